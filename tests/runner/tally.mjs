import { asTrouble, Trouble } from '../../lib/launch/trouble.mjs'

/*
 * The count over all runners. Each static check is one, each test is one, and a runner that breaks down is a failure of its own: nothing
 * that did not run may look like something that passed.
 */

/** @param {(text: string) => void} [write] */
export function createTally(write = (text) => void process.stdout.write(text)) {
  let passed = 0
  let failed = 0
  /** @type {string[]} */
  const failures = []
  const fail = (/** @type {string} */ what, count = 1) => {
    failed += count
    failures.push(count === 1 ? what : `${what} (${count})`)
  }
  return {
    /**
     * Does one thing that passes or fails; whatever it throws is its failure, and the run goes on.
     * @template T
     * @param {string} what
     * @param {() => Promise<T>} action answers once it has passed
     * @returns {Promise<T | undefined>}
     */
    async check(what, action) {
      const began = performance.now()
      const time = () => `${((performance.now() - began) / 1000).toFixed(1)} s`
      try {
        const result = await action()
        passed += 1
        write(`ok      ${what} (${time()})\n`)
        return result
      } catch (error) {
        fail(what)
        write(`FAILED  ${what} (${time()})\n${describe(error)}\n`)
        return undefined
      }
    },
    /**
     * Adds what a runner of many tests counted.
     * @param {string} what
     * @param {{ passed: number, failed: number, failures: readonly string[] }} counts
     */
    add(what, counts) {
      passed += counts.passed
      if (counts.failed > 0) {
        failed += counts.failed
        failures.push(...counts.failures.map((name) => `${what}: ${name}`))
      }
      write(`${counts.failed > 0 ? 'FAILED ' : 'ok     '} ${what}: ${counts.passed} passed, ${counts.failed} failed\n`)
    },
    fail,
    /**
     * The closing lines; the very last is the count alone.
     * @returns {{ text: string, code: number }}
     */
    close() {
      if (passed + failed === 0) fail('nothing was run')
      const list = failures.length > 0 ? `\nWhat failed:\n${failures.map((what) => `  ${what}\n`).join('')}` : ''
      return { text: `${list}\n${passed} passed, ${failed} failed\n`, code: failed > 0 ? 1 : 0 }
    },
  }
}

/** @typedef {ReturnType<typeof createTally>} Tally */

/** @param {unknown} error */
function describe(error) {
  const known = asTrouble(error)
  if (!(known instanceof Error)) return String(known)
  const cause = known.cause instanceof Error ? `\n${known.cause.message}` : ''
  return known instanceof Trouble || known instanceof Failure
    ? `${known.message}${cause}`
    : (known.stack ?? known.message) + cause
}

/** A check that found something; its message is what it found. */
export class Failure extends Error {}

/**
 * Prints the closing lines and ends, with nothing after them.
 * @param {Tally} tally
 */
export function finish(tally) {
  const { text, code } = tally.close()
  process.stdout.write(text, () => process.exit(code))
}
