import type { DigitalFilter, Filter } from '../forms/filter'
import type { DepartureBudget } from '../spec'
import { analogCurve, bestDelay, departureCurve } from './departure-curve'
import type { Version } from './departure-curve'
import { departureGrid, humps } from './departure-grid'
import { useBandOf } from './use-band'

export interface TrustedBand {
  readonly fromHz: number
  /** Equal to `fromHz` when the budget is broken from the start. */
  readonly upToHz: number
  /** What ends the band at its upper end. */
  readonly limitedBy: 'magnitude' | 'phase' | 'half the rate'
  /** The constant delay taken off over the band; 0 when the budget doesn't allow one. */
  readonly delaySeconds: number
}

const TURN = 2 * Math.PI
const EDGE_ROUNDS = 24

/** Departures on a grid, as far as it is judged. */
interface Judgement {
  readonly hertz: Float64Array
  readonly db: Float64Array
  readonly radians: Float64Array
  readonly counts: Uint8Array
}

type Judge = (grid: Float64Array) => Judgement

function judgeOf(analog: Filter<'s'>, digital: DigitalFilter): Judge {
  const version: Version = { by: 'roots', filter: digital }
  return (grid) => {
    const curve = analogCurve(analog, grid)
    return { hertz: grid, ...departureCurve(analog, curve, version), counts: curve.counts }
  }
}

/** The grid, and the humps of the departure between its points. */
function refined(judge: Judge, grid: Float64Array): Judgement {
  const coarse = judge(grid)
  const slope = bestDelay(grid, coarse.radians, coarse.counts)
  const level = coarse.radians.map((value, n) => value + TURN * grid[n]! * slope)
  const extra = [...humps(grid, coarse.db), ...humps(grid, coarse.radians), ...humps(grid, level)]
  return extra.length === 0 ? coarse : judge(Float64Array.from(new Set([...grid, ...extra])).sort())
}

type Broken = 'magnitude' | 'phase' | null

/** What one point breaks under a given delay. */
function brokenAt(judgement: Judgement, n: number, budget: DepartureBudget, delay: number): Broken {
  if (judgement.counts[n] !== 1) return null
  if (!(Math.abs(judgement.db[n]!) <= budget.magnitudeDb)) return 'magnitude'
  const degrees = (Math.abs(judgement.radians[n]! + TURN * judgement.hertz[n]! * delay) * 180) / Math.PI
  return degrees <= budget.phaseDegrees ? null : 'phase'
}

const delayOf = (judgement: Judgement, end: number, budget: DepartureBudget): number =>
  budget.removeDelay ? bestDelay(judgement.hertz, judgement.radians, judgement.counts, end) : 0

/** What the first `end` points break, if anything, with the best delay over just them. */
function broken(judgement: Judgement, end: number, budget: DepartureBudget): Broken {
  const delay = delayOf(judgement, end, budget)
  for (let n = 0; n < end; n++) {
    const what = brokenAt(judgement, n, budget, delay)
    if (what !== null) return what
  }
  return null
}

/** Points from the start that keep the budget: up to the first that fails; with a delay of its own, the longest run that passes. */
function pointsKept(judgement: Judgement, budget: DepartureBudget): number {
  const count = judgement.hertz.length
  let reach = 0
  // The level doesn't depend on the delay, so its first failure bounds the search either way.
  const limit = budget.removeDelay ? { ...budget, phaseDegrees: Infinity } : budget
  while (reach < count && brokenAt(judgement, reach, limit, 0) === null) reach += 1
  let kept = reach
  if (budget.removeDelay) while (kept > 0 && broken(judgement, kept, budget) !== null) kept -= 1
  // A notch that isn't judged ends no band: back to its near side.
  if (kept < count) while (kept > 0 && judgement.counts[kept - 1] !== 1) kept -= 1
  return kept
}

