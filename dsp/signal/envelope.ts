import { DesignError } from '../errors'

/*
 * The least and the greatest sample of every stretch of a recording, ready for drawing at any zoom: a pyramid of blocks, each level four
 * times coarser than the one below, on top of the samples themselves. Plain data, so that a worker can build it and hand it over.
 */

export interface EnvelopeLevel {
  readonly samplesPerBlock: number
  readonly least: Float64Array
  readonly greatest: Float64Array
}

export interface Envelope {
  readonly sampleCount: number
  readonly levels: readonly EnvelopeLevel[]
}

const FIRST_BLOCK = 64
const FACTOR = 4

/**
 * Builds the pyramid; about a thirtieth of the recording's memory.
 * @param samples N samples
 */
export function buildEnvelope(samples: Float64Array): Envelope {
  const levels: EnvelopeLevel[] = []
  const blocks = Math.ceil(samples.length / FIRST_BLOCK)
  let least = new Float64Array(blocks)
  let greatest = new Float64Array(blocks)
  for (let block = 0; block < blocks; block++) {
    const end = Math.min((block + 1) * FIRST_BLOCK, samples.length)
    let low = Infinity
    let high = -Infinity
    for (let n = block * FIRST_BLOCK; n < end; n++) {
      const value = samples[n]!
      if (value < low) low = value
      if (value > high) high = value
    }
    least[block] = low
    greatest[block] = high
  }
  let samplesPerBlock = FIRST_BLOCK
  levels.push({ samplesPerBlock, least, greatest })
  while (least.length > FACTOR) {
    const count = Math.ceil(least.length / FACTOR)
    const lower = new Float64Array(count).fill(Infinity)
    const upper = new Float64Array(count).fill(-Infinity)
    for (let i = 0; i < least.length; i++) {
      const block = Math.floor(i / FACTOR)
      lower[block] = Math.min(lower[block]!, least[i]!)
      upper[block] = Math.max(upper[block]!, greatest[i]!)
    }
    samplesPerBlock *= FACTOR
    least = lower
    greatest = upper
    levels.push({ samplesPerBlock, least, greatest })
  }
  return { sampleCount: samples.length, levels }
}

/** Widens [low, high] by the samples from..to, taking whole blocks of the coarsest level that fits and the rest from finer ones. */
function range(
  envelope: Envelope,
  samples: Float64Array,
  from: number,
  to: number,
  level: number,
): readonly [number, number] {
  let low = Infinity
  let high = -Infinity
  const take = (bounds: readonly [number, number]): void => {
    if (bounds[0] < low) low = bounds[0]
    if (bounds[1] > high) high = bounds[1]
  }
  const current = level < 0 ? undefined : envelope.levels[level]
  if (current === undefined) {
    for (let n = from; n < to; n++) {
      const value = samples[n]!
      if (value < low) low = value
      if (value > high) high = value
    }
    return [low, high]
  }
  const size = current.samplesPerBlock
  const first = Math.ceil(from / size)
  const last = Math.floor(to / size)
  if (first >= last) return range(envelope, samples, from, to, level - 1)
  for (let block = first; block < last; block++) take([current.least[block]!, current.greatest[block]!])
  if (from < first * size) take(range(envelope, samples, from, first * size, level - 1))
  if (last * size < to) take(range(envelope, samples, last * size, to, level - 1))
  return [low, high]
}

export interface EnvelopeView {
  readonly least: Float64Array
  readonly greatest: Float64Array
}

/**
 * What a plot of `columns` columns must show of the samples from `fromIndex` up to (not including) `toIndex`: the exact least and
 * greatest sample that falls into each column. Columns narrower than a sample show the sample they lie in.
 *
 * @param fromIndex 0 ≤ fromIndex < toIndex ≤ N; fractions are allowed, so that a view can slide smoothly
 * @throws DesignError `range` when no sample lies in the view, `count` for no columns, `length` for samples of another recording
 */
export function readEnvelope(
  envelope: Envelope,
  samples: Float64Array,
  fromIndex: number,
  toIndex: number,
  columns: number,
): EnvelopeView {
  if (samples.length !== envelope.sampleCount) {
    throw new DesignError('length', 'samples', 'The envelope was built from another recording.', envelope.sampleCount)
  }
  if (!(fromIndex >= 0 && toIndex <= samples.length && fromIndex < toIndex)) {
    throw new DesignError(
      'range',
      'fromIndex',
      `The view must lie within the ${samples.length} samples of the recording.`,
      0,
    )
  }
  if (!Number.isInteger(columns) || columns < 1) {
    throw new DesignError('count', 'columns', 'A view has at least one column.', 1)
  }
  const least = new Float64Array(columns)
  const greatest = new Float64Array(columns)
  const perColumn = (toIndex - fromIndex) / columns
  for (let column = 0; column < columns; column++) {
    const start = Math.min(Math.floor(fromIndex + column * perColumn), samples.length - 1)
    const end = Math.min(Math.max(Math.floor(fromIndex + (column + 1) * perColumn), start + 1), samples.length)
    const [low, high] = range(envelope, samples, start, end, envelope.levels.length - 1)
    least[column] = low
    greatest[column] = high
  }
  return { least, greatest }
}
