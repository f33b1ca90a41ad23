import { DesignError } from '../errors'
import { quantilesOf } from './tolerance-quantiles'
import type { ComputedChain } from './chain'
import type { ToleranceSettings } from './spec'

/** One value a frequency each. */
export interface Percentiles {
  readonly p5: Float64Array
  readonly p50: Float64Array
  readonly p95: Float64Array
}

/** How far apart two channels are: half, 95 in 100 and all of the pairs stay within. */
export interface MatchPercentiles {
  readonly p50: Float64Array
  readonly p95: Float64Array
  readonly most: Float64Array
}

/** Channels `fromChannel` up to but without `toChannel`: their departures from nominal, all frequencies of a channel side by side. */
export interface ToleranceShard {
  readonly fromChannel: number
  readonly toChannel: number
  readonly magnitudeDb: Float64Array
  readonly phaseDegrees: Float64Array
}

export interface ToleranceResult {
  readonly settings: ToleranceSettings
  readonly frequenciesHz: Float64Array
  /** Departure from nominal. */
  readonly magnitudeDb: Percentiles
  readonly phaseDegrees: Percentiles
  /** |channel − another channel| */
  readonly gainMatchDb: MatchPercentiles
  readonly phaseMatchDegrees: MatchPercentiles
}

/** Frequencies whose columns are gathered in one walk over the channels. */
const COLUMNS = 16

function checkShards(shards: readonly ToleranceShard[], channels: number, points: number): readonly ToleranceShard[] {
  const inOrder = [...shards].sort((a, b) => a.fromChannel - b.fromChannel)
  let next = 0
  for (const { fromChannel, toChannel, magnitudeDb, phaseDegrees } of inOrder) {
    const length = (toChannel - fromChannel) * points
    if (fromChannel !== next || magnitudeDb.length !== length || phaseDegrees.length !== length) break
    next = toChannel
  }
  if (next !== channels) {
    const message = `The parts of the run hold channels 0 to ${next} without a gap; all ${channels} are needed.`
    throw new DesignError('incomplete-shards', 'tolerance.channels', message, channels)
  }
  return inOrder
}

interface Distribution {
  readonly spread: Percentiles
  readonly match: MatchPercentiles
}

function distributionOf(
  shards: readonly ToleranceShard[],
  read: (shard: ToleranceShard) => Float64Array,
  channels: number,
  points: number,
): Distribution {
  const empty = () => new Float64Array(points)
  const spread = { p5: empty(), p50: empty(), p95: empty() }
  const match = { p50: empty(), p95: empty(), most: empty() }
  const columns = Array.from({ length: COLUMNS }, () => new Float64Array(channels))
  const apart = new Float64Array(channels)
  for (let first = 0; first < points; first += COLUMNS) {
    const width = Math.min(COLUMNS, points - first)
    for (const shard of shards) {
      const values = read(shard)
      for (let channel = shard.fromChannel, at = first; channel < shard.toChannel; channel += 1, at += points) {
        for (let column = 0; column < width; column += 1) columns[column]![channel] = values[at + column]!
      }
    }
    for (let column = 0; column < width; column += 1) {
      const values = columns[column]!
      let most = Math.abs(values[0]! - values[channels - 1]!)
      apart[0] = most
      for (let channel = 1; channel < channels; channel += 1) {
        const distance = Math.abs(values[channel]! - values[channel - 1]!)
        apart[channel] = distance
        if (distance > most) most = distance
      }
      const point = first + column
      match.most[point] = most
      ;[match.p50[point], match.p95[point]] = quantilesOf(apart, [0.5, 0.95])
      ;[spread.p5[point], spread.p50[point], spread.p95[point]] = quantilesOf(values, [0.05, 0.5, 0.95])
    }
  }
  return { spread, match }
}

/**
 * What a tolerance run comes to at each frequency: percentiles over the channels, and how far channels lie apart.
 *
 * Pairs are channel i against channel i + 1, the last against the first: as many pairs as channels, each channel in two of them, and
 * every pair two independent draws, so that their distribution is that of any two channels.
 *
 * @param frequenciesHz those the shards were computed at
 * @param shards in any order; together every channel of the settings once
 * @throws DesignError `incomplete-shards`
 */
export function toleranceResult(
  chain: Pick<ComputedChain, 'spec'>,
  frequenciesHz: Float64Array,
  shards: readonly ToleranceShard[],
): ToleranceResult {
  const settings = chain.spec.tolerance
  const points = frequenciesHz.length
  const inOrder = checkShards(shards, settings.channels, points)
  const magnitude = distributionOf(inOrder, (shard) => shard.magnitudeDb, settings.channels, points)
  const phase = distributionOf(inOrder, (shard) => shard.phaseDegrees, settings.channels, points)
  return {
    settings,
    frequenciesHz,
    magnitudeDb: magnitude.spread,
    phaseDegrees: phase.spread,
    gainMatchDb: magnitude.match,
    phaseMatchDegrees: phase.match,
  }
}
