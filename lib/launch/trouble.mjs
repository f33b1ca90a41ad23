/**
 * What stops a start for a reason that the person at the keyboard can mend. Its message is one whole sentence that says what is wrong and
 * what to do; it is printed alone, without a stack trace.
 */
export class Trouble extends Error {
  /**
   * @param {string} sentence
   * @param {unknown} [cause]
   */
  constructor(sentence, cause) {
    super(sentence, cause === undefined ? undefined : { cause })
    this.name = 'Trouble'
  }
}

/** The system's own error codes, as sentences; `path` is where it happened. */
const sentences = {
  ENOSPC: (path) => `The disk is full: nothing more could be written at ${path}. Free some space and start again.`,
  EDQUOT: (path) =>
    `Your disk quota is used up: nothing more could be written at ${path}. Free some space and start again.`,
  EACCES: (path) =>
    `No right to write at ${path}. Give this user write access to it, or start from a folder of its own.`,
  EPERM: (path) => `No right to change ${path}. Give this user write access to it, or start from a folder of its own.`,
  EROFS: (path) => `${path} is on a read-only file system. Start from a folder that can be written.`,
  ENOTDIR: (path) => `${path} can't be used: a part of that path is a file, not a folder.`,
  EMFILE: () => 'Too many files are open for this user (see ulimit -n). Raise the limit and start again.',
}

/**
 * Turns the system errors that people can mend into Trouble; anything else comes back as it was.
 * @param {unknown} error
 * @param {string} [where] what was being written, when the error does not say
 * @returns {unknown}
 */
export function asTrouble(error, where = 'this folder') {
  if (error instanceof Trouble || !(error instanceof Error)) return error
  const code = 'code' in error ? String(error.code) : ''
  const path = 'path' in error && typeof error.path === 'string' ? error.path : where
  const sentence = Object.hasOwn(sentences, code)
    ? sentences[/** @type {keyof typeof sentences} */ (code)](path)
    : undefined
  return sentence === undefined ? error : new Trouble(sentence, error)
}

/**
 * The same for a tool that only left text: npm, apt and PostgreSQL print the disk's and the system's refusals in their own lines.
 * @param {string} output
 * @param {string} where
 * @returns {string | undefined} a sentence, or nothing when the text names none of them
 */
export function troubleInOutput(output, where) {
  if (/ENOSPC|No space left on device/i.test(output)) return sentences.ENOSPC(where)
  if (/EDQUOT|Disk quota exceeded/i.test(output)) return sentences.EDQUOT(where)
  if (/EROFS|Read-only file system/i.test(output)) return sentences.EROFS(where)
  if (/EACCES|Permission denied/i.test(output)) return sentences.EACCES(where)
  return undefined
}
