import { createBreath } from '../breathe'
import { RecordingError } from '../errors'
import { SampleStore, storesAsSource, type MemoryBudget } from '../sample-store'
import type { FrameSource, Recording, TaskControl } from '../types'
import { statedTiming } from './timing'

const BLOCK = 16_384
/** A gap in time may blow a recording up to this many times its samples, not more. */
const MOST_GROWTH = 4

/**
 * Even steps from uneven time stamps, by straight lines between neighbouring samples. An explicit choice of the user's: it attenuates
 * what is near half the rate. Samples without a stamp are passed over; a missing value makes the new samples beside it missing.
 *
 * @throws RecordingError 'no-resampling' when time falls back, or a gap would multiply the samples
 */
export async function resampleEvenly(
  recording: Recording,
  budget: MemoryBudget,
  control: TaskControl,
): Promise<Recording> {
  const { times, source, timing } = recording
  if (!times)
    throw new RecordingError('no-resampling', 'Resampling needs a time column; this recording has a stated rate.')
  const stores = recording.channels.map(() => new SampleStore(budget))
  const release = () => stores.forEach((store) => store.clear())
  try {
    await interpolate(recording, times, source, stores, control)
  } catch (cause) {
    release()
    throw cause
  }
  const even = storesAsSource(stores)
  return {
    kind: recording.kind,
    name: recording.name,
    sampleRateHz: timing.sampleRateHz,
    channels: recording.channels,
    source: even,
    storage: recording.storage,
    notes: [...recording.notes, `Resampled evenly by straight lines: ${even.frames} samples from ${source.frames}.`],
    flaws: [],
    flawCount: 0,
    timing: statedTiming(timing.sampleRateHz, 'resampled'),
    rowOf: () => undefined,
    release,
  }
}

async function interpolate(
  recording: Recording,
  times: FrameSource,
  source: FrameSource,
  stores: readonly SampleStore[],
  control: TaskControl,
): Promise<void> {
  const { sampleRateHz } = recording.timing
  const breath = createBreath(control)
  const channels = stores.map((_, channel) => channel)
  const clock = new Float64Array(BLOCK)
  const values = stores.map(() => new Float64Array(BLOCK))
  const outs = stores.map(() => new Float64Array(BLOCK))
  const before = new Float64Array(stores.length)
  let filled = 0
  let made = 0
  let start = NaN
  let lastTime = NaN
  const emit = (): void => {
    stores.forEach((store, k) => store.append(outs[k]!.subarray(0, filled)))
    filled = 0
  }
  for (let from = 0; from < source.frames; from += BLOCK) {
    const count = Math.min(BLOCK, source.frames - from)
    await times.read(from, [0], [clock.subarray(0, count)])
    await source.read(
      from,
      channels,
      values.map((column) => column.subarray(0, count)),
    )
    for (let i = 0; i < count; i += 1) {
      const time = clock[i]!
      if (Number.isNaN(time)) continue
      if (Number.isNaN(start)) start = time
      else if (time <= lastTime) throw backwards(recording, from + i)
      // all even instants up to this stamp lie between the last stamp and this one
      for (let even = start + made / sampleRateHz; even <= time; even = start + made / sampleRateHz) {
        const part = Number.isNaN(lastTime) ? 1 : (even - lastTime) / (time - lastTime)
        for (let k = 0; k < values.length; k += 1) {
          const after = values[k]![i]!
          outs[k]![filled] = part === 1 ? after : before[k]! + (after - before[k]!) * part
        }
        filled += 1
        made += 1
        if (made > MOST_GROWTH * source.frames) throw tooSparse(recording, from + i)
        if (filled === BLOCK) emit()
      }
      lastTime = time
      for (let k = 0; k < values.length; k += 1) before[k] = values[k]![i]!
    }
    await breath(from + count, source.frames)
  }
  emit()
}

const placeOf = (recording: Recording, frame: number): { row?: number } => {
  const row = recording.rowOf(frame)
  return row === undefined ? {} : { row }
}

function backwards(recording: Recording, frame: number): RecordingError {
  const place = placeOf(recording, frame)
  const where = place.row === undefined ? `sample ${frame}` : `line ${place.row}`
  return new RecordingError(
    'no-resampling',
    `Time does not go forward at ${where}, so there is no even series to draw from it.`,
    place,
  )
}

function tooSparse(recording: Recording, frame: number): RecordingError {
  const place = placeOf(recording, frame)
  const where = place.row === undefined ? `sample ${frame}` : `line ${place.row}`
  return new RecordingError(
    'no-resampling',
    `The gap before ${where} would fill the record with more than ${MOST_GROWTH} times its samples. Split the file there.`,
    place,
  )
}
