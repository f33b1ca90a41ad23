/*
 * The face of dsp: everybody else imports the numbers from here and from nowhere deeper.
 */

// Shapes, specs and refusals
export { DesignError } from './errors'
export { ENGINE_VERSION } from './version'
export {
  isFir,
  type AnyDigital,
  type Complex,
  type Diagnostic,
  type DigitalFilter,
  type Domain,
  type Filter,
  type FirFilter,
  type ParallelForm,
  type Section,
} from './forms/filter'
export {
  analogSpecSchema,
  departureBudgetSchema,
  designSpecSchema,
  familySchema,
  firKindSchema,
  firResponseSchema,
  firSpecSchema,
  firWindowSchema,
  methodSchema,
  ownTargetSchema,
  responseSchema,
} from './spec'
export { MOST_MEASURED_ROWS, MOST_REQUIREMENTS, MOST_TAPS } from './limits'
export { isFamilyDesign, isFirDesign, isOwnDesign } from './spec-kinds'
export type {
  AnalogSpec,
  DepartureBudget,
  DesignSpec,
  Family,
  FamilyDesign,
  FirBand,
  FirDesign,
  FirKind,
  FirResponse,
  FirSpec,
  FirWindow,
  Method,
  MethodName,
  OwnDesign,
  OwnTarget,
  ResponseKind,
} from './spec'
export {
  requirementSchema,
  sheetSchema,
  type Requirement,
  type RequirementKind,
  type RequirementSheet,
} from './requirements/requirement'
export {
  checkRequirement,
  checkSheet,
  type RequirementCurve,
  type RequirementResult,
  type RequirementUnit,
} from './requirements/evaluate'
export type { Judged } from './requirements/departure-line'
export { contradictions, type Contradiction } from './requirements/contradictions'
export { requirementTemplates, type RequirementTemplate, type TemplateOptions } from './requirements/templates'
export { candidateSteps, searchCandidates } from './candidates/search'
export { sketchFrequencies } from './candidates/figures'
export {
  isOffered,
  type CandidateFigures,
  type CandidateOutcome,
  type CandidateParts,
  type CandidateRequest,
  type CandidateRow,
  type OfferedRow,
  type RefusedRow,
  type Spend,
} from './candidates/request'
export { multipliesPerSample } from './forms/cost'

// Design: spec → analog → digital → sections
export { designFromSpec, type Design, type DesignOfFamily } from './design'
export { checkAnalogSpec, checkDiscretization } from './check'
export { designAnalog } from './design-analog'
export { minimumOrder, type LeastOrder } from './prototypes/order'
export type { OrderRequirement } from './prototypes/order-check'
export { discretize } from './discretise/discretize'
export { fittedAdvantage, type FittedAdvantage, type Rival, type RivalDeparture } from './discretise/fitted-advantage'
export { designOwn, referenceOfTarget, type OwnDesignResult } from './targets/design-own'
export type { MeasuredTable } from './targets/measured'
export { toSections, type SectionOptions, type SectionOrder } from './forms/sections'
export type { SectionScale } from './forms/section-scaling'
export { toTransferFunction, type TransferFunction } from './forms/transfer-function'

// FIR filters
export { designFir } from './fir/design-fir'
export { equiripple, type Equiripple } from './fir/equiripple'
export { bandsWeightedFor, firMeets, leastTaps, type FirRequirement } from './fir/least-taps'
export { mostTaps } from './fir/check'
export { firBandMagnitudes, type BandMagnitude } from './fir/band-magnitudes'
export { firWindow, kaiserBeta, kaiserOrder } from './fir/windows'
export { firZeros, MOST_TAPS_FOR_ZEROS } from './fir/zeros'
export { createTapsRunner, runTaps, type RunTapsOptions } from './fir/run-taps'

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
export { departure, worstDeparture, type Departure, type WorstDeparture } from './response/departure'
export {
  referenceDelay,
  referenceMagnitudeDb,
  referencePhase,
  referenceResponse,
  type Reference,
} from './response/reference'
export { departureFrom, residual, type Residual } from './response/departure-from-reference'
export { bestDelay } from './response/departure-curve'
export { trustedBand, type TrustedBand } from './response/trusted-band'
export {
  lowestRate,
  rateSweep,
  type LowestRateOptions,
  type MethodSweep,
  type RateSweep,
  type RateSweepOptions,
} from './response/rates'
export { parallelResponse } from './response/parallel'
export { impulseResponse, stepResponse, type TimeGrid, type TimeResponse } from './response/time'
export { settlingTime, stepFigures, type StepFigures } from './response/settling'

