import { expand, fullCount, type HalfForm } from '../forms/zeros-poles-gain'
import { FixedPoint, type BigComplex } from '../numeric/fixed-point'
import type { Complex } from '../forms/filter'

/*
 * The exact way from an analog filter to the numerator of the digital filter with the same impulse (or step) samples. At low corners
 * and high orders the residues cancel by dozens of digits, so all of it runs on long fixed-point numbers (numeric/fixed-point); time
 * is in samples and roots are in rad per sample.
 */

/** A pole (im ≥ 0, standing for its pair too) with the coefficients of 1/(s − p)ʲ, j = 1 … multiplicity. */
export interface PartialFraction {
  readonly pole: Complex
  readonly coefficients: readonly BigComplex[]
}

export interface SampledForm {
  /** b₀ … bₙ of Σ bₖ·z⁻ᵏ over ∏(1 − e^p·z⁻¹), as fixed-point numbers of `arithmetic`. */
  readonly numerator: readonly bigint[]
  readonly fractions: readonly PartialFraction[]
  readonly arithmetic: FixedPoint
}

const ZERO: BigComplex = { re: 0n, im: 0n }

/** Equal poles grouped. Prototypes and transforms yield repeated poles as identical numbers, so equality is exact. */
function group(poles: readonly Complex[]): { pole: Complex; count: number }[] {
  const groups: { pole: Complex; count: number }[] = []
  for (const pole of poles) {
    const same = groups.find((entry) => entry.pole.re === pole.re && entry.pole.im === pole.im)
    if (same === undefined) groups.push({ pole, count: 1 })
    else same.count += 1
  }
  return groups
}

/**
 * Fractional bits that keep a double's worth of digits in the numerator and near its roots: twice the sum of the poles' distances from
 * the axis in bits (residues of a narrow band cancel by about that, and zeros gather around its centre or around z = 1), and 9 bits per
 * pole for binomials.
 */
function bitsFor(poles: readonly Complex[]): number {
  const bits = poles.reduce(
    (sum, { re, im }) => sum + (im > 0 ? 2 : 1) * Math.max(0, Math.log2((2 * Math.PI) / -re)),
    0,
  )
  return 256 + 9 * fullCount(poles) + Math.ceil(2 * bits)
}

/** gain·∏zeros/∏others, with one division. */
function residue(
  zeros: readonly BigComplex[],
  others: readonly BigComplex[],
  gain: number,
  fx: FixedPoint,
): BigComplex {
  const one: BigComplex = { re: fx.one, im: 0n }
  const above = zeros.reduce((product, factor) => fx.times(product, factor), { re: fx.fromNumber(gain), im: 0n })
  const below = others.reduce((product, factor) => fx.times(product, factor), one)
  return fx.times(above, fx.reciprocal(below))
}

/** Coefficients of 1/(s − p)ʲ from the series of H(p + u)·u^m, by one linear factor at a time. */
function expandAt(
  pole: Complex,
  count: number,
  form: HalfForm,
  others: readonly Complex[],
  fx: FixedPoint,
): BigComplex[] {
  const centre = fx.complex(pole)
  const offset = (root: Complex): BigComplex => {
    const exact = fx.complex(root)
    return { re: centre.re - exact.re, im: centre.im - exact.im }
  }
  let series: BigComplex[] = Array.from({ length: count }, (_, k) =>
    k === 0 ? { re: fx.fromNumber(form.gain), im: 0n } : ZERO,
  )
  const zeros = expand(form.zeros)
  if (count === 1) return [residue(zeros.map(offset), others.map(offset), form.gain, fx)]
  for (let index = 0; index < Math.max(zeros.length, others.length); index += 1) {
    const zero = zeros[index]
    const other = others[index]
    if (zero !== undefined) {
      const constant = offset(zero)
      series = series.map((term, k) => {
        const scaled = fx.times(term, constant)
        const lower = series[k - 1] ?? ZERO
        return { re: scaled.re + lower.re, im: scaled.im + lower.im }
      })
    }
    if (other !== undefined) {
      const inverse = fx.reciprocal(offset(other))
      let before = ZERO
      series = series.map((term) => {
        before = fx.times({ re: term.re - before.re, im: term.im - before.im }, inverse)
        return before
      })
    }
  }
  return series.reverse()
}

