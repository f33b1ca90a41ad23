/*
 * The face of dsp: everybody else imports the numbers from here and from nowhere deeper.
 */

// Shapes, specs and refusals
export { DesignError } from './errors'
export { ENGINE_VERSION } from './version'
export type { Complex, Diagnostic, DigitalFilter, Domain, Filter, ParallelForm, Section } from './forms/filter'
export {
  analogSpecSchema,
  departureBudgetSchema,
  designSpecSchema,
  familySchema,
  methodSchema,
  responseSchema,
} from './spec'
export type {
  AnalogSpec,
  DepartureBudget,
  DesignMethod,
  DesignSpec,
  Family,
  Method,
  MethodName,
  ResponseKind,
} from './spec'

// Design: spec → analog → digital → sections
export { designFromSpec, type Design } from './design'
export { checkAnalogSpec, checkDiscretization } from './check'
export { designAnalog } from './design-analog'
export { discretize } from './discretise/discretize'
export { toSections, type SectionOptions, type SectionOrder } from './forms/sections'
export type { SectionScale } from './forms/section-scaling'

// Responses
export type { AnyFilter } from './response/factors'
export {
  frequencyResponse,
  frequencyResponseInto,
  magnitudeDb,
  magnitudeDbInto,
  zeroPhaseMagnitudeDb,
} from './response/frequency'
export { groupDelay, groupDelayInto, phaseDelay, phaseResponse, phaseResponseInto } from './response/delay'
