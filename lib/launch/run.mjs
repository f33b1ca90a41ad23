import { spawn } from 'node:child_process'

/**
 * Runs a program to its end and keeps what it printed. A program that ends badly is an answer, not an exception: look at `code`.
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, uid?: number, gid?: number, input?: string, timeoutSeconds?: number }} [options]
 * @returns {Promise<{ code: number, stdout: string, stderr: string, output: string }>} code 127 when there is no such program, 124 after
 *   the time-out, 128 when a signal ended it
 */
export function run(command, args, options = {}) {
  const { input, timeoutSeconds, ...spawnOptions } = options
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, {
      ...spawnOptions,
      stdio: [input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe'],
    })
    let stdout = ''
    let stderr = ''
    let output = ''
    let late = false
    const timer =
      timeoutSeconds === undefined
        ? undefined
        : setTimeout(() => {
            late = true
            child.kill('SIGKILL')
          }, timeoutSeconds * 1000)
    child.stdout?.setEncoding('utf8').on('data', (text) => {
      stdout += text
      output += text
    })
    child.stderr?.setEncoding('utf8').on('data', (text) => {
      stderr += text
      output += text
    })
    child.on('error', (error) => {
      clearTimeout(timer)
      if ('code' in error && error.code === 'ENOENT')
        resolve({ code: 127, stdout, stderr, output: `${command}: not found` })
      else reject(error)
    })
    const finish = (/** @type {number | null} */ code) => {
      clearTimeout(timer)
      resolve({ code: late ? 124 : (code ?? 128), stdout, stderr, output })
    }
    child.on('close', finish)
    // A server that the program left running may hold the pipes open, so that 'close' never comes.
    child.on('exit', (code) => setTimeout(finish, 1000, code).unref())
    if (input !== undefined) child.stdin?.end(input)
  })
}
