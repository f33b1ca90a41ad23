import { spawn } from 'node:child_process'
import { chmodSync, closeSync, existsSync, openSync, readFileSync, renameSync, statSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { setTimeout as pause } from 'node:timers/promises'
import { nextCommand, root } from './places.mjs'
import { Trouble } from './trouble.mjs'

/*
 * The two processes that go on while the product runs: the mailbox and the app's server. Their output goes to a log file each; a channel to
 * them (IPC) lets them end when we are killed.
 */

const largestLogBytes = 10 * 1024 * 1024

/**
 * @typedef {object} Child
 * @property {import('node:child_process').ChildProcess} process
 * @property {Promise<string>} ended how it ended, once it has
 * @property {() => boolean} running
 * @property {() => string} lastWords what it wrote to its log since its start
 * @property {() => Promise<void>} stop
 */

/**
 * @param {readonly string[]} args of node
 * @param {{ env: NodeJS.ProcessEnv, logFile: string, patienceSeconds?: number }} options
 * @returns {Child}
 */
function startChild(args, { env, logFile, patienceSeconds = 10 }) {
  if (existsSync(logFile) && statSync(logFile).size > largestLogBytes) renameSync(logFile, `${logFile}.old`)
  const before = existsSync(logFile) ? statSync(logFile).size : 0
  const log = openSync(logFile, 'a', 0o600)
  chmodSync(logFile, 0o600)
  // A group of its own, so that Ctrl-C reaches us alone and things end in their order.
  const child = spawn(process.execPath, args, { cwd: root, env, detached: true, stdio: ['ignore', log, log, 'ipc'] })
  closeSync(log)
  child.channel?.unref()
  /** @type {Promise<string>} */
  const ended = new Promise((resolve) => {
    child.once('error', (error) => resolve(error.message))
    child.once('exit', (code, signal) => resolve(signal ? `signal ${signal}` : `code ${code}`))
  })
  const running = () => child.exitCode === null && child.signalCode === null && child.pid !== undefined
  return {
    process: child,
    ended,
    running,
    lastWords: () => readFileSync(logFile).subarray(before).toString('utf8'),
    async stop() {
      if (!running()) return
      child.kill('SIGTERM')
      const left = await Promise.race([ended.then(() => true), pause(patienceSeconds * 1000, false)])
      if (!left) child.kill('SIGKILL')
      await ended
    },
  }
}

/**
 * @param {{ folder: string, logFile: string }} options
 * @returns {Promise<Child & { port: number }>}
 */
export async function startMailboxProcess({ folder, logFile }) {
  const script = fileURLToPath(new URL('./mailbox-process.mjs', import.meta.url))
  const child = startChild([script, folder], { env: { ...process.env, NODE_OPTIONS: '' }, logFile })
  const port = await Promise.race([
    new Promise((resolve) => child.process.once('message', (message) => resolve(Number(Object(message).port)))),
    child.ended.then(() => undefined),
    pause(15_000, undefined, { ref: false }),
  ])
  if (typeof port === 'number' && port > 0) return { ...child, port }
  await child.stop()
  throw new Trouble(`The local mailbox did not start; what it said is in ${logFile}.`, new Error(child.lastWords()))
}

/**
 * Starts the app's server and waits until it answers.
 *
 * @param {{ port: number, dist: string, env: NodeJS.ProcessEnv, logFile: string, patienceSeconds?: number }} options `env` adds to ours
 * @returns {Promise<Child & { origin: string }>}
 */
export async function startApp({ port, dist, env, logFile, patienceSeconds = 60 }) {
  const follow = new URL('./follow-parent.mjs', import.meta.url).href
  const args = ['--import', follow, nextCommand, 'start', '-H', '127.0.0.1', '-p', String(port)]
  const settings = {
    ...process.env,
    ...env,
    NODE_ENV: 'production',
    POLEWRIGHT_DIST: dist,
    NEXT_TELEMETRY_DISABLED: '1',
  }
  const child = startChild(args, { env: settings, logFile })
  const origin = `http://127.0.0.1:${port}`
  const deadline = Date.now() + patienceSeconds * 1000
  let last = 'no answer'
  while (child.running() && Date.now() < deadline) {
    last = await healthOf(origin)
    // Another program may have taken the port in the meantime and answer in our server's place.
    if (last === 'ready' && child.running()) return { ...child, origin }
    await Promise.race([child.ended, pause(100)])
  }
  const words = child.lastWords()
  await child.stop()
  const cause = new Error(words.slice(-6000))
  if (/EADDRINUSE/.test(words))
    throw new Trouble(`Port ${port} is taken by another program; stop it, or choose another with PORT.`, cause)
  const environment = /The environment can't be used: .*/.exec(words)
  if (environment) throw new Trouble(environment[0], cause)
  throw new Trouble(`The app did not become ready (${last}); what it said is in ${logFile}.`, cause)
}

/** @param {string} origin */
async function healthOf(origin) {
  try {
    const answer = await fetch(`${origin}/api/health`, { signal: AbortSignal.timeout(5000), redirect: 'manual' })
    const text = await answer.text()
    return answer.status === 200 ? 'ready' : `answer ${answer.status} ${text.slice(0, 200)}`
  } catch (error) {
    return error instanceof Error ? error.message : String(error)
  }
}
