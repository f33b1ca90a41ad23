import { fullCount } from '../forms/zeros-poles-gain'
import { complex, modulus, scale } from '../numeric/complex'
import { ratio, shortPoint, timesShort, type BigComplex } from '../numeric/fixed-point'
import { simultaneousRoots } from '../numeric/simultaneous-roots'
import type { Complex } from '../forms/filter'
import type { HalfRoots } from '../forms/zeros-poles-gain'
import type { Prototype } from './prototype'

/** What 1 rad/s means for a Bessel prototype. */
export type BesselNormalization = 'magnitude' | 'delay' | 'phase'

/**
 * Newton step of the reverse Bessel polynomial, θₙ/θₙ′, on the recurrence θₖ = (2k − 1)·θₖ₋₁ + s²·θₖ₋₂ and its derivative; the
 * expanded coefficients (up to 10³⁰ at order 24) are never formed. In the left half plane the recurrence itself cancels by about
 * half a digit a step, so it runs on long fixed-point numbers, of which the ratio keeps the digits of a double.
 */
function newtonStep(order: number, s: Complex): Complex {
  const point = shortPoint(s)
  const twice = { ...point, re: 2n * point.re, im: 2n * point.im }
  let before: { p: BigComplex; d: BigComplex } = { p: { re: ONE, im: 0n }, d: { re: 0n, im: 0n } }
  let now = { p: { ...timesShort(before.p, point) }, d: before.p }
  now.p.re += ONE
  for (let k = 2; k <= order; k += 1) {
    const factor = BigInt(2 * k - 1)
    const squared = timesShort(timesShort(before.p, point), point)
    const slope = timesShort(timesShort(before.d, point), point)
    const chain = timesShort(before.p, twice)
    const next = {
      p: { re: factor * now.p.re + squared.re, im: factor * now.p.im + squared.im },
      d: { re: factor * now.d.re + slope.re + chain.re, im: factor * now.d.im + slope.im + chain.im },
    }
    before = now
    now = next
  }
  return ratio(now.p, now.d)
}

/** One at 192 fractional bits: 60 of a double and its guard, and about 80 that the recurrence cancels at order 24. */
const ONE = 1n << 192n

const known = new Map<number, HalfRoots>()

/**
 * Poles of the unit-delay Bessel–Thomson filter: the zeros of θₙ, found all at once. They lie near an arc through −0.68·n and ±j·0.93·n,
 * about 1.74 apart (E. Grosswald, Bessel Polynomials, 1978, ch. 10), which gives the start. Remembered by order: they depend on nothing
 * else.
 */
function unitDelayPoles(order: number): HalfRoots {
  const before = known.get(order)
  if (before !== undefined) return before
  const start: Complex[] = []
  const first = order % 2 === 0 ? 1 : 2
  for (let k = first; k < order; k += 2) {
    const im = 0.868 * k * (1 + 0.08 * (k / order) ** 3)
    start.push(complex(-0.676 * order * Math.sqrt(Math.max(0.02, 1 - (im / (0.93 * order)) ** 2)), im))
  }
  const { upper, real } = simultaneousRoots(
    (s) => newtonStep(order, s),
    start,
    order % 2 === 1 ? [-0.676 * order - 0.3] : [],
  )
  const poles = [...upper, ...real.map((root) => complex(root))]
  known.set(order, poles)
  return poles
}

/** ln|H(jω)|² of an all-pole low-pass with unit gain at DC, and its slope in ω. */
function logPower(poles: HalfRoots, omega: number): { value: number; slope: number } {
  let value = 0
  let slope = 0
  const term = (pole: Complex) => {
    const square = pole.re * pole.re + (omega - pole.im) * (omega - pole.im)
    value += Math.log((pole.re * pole.re + pole.im * pole.im) / square)
    slope -= (2 * (omega - pole.im)) / square
  }
  for (const pole of poles) {
    term(pole)
    if (pole.im > 0) term({ re: pole.re, im: -pole.im })
  }
  return { value, slope }
}

/** Where an all-pole low-pass with unit gain at DC has lost 10·lg 2 dB: Newton on ln|H|², which falls monotonically. */
function halfPowerFrequency(poles: HalfRoots): number {
  let omega = 1
  for (let round = 0; round < 60; round += 1) {
    const { value, slope } = logPower(poles, omega)
    const next = omega - (value + Math.LN2) / slope
    const bounded = Math.min(Math.max(next, omega / 2), omega * 2)
    if (Math.abs(bounded - omega) <= 2 * Number.EPSILON * omega) return bounded
    omega = bounded
  }
  return omega
}

/**
 * Bessel–Thomson low-pass, maximally flat group delay at DC (W. E. Thomson, Proc. IEE 96, 1949; L. Storch, Proc. IRE 42, 1954).
 *
 * 1 rad/s is, by `normalization`,
 * - 'magnitude': where the magnitude is 3.0103 dB down;
 * - 'delay': the reciprocal of the group delay at DC, which is then 1 s (a filter with its edge at f has the DC delay 1/(2π·f));
 * - 'phase': where the high-frequency asymptote |H| → 1/ωⁿ crosses 0 dB, as for a Butterworth filter of that edge. The phase there is
 *   about half of its final −n·90°.
 *
 * @param order 1–24
 */
export function bessel(order: number, normalization: BesselNormalization): Prototype {
  const poles = unitDelayPoles(order)
  const divisor = { magnitude: () => halfPowerFrequency(poles), delay: () => 1, phase: () => geometricMean(poles) }[
    normalization
  ]()
  return { zeros: [], poles: poles.map((pole) => scale(pole, 1 / divisor)), dcGain: 1 }
}

/** (∏|poles|)^(1/n). */
function geometricMean(poles: HalfRoots): number {
  const logarithm = poles.reduce((sum, pole) => sum + (pole.im > 0 ? 2 : 1) * Math.log(modulus(pole)), 0)
  return Math.exp(logarithm / fullCount(poles))
}
