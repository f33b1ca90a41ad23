import { departureGrid } from '../response/departure-grid'
import { frequencyResponse } from '../response/frequency'
import type { Filter } from '../forms/filter'
import type { FitTarget, PinnedZeros } from './fitted-product'

/** Relative errors count fully down to here below the peak, and by the fourth root of the level under it. */
const FULL_WEIGHT_LEVEL = 0.1
const SLOPE_POWER = 1 / 4
/** Below this level, 100 dB under the peak, errors count absolutely. */
const LEAST_LEVEL = 1e-5
const EVEN_POINTS = 64
const TURN = 2 * Math.PI

/**
 * The weights of the fit's errors for levels |D| with peak P: min(1, |D|/(P/10))^¼ / |D|, with |D| not under 10⁻⁵·P. Where the filter is in
 * use (within 20 dB of its peak) an error so counts as decibels and degrees do; on the slope it counts less, by 3 at −60 dB and by 10 at
 * −100 dB; below that it fades.
 */
export function fitWeights(levels: Float64Array): Float64Array {
  const peak = levels.reduce((most, level) => Math.max(most, level), 0)
  return levels.map((level) => {
    const bounded = Math.max(level, LEAST_LEVEL * peak)
    return Math.min(1, bounded / (FULL_WEIGHT_LEVEL * peak)) ** SLOPE_POWER / bounded
  })
}

/** Zeros on the axis inside the band: at 0 Hz and in notches. A fitted version has them where the original has them. */
function pinnedOf(filter: Filter<'s'>, upTo: number, order: number): PinnedZeros {
  let room = order
  let atZero = 0
  const angles: number[] = []
  for (const { re, im } of filter.zeros) {
    if (re === 0 && im === 0 && room > 0) {
      atZero += 1
      room -= 1
    }
  }
  for (const { re, im } of filter.zeros) {
    if (im > 0 && Math.abs(re) <= 1e-12 * im && im < upTo && room > 1) {
      angles.push(im)
      room -= 2
    }
  }
  return { atZero, angles }
}

/** A fitted pole may ring this many times as long as the slowest of the original. */
const LONGER = 20

const leastMarginOf = ({ poles }: Filter<'s'>): number =>
  poles.reduce((least, { re }) => Math.min(least, -Math.expm1(2 * re) / LONGER), 1)

/**
 * What a fit is to come to: the analog response on points spread evenly over the band, and around each analog root as closely as it is
 * sharp; each point counts alike but for its weight.
 *
 * @param filter roots in rad per sample
 * @param upTo rad per sample
 */
export function targetOf(filter: Filter<'s'>, upTo: number, freeDelay: boolean, order: number): FitTarget {
  const turns = departureGrid(0, upTo / TURN, filter, null, EVEN_POINTS).filter(
    (value) => value > 0 || !filter.zeros.some(({ re, im }) => re === 0 && im === 0),
  )
  const { re, im } = frequencyResponse(filter, turns)
  return {
    omega: turns.map((value) => TURN * value),
    re,
    im,
    weight: fitWeights(re.map((value, k) => Math.hypot(value, im[k]!))),
    upTo,
    pinned: pinnedOf(filter, upTo, order),
    freeDelay,
    leastMargin: leastMarginOf(filter),
  }
}
