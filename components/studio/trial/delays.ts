import { DesignError, measureDelay, predictDelay, type DigitalFilter } from '@/dsp'
import type { FrameSource } from '@/lib/recordings/types'
import type { RunMode } from './run'
import type { DelayReading } from './shapes'
import { densityOf } from './spectrum'

/** Samples that are correlated at most, from the end of the start-up on. */
const MOST_FRAMES = 262_144
const LEAST_FRAMES = 64

/**
 * The delay of what came out against what went in, as measured (the peak of their cross-correlation) and as predicted (the peak that
 * the spectrum of what went in and the design's response should give). Run forward and backward the prediction is 0.
 */
export async function readDelay(
  before: FrameSource,
  channel: number,
  after: FrameSource,
  afterChannel: number,
  run: { readonly filter: DigitalFilter; readonly mode: RunMode; readonly settlingFrames: number },
): Promise<DelayReading> {
  const { sampleRateHz } = run.filter
  const usable = before.frames - run.settlingFrames
  const from = usable >= 4 * LEAST_FRAMES ? run.settlingFrames : 0
  const frames = Math.min(MOST_FRAMES, before.frames - from)
  const nothing = { channel, measuredSeconds: null, predictedSeconds: null, frames }
  if (frames < LEAST_FRAMES) return nothing
  const x = new Float64Array(frames)
  const y = new Float64Array(frames)
  await before.read(from, [channel], [x])
  await after.read(from, [afterChannel], [y])
  try {
    const measured = measureDelay(x, y, { sampleRateHz })
    if (run.mode === 'zero-phase') return { ...nothing, measuredSeconds: measured.delaySeconds, predictedSeconds: 0 }
    const segmentLength = 2 ** Math.min(12, Math.floor(Math.log2(frames)))
    const spectrum = await densityOf(before, channel, from, from + frames, {
      sampleRateHz,
      segmentLength,
      window: 'hann',
    })
    return { ...nothing, measuredSeconds: measured.delaySeconds, predictedSeconds: predictDelay(run.filter, spectrum) }
  } catch (cause) {
    if (cause instanceof DesignError && cause.code === 'silent') return nothing
    throw cause
  }
}
