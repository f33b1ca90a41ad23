import { welch, type WindowName } from '@/dsp'
import { RecordingError } from '@/lib/recordings/errors'
import type { FrameSource } from '@/lib/recordings/types'
import type { RunSummary, SpectrumReading } from './shapes'

/** Samples that a spectrum is taken from at most: more would only take longer. */
const MOST_SPECTRUM_FRAMES = 8_388_608
/** Samples held at once. */
const BLOCK_FRAMES = 1 << 19
const OVERLAP = 0.5

export interface DensityOptions {
  readonly sampleRateHz: number
  readonly segmentLength: number
  readonly window: WindowName
}

export interface Density {
  readonly frequenciesHz: Float64Array
  readonly density: Float64Array
  readonly segments: number
}

/**
 * Welch's density of frames [from, to) of a channel, in memory that doesn't grow with them: blocks overlap as segments do, so that the
 * mean over the blocks, weighted by their segments, is the mean over all segments. Each segment's mean is taken off first.
 */
export async function densityOf(
  source: FrameSource,
  channel: number,
  from: number,
  to: number,
  options: DensityOptions,
): Promise<Density> {
  const { segmentLength: size } = options
  const hop = Math.max(1, Math.round(size * (1 - OVERLAP)))
  const perBlock = Math.max(1, Math.floor((BLOCK_FRAMES - size) / hop) + 1)
  let sum = new Float64Array(0)
  let frequenciesHz = new Float64Array(0)
  let segments = 0
  for (let start = from; start + size <= to; start += perBlock * hop) {
    const block = new Float64Array(Math.min(size + (perBlock - 1) * hop, to - start))
    await source.read(start, [channel], [block])
    const found = welch(block, { ...options, overlap: OVERLAP, detrend: 'constant' })
    if (segments === 0) {
      sum = new Float64Array(found.density.length)
      frequenciesHz = Float64Array.from(found.frequenciesHz)
    }
    for (let k = 0; k < sum.length; k += 1) sum[k]! += found.density[k]! * found.segments
    segments += found.segments
  }
  return { frequenciesHz, density: sum.map((value) => value / segments), segments }
}

/** Both spectra leave out the same start-up and ends, where the record is long enough for that. */
export function spectrumSpan(
  frames: number,
  segmentLength: number,
  run: RunSummary | null,
): { from: number; to: number; leftOut: SpectrumReading['leftOut']; isPart: boolean } {
  const causal = run?.request.mode === 'causal'
  const head = run ? (causal ? run.settlingFrames : run.extensionFrames) : 0
  const tail = run && !causal ? run.extensionFrames : 0
  const trimmed = frames - head - tail >= 4 * segmentLength
  const from = trimmed ? head : 0
  const end = trimmed ? frames - tail : frames
  const to = Math.min(end, from + MOST_SPECTRUM_FRAMES)
  if (to - from < segmentLength) {
    throw new RecordingError(
      'too-short',
      `The recording has ${frames} samples, fewer than one segment of ${segmentLength}. Choose shorter segments.`,
    )
  }
  return {
    from,
    to,
    isPart: to < end,
    leftOut: !trimmed || head + tail === 0 ? 'nothing' : causal ? 'start-up' : 'ends',
  }
}
