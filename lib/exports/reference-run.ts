import type { Section } from '@/dsp'
import type { NumberType } from './numbers'

/*
 * The arithmetic that the exported C code performs, operation by operation: direct form II transposed (Oppenheim & Schafer, section
 * 6.3), one multiplication or addition at a time. In binary32 every operation is rounded by Math.fround; rounding the double result
 * of one operation on two singles is exact (53 ≥ 2·24 + 2; Figueroa 1995), so the emulation is bit for bit that of a machine
 * with IEEE 754 singles, without contraction and without wider intermediates.
 *
 * Coefficients are those of the difference equation with subtracted feedback; adding negated ones gives the same bits.
 */

type Round = (value: number) => number

const asIs: Round = (value) => value
const rounding = (type: NumberType): Round => (type === 'float' ? Math.fround : asIs)

/**
 * Runs a cascade.
 * @param sections coefficients, already of the number type
 * @param input samples; not changed
 * @param state two numbers a section, the initial state; zero when left out
 * @returns output of the same length
 */
export function runCascade(
  sections: readonly Section[],
  input: Float64Array,
  type: NumberType,
  state?: readonly (readonly number[])[],
): Float64Array {
  const r = rounding(type)
  const output = Float64Array.from(input, r)
  sections.forEach(({ b0, b1, b2, a1, a2 }, index) => {
    let s1 = state?.[index]?.[0] ?? 0
    let s2 = state?.[index]?.[1] ?? 0
    for (let n = 0; n < output.length; n++) {
      const x = output[n] ?? 0
      const y = r(r(b0 * x) + s1)
      s1 = r(r(r(b1 * x) + s2) - r(a1 * y))
      s2 = r(r(b2 * x) - r(a2 * y))
      output[n] = y
    }
  })
  return output
}

/**
 * Runs a ratio of polynomials.
 * @param b N + 1 numbers, @param a N numbers a₁ … aN (the coefficient of y[n] is 1), already of the number type
 * @param state N numbers; zero when left out
 */
export function runRatio(
  b: readonly number[],
  a: readonly number[],
  input: Float64Array,
  type: NumberType,
  state?: readonly number[],
): Float64Array {
  const r = rounding(type)
  const order = a.length
  const s = Float64Array.from({ length: order }, (_, k) => state?.[k] ?? 0)
  return Float64Array.from(input, (sample) => {
    const x = r(sample)
    const y = r(r((b[0] ?? 0) * x) + (s[0] ?? 0))
    for (let k = 1; k < order; k++) s[k - 1] = r(r(r((b[k] ?? 0) * x) + (s[k] ?? 0)) - r((a[k - 1] ?? 0) * y))
    s[order - 1] = r(r((b[order] ?? 0) * x) - r((a[order - 1] ?? 0) * y))
    return y
  })
}

/**
 * Runs taps by the direct form (Oppenheim & Schafer, section 6.5.1): products are added one by one, from that of the oldest sample to that of
 * the newest. In doubles these are the bits of dsp's run; a port that adds samples of like taps first gets other last bits.
 * @param taps already of the number type
 */
export function runDirectForm(taps: readonly number[], input: Float64Array, type: NumberType): Float64Array {
  const r = rounding(type)
  const samples = Float64Array.from(input, r)
  return samples.map((_, n) => {
    let sum = 0
    for (let k = Math.min(taps.length - 1, n); k >= 0; k--) sum = r(sum + r((taps[k] ?? 0) * (samples[n - k] ?? 0)))
    return sum
  })
}

/**
 * State of a ratio after an endless unit step, from the last delay backwards: sN = bN − aN·y, s(k) = b(k) − a(k)·y + s(k+1),
 * with y = Σb / (1 + Σa).
 */
export function steadyRatioState(b: readonly number[], a: readonly number[]): number[] {
  const level = carefulSum(b) / carefulSum([1, ...a])
  const state = a.map(() => 0)
  for (let k = a.length; k >= 1; k--) state[k - 1] = (b[k] ?? 0) - (a[k - 1] ?? 0) * level + (state[k] ?? 0)
  return state
}

/** Compensated summation (Neumaier 1974): at low corners the denominator sums to almost nothing. */
function carefulSum(values: readonly number[]): number {
  let total = 0
  let lost = 0
  for (const value of values) {
    const next = total + value
    lost += Math.abs(total) >= Math.abs(value) ? total - next + value : value - next + total
    total = next
  }
  return total + lost
}
