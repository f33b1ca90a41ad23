import type * as z from 'zod'

/* A spec is one of three shapes; what is said of a wrong one is what its own shape finds, and where. */

const designParts = ['analog', 'fir', 'own'] as const

const ONE_OF_THREE = 'A design has one of three parts: analog, fir or own.'

type Issue = z.core.$ZodIssue

/** The innermost issue of a choice that failed: the branch that got furthest knows best. */
function innermost(issue: Issue): { readonly path: readonly PropertyKey[]; readonly message: string } {
  if (issue.code !== 'invalid_union') return issue
  const firsts = issue.errors.flatMap(([first]) => (first ? [innermost(first)] : []))
  const [deepest] = firsts.sort((one, other) => other.path.length - one.path.length)
  return deepest ? { path: [...issue.path, ...deepest.path], message: deepest.message } : issue
}

/** A path as a sentence names it, places counted from 1 as people do. */
function placeOf(path: readonly PropertyKey[]): string {
  const [first, second, third, ...rest] = path
  const within = (keys: readonly PropertyKey[]): string => (keys.length > 0 ? `, ${keys.map(String).join('.')}` : '')
  if (first === 'sheet' && typeof second === 'number')
    return `Line ${second + 1} of the requirement sheet${within(path.slice(2))}`
  if (first === 'own' && second === 'rows' && typeof third === 'number')
    return `Row ${third + 1} of the measured table${typeof rest[0] === 'number' ? `, column ${rest[0] + 1}` : ''}`
  return path.map(String).join('.')
}

/**
 * What is wrong with an input that is none of the three designs, as a sentence with its place.
 *
 * @param errors issues by branch, in the order of analog, fir, own
 */
export function specRefusal(input: unknown, errors: readonly (readonly Issue[])[]): string {
  if (typeof input !== 'object' || input === null) return ONE_OF_THREE
  const present = designParts.filter((part) => part in input)
  const [part] = present
  if (part === undefined || present.length > 1) return ONE_OF_THREE
  const [first] = errors[designParts.indexOf(part)] ?? []
  if (!first) return ONE_OF_THREE
  const { path, message } = innermost(first)
  const place = placeOf(path)
  return `${place ? `${place}: ${message}` : message}${/[.!?]$/.test(message) ? '' : '.'}`
}
