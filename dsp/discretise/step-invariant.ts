import { parallelOfSteps } from '../forms/parallel'
import { modulusRatio, type HalfForm } from '../forms/zeros-poles-gain'
import { rootsOfSampled, type SampledFilter } from './impulse-invariant'
import { sampledForm } from './sampled-numerator'

/**
 * Step-invariant version (zero-order hold): the digital step response is the analog one, sampled; so DC gain is exact, and in between
 * the hold adds half a sample of delay and a droop of sin(ω/2)/(ω/2).
 * Source: K. J. Åström & B. Wittenmark, Computer-Controlled Systems (1997), ch. 2.
 *
 * @param form proper analog filter in rad per sample, without poles at the origin
 */
export function stepInvariant(form: HalfForm): SampledFilter {
  const sampled = sampledForm(form, 'step')
  // What blocks DC in the analog filter blocks it here, exactly.
  const zeroAtOne = form.zeros.some((zero) => zero.re === 0 && zero.im === 0)
  const roots = rootsOfSampled(form, sampled, zeroAtOne)
  const rightZeros = form.zeros.filter((zero) => zero.im === 0 && zero.re > 0).length
  const dcGain = zeroAtOne ? 0 : form.gain * modulusRatio(form.zeros, form.poles) * (rightZeros % 2 === 0 ? 1 : -1)
  const parallel = parallelOfSteps(sampled.fractions, sampled.arithmetic, dcGain)
  return parallel === undefined ? { form: roots } : { form: roots, parallel }
}
