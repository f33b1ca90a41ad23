import type { DigitalFilter, Filter } from '../forms/filter'
import type { DepartureBudget } from '../spec'
import { analogCurve, bestDelay, bestDelays, departureCurve } from './departure-curve'
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
/** Halvings of the step between two grid points, a hundredth of the band or less: to 1e-7 of it. */
const EDGE_ROUNDS = 17

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
  return extra.length === 0 ? coarse : merged(coarse, judge(Float64Array.from(extra).sort()))
}

/** Two judgements as one, in the order of frequency. */
function merged(left: Judgement, right: Judgement): Judgement {
  const count = left.hertz.length + right.hertz.length
  const out = {
    hertz: new Float64Array(count),
    db: new Float64Array(count),
    radians: new Float64Array(count),
    counts: new Uint8Array(count),
  }
  let [l, r] = [0, 0]
  for (let n = 0; n < count; n++) {
    const fromLeft = r >= right.hertz.length || (l < left.hertz.length && left.hertz[l]! <= right.hertz[r]!)
    const [source, at] = fromLeft ? [left, l++] : [right, r++]
    out.hertz[n] = source.hertz[at]!
    out.db[n] = source.db[at]!
    out.radians[n] = source.radians[at]!
    out.counts[n] = source.counts[at]!
  }
  return out
}

type Broken = 'magnitude' | 'phase' | null

/** What one point breaks under a given delay. */
function brokenAt(judgement: Judgement, n: number, budget: DepartureBudget, delay: number): Broken {
  if (judgement.counts[n] !== 1) return null
  if (!(Math.abs(judgement.db[n]!) <= budget.magnitudeDb)) return 'magnitude'
  const degrees = (Math.abs(judgement.radians[n]! + TURN * judgement.hertz[n]! * delay) * 180) / Math.PI
  return degrees <= budget.phaseDegrees ? null : 'phase'
}

/** What the first `end` points break under a delay, the highest first. */
function broken(judgement: Judgement, end: number, budget: DepartureBudget, delay: number): Broken {
  for (let n = end - 1; n >= 0; n--) {
    const what = brokenAt(judgement, n, budget, delay)
    if (what !== null) return what
  }
  return null
}

/** A notch that isn't judged ends no band: back to its near side. */
function beforeNotch({ counts, hertz }: Judgement, kept: number): number {
  let end = kept
  if (end < hertz.length) while (end > 0 && counts[end - 1] !== 1) end -= 1
  return end
}

/** Points from the start up to the first that fails. */
function pointsKept(judgement: Judgement, budget: DepartureBudget): number {
  let reach = 0
  while (reach < judgement.hertz.length && brokenAt(judgement, reach, budget, 0) === null) reach += 1
  return reach
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
  const counts = new Uint8Array(end + 1)
  counts.set(judgement.counts.subarray(0, end))
  counts[end] = more.counts[0]!
  return {
    hertz: append(judgement.hertz, more.hertz),
    db: append(judgement.db, more.db),
    radians: append(judgement.radians, more.radians),
    counts,
  }
}

type UpperEnd = Omit<TrustedBand, 'fromHz'>

/** Halves the way from the last point kept to the first lost; `ask` says what a frequency breaks, and the delay it takes. */
function upperEnd(
  inside: number,
  outside: number,
  start: { readonly delay: number; readonly limitedBy: Exclude<Broken, null> },
  ask: (hertz: number) => { readonly what: Broken; readonly delay: number },
): UpperEnd {
  let [kept, lost, delaySeconds] = [inside, outside, start.delay]
  let limitedBy = start.limitedBy
  for (let round = 0; round < EDGE_ROUNDS; round++) {
    const middle = (kept + lost) / 2
    const { what, delay } = ask(middle)
    if (what === null) {
      kept = middle
      delaySeconds = delay
    } else {
      lost = middle
      limitedBy = what
    }
  }
  return { upToHz: kept, limitedBy, delaySeconds }
}

/** From the start of use upwards without a delay: the first failure ends the band. */
function upwardPlain(judge: Judge, judgement: Judgement, budget: DepartureBudget): UpperEnd {
  const { hertz } = judgement
  const reach = pointsKept(judgement, budget)
  const kept = beforeNotch(judgement, reach)
  if (kept === hertz.length) return { upToHz: hertz[kept - 1]!, limitedBy: 'half the rate', delaySeconds: 0 }
  const limitedBy = brokenAt(judgement, reach, budget, 0) ?? 'phase'
  if (kept === 0) return { upToHz: hertz[0]!, limitedBy, delaySeconds: 0 }
  return upperEnd(hertz[kept - 1]!, hertz[kept]!, { delay: 0, limitedBy }, (middle) => ({
    what: brokenAt(judge(Float64Array.of(middle)), 0, budget, 0),
    delay: 0,
  }))
}

/** From the start of use upwards, each band with the best delay of its own: the longest that passes. */
function upwardDelayed(judge: Judge, judgement: Judgement, budget: DepartureBudget): UpperEnd {
  const { hertz, radians, counts } = judgement
  const delays = bestDelays(hertz, radians, counts)
  // The level doesn't depend on the delay, so that its first failure bounds the search.
  let kept = pointsKept(judgement, { ...budget, phaseDegrees: Infinity })
  while (kept > 0 && broken(judgement, kept, budget, delays(kept)) !== null) kept -= 1
  kept = beforeNotch(judgement, kept)
  const delay = delays(kept)
  if (kept === hertz.length) return { upToHz: hertz[kept - 1]!, limitedBy: 'half the rate', delaySeconds: delay }
  const limitedBy = broken(judgement, kept + 1, budget, delays(kept + 1)) ?? 'phase'
  if (kept === 0) return { upToHz: hertz[0]!, limitedBy, delaySeconds: 0 }
  return upperEnd(hertz[kept - 1]!, hertz[kept]!, { delay, limitedBy }, (middle) => {
    const more = extended(judge, judgement, kept, middle)
    const own = bestDelay(more.hertz, more.radians, more.counts)
    return { what: broken(more, kept + 1, budget, own), delay: own }
  })
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
 * that reaches farther. The grid is refined around every root and hump, and the ends are found by halving.
 *
 * @throws DesignError `not-finite` when a filter has a root that is no finite number
 */
export function trustedBand(analog: Filter<'s'>, digital: DigitalFilter, budget: DepartureBudget): TrustedBand {
  const judge = judgeOf(analog, digital)
  const start = useBandOf(analog).fromHz
  const fold = digital.sampleRateHz / 2
  if (start >= fold) return { fromHz: start, upToHz: start, limitedBy: 'half the rate', delaySeconds: 0 }
  const judgement = refined(judge, departureGrid(start, fold, analog, digital))
  const plain = upwardPlain(judge, judgement, budget)
  const delayed = budget.removeDelay ? upwardDelayed(judge, judgement, budget) : plain
  const above = delayed.upToHz >= plain.upToHz ? delayed : plain
  if (start === 0 || above.upToHz === start) return { fromHz: start, ...above }
  const below = refined(judge, departureGrid(0, start, analog, digital))
  return { fromHz: downward(judge, below, budget, above.delaySeconds), ...above }
}
