import { RecordingError } from '@/lib/recordings/errors'
import type { Recording } from '@/lib/recordings/types'
import type { Overview } from './overview'
import type { RecordingSummary } from './shapes'

export function summaryOf(recording: Recording, overviews: readonly Overview[], serial: number): RecordingSummary {
  const { timing } = recording
  return {
    serial,
    kind: recording.kind,
    name: recording.name,
    sampleRateHz: recording.sampleRateHz,
    frames: recording.source.frames,
    storage: recording.storage,
    notes: recording.notes,
    channels: recording.channels.map((info, channel) => {
      const overview = overviews[channel]!
      return {
        ...info,
        min: overview.min,
        max: overview.max,
        mean: overview.mean,
        rms: overview.rms,
        missing: overview.gapFrames,
        gaps: overview.gapCount,
        firstMissing: overview.gaps[0]?.from ?? null,
      }
    }),
    flaws: recording.flaws,
    flawCount: recording.flawCount,
    timing,
    worstRow: recording.times ? (recording.rowOf(timing.worstFrame) ?? null) : null,
    mayResample: recording.times !== undefined && timing.basis !== 'stated',
  }
}

/** Says which channels can't be run because samples are missing, and where the first of them is. */
export function refuseGaps(recording: Recording, overviews: readonly Overview[], channels: readonly number[]): void {
  for (const channel of channels) {
    const overview = overviews[channel]
    const frame = overview?.gaps[0]?.from
    if (!overview || frame === undefined) continue
    const row = recording.rowOf(frame)
    const where = row === undefined ? `sample ${frame}` : `line ${row}, sample ${frame}`
    const reason =
      recording.flaws.find((flaw) => flaw.channel === channel && flaw.frame === frame)?.reason ?? 'NaN or infinite'
    const count = overview.gapFrames
    throw new RecordingError(
      'not-finite',
      `${recording.channels[channel]?.name ?? 'A channel'} has ${count} ${count === 1 ? 'sample' : 'samples'} without a value, the first at ${where}: ${reason}. A filter would carry it on to all that follows.`,
      row === undefined ? {} : { row },
    )
  }
}

/** Refuses to fill gaps that can't be filled. */
export function refuseHopelessGaps(
  recording: Recording,
  overviews: readonly Overview[],
  channels: readonly number[],
): void {
  for (const channel of channels) {
    const overview = overviews[channel]
    const name = recording.channels[channel]?.name ?? 'A channel'
    if (overview?.finiteFrames === 0)
      throw new RecordingError('not-finite', `${name} holds no finite sample at all. Leave it out.`)
    if (overview?.gapsForgotten) {
      throw new RecordingError(
        'not-finite',
        `${name} has ${overview.gapCount} separate gaps, too many to fill sensibly. Leave it out.`,
      )
    }
  }
}
