/**
 * A plain value as the one text of it: keys in the order of their UTF-16 units, no spaces, numbers as ECMAScript writes them, fields that are
 * undefined left out (RFC 8785). jsonb forgets the order of keys, and a form may add them in another.
 * @throws RangeError for a number that is none: it can't be kept
 */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(ordered(value))
}

function ordered(value: unknown): unknown {
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new RangeError('A figure is not a finite number, so that it can’t be kept.')
    return value === 0 ? 0 : value
  }
  if (Array.isArray(value)) return value.map(ordered)
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(
    Object.entries(value)
      .filter(([, field]) => field !== undefined)
      .sort(([one], [other]) => (one < other ? -1 : 1))
      .map(([key, field]): [string, unknown] => [key, ordered(field)]),
  )
}
