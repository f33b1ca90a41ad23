import { checkAnalogSpec } from './check'
import { fromHalf, type HalfForm } from './forms/zeros-poles-gain'
import { prototypeOf } from './prototypes/family'
import { toBandpass, toBandstop, toHighpass, toLowpass } from './transforms/bands'
import type { Filter } from './forms/filter'
import type { AnalogSpec } from './spec'

/**
 * Prototype → band transform, with the edges in whatever unit the caller works in (rad/s, rad per sample, or the bilinear plane).
 *
 * @param edges one edge, or [low, high]
 * @param bandwidth high − low, where the caller knows it with more digits than the difference has
 */
export function designHalf(spec: AnalogSpec, edges: readonly number[], bandwidth?: number): HalfForm {
  const prototype = prototypeOf(spec)
  const [low = Number.NaN, high = Number.NaN] = edges
  switch (spec.response) {
    case 'lowpass':
      return toLowpass(prototype, low)
    case 'highpass':
      return toHighpass(prototype, low)
    case 'bandpass':
      return toBandpass(prototype, { low, high, bandwidth: bandwidth ?? high - low })
    case 'bandstop':
      return toBandstop(prototype, { low, high, bandwidth: bandwidth ?? high - low })
  }
}

/**
 * The analog filter of a specification.
 *
 * @param spec family, response, order of the prototype, edges in Hz, levels in dB
 * @returns zeros and poles in rad/s and the gain factor; conjugate pairs are exact
 * @throws DesignError as checkAnalogSpec
 */
export function designAnalog(spec: AnalogSpec): Filter<'s'> {
  checkAnalogSpec(spec)
  const perHertz = 2 * Math.PI
  const [low = 0, high = 0] = spec.edgesHz
  return fromHalf(
    's',
    designHalf(
      spec,
      spec.edgesHz.map((edge) => perHertz * edge),
      perHertz * (high - low),
    ),
  )
}
