/*
 * Numbers as text that reads back to the very same bits. Doubles use the shortest decimal that round-trips (ECMAScript Number to
 * string); singles the shortest decimal that rounds to the same binary32; both can also be written as C99 hexadecimal floats.
 */

export type NumberType = 'double' | 'float'

/** −0 reads as a difference where there is none; a coefficient of zero is written 0. */
function withoutNegativeZero(value: number): number {
  return value === 0 ? 0 : value
}

/** Negates without making −0. */
export function negated(value: number): number {
  return value === 0 ? 0 : -value
}

/** Rounds to the chosen type; a binary32 value is held in a double without loss. */
export function roundTo(type: NumberType, value: number): number {
  return withoutNegativeZero(type === 'float' ? Math.fround(value) : value)
}

/** Shortest decimal text of a finite number, e.g. `0.1`, `-5.2`, `1e-7`. A single is judged as binary32. */
export function decimalText(value: number, type: NumberType): string {
  if (!Number.isFinite(value)) throw new RangeError(`A coefficient set holds finite numbers only, not ${value}.`)
  const clean = withoutNegativeZero(value)
  if (type === 'double') return String(clean)
  // Nine significant digits always suffice for binary32 (IEEE 754-2019, 5.12.2); fewer often do.
  for (let digits = 1; digits < 9; digits++) {
    const decimal = Number(clean.toPrecision(digits))
    // Its neighbours too: a reader that rounds the decimal to binary32 in one step, not by way of a double, gets the same number.
    const isSafe = [1 - Number.EPSILON, 1, 1 + Number.EPSILON].every((nudge) => Math.fround(decimal * nudge) === clean)
    if (isSafe) return String(decimal)
  }
  return String(Number(clean.toPrecision(9)))
}

/** The same number as a C literal of that type: always with a point or an exponent, `f` after a single. */
export function cLiteral(value: number, type: NumberType, style: 'decimal' | 'hexadecimal'): string {
  const text = style === 'hexadecimal' ? hexFloatText(value) : withPoint(decimalText(value, type))
  return type === 'float' ? `${text}f` : text
}

/** A decimal that every language takes for a floating-point number rather than an integer. */
export function withPoint(text: string): string {
  return /[.e]/.test(text) ? text : `${text}.0`
}

/** C99 hexadecimal floating constant (6.4.4.2) of a finite double, exact for every value. */
export function hexFloatText(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`A coefficient set holds finite numbers only, not ${value}.`)
  if (value === 0) return '0x0p+0'
  const view = new DataView(new ArrayBuffer(8))
  view.setFloat64(0, value)
  const high = view.getUint32(0)
  const sign = high >>> 31 === 1 ? '-' : ''
  const biased = (high >>> 20) & 0x7ff
  const fraction = (high & 0xfffff).toString(16).padStart(5, '0') + view.getUint32(4).toString(16).padStart(8, '0')
  const digits = fraction.replace(/0+$/, '')
  const lead = biased === 0 ? '0' : '1'
  const exponent = biased === 0 ? -1022 : biased - 1023
  return `${sign}0x${lead}${digits === '' ? '' : `.${digits}`}p${exponent < 0 ? '-' : '+'}${Math.abs(exponent)}`
}
