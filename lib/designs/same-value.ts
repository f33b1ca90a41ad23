/**
 * Whether two plain values (numbers, texts, lists, records of them) are the same. The order in which a record's fields were written says
 * nothing: an edit puts a new field last, the schema puts it in its place. A field that is undefined is as good as none.
 */
export function sameValue(one: unknown, other: unknown): boolean {
  if (Object.is(one, other)) return true
  if (!isRecord(one) || !isRecord(other) || Array.isArray(one) !== Array.isArray(other)) return false
  const keys = new Set([...Object.keys(one), ...Object.keys(other)])
  return [...keys].every((key) => sameValue(one[key], other[key]))
}

const isRecord = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null
