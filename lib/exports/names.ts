import { DesignError } from '@/dsp'

const longest = 40

/**
 * A name that C, C++, Python and Octave all take as the start of an identifier: lower-case letters, digits and single underscores, a
 * letter first, at most 40 characters. Everything the files declare is this name with a suffix, so keywords can't be hit.
 */
export function identifierFrom(text: string): string {
  const plain = text
    .normalize('NFKD')
    .replace(/\p{Mn}/gu, '')
    .replace(/[^A-Za-z0-9]+/g, '_')
    .replace(/^_+|_+$/g, '')
    .toLowerCase()
  if (plain === '') return 'filter'
  const started = /^[a-z]/.test(plain) ? plain : `filter_${plain}`
  return started.slice(0, longest).replace(/_+$/, '')
}

/** The name a version's files carry unless another is asked for: drawing number and version. */
export function defaultIdentifier(drawingNumber: string, versionNumber: number): string {
  const suffix = `_v${versionNumber}`
  return (
    identifierFrom(drawingNumber)
      .slice(0, longest - suffix.length)
      .replace(/_+$/, '') + suffix
  )
}

/** Refuses a name that isn't an identifier, naming the nearest one that is. */
export function checkIdentifier(name: string): void {
  if (/^[A-Za-z](?:_?[A-Za-z0-9])*$/.test(name) && name.length <= longest) return
  throw new DesignError(
    'name-not-an-identifier',
    'name',
    `“${name}” can't start an identifier: letters, digits and single underscores only, a letter first, ${longest} characters at most.`,
    identifierFrom(name),
  )
}
