import { discretize } from './discretise/discretize'
import { designAnalog } from './design-analog'
import type { Diagnostic, DigitalFilter, Filter } from './forms/filter'
import type { DesignSpec } from './spec'

/** A design computed: its analog original, its digital version, and what the user should know about them. */
export interface Design {
  readonly spec: DesignSpec
  readonly analog: Filter<'s'>
  readonly digital: DigitalFilter
  readonly diagnostics: readonly Diagnostic[]
}

/**
 * Spec in, design and diagnostics out: prototype → band transform → method → sections, all of it visible in the result.
 *
 * @throws DesignError with the field of the spec that is to blame and the nearest value that works
 */
export function designFromSpec(spec: DesignSpec): Design {
  const digital = discretize(spec.analog, spec.sampleRateHz, spec.how)
  return { spec, analog: designAnalog(spec.analog), digital, diagnostics: digital.diagnostics }
}
