import { designAnalog } from './design-analog'
import { discretize } from './discretise/discretize'
import { designFir } from './fir/design-fir'
import { DesignError } from './errors'
import type { AnyDigital, Diagnostic, DigitalFilter, Filter } from './forms/filter'
import type { Reference } from './response/reference'
import type { DesignSpec, FamilyDesign, FirDesign } from './spec'
import { isFamilyDesign, isFirDesign } from './spec-kinds'
import { designOwn } from './targets/design-own'

/** A design computed: what it is held against, its digital version, and what the user should know about them. */
export interface Design {
  readonly spec: DesignSpec
  readonly reference: Reference
  /** The analog original, where it is known by its roots. */
  readonly analog: Filter<'s'> | null
  readonly digital: AnyDigital
  readonly diagnostics: readonly Diagnostic[]
}

/** A design of a known family, which has all its roots on both sides. */
export interface DesignOfFamily extends Design {
  readonly spec: FamilyDesign
  readonly analog: Filter<'s'>
  readonly digital: DigitalFilter
}

/**
 * Spec in, design and diagnostics out: prototype → band transform → method → sections, or bands → taps, all of it visible in the result.
 *
 * @throws DesignError with the field of the spec that is to blame and the nearest value that works
 */
export function designFromSpec(spec: FamilyDesign): DesignOfFamily
export function designFromSpec(spec: DesignSpec): Design
export function designFromSpec(spec: DesignSpec): Design {
  try {
    return computed(spec)
  } catch (thrown) {
    if (thrown instanceof RangeError || thrown instanceof TypeError) throw notComputable(spec, thrown)
    throw thrown
  }
}

/** What no check foresaw is still said as a refusal: a page or an action shows a sentence, and the cause is kept for the log. */
function notComputable(spec: DesignSpec, cause: Error): DesignError {
  const field = isFamilyDesign(spec) ? 'analog' : isFirDesign(spec) ? 'fir' : 'own'
  const message = 'These numbers make no filter that double precision can hold; more moderate ones do.'
  return Object.assign(new DesignError('not-computable', field, message), { cause })
}

function computed(spec: DesignSpec): Design {
  if (isFamilyDesign(spec)) return familyDesign(spec)
  if (isFirDesign(spec)) return firDesign(spec)
  const made = designOwn(spec.own, spec.sampleRateHz, spec.how)
  return { spec, ...made, diagnostics: made.digital.diagnostics }
}

function familyDesign(spec: FamilyDesign): DesignOfFamily {
  const digital = discretize(spec.analog, spec.sampleRateHz, spec.how)
  const analog = designAnalog(spec.analog)
  return { spec, reference: { kind: 'analog', filter: analog }, analog, digital, diagnostics: digital.diagnostics }
}

function firDesign(spec: FirDesign): Design {
  const digital = designFir(spec.fir, spec.sampleRateHz)
  const { kind, bands, response, taps } = spec.fir
  const reference: Reference = {
    kind: 'ideal',
    bands,
    isDifferentiator: response === 'differentiator',
    delaySeconds: kind === 'minimum-phase' ? 0 : (taps - 1) / 2 / spec.sampleRateHz,
    sampleRateHz: spec.sampleRateHz,
  }
  return { spec, reference, analog: null, digital, diagnostics: digital.diagnostics }
}
