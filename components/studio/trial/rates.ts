import type { DesignSpec } from '@/dsp'
import { withRate } from '@/lib/designs/edits'

/** Relative difference of two rates that counts as none: rounding of a stated rate, not another clock. */
const SAME_RATE = 1e-9

export const sameRate = (aHz: number, bHz: number): boolean => Math.abs(aHz - bHz) <= SAME_RATE * Math.max(aHz, bHz)

/**
 * The statement as it may be run over a recording, or null: a design never runs silently at a rate it was not made for. With
 * `atRecordingRate` the reader has chosen to have the same statement designed at the recording's rate, for the trial only.
 */
export function specForRun(spec: DesignSpec, recordingRateHz: number, atRecordingRate: boolean): DesignSpec | null {
  if (sameRate(spec.sampleRateHz, recordingRateHz)) return spec
  return atRecordingRate ? withRate(spec, recordingRateHz) : null
}

/** Segment lengths that are offered for a spectrum of that many samples. */
export const segmentLengths = (frames: number): number[] =>
  Array.from({ length: 12 }, (_, k) => 2 ** (k + 6)).filter((length) => length <= Math.max(64, frames))

/** Long enough to see detail, short enough to average eight segments or more. */
export const usualSegmentLength = (frames: number): number =>
  segmentLengths(frames)
    .filter((length) => length <= 4096 && length * 4 <= Math.max(256, frames))
    .at(-1) ?? 64