/** ∏(1 − e^p·z⁻¹) over the full list. */
function denominator(groups: readonly { count: number; image: BigComplex; real: boolean }[], fx: FixedPoint): bigint[] {
  let a: bigint[] = [fx.one]
  for (const { count, image, real } of groups) {
    const factor = real
      ? [-image.re]
      : [-2n * image.re, fx.multiply(image.re, image.re) + fx.multiply(image.im, image.im)]
    for (let repeat = 0; repeat < count; repeat += 1) {
      const next = [...a, ...factor.map(() => 0n)]
      factor.forEach((value, shift) => {
        a.forEach((coefficient, k) => {
          next[k + shift + 1] = (next[k + shift + 1] ?? 0n) + fx.multiply(coefficient, value)
        })
      })
      a = next
    }
  }
  return a
}

/**
 * Numerator and partial fractions of the digital filter whose impulse response is h(k) (kind 'impulse') or whose step response is the
 * sampled analog step response (kind 'step').
 *
 * Steps: 1. partial fractions of H(s), or of H(s)/s, with multiplicity; 2. samples h(0 … n) by powers of e^p; 3. numerator = the first
 * n + 1 terms of denominator × samples, since all later ones vanish. Values that are known exactly (h(0+), trailing zeros) are set,
 * not computed.
 * Source: Oppenheim & Schafer 7.1.1; K. J. Åström & B. Wittenmark, Computer-Controlled Systems, ch. 2.
 *
 * @param form analog filter in rad per sample
 * @param firstSample part of h(0+) that the first sample takes, 1 or ½; used by 'impulse' only
 */
export function sampledForm(form: HalfForm, kind: 'impulse' | 'step', firstSample = 1): SampledForm {
  const order = fullCount(form.poles)
  const excess = order - fullCount(form.zeros)
  const origin: Complex = { re: 0, im: 0 }
  const poles = kind === 'step' ? [...form.poles, origin] : form.poles
  const fx = new FixedPoint(bitsFor(form.poles))
  const full = expand(poles)

  const groups = group(poles).map(({ pole, count }) => {
    const others = full.filter((root) => root.re !== pole.re || root.im !== pole.im)
    const coefficients = expandAt(pole, count, form, others, fx)
    return {
      pole,
      count,
      real: pole.im === 0,
      coefficients,
      image: fx.exponential(pole),
      power: { re: fx.one, im: 0n },
    }
  })

  const samples: bigint[] = []
  for (let k = 0; k <= order; k += 1) {
    let sum = 0n
    for (const entry of groups) {
      let polynomial = ZERO
      let weight = fx.one
      entry.coefficients.forEach((coefficient, j) => {
        if (j > 0) weight = (weight * BigInt(k)) / BigInt(j)
        polynomial = {
          re: polynomial.re + fx.multiply(coefficient.re, weight),
          im: polynomial.im + fx.multiply(coefficient.im, weight),
        }
      })
      sum += fx.times(polynomial, entry.power).re * (entry.real ? 1n : 2n)
      entry.power = fx.times(entry.power, entry.image)
    }
    samples.push(sum)
  }

  const gain = fx.fromNumber(form.gain)
  const response = samples.map((value, k) => (kind === 'step' ? value - (samples[k - 1] ?? 0n) : value))
  if (kind === 'step') response[0] = excess === 0 ? gain : 0n
  else response[0] = excess === 1 ? fx.fromNumber(form.gain * firstSample) : 0n
  if (kind === 'step') response[1] = (samples[1] ?? 0n) - (response[0] ?? 0n)

  const a = denominator(
    groups.filter((entry) => entry.pole.re !== 0 || entry.pole.im !== 0),
    fx,
  )
  const numerator = response.map((_, k) => {
    let sum = 0n
    for (let j = 0; j <= k; j += 1) sum += fx.multiply(a[j] ?? 0n, response[k - j] ?? 0n)
    return sum
  })
  // Σ c/(1 − P·z⁻¹) has no z⁻ⁿ term; taking half of the first sample gives it one.
  if (kind === 'impulse' && (excess > 1 || firstSample === 1)) numerator[order] = 0n
  return { numerator, fractions: groups.map(({ pole, coefficients }) => ({ pole, coefficients })), arithmetic: fx }
}
