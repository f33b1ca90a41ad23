import { randomBytes } from 'node:crypto'
import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'

/*
 * Which process is which. A bare process id is not enough: after a crash or a restart of the machine another program may have it, so a lock
 * also keeps the moment at which its process began.
 */

/**
 * @param {number} pid
 * @returns {string | undefined} when the process began, in the kernel's ticks; undefined when it is gone; '' where /proc does not exist
 */
export function bornAt(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The program's name stands in brackets and may hold blanks; the state and the later fields follow the last bracket.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return fields[0] === 'Z' ? undefined : fields[19]
  } catch {
    return process.platform === 'linux' ? undefined : isThere(pid) ? '' : undefined
  }
}

/** @param {number} pid */
function isThere(pid) {
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    return error instanceof Error && 'code' in error && error.code === 'EPERM'
  }
}

/** A process as a lock or a lease names it. */
export const me = () => ({ pid: process.pid, born: bornAt(process.pid) ?? '' })

/** @param {{ pid: number, born: string }} who */
export const isAlive = (who) => bornAt(who.pid) === who.born

/**
 * Reads a lock or a lease; a half-written or foreign file counts as none.
 * @param {string} path
 * @returns {({ pid: number, born: string } & Record<string, unknown>) | undefined}
 */
export function readHolder(path) {
  try {
    const value = JSON.parse(readFileSync(path, 'utf8'))
    return typeof value?.pid === 'number' && typeof value?.born === 'string' ? value : undefined
  } catch {
    return undefined
  }
}

/**
 * Takes a lock file, unless a living process holds it.
 * @param {string} path
 * @param {Record<string, unknown>} [details] kept in the file for whoever is refused
 * @returns {{ taken: true, release: () => void } | { taken: false, holder: Record<string, unknown> & { pid: number } }}
 */
export function takeLock(path, details = {}) {
  // Written aside and then linked into place: a lock file is never seen half-written, and of two who come at once only one gets the link.
  const draft = `${path}.${process.pid}-${randomBytes(4).toString('hex')}`
  writeFileSync(draft, JSON.stringify({ ...me(), ...details }), { mode: 0o600, flag: 'wx' })
  try {
    for (;;) {
      if (placed(draft, path)) return { taken: true, release: () => rmSync(path, { force: true }) }
      const holder = readHolder(path)
      if (holder && isAlive(holder)) return { taken: false, holder }
      moveAway(path, `${draft}.stale`)
    }
  } finally {
    rmSync(draft, { force: true })
  }
}

/**
 * @param {string} from
 * @param {string} to
 * @returns {boolean} false when there is something already
 */
function placed(from, to) {
  try {
    linkSync(from, to)
    return true
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'EEXIST') return false
    throw error
  }
}

/**
 * Removes a stale lock, but not one that somebody else has put in its place since we looked.
 * @param {string} path
 * @param {string} aside
 */
function moveAway(path, aside) {
  try {
    renameSync(path, aside)
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return
    throw error
  }
  const moved = readHolder(aside)
  if (moved && isAlive(moved)) placed(aside, path)
  rmSync(aside, { force: true })
}

/**
 * Does something while holding a lock file, waiting for its turn.
 * @template T
 * @param {string} path
 * @param {() => Promise<T>} action
 * @param {number} [patienceSeconds]
 * @returns {Promise<T>}
 */
export async function withLock(path, action, patienceSeconds = 120) {
  const deadline = Date.now() + patienceSeconds * 1000
  for (;;) {
    const lock = takeLock(path)
    if (lock.taken) {
      try {
        return await action()
      } finally {
        lock.release()
      }
    }
    if (Date.now() > deadline)
      throw new Error(`Process ${lock.holder.pid} has held ${path} for more than ${patienceSeconds} s.`)
    await pause(100)
  }
}
