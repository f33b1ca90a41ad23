import { isFir, type AnyDigital } from '../forms/filter'
import { frequencyResponse, magnitudeDb } from '../response/frequency'
import { createRunner } from '../signal/run'
import { bandGrid } from './extremes'

/*
 * What a sheet asks of a step response. It is measured in parts of its final value; a filter that blocks 0 Hz, or nearly, has none to
 * measure by, and is measured in parts of the step itself.
 */

export interface StepShape {
  /** How far the response passes its final value, away from where it started. */
  readonly overshoot: number
  readonly overshootSeconds: number
  /** From when on it stays within `within` of its final value; Infinity when that isn't reached. */
  readonly settlingSeconds: number
}

const BLOCK = 4096
/** No response is followed longer than this. */
const MOST_SAMPLES = 2 ** 21
/** A filter with less than this part of its strongest gain at 0 Hz, 20 dB, isn't in use there: its final value counts as none. */
const OUT_OF_USE = 0.1

/** Samples after which nothing moves: the time constants of the slowest pole, more for each pole that may repeat it. */
function horizonOf(filter: AnyDigital): number {
  if (isFir(filter)) return filter.taps.length
  const slowest = filter.poles.reduce((most, { re, im }) => Math.max(most, Math.hypot(re, im)), 0)
  if (slowest === 0) return filter.poles.length + 2
  return Math.ceil((16 + 2 * filter.poles.length) / -Math.log(slowest)) + filter.poles.length + 1
}

/** The step response, block by block. */
function* blocks(filter: AnyDigital, count: number): Generator<Float64Array> {
  if (isFir(filter)) {
    const sums = new Float64Array(count)
    let sum = 0
    for (let n = 0; n < count; n++) sums[n] = sum += filter.taps[n] ?? 0
    yield sums
    return
  }
  const runner = createRunner(filter.sections)
  const input = new Float64Array(BLOCK).fill(1)
  const output = new Float64Array(BLOCK)
  for (let from = 0; from < count; from += BLOCK) {
    runner.process(input, output)
    yield output.subarray(0, Math.min(BLOCK, count - from))
  }
}

/**
 * Overshoot and settling of a digital step response.
 * @param within part of the final value, e.g. 0.02
 * @returns null when the response is still moving after two million samples
 */
export function stepShape(filter: AnyDigital, within: number): StepShape | null {
  const count = horizonOf(filter)
  if (!(count <= MOST_SAMPLES)) return null
  const end = frequencyResponse(filter, [0]).re[0]!
  let [highest, highestAt, lowest, lowestAt, start] = [-Infinity, 0, Infinity, 0, 0]
  let from = 0
  for (const values of blocks(filter, count)) {
    for (let n = 0; n < values.length; n++) {
      const value = values[n]!
      if (start === 0) start = value
      if (value > highest) [highest, highestAt] = [value, from + n]
      if (value < lowest) [lowest, lowestAt] = [value, from + n]
    }
    from += values.length
  }
  const peakDb = magnitudeDb(filter, bandGrid(filter, 0, filter.sampleRateHz / 2)).reduce(
    (most, db) => Math.max(most, db),
    -Infinity,
  )
  const isNothing = Math.abs(end) < OUT_OF_USE * 10 ** (peakDb / 20)
  const unit = isNothing ? 1 : Math.abs(end)
  const upward = isNothing ? start < 0 : end > 0
  const past = upward ? highest - end : end - lowest
  let last = -1
  from = 0
  for (const values of blocks(filter, count)) {
    for (let n = 0; n < values.length; n++) if (Math.abs(values[n]! - end) > within * unit) last = from + n
    from += values.length
  }
  // The last sum of taps is the final value itself, but for rounding.
  const settled = isFir(filter) || last < count - 1
  return {
    overshoot: Math.max(0, past / unit),
    overshootSeconds: (upward ? highestAt : lowestAt) / filter.sampleRateHz,
    settlingSeconds: settled ? (last + 1) / filter.sampleRateHz : Infinity,
  }
}
