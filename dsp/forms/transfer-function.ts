import { DesignError } from '../errors'
import { complex, divide, modulus, multiply, subtract } from '../numeric/complex'
import { FixedPoint, timesPowerOfTwo } from '../numeric/fixed-point'
import { refinedAngles, refinedFrequencies } from '../numeric/refined-axis'
import { rootsInLeftHalf, rootsInsideCircle } from './stability'
import { halve, magnitudeAt, valueAt, type HalfRoots } from './zeros-poles-gain'
import type { Complex, Domain, Filter } from './filter'

/** Numerator and denominator of a filter, and what rounding them to doubles does. */
export interface TransferFunction {
  /**
   * As long as `a`. For 'z': H = Σ b[k]·z⁻ᵏ / Σ a[k]·z⁻ᵏ. For 's': highest power first, padded with leading zeros.
   */
  readonly b: Float64Array
  /** a[0] = 1. */
  readonly a: Float64Array
  /**
   * Largest deviation of the rounded polynomials from the roots in dB, at frequencies where the response is within 120 dB of its peak:
   * the larger of the level difference and 20·lg(1 + |H_ba/H − 1|), which counts phase too. Infinity when either polynomial is rounded
   * to nothing there.
   */
  readonly worstDeviationDb: number
  /** Whether the roots of the rounded denominator are where a stable filter’s must be. */
  readonly stable: boolean
}

/** The response is compared down to here, relative to its peak: below it a relative deviation says nothing. */
const COMPARED_DB = 120

const BITS = 3072

/** Monic polynomial with these roots, highest power first, exact but for the last of 3072 fractional bits. */
function expandRoots(half: HalfRoots, fx: FixedPoint): bigint[] {
  let polynomial: bigint[] = [fx.one]
  for (const root of half) {
    const re = fx.fromNumber(root.re)
    const im = fx.fromNumber(root.im)
    const factor = root.im > 0 ? [-2n * re, fx.multiply(re, re) + fx.multiply(im, im)] : [-re]
    const next = [...polynomial, ...factor.map(() => 0n)]
    factor.forEach((value, shift) => {
      polynomial.forEach((coefficient, k) => {
        next[k + shift + 1] = (next[k + shift + 1] ?? 0n) + fx.multiply(coefficient, value)
      })
    })
    polynomial = next
  }
  return polynomial
}

/** A power of two near the largest root, so that s-plane polynomials are expanded (and compared) with roots of order one. */
function exponentOf(filter: Filter<Domain>): number {
  if (filter.domain === 'z') return 0
  const largest = Math.max(0, ...filter.poles.map(modulus))
  return largest === 0 ? 0 : Math.ceil(Math.log2(largest))
}

function rounded(polynomial: readonly bigint[], fx: FixedPoint, exponent: (k: number) => number): Float64Array {
  return Float64Array.from(polynomial, (value, k) => {
    const scaled = timesPowerOfTwo(fx.toNumber(value), exponent(k))
    if (!Number.isFinite(scaled) || (value !== 0n && Math.abs(scaled) < 2 ** -1022)) {
      throw new DesignError(
        'coefficients-out-of-range',
        'filter',
        'The polynomials of this filter need numbers outside the range of double precision; use its sections or its roots.',
        'sections',
      )
    }
    return scaled
  })
}

/** Σ c[k]·x^(n−k) by Horner. */
function evaluate(highestFirst: ArrayLike<number>, x: Complex): Complex {
  let value = complex(0)
  for (let k = 0; k < highestFirst.length; k += 1) {
    const product = multiply(value, x)
    value = complex(product.re + (highestFirst[k] ?? 0), product.im)
  }
  return value
}

function worstDeviation(filter: Filter<Domain>, b: Float64Array, a: Float64Array, unit: number): number {
  const roots = [...filter.poles, ...filter.zeros]
  const axis: Complex[] =
    filter.domain === 'z'
      ? refinedAngles(roots, 512).map((angle) => ({ re: Math.cos(angle), im: Math.sin(angle) }))
      : refinedFrequencies(roots).map((omega) => ({ re: 0, im: omega }))
  const peak = Math.max(...axis.map((x) => magnitudeAt(filter, x)))
  const least = peak * 10 ** (-COMPARED_DB / 20)
  let worst = 0
  for (const x of axis) {
    const wanted = valueAt(filter, x)
    if (!(modulus(wanted) >= least)) continue
    const scaled = { re: x.re / unit, im: x.im / unit }
    const got = divide(evaluate(b, scaled), evaluate(a, scaled))
    const vector = 20 * Math.log10(1 + modulus(divide(subtract(got, wanted), wanted)))
    const level = Math.abs(20 * Math.log10(modulus(got) / modulus(wanted)))
    const deviation = Math.max(vector, level)
    if (!Number.isFinite(deviation)) return Number.POSITIVE_INFINITY
    worst = Math.max(worst, deviation)
  }
  return worst
}

/**
 * Polynomials b/a of a filter: an output, for those who must have it. The expansion itself is exact (long fixed-point numbers), so that
 * what is measured is the rounding of b and a alone, and whatever evaluates them in doubles.
 *
 * Steps: 1. expand the roots; 2. round once; 3. compare H from the rounded polynomials with H from the roots on a net that is refined
 * at every pole and zero; 4. test the rounded denominator for stability (Schur–Cohn, Routh).
 * Source: J. H. Wilkinson, Rounding Errors in Algebraic Processes (1963), on what expansion does to roots.
 *
 * @param filter roots in rad/s for 's'
 * @throws DesignError `coefficients-out-of-range` when a coefficient over- or underflows
 */
export function toTransferFunction(filter: Filter<Domain>): TransferFunction {
  const fx = new FixedPoint(BITS)
  const exponent = exponentOf(filter)
  const unit = 2 ** exponent
  const scaled = (roots: readonly Complex[]) => halve(roots).map((root) => complex(root.re / unit, root.im / unit))
  const denominator = expandRoots(scaled(filter.poles), fx)
  const monic = expandRoots(scaled(filter.zeros), fx)
  const gain = fx.fromNumber(filter.gain)
  const excess = filter.poles.length - filter.zeros.length
  // In the scaled variable the gain carries unit^(zeros − poles).
  const numerator = [...Array.from({ length: excess }, () => 0n), ...monic.map((value) => fx.multiply(value, gain))]

  const a = rounded(denominator, fx, (k) => exponent * k)
  const b = rounded(numerator, fx, (k) => exponent * (k - excess))
  const scaledA = a.map((value, k) => timesPowerOfTwo(value, -exponent * k))
  const scaledB = b.map((value, k) => timesPowerOfTwo(value, -exponent * k))
  return {
    b,
    a,
    worstDeviationDb: worstDeviation(filter, scaledB, scaledA, unit),
    stable: filter.domain === 'z' ? rootsInsideCircle(a) : rootsInLeftHalf(scaledA),
  }
}
