import {
  DesignError,
  frequencyResponse,
  measureDelay,
  predictDelay,
  welch,
  type AnyDigital,
  type Spectrum,
} from '@/dsp'
import type { FrameSource } from '@/lib/recordings/types'
import type { RunMode } from './run'
import type { DelayReading } from './shapes'
import { extensionOf, zeroPhaseWay } from './zero-phase'

/** Samples that are correlated at most, from the end of the start-up on. */
const MOST_FRAMES = 262_144
const LEAST_FRAMES = 64

/**
 * The delay of what came out against what went in, as measured (the peak of their cross-correlation) and as predicted (the peak that
 * the spectrum of what went in and the design's response should give). Run forward and backward the prediction is 0; where a delay was taken off, it is taken off the prediction:
 * a differentiator's quarter turn and a band of negative gain still move the peak.
 */
export async function readDelay(
  before: FrameSource,
  channel: number,
  after: FrameSource,
  afterChannel: number,
  run: { readonly filter: AnyDigital; readonly mode: RunMode; readonly settlingFrames: number },
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
    const way = run.mode === 'zero-phase' ? zeroPhaseWay(run.filter) : null
    if (way === 'forward-backward') return { ...nothing, measuredSeconds: measured.delaySeconds, predictedSeconds: 0 }
    const removed = way === 'delay-removed' ? extensionOf(run.filter) / sampleRateHz : 0
    return {
      ...nothing,
      measuredSeconds: measured.delaySeconds,
      predictedSeconds: predictDelay(run.filter, spectrumOf(x, run.filter)) - removed,
    }
  } catch (cause) {
    if (cause instanceof DesignError && cause.code === 'silent') return nothing
    throw cause
  }
}

/** Lines that a prediction looks through at most; the finest spectrum that needs no more is taken. */
const MOST_LINES = 2049
const FINEST = 14
/** Lines that carry less of the result than this part of the strongest have no say in where its correlation peaks. */
const SILENT = 1e-8

/** Spectrum of what went in, as finely resolved as it may be, up to the last line that gets through the design. */
function spectrumOf(samples: Float64Array, filter: AnyDigital): Pick<Spectrum, 'frequenciesHz' | 'density'> {
  const mean = samples.reduce((sum, value) => sum + value, 0) / samples.length
  const about = samples.map((value) => value - mean)
  for (let power = Math.min(FINEST, Math.floor(Math.log2(samples.length))); ; power -= 1) {
    const found = welch(about, {
      sampleRateHz: filter.sampleRateHz,
      segmentLength: 2 ** power,
      overlap: 0.5,
      window: 'hann',
    })
    const { re, im } = frequencyResponse(filter, found.frequenciesHz)
    const through = found.density.map((density, k) => density * Math.hypot(re[k]!, im[k]!))
    const strongest = through.reduce((most, value) => Math.max(most, value), 0)
    const lines = through.findLastIndex((value) => value > SILENT * strongest) + 2
    if (lines <= MOST_LINES || 2 ** (power - 1) < MOST_LINES - 1) {
      return { frequenciesHz: found.frequenciesHz.subarray(0, lines), density: found.density.subarray(0, lines) }
    }
  }
}
