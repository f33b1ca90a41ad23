import { isFir, type AnyDigital, type Complex, type DigitalFilter, type Section } from '../forms/filter'

/*
 * A filter whose coefficients are held in words of a given length. Each section has two scales, both powers of two (shifts in firmware):
 * one for b0, b1, b2 and one for a1, a2; the taps of a FIR filter share one. A word holds the whole numbers from −2^(bits−1) to
 * 2^(bits−1) − 1, and a coefficient takes the nearest. The scale is the finest at which all of its coefficients fit.
 */

function rounded(values: readonly number[], bits: number): number[] {
  const most = values.reduce((size, value) => Math.max(size, Math.abs(value)), 0)
  if (most === 0) return [...values]
  const top = 2 ** (bits - 1) - 1
  let unit = 2 ** (Math.floor(Math.log2(most)) + 2 - bits)
  if (Math.round(most / unit) > top) unit *= 2
  return values.map((value) => Math.round(value / unit) * unit)
}

const isStable = ({ a1, a2 }: Section) => Math.abs(a2) < 1 && Math.abs(a1) < 1 + a2

/** Roots of x²·c0 + x·c1 + c2, without the loss of digits of the school formula; fewer where leading coefficients are 0. */
function rootsOf(c0: number, c1: number, c2: number): Complex[] {
  if (c0 === 0) return c1 === 0 ? [] : [{ re: -c2 / c1, im: 0 }]
  const half = -c1 / (2 * c0)
  const product = c2 / c0
  const rest = half * half - product
  if (rest < 0) {
    const im = Math.sqrt(-rest)
    return [
      { re: half, im },
      { re: half, im: -im },
    ]
  }
  const far = half + (half < 0 ? -Math.sqrt(rest) : Math.sqrt(rest))
  return [
    { re: far, im: 0 },
    { re: far === 0 ? 0 : product / far, im: 0 },
  ]
}

/** The filter of a cascade, by the roots of its sections. */
function fromSections(sections: readonly Section[], sampleRateHz: number): DigitalFilter {
  const zeros: Complex[] = []
  const poles: Complex[] = []
  let gain = 1
  for (const { b0, b1, b2, a1, a2 } of sections) {
    poles.push(...rootsOf(1, a1, a2))
    zeros.push(...rootsOf(b0, b1, b2))
    gain *= b0 !== 0 ? b0 : b1 !== 0 ? b1 : b2
  }
  return { domain: 'z', zeros, poles, gain, sampleRateHz, sections, diagnostics: [] }
}

/**
 * The filter with its coefficients rounded to `bits` bits, sign included.
 * @returns null when a pole is on the unit circle or outside it then
 */
export function heldIn(bits: number, filter: AnyDigital): AnyDigital | null {
  if (isFir(filter)) return { ...filter, taps: Float64Array.from(rounded([...filter.taps], bits)) }
  const sections = filter.sections.map(({ b0, b1, b2, a1, a2 }) => {
    const [n0 = 0, n1 = 0, n2 = 0] = rounded([b0, b1, b2], bits)
    const [d1 = 0, d2 = 0] = rounded([a1, a2], bits)
    return { b0: n0, b1: n1, b2: n2, a1: d1, a2: d2 }
  })
  return sections.every(isStable) ? fromSections(sections, filter.sampleRateHz) : null
}
