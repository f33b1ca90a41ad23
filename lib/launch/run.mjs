import { spawn } from 'node:child_process'

/** The programs under way that may be ended half-way without harm. */
const endable = new Set()

/**
 * Runs a program to its end and keeps what it printed. A program that ends badly is an answer, not an exception: look at `code`.
 *
 * The program gets a process group of its own: Ctrl-C in the terminal reaches this process alone, which then decides what to end and what
 * to wait for (a package installation cut half-way leaves the machine's packages broken).
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, uid?: number, gid?: number, timeoutSeconds?: number, endable?: boolean,
 *   onOutput?: (text: string) => void }} [options]
 * @returns {Promise<{ code: number, stdout: string, stderr: string, output: string }>} code 127 when there is no such program, 124 after
 *   the time-out, 128 when a signal ended it
 */
export function run(command, args, options = {}) {
  const { timeoutSeconds, endable: mayBeEnded = false, onOutput, ...spawnOptions } = options
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { ...spawnOptions, detached: true, stdio: ['ignore', 'pipe', 'pipe'] })
    if (mayBeEnded) endable.add(child)
    let stdout = ''
    let stderr = ''
    let output = ''
    let late = false
    const timer =
      timeoutSeconds === undefined
        ? undefined
        : setTimeout(() => {
            late = true
            signalGroup(child, 'SIGKILL')
          }, timeoutSeconds * 1000)
    const keep = (/** @type {string} */ text) => {
      output += text
      onOutput?.(text)
    }
    child.stdout.setEncoding('utf8').on('data', (text) => {
      stdout += text
      keep(text)
    })
    child.stderr.setEncoding('utf8').on('data', (text) => {
      stderr += text
      keep(text)
    })
    const finish = (/** @type {number | null} */ code) => {
      clearTimeout(timer)
      endable.delete(child)
      resolve({ code: late ? 124 : (code ?? 128), stdout, stderr, output })
    }
    child.on('error', (error) => {
      output += `${command}: not found`
      if ('code' in error && error.code === 'ENOENT') finish(127)
      else reject(error)
    })
    child.on('close', finish)
    // A server that the program left running may hold the pipes open, so that 'close' never comes.
    child.on('exit', (code) => setTimeout(finish, 1000, code).unref())
  })
}

/**
 * @param {import('node:child_process').ChildProcess} child
 * @param {NodeJS.Signals} signal
 */
function signalGroup(child, signal) {
  if (child.pid === undefined || child.exitCode !== null || child.signalCode !== null) return
  try {
    process.kill(-child.pid, signal)
  } catch (error) {
    // It ended between the look and the signal.
    if (!(error instanceof Error && 'code' in error && error.code === 'ESRCH')) throw error
  }
}

/** Ends the programs under way that may be ended. */
export function endRunning() {
  for (const child of endable) signalGroup(child, 'SIGTERM')
}
