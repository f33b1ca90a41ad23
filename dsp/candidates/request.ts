import type { RequirementResult } from '../requirements/evaluate'
import type { Contradiction } from '../requirements/contradictions'
import type { RequirementSheet } from '../requirements/requirement'
import type { DepartureBudget, DesignSpec, Family, FirKind, FirWindow, MethodName } from '../spec'

/** What room is spent on, where a design meets its sheet with room to spare. */
export type Spend = 'narrower' | 'flatter' | 'less-delay'

export interface CandidateRequest {
  readonly sheet: RequirementSheet
  readonly sampleRateHz: number
  /** Goes into each design as it is, and says whether a departure is shown with its best delay taken off. */
  readonly budget: DepartureBudget
  readonly spend: Spend
  /** All of them when left out. */
  readonly families?: readonly Family[]
  readonly methods?: readonly MethodName[]
  readonly firKinds?: readonly FirKind[]
}

export interface CandidateFigures {
  /** Least room of any line, as a part of its limit. */
  readonly marginParts: number
  /** Largest group delay in the pass bands. */
  readonly delaySeconds: number
  /** Largest less least group delay in the pass bands. */
  readonly delaySpreadSeconds: number
  /** Worst departure from the original in phase up to the highest pass edge; null where there is none to compare. */
  readonly phaseDepartureDegrees: number | null
  readonly multiplies: number
  /** null when the step response is still moving after two million samples. */
  readonly overshootPercent: number | null
}

/** What a row is about: a family by a method, or a kind of FIR filter. */
export type CandidateParts =
  { readonly family: Family; readonly method: MethodName } | { readonly firKind: FirKind; readonly window?: FirWindow }

interface RowHead {
  readonly id: string
  readonly parts: CandidateParts
}

export interface OfferedRow extends RowHead {
  readonly spec: DesignSpec
  /** Order of the recursive filter's prototype, or the number of taps. */
  readonly size: number
  readonly results: readonly RequirementResult[]
  readonly figures: CandidateFigures
  /** Magnitude in dB at the frequencies of sketchFrequencies, not below −200. */
  readonly sketch: Float32Array
}

export interface RefusedRow extends RowHead {
  readonly refused: {
    /** The line that stops it, from 0; null where the method itself refuses. */
    readonly requirementIndex: number | null
    readonly reason: string
  }
}

export type CandidateRow = OfferedRow | RefusedRow

export const isOffered = (row: CandidateRow): row is OfferedRow => 'spec' in row

export interface CandidateOutcome {
  /** Lines that no filter can meet together; then nothing was searched. */
  readonly contradictions: readonly Contradiction[]
  /** Why the sheet doesn't say enough to search by; null when it does. */
  readonly unclear: string | null
  readonly offered: number
  readonly refused: number
  readonly isCancelled: boolean
}
