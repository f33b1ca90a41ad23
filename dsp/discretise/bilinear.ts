import { expand, fromHalf, fullCount, repeated, toHalf, type HalfForm, type HalfRoots } from '../forms/zeros-poles-gain'
import { complex } from '../numeric/complex'
import type { Complex, Filter } from '../forms/filter'

/**
 * The factor c of s = c·(z − 1)/(z + 1), in rad per sample, that maps `heldHz` exactly onto itself:
 * c = ω/tan(ω/2) with ω = 2π·heldHz/sampleRateHz; c = 2 holds DC alone.
 */
export function bilinearFactor(sampleRateHz: number, heldHz: number | 'none'): number {
  if (heldHz === 'none') return 2
  const radiansPerSample = (2 * Math.PI * heldHz) / sampleRateHz
  return radiansPerSample / Math.tan(radiansPerSample / 2)
}

/** The frequency variable of the bilinear plane, tan(ω/2): where an edge must lie so that it comes out at `frequencyHz`. */
export const warp = (frequencyHz: number, sampleRateHz: number): number =>
  Math.tan((Math.PI * frequencyHz) / sampleRateHz)

/** warp(high) − warp(low) without cancellation: sin(b − a)/(cos a · cos b). */
export function warpedWidth(lowHz: number, highHz: number, sampleRateHz: number): number {
  const radians = Math.PI / sampleRateHz
  return Math.sin((highHz - lowHz) * radians) / (Math.cos(lowHz * radians) * Math.cos(highHz * radians))
}

/** z = (1 + s)/(1 − s), written so that neither part cancels for |s| ≪ 1. */
function mapRoot({ re, im }: Complex): Complex {
  const denominator = (1 - re) * (1 - re) + im * im
  return { re: (1 - re * re - im * im) / denominator, im: (2 * im) / denominator }
}

/** ∏(1 − zeros)/∏(1 − poles) over the full lists, by turns against overflow. */
function gainRatio(zeros: HalfRoots, poles: HalfRoots): number {
  const factor = ({ re, im }: Complex) => (im > 0 ? (1 - re) * (1 - re) + im * im : 1 - re)
  let ratio = 1
  for (let k = 0; k < Math.max(zeros.length, poles.length); k += 1) {
    const zero = zeros[k]
    const pole = poles[k]
    if (zero !== undefined) ratio *= factor(zero)
    if (pole !== undefined) ratio /= factor(pole)
  }
  return ratio
}

/**
 * Bilinear transform on the roots, in the plane where s = (z − 1)/(z + 1) (A. Tustin 1947; Oppenheim & Schafer 7.1.2).
 * Zeros at infinity go to z = −1, half the sampling rate.
 */
export function bilinearHalf(form: HalfForm): HalfForm {
  const excess = fullCount(form.poles) - fullCount(form.zeros)
  return {
    zeros: [...form.zeros.map(mapRoot), ...repeated(-1, excess)],
    poles: form.poles.map(mapRoot),
    gain: form.gain * gainRatio(form.zeros, form.poles),
  }
}

/**
 * Bilinear transform of any analog filter.
 *
 * @param filter roots in rad/s
 * @param sampleRateHz sampling rate in Hz
 * @param heldHz the frequency, below half the rate, at which analog and digital agree exactly; 'none' holds DC alone
 * @returns zeros (as many as poles), poles and gain on the z-plane
 * @throws DesignError `not-finite` when a root or the gain leaves double precision
 */
export function bilinearTransform(filter: Filter<'s'>, sampleRateHz: number, heldHz: number | 'none'): Filter<'z'> {
  const perUnit = 1 / (sampleRateHz * bilinearFactor(sampleRateHz, heldHz))
  const scaled = (root: Complex) => complex(root.re * perUnit, root.im * perUnit)
  const { zeros, poles, gain } = toHalf(filter)
  const excess = expand(poles).length - expand(zeros).length
  return fromHalf(
    'z',
    bilinearHalf({ zeros: zeros.map(scaled), poles: poles.map(scaled), gain: gain * perUnit ** excess }),
  )
}
