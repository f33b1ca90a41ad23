/** The largest file that is read, in bytes: 500 MB, counted as the trade counts file sizes. */
export const MAX_FILE_BYTES = 500_000_000

/** Samples that can be read anywhere without being held whole; several channels over one clock. */
export interface FrameSource {
  readonly frames: number
  readonly channelCount: number
  /**
   * Fills `outs[k]` with the samples of channel `channels[k]` from `startFrame` on. All of `outs` have one length, and
   * startFrame + length ≤ frames.
   */
  read(startFrame: number, channels: readonly number[], outs: readonly Float64Array[]): Promise<void>
}

export interface ChannelInfo {
  readonly name: string
  /** As written in the header or typed; '' when none was stated. */
  readonly unit: string
}

/** A cell that held no usable number, kept as NaN. */
export interface Flaw {
  /** Line of the file for a table; absent for WAV. */
  readonly row?: number
  /** Sample number from 0. */
  readonly frame: number
  readonly channel: number
  readonly reason: string
}

export interface Timing {
  readonly sampleRateHz: number
  /** Where the rate comes from. 'mean step': time stamps are even up to their own rounding, so the mean is the better figure. */
  readonly basis: 'header' | 'stated' | 'resampled' | 'median step' | 'mean step'
  readonly medianStepSeconds: number
  readonly meanRateHz: number
  /** Worst deviation of a step from 1/rate. */
  readonly jitterSeconds: number
  readonly jitterPercent: number
  /** Sample number at the end of the worst step. */
  readonly worstFrame: number
  /** Spacing of the written time stamps, 0 when unknown. */
  readonly resolutionSeconds: number
  /** Steps that were zero or negative. */
  readonly backwardSteps: number
  /** Time cells without a usable number. */
  readonly missingStamps: number
}

/** A recording as opened: what is known of it, and its samples. */
export interface Recording {
  readonly kind: 'wav' | 'table' | 'demo'
  readonly name: string
  readonly sampleRateHz: number
  readonly channels: readonly ChannelInfo[]
  readonly source: FrameSource
  /** How its samples were stored, in words: "24-bit integer", "4 columns, semicolon, decimal comma". */
  readonly storage: string
  /** Things the reader should know about a file that was nevertheless read. */
  readonly notes: readonly string[]
  readonly flaws: readonly Flaw[]
  readonly flawCount: number
  readonly timing: Timing
  /** Seconds from the first stamp, one a frame; absent without a time column. */
  readonly times?: FrameSource
  /** Line of the file a frame came from; tables only. */
  rowOf(frame: number): number | undefined
  /** Gives back the memory that its samples take. */
  release(): void
}

/** How a long task tells how far it is, and hears that it should stop. */
export interface TaskControl {
  progress(done: number, total: number): void
  readonly cancelled: () => boolean
}

export const QUIET: TaskControl = { progress: () => undefined, cancelled: () => false }
