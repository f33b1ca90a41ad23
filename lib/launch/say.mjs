/**
 * What the start command prints: one short line a step, with the time it took.
 *
 * @param {{ write?: (text: string) => void, now?: () => number }} [to]
 */
export function createSpeaker({
  write = (text) => void process.stdout.write(text),
  now = () => performance.now(),
} = {}) {
  let lineIsOpen = false
  const line = (/** @type {string} */ text = '') => {
    if (lineIsOpen) write('\n')
    lineIsOpen = false
    write(`${text}\n`)
  }

  return {
    line,
    /**
     * Prints what is being done, does it, and closes the line with the time, or with the note that the action answers.
     * @template T
     * @param {string} what
     * @param {() => Promise<T> | T} action
     * @param {(result: T) => string | undefined} [note]
     * @returns {Promise<T>}
     */
    async step(what, action, note) {
      const began = now()
      write(`  ${what} …`)
      lineIsOpen = true
      try {
        const result = await action()
        const seconds = (now() - began) / 1000
        const time = `${seconds < 10 ? seconds.toFixed(1) : seconds.toFixed(0)} s`
        const text = [note?.(result), time].filter((part) => part !== undefined).join(', ')
        // Something else may have been said meanwhile; then the time stands on a line of its own.
        write(lineIsOpen ? ` ${text}\n` : `  ${what}: ${text}\n`)
        lineIsOpen = false
        return result
      } catch (error) {
        if (lineIsOpen) write(' stopped\n')
        lineIsOpen = false
        throw error
      }
    },
  }
}

/** @typedef {ReturnType<typeof createSpeaker>} Speaker */