/** The first `end` points of a judgement and one more. */
function extended(judge: Judge, judgement: Judgement, end: number, hertz: number): Judgement {
  const more = judge(Float64Array.of(hertz))
  const append = (values: Float64Array, value: Float64Array) => {
    const out = new Float64Array(end + 1)
    out.set(values.subarray(0, end))
    out[end] = value[0]!
    return out
  }
  return {
    hertz: append(judgement.hertz, more.hertz),
    db: append(judgement.db, more.db),
    radians: append(judgement.radians, more.radians),
    counts: Uint8Array.of(...judgement.counts.subarray(0, end), more.counts[0]!),
  }
}

/** From the start of use upwards. */
function upward(judge: Judge, judgement: Judgement, budget: DepartureBudget): Omit<TrustedBand, 'fromHz'> {
  const { hertz } = judgement
  const kept = pointsKept(judgement, budget)
  if (kept === hertz.length) {
    return { upToHz: hertz[kept - 1]!, limitedBy: 'half the rate', delaySeconds: delayOf(judgement, kept, budget) }
  }
  let limitedBy = broken(judgement, kept + 1, budget) ?? 'phase'
  if (kept === 0) return { upToHz: hertz[0]!, limitedBy, delaySeconds: 0 }
  let inside = hertz[kept - 1]!
  let outside = hertz[kept]!
  let delaySeconds = delayOf(judgement, kept, budget)
  for (let round = 0; round < EDGE_ROUNDS; round++) {
    const middle = (inside + outside) / 2
    const more = extended(judge, judgement, kept, middle)
    const what = broken(more, kept + 1, budget)
    if (what === null) {
      inside = middle
      delaySeconds = delayOf(more, kept + 1, budget)
    } else {
      outside = middle
      limitedBy = what
    }
  }
  return { upToHz: inside, limitedBy, delaySeconds }
}

/** From the start of use downwards, with the delay that the band has. */
function downward(judge: Judge, judgement: Judgement, budget: DepartureBudget, delay: number): number {
  const { hertz } = judgement
  let n = hertz.length - 1
  while (n >= 0 && brokenAt(judgement, n, budget, delay) === null) n -= 1
  if (n < 0) return hertz[0]!
  if (n === hertz.length - 1) return hertz[n]!
  let outside = hertz[n]!
  let inside = hertz[n + 1]!
  for (let round = 0; round < EDGE_ROUNDS; round++) {
    const middle = (inside + outside) / 2
    if (brokenAt(judge(Float64Array.of(middle)), 0, budget, delay) === null) inside = middle
    else outside = middle
  }
  return inside
}

/**
 * The trusted band: the frequencies around the low end of the pass band over which the departure stays inside its budget.
 *
 * It starts from 0 Hz for low-pass and band-stop filters and from the lower −3 dB point for high-pass and band-pass ones, and reaches up
 * as far as the budget holds all the way; for the latter two it then reaches down as well. Notches deeper than 20 dB below the peak,
 * with frequencies in use above them, aren't judged. With `removeDelay` one constant delay is taken off, fitted by least squares over
 * the band from its start up (see departure); the band is the longest that keeps the budget with its own such delay, or with none where
 * that reaches farther. The grid is refined around
 * every root and hump, and the ends are found by halving.
 *
 * @throws DesignError `not-finite` when a filter has a root that is no finite number
 */
export function trustedBand(analog: Filter<'s'>, digital: DigitalFilter, budget: DepartureBudget): TrustedBand {
  const judge = judgeOf(analog, digital)
  const start = useBandOf(analog).fromHz
  const fold = digital.sampleRateHz / 2
  if (start >= fold) return { fromHz: start, upToHz: start, limitedBy: 'half the rate', delaySeconds: 0 }
  const judgement = refined(judge, departureGrid(start, fold, analog, digital))
  const plain = upward(judge, judgement, { ...budget, removeDelay: false })
  const delayed = budget.removeDelay ? upward(judge, judgement, budget) : plain
  const above = delayed.upToHz >= plain.upToHz ? delayed : plain
  if (start === 0 || above.upToHz === start) return { fromHz: start, ...above }
  const below = refined(judge, departureGrid(0, start, analog, digital))
  return { fromHz: downward(judge, below, budget, above.delaySeconds), ...above }
}
