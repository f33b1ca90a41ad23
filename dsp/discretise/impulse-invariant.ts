import { parallelOfSamples, scaleParallel } from '../forms/parallel'
import { fromHalf, fullCount, magnitudeAt, upper, type HalfForm } from '../forms/zeros-poles-gain'
import { exponential } from '../numeric/complex'
import { polynomialRoots } from '../numeric/polynomial-roots'
import { sampledForm, type SampledForm } from './sampled-numerator'
import type { ParallelForm } from '../forms/filter'

/** A digital filter in half form, with its sum of sections where one exists. */
export interface SampledFilter {
  readonly form: HalfForm
  /** Absent when a pole is repeated in a way that a sum of second-order sections can't hold. */
  readonly parallel?: ParallelForm
}

/** Zeros and gain from the numerator; b₀ may be missing, which delays the filter by as many samples. */
export function rootsOfSampled(form: HalfForm, { numerator, arithmetic }: SampledForm, zeroAtOne: boolean): HalfForm {
  let leading = 0
  while (leading < numerator.length - 1 && numerator[leading] === 0n) leading += 1
  let coefficients = numerator.slice(leading)
  if (zeroAtOne) {
    // Synthetic division by (z − 1); the remainder is rounding.
    let sum = 0n
    coefficients = coefficients.slice(0, -1).map((value) => (sum += value))
  }
  const zeros = polynomialRoots(coefficients)
  return {
    zeros: zeroAtOne ? [...zeros, { re: 1, im: 0 }] : zeros,
    poles: form.poles.map((pole) => upper(exponential(pole))),
    gain: arithmetic.toNumber(coefficients[0] ?? 0n),
  }
}

/**
 * Impulse-invariant version: h[n] = T·h(nT), the impulse samples times the sampling interval (so that gain is kept, not the height of
 * the pulse). Repeated poles are handled in full; zeros come from the exact numerator.
 * Source: Oppenheim & Schafer 7.1.1; half of the first sample: L. B. Jackson, IEEE Signal Processing Letters 7(10), 2000.
 *
 * @param form strictly proper analog filter in rad per sample (frequencies divided by the sampling rate)
 * @param halfFirstSample take half of the first sample where h(0+) ≠ 0, as Fourier inversion at a jump gives
 */
export function impulseInvariant(form: HalfForm, halfFirstSample = false): SampledFilter {
  const firstSample = halfFirstSample ? 0.5 : 1
  const sampled = sampledForm(form, 'impulse', firstSample)
  const roots = rootsOfSampled(form, sampled, false)
  const jump = fullCount(form.poles) - fullCount(form.zeros) === 1 ? form.gain : 0
  const parallel = parallelOfSamples(sampled.fractions, sampled.arithmetic, jump * (firstSample - 1))
  return parallel === undefined ? { form: roots } : { form: roots, parallel }
}

/**
 * Scales a digital filter to the analog gain at one frequency. At DC that is unity, but for even orders of the equal-ripple families,
 * whose gain there is −ripple by design.
 *
 * @param radians rad per sample: 0, or the centre of a band
 */
export function restoreGain(analog: HalfForm, digital: SampledFilter, radians: number): SampledFilter {
  const wanted = magnitudeAt(fromHalf('s', analog), { re: 0, im: radians })
  const got = magnitudeAt(fromHalf('z', digital.form), { re: Math.cos(radians), im: Math.sin(radians) })
  const factor = wanted / got
  const form = { ...digital.form, gain: digital.form.gain * factor }
  return digital.parallel === undefined ? { form } : { form, parallel: scaleParallel(digital.parallel, factor) }
}
