import type { DesignSpec, WindowName } from '@/dsp'
import type { RecordingProblem } from '@/lib/recordings/errors'
import type { GuessedColumn, Settled } from '@/lib/recordings/table/guess'
import type { TablePlan } from '@/lib/recordings/table/plan'
import type { ChannelInfo, Flaw, Timing } from '@/lib/recordings/types'
import type { WavSampleFormat } from '@/lib/recordings/wav/write'
import type { RunMode, RunStart } from './run'
import type { ZeroPhaseWay } from './zero-phase'

/*
 * What passes between the page and the worker: plain data, so that it can be cloned. Refusals are answers, not exceptions: an error
 * would lose its code on the way.
 */

export type Answer<Value> =
  { readonly ok: true; readonly value: Value } | { readonly ok: false; readonly problem: RecordingProblem }

export interface ChannelSummary extends ChannelInfo {
  readonly min: number
  readonly max: number
  readonly mean: number
  readonly rms: number
  /** Samples without a finite value, the runs they form, and the first of them. */
  readonly missing: number
  readonly gaps: number
  readonly firstMissing: number | null
}

export interface RecordingSummary {
  /** Grows with each recording, so that an answer about an older one is recognised. */
  readonly serial: number
  readonly kind: 'wav' | 'table' | 'demo'
  readonly name: string
  readonly sampleRateHz: number
  readonly frames: number
  readonly storage: string
  readonly notes: readonly string[]
  readonly channels: readonly ChannelSummary[]
  readonly flaws: readonly Flaw[]
  readonly flawCount: number
  readonly timing: Timing
  /** Line of the file at the end of the worst time step. */
  readonly worstRow: number | null
  readonly mayResample: boolean
}

/** What a table would give if it were read as planned, tried on its first lines. */
export interface TablePreview {
  readonly fileName: string
  readonly fileBytes: number
  readonly plan: TablePlan
  readonly columns: readonly GuessedColumn[]
  readonly firstLines: readonly string[]
  /** Rate and jitter of the first lines; null when they can't be read so. */
  readonly timing: Timing | null
  readonly rowsTried: number
  readonly flaws: readonly Flaw[]
  readonly problem: RecordingProblem | null
}

export type Opened =
  | { readonly kind: 'recording'; readonly summary: RecordingSummary }
  | { readonly kind: 'table'; readonly preview: TablePreview }

/** How a plan is changed: detection runs again around what is settled, or the plan is taken as it is. */
export type PlanChange = { readonly settled: Settled } | { readonly plan: TablePlan }

export interface RunRequest {
  /** At the recording's own rate. */
  readonly spec: DesignSpec
  readonly mode: RunMode
  readonly start: RunStart
  readonly channels: readonly number[]
  /** Missing samples are put on straight lines; without this they are refused. */
  readonly fillGaps: boolean
}

export interface DelayReading {
  readonly channel: number
  /** Null where there is nothing to correlate: a constant signal, or an output of zero. */
  readonly measuredSeconds: number | null
  readonly predictedSeconds: number | null
  /** Samples that were correlated. */
  readonly frames: number
}

export interface EdgeLevel {
  readonly hz: number
  /** As in real time. */
  readonly onceDb: number
  /** Run without delay: twice that forward and backward, the same where a delay is taken off. */
  readonly zeroPhaseDb: number
}

export interface RunSummary {
  readonly serial: number
  readonly request: RunRequest
  readonly channels: readonly {
    readonly channel: number
    readonly min: number
    readonly max: number
    readonly rms: number
  }[]
  /** Causal: samples until the response to a step has settled to 1 %, at most the whole record. */
  readonly settlingFrames: number
  /** How the delay was avoided; null in a causal run. */
  readonly zeroPhase: ZeroPhaseWay | null
  /** Without delay: samples of the extension at each end, and the least record length. */
  readonly extensionFrames: number
  readonly leastFrames: number
  /** What a run without delay does at the edges of the statement. */
  readonly edges: readonly EdgeLevel[]
}

export type Series = 'before' | 'after'

/** A window of one channel: the samples themselves where they fit, else least and greatest of equal columns. */
export type WindowReading =
  | { readonly kind: 'samples'; readonly from: number; readonly values: Float64Array }
  | {
      readonly kind: 'envelope'
      readonly from: number
      readonly to: number
      readonly low: Float64Array
      readonly high: Float64Array
    }

export interface WindowRequest {
  readonly series: Series
  readonly channel: number
  readonly from: number
  readonly to: number
  readonly columns: number
  /** The series is shown so many samples earlier than it is. */
  readonly shift: number
}

export interface SpectrumRequest {
  readonly channel: number
  readonly segmentLength: number
  readonly window: WindowName
}

export interface SpectrumReading {
  readonly channel: number
  readonly segmentLength: number
  readonly window: WindowName
  readonly segments: number
  /** What was left out of both spectra. */
  readonly leftOut: 'nothing' | 'start-up' | 'ends'
  /** How many samples went in, when that is only the first part of a very long record. */
  readonly partFrames: number | null
  readonly frequenciesHz: Float64Array
  readonly before: Float64Array
  readonly after: Float64Array | null
}

export type SaveFormat = WavSampleFormat | 'csv'

export interface SaveRequest {
  readonly format: SaveFormat
  /** 24-bit: what happens to samples beyond full scale. */
  readonly beyondFullScale: 'refuse' | 'scale'
}

export interface SavedFile {
  readonly blob: Blob
  readonly name: string
  /** What the reader of the file should know. */
  readonly note: string
}
