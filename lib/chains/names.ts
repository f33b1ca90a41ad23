const MOST_LETTERS = 60
const UNSHOWN = /[\p{Cc}\p{Cs}\p{Bidi_Control}]/u

/** Why a name can't be used in a chain, in the words of a screen; null when it can. The schema says the same of what is sent. */
export function nameRefusal(name: string): string | null {
  if (!/\S/u.test(name)) return 'A name has at least one character that can be seen.'
  if (name.length > MOST_LETTERS) return `A name has ${MOST_LETTERS} characters at most.`
  return UNSHOWN.test(name) ? 'A name has no control characters and no marks that turn the reading direction.' : null
}