// Signals
export { createRunner, runFilter, type Runner, type RunOptions } from './signal/run'
export { steadyState } from './signal/cascade'
export { minimumSamplesForZeroPhase, zeroPhasePadLength } from './signal/zero-phase'
export { welch, type Spectrum, type WelchOptions } from './signal/welch'
export { spectralWindow, windowNames, type SpectralWindow, type WindowName } from './signal/windows'
export { convolve } from './signal/convolve'
export { measureDelay, predictDelay, type DelayOptions, type MeasuredDelay } from './signal/delay-estimate'
export { buildEnvelope, readEnvelope, type Envelope, type EnvelopeLevel, type EnvelopeView } from './signal/envelope'
export { footbridgeDemo, type DemoOptions, type DemoRecording } from './signal/demo-recording'
export { seededNoise } from './numeric/random'

// Chains: sensor to stored sample
export { chainSpecSchema, chainStageSchema, chainUnitSchema, toleranceSchema } from './chain/spec'
export type {
  AnalogStage,
  ChainSpec,
  ChainStage,
  ChainStageKind,
  ChainUnit,
  ConverterStage,
  DecimateStage,
  DesignLink,
  Interferer,
  SensorStage,
  ShapeStage,
  ToleranceSettings,
} from './chain/spec'
export {
  LEAST_CHANNELS,
  MOST_CHAIN_REQUIREMENTS,
  MOST_CHAIN_STAGES,
  MOST_CHANNELS,
  MOST_DECIMATION,
  MOST_INTERFERERS,
  MOST_STAGE_TAPS,
} from './chain/limits'
export type { ChainRequirement, ChainRequirementKind } from './chain/requirement'
export { chainUnits, integralOf, type ChainQuantity } from './chain/units'
export type {
  ChainRequirementResult,
  ChainRequirementUnit,
  ChainResponse,
  ComputedChain,
  ComputedStage,
  FoldChart,
  FoldPath,
  FoldStrip,
  InterfererLanding,
  NoiseBudget,
  UsableBand,
  WorstAlias,
} from './chain/chain'
export { computeChain } from './chain/compute'
export { chainResponse, stageMagnitudeDb } from './chain/response'
export { foldChart, foldPaths, worstAlias } from './chain/folding'
export { usableBand } from './chain/usable-band'
export { noiseBudget } from './chain/noise'
export { interfererLandings } from './chain/interferers'
export { chainSheetLines, checkChainSheet } from './chain/sheet'
export { chainSketch, type ChainSketch } from './chain/sketch'
export { analogSections, type AnalogSection, type SectionResponse } from './chain/analog-sections'
export {
  toleranceResult,
  type MatchPercentiles,
  type Percentiles,
  type ToleranceResult,
  type ToleranceShard,
} from './chain/tolerance'
export { toleranceFrequencies, toleranceShard } from './chain/tolerance-shard'
export {
  buildSheet,
  type BuildCircuit,
  type BuildOptions,
  type BuildPart,
  type BuildSection,
} from './chain/build-sheet'
export { proofSteps, type ProofOptions } from './chain/proof/prove'
export type { ProofLine, ProofResult } from './chain/proof/report'
export { advisePlans, planSteps, type PlanOption } from './chain/advisor/plans'
export { adviseRates, rateSteps, type RateOption } from './chain/advisor/rates'
