import { RecordingError } from '../errors'
import type { FrameSource, Timing } from '../types'
import { medianOf, type Pass } from './median'

const BLOCK = 65_536

/** A recording whose rate is stated, not measured: by a header or by the reader. */
export const statedTiming = (sampleRateHz: number, basis: 'header' | 'stated' | 'resampled'): Timing => ({
  sampleRateHz,
  basis,
  medianStepSeconds: 1 / sampleRateHz,
  meanRateHz: sampleRateHz,
  jitterSeconds: 0,
  jitterPercent: 0,
  worstFrame: 0,
  resolutionSeconds: 0,
  backwardSteps: 0,
  missingStamps: 0,
})

/**
 * Rate and jitter from time stamps in seconds. The rate is 1 / median step, freed of the rounding of the stamps: where most steps agree
 * with the median up to that rounding (`resolutionSeconds`), it is 1 / their mean, to as many digits as the stamps bear. Jitter is the
 * worst deviation of a step from 1 / rate.
 *
 * @param rowOf line of the file for a sample, for the messages
 * @throws RecordingError 'time-order' when time does not go forward, 'bad-rate' when there are fewer than two stamps
 */
export async function measureTiming(
  times: FrameSource,
  resolutionSeconds: number,
  statedRateHz: number | null,
  rowOf: (frame: number) => number | undefined,
): Promise<Timing> {
  const stamps = await countStamps(times)
  const median = await medianOf(stepsOf(times))
  if (median === null)
    throw new RecordingError(
      'bad-rate',
      'The time column holds fewer than two stamps in a row. Choose another column, or state the rate.',
    )
  if (!(median > 0)) {
    const row = rowOf(stamps.firstBackward)
    const where = row === undefined ? '' : ` (line ${row})`
    throw new RecordingError(
      'time-order',
      `The time column does not go forward${where}. Choose another column, or state the rate.`,
      row === undefined ? {} : { row },
    )
  }
  const span = stamps.last - stamps.first
  const meanStep = span / (stamps.lastFrame - stamps.firstFrame)
  // double precision itself rounds stamps far from zero
  const rounding = Math.max(
    resolutionSeconds,
    2 * Number.EPSILON * Math.max(Math.abs(stamps.first), Math.abs(stamps.last)),
  )
  const even = await evenSteps(times, median, rounding * (1 + 1e-6))
  const allEven = even.count === even.total
  const rateHz =
    statedRateHz ??
    (even.count * 2 > even.total
      ? shortestWithin(
          even.count / even.sum,
          (rounding * (even.total - even.count + 1) * 1.01) / even.sum + 4 * Number.EPSILON,
        )
      : 1 / median)
  const worst = await worstStep(times, 1 / rateHz)
  return {
    sampleRateHz: rateHz,
    basis: statedRateHz !== null ? 'stated' : allEven ? 'mean step' : 'median step',
    medianStepSeconds: median,
    meanRateHz: 1 / meanStep,
    jitterSeconds: worst.seconds,
    jitterPercent: worst.seconds * rateHz * 100,
    worstFrame: worst.frame,
    resolutionSeconds,
    backwardSteps: stamps.backward,
    missingStamps: stamps.missing,
  }
}

/** The decimal with fewest digits that is within a relative tolerance of a value: 1/0.0009999999999999787 is 1,000 Hz. */
function shortestWithin(value: number, tolerance: number): number {
  for (let digits = 1; digits < 17; digits += 1) {
    const shorter = Number(value.toPrecision(digits))
    if (Math.abs(shorter - value) <= tolerance * value) return shorter
  }
  return value
}

interface Stamps {
  readonly first: number
  readonly firstFrame: number
  readonly last: number
  readonly lastFrame: number
  readonly missing: number
  readonly backward: number
  readonly firstBackward: number
}

async function countStamps(times: FrameSource): Promise<Stamps> {
  let first = NaN
  let firstFrame = 0
  let last = NaN
  let lastFrame = 0
  let missing = 0
  let backward = 0
  let firstBackward = 0
  await eachBlock(times, (block, start) => {
    for (let i = 0; i < block.length; i += 1) {
      const value = block[i]!
      if (Number.isNaN(value)) {
        missing += 1
        continue
      }
      if (Number.isNaN(first)) {
        first = value
        firstFrame = start + i
      } else if (value <= last) {
        if (backward === 0) firstBackward = start + i
        backward += 1
      }
      last = value
      lastFrame = start + i
    }
  })
  return { first, firstFrame, last, lastFrame, missing, backward, firstBackward }
}

/** Steps between neighbouring stamps; NaN where one of the two is missing. */
const stepsOf =
  (times: FrameSource): Pass =>
  async (visit) => {
    let previous = NaN
    const steps = new Float64Array(BLOCK)
    await eachBlock(times, (block) => {
      for (let i = 0; i < block.length; i += 1) {
        const value = block[i]!
        steps[i] = value - previous
        previous = value
      }
      visit(steps.subarray(0, block.length))
    })
  }

/** Steps that agree with the median up to the rounding of the stamps: how many there are, of how many, and their sum. */
async function evenSteps(
  times: FrameSource,
  median: number,
  within: number,
): Promise<{ count: number; total: number; sum: number }> {
  let count = 0
  let total = 0
  let sum = 0
  await stepsOf(times)((steps) => {
    for (const step of steps) {
      if (Number.isNaN(step)) continue
      total += 1
      if (Math.abs(step - median) > within) continue
      count += 1
      sum += step
    }
  })
  return { count, total, sum }
}

async function worstStep(times: FrameSource, stepSeconds: number): Promise<{ seconds: number; frame: number }> {
  let seconds = 0
  let frame = 0
  let at = 0
  await stepsOf(times)((steps) => {
    for (let i = 0; i < steps.length; i += 1) {
      const deviation = Math.abs(steps[i]! - stepSeconds)
      if (deviation > seconds) {
        seconds = deviation
        frame = at + i
      }
    }
    at += steps.length
  })
  return { seconds, frame }
}

async function eachBlock(source: FrameSource, visit: (block: Float64Array, start: number) => void): Promise<void> {
  const buffer = new Float64Array(Math.min(BLOCK, source.frames))
  for (let start = 0; start < source.frames; start += BLOCK) {
    const block = buffer.subarray(0, Math.min(BLOCK, source.frames - start))
    await source.read(start, [0], [block])
    visit(block, start)
  }
}
