import type { Diagnostic, DigitalFilter, Filter, FirFilter } from '../forms/filter'
import type { ChainRequirement } from './requirement'
import type { ChainSpec, ChainStage, ChainUnit } from './spec'

/*
 * What a chain comes to. Gains are referred to the sensor's unit: 1 (0 dB) is a sample that says exactly what the sensor felt; an
 * integrating stage counts against the ideal integral, so that its 1 is a sample in the unit it integrates to.
 */

/** One linear part of a stage and the rate it runs at; `inRateHz` is null ahead of the converter. */
export type ChainPart =
  | { readonly kind: 'analog'; readonly filter: Filter<'s'> }
  /** (sin(πf/fs) / (πf/fs))^order, the averaging of a converter. */
  | { readonly kind: 'averaging'; readonly order: number; readonly sampleRateHz: number }
  | { readonly kind: 'digital'; readonly filter: DigitalFilter | FirFilter }
  /** Hogenauer 1981, unity at DC, at the rate ahead of the decimation. */
  | {
      readonly kind: 'cic'
      readonly order: number
      readonly combDelay: number
      readonly factor: number
      readonly sampleRateHz: number
    }
  /** Integration: the digital integrator over the ideal one, its high-pass being a digital part of its own. */
  | { readonly kind: 'integration'; readonly times: 1 | 2; readonly sampleRateHz: number }

export interface ComputedStage {
  readonly stage: ChainStage
  readonly index: number
  /** In signal order; none when bypassed or when the stage has no filter. */
  readonly parts: readonly ChainPart[]
  readonly inRateHz: number | null
  /** Null ahead of the converter. */
  readonly outRateHz: number | null
  /** 1 where the rate stays. */
  readonly factor: number
  /** Unit after the stage; volts between sensor and converter are still counted in the sensor's unit. */
  readonly unit: ChainUnit
  /** Multiplies for each sample that the whole chain stores. */
  readonly multipliesPerStoredSample: number
  /** Coefficients and state, in words. */
  readonly words: number
  /** Group delay in the middle of the kept band, seconds. */
  readonly delaySeconds: number
  readonly diagnostics: readonly Diagnostic[]
}

export interface ComputedChain {
  readonly spec: ChainSpec
  readonly stages: readonly ComputedStage[]
  readonly converterIndex: number
  readonly converterRateHz: number
  readonly outputRateHz: number
  /** Of the stored samples. */
  readonly unit: ChainUnit
  readonly diagnostics: readonly Diagnostic[]
}

/** Magnitude, phase and delay from the sensor to the stored sample, one value a frequency. */
export interface ChainResponse {
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  /** Unwrapped. */
  readonly phaseRadians: Float64Array
  readonly groupDelaySeconds: Float64Array
}

/** An input frequency that lands on an output frequency, and how. */
export interface FoldPath {
  readonly inputHz: number
  readonly outputHz: number
  /** The strip it comes from: 0 is the base band itself, strip n reaches from n to n + 1 times half the output rate. */
  readonly strip: number
  /** The stage at whose output it first folds; null for the base band. */
  readonly foldsAtStageId: string | null
  /** Its spectrum runs backwards in the base band. */
  readonly mirrored: boolean
  /** Level in the samples of what has level 1 at the sensor; −Infinity for an exact zero. */
  readonly levelDb: number
}

export interface FoldStrip {
  /** 0 is the base band. */
  readonly strip: number
  readonly fromHz: number
  readonly toHz: number
  readonly mirrored: boolean
  readonly foldsAtStageId: string | null
  /** What reaches the base band, over the chart's output frequencies. */
  readonly levelDb: Float64Array
  /** The highest of them inside the kept band; null for the base band. */
  readonly worst: { readonly levelDb: number; readonly outputHz: number; readonly inputHz: number } | null
}

export interface FoldChart {
  readonly outputHz: Float64Array
  /** By strip, the base band first; as many as reach the last image looked at. */
  readonly strips: readonly FoldStrip[]
  /** The strip that is least far down in the kept band. */
  readonly weakStrip: number
  /** Images above this were not looked at, and what they come to at most. */
  readonly lookedUpToHz: number
  readonly beyondAtMostDb: number
}

export interface WorstAlias {
  readonly levelDb: number
  readonly outputHz: number
  readonly inputHz: number
  readonly strip: number
  readonly foldsAtStageId: string | null
}

export interface UsableBand {
  readonly fromHz: number
  readonly toHz: number
  /** What ends it above. */
  readonly endedBy: 'ripple' | 'alias' | 'half the output rate'
}

export interface NoisePart {
  readonly stageId: string
  readonly source: 'converter' | 'decimation arithmetic'
  /** Root mean square over the kept band, in the sensor's unit. */
  readonly rms: number
  readonly words: string
}

export interface NoiseBudget {
  readonly parts: readonly NoisePart[]
  /** Root mean square over the kept band, in the sensor's unit. */
  readonly rms: number
  /** Density at the middle of the kept band, sensor's unit/√Hz. */
  readonly density: number
  /** Amplitude of a sine that just fills the converter, in the sensor's unit. */
  readonly fullScale: number
  /** Full-scale sine over noise in the kept band. */
  readonly snrDb: number
  /** (snrDb − 10 lg 1.5) / (20 lg 2) */
  readonly effectiveBits: number
}

export interface InterfererLanding {
  readonly name: string
  /** Frequency at the sensor; of a band, where it comes through strongest, inside the kept band if any of it lands there. */
  readonly inputHz: number
  readonly landsHz: number
  readonly strip: number
  readonly levelDb: number
  /** In the samples, in the chain's unit: amplitude of a tone; root mean square of what of a band lands inside the kept one, else of all of it. */
  readonly level: number
  /** Whether any of it lands there: frequency, strip and levels are then those of that part alone. */
  readonly inKeptBand: boolean
  /** Part of it, by width, that lands inside the kept band: 0 to 1. */
  readonly keptShare: number
}

export type ChainRequirementUnit = 'Hz' | 'dB' | '°' | 's' | 'bits'

export interface ChainRequirementResult {
  readonly requirement: ChainRequirement
  /** In the line's unit; null while it can't be judged, and `reason` says why. */
  readonly value: number | null
  readonly limit: number
  readonly unit: ChainRequirementUnit
  /** Room left, 0 or more when met. */
  readonly margin: number | null
  readonly met: boolean | null
  /** Where it is nearest to its limit, as an output frequency. */
  readonly worstHz: number | null
  readonly reason?: string
}
