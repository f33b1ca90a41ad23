import { DesignError } from '../errors'
import type { DigitalFilter, Filter } from '../forms/filter'
import { groupDelay } from './delay'
import type { AnalogCurve, DepartureCurve, Version } from './departure-curve'
import { analogCurve, bestDelay, departureCurve } from './departure-curve'
import { departureGrid, humps } from './departure-grid'
import { useBandOf } from './use-band'

export interface Departure {
  readonly db: Float64Array
  readonly degrees: Float64Array
  /** Phase-delay difference: positive where the digital version is later. */
  readonly microseconds: Float64Array
  /** The constant delay that was taken off, in seconds; 0 when none was asked for. */
  readonly delaySeconds: number
}

const DEGREES = 180 / Math.PI
const TURN = 2 * Math.PI
const MICRO = 1e6

const drawn = new WeakMap<Filter<'s'>, AnalogCurve>()

/** The analog side on a caller's grid, kept from call to call: several versions are held against it on the same frequencies. */
function drawnCurve(analog: Filter<'s'>, grid: Float64Array): AnalogCurve {
  const before = drawn.get(analog)
  if (before !== undefined && before.frequenciesHz.length === grid.length) {
    let n = 0
    while (n < grid.length && before.frequenciesHz[n] === grid[n]) n++
    if (n === grid.length) return before
  }
  const fresh = analogCurve(analog, grid)
  drawn.set(analog, fresh)
  return fresh
}

/** The best constant delay over a band, on the grid that its filters ask for. */
function delayOver(analog: Filter<'s'>, digital: DigitalFilter, fromHz: number, toHz: number): number {
  const grid = departureGrid(fromHz, toHz, analog, digital)
  const curve = analogCurve(analog, grid)
  const { radians } = departureCurve(analog, curve, { by: 'roots', filter: digital })
  return bestDelay(grid, radians, curve.counts)
}

/**
 * Departure of a digital version from its analog prototype: digital minus analog, at given frequencies.
 *
 * The phase difference is continuous and lies within half a turn where the analog filter comes into use (0 Hz, or its lower −3 dB point). `microseconds` is −Δφ/ω, at
 * 0 Hz its limit (±Infinity where the phases differ there). With `removeDelayOver` = [from, to] in Hz, the constant delay τ that
 * minimises ∫(Δφ + ωτ)² over that band, without a constant phase beside it, is taken off degrees and microseconds; notches deeper than
 * 20 dB below the analog peak don't count in the fit.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N values each; `db` is ±Infinity where just one of the two is exactly zero, and 0 where both are
 * @throws DesignError `range` for a band that isn't 0 ≤ from < to ≤ half the rate; `not-finite` for a frequency
 */
export function departure(
  analog: Filter<'s'>,
  digital: DigitalFilter,
  frequenciesHz: ArrayLike<number>,
  options: { readonly removeDelayOver?: readonly [number, number] } = {},
): Departure {
  const grid = Float64Array.from(frequenciesHz)
  const { db, radians } = departureCurve(analog, drawnCurve(analog, grid), { by: 'roots', filter: digital })
  let delaySeconds = 0
  if (options.removeDelayOver !== undefined) {
    const [from, to] = options.removeDelayOver
    const fold = digital.sampleRateHz / 2
    if (!(from >= 0 && from < to && to <= fold)) {
      const message = `The delay is fitted over a band between 0 and ${fold} Hz (half the rate), its lower end first.`
      throw new DesignError('range', 'removeDelayOver', message, from >= 0 && from < fold ? Math.min(to, fold) : fold)
    }
    delaySeconds = delayOver(analog, digital, from, to)
  }
  const degrees = new Float64Array(grid.length)
  const microseconds = new Float64Array(grid.length)
  for (let n = 0; n < grid.length; n++) {
    const omega = TURN * grid[n]!
    const rest = radians[n]! + omega * delaySeconds
    degrees[n] = rest * DEGREES
    if (omega !== 0) microseconds[n] = (-rest / omega) * MICRO
    else if (rest !== 0) microseconds[n] = rest > 0 ? -Infinity : Infinity
    else microseconds[n] = (groupDelay(digital, [0])[0]! - groupDelay(analog, [0])[0]! - delaySeconds) * MICRO
  }
  return { db, degrees, microseconds, delaySeconds }
}

export interface WorstDeparture {
  /** Largest magnitudes of the departure, so 0 or more. */
  readonly db: number
  readonly degrees: number
  readonly microseconds: number
  readonly atHz: { readonly db: number; readonly degrees: number; readonly microseconds: number }
  readonly delaySeconds: number
}

/** Running maxima of a departure and where they stand: dB, its Hz, radians, its Hz, seconds, its Hz. */
type Worst = Float64Array

function widen(worst: Worst, curve: AnalogCurve, { db, radians }: DepartureCurve, delaySeconds: number): void {
  const { frequenciesHz, counts } = curve
  for (let n = 0; n < counts.length; n++) {
    if (counts[n] !== 1) continue
    const hertz = frequenciesHz[n]!
    const omega = TURN * hertz
    const level = Math.abs(db[n]!)
    const angle = Math.abs(radians[n]! + omega * delaySeconds)
    if (level > worst[0]!) {
      worst[0] = level
      worst[1] = hertz
    }
    if (angle > worst[2]!) {
      worst[2] = angle
      worst[3] = hertz
    }
    // At 0 Hz a phase delay is a limit, which the next points stand for.
    if (omega > 0 && angle > worst[4]! * omega) {
      worst[4] = angle / omega
      worst[5] = hertz
    }
  }
}

/** The worst departure on a grid, humps between its points included. */
export function worstOnGrid(
  analog: Filter<'s'>,
  version: Version,
  curve: AnalogCurve,
  removeDelay: boolean,
): WorstDeparture {
  const grid = curve.frequenciesHz
  const first = departureCurve(analog, curve, version)
  const delaySeconds = removeDelay ? bestDelay(grid, first.radians, curve.counts) : 0
  const start = grid[0]!
  const worst = Float64Array.of(0, start, 0, start, 0, start)
  widen(worst, curve, first, delaySeconds)
  const rest =
    delaySeconds === 0 ? first.radians : first.radians.map((value, n) => value + TURN * grid[n]! * delaySeconds)
  const between = Float64Array.from([...humps(grid, first.db), ...humps(grid, rest)]).sort()
  if (between.length > 0) {
    const extra = analogCurve(analog, between)
    widen(worst, extra, departureCurve(analog, extra, version), delaySeconds)
  }
  return {
    db: worst[0]!,
    degrees: worst[2]! * DEGREES,
    microseconds: worst[4]! * MICRO,
    atHz: { db: worst[1]!, degrees: worst[3]!, microseconds: worst[5]! },
    delaySeconds,
  }
}

/**
 * The worst departure from the low end of use up to a frequency: largest |dB|, |degrees| and |microseconds|, and where.
 *
 * The band begins at `fromHz`, or at 0 Hz for low-pass and band-stop filters and the lower −3 dB point for the others; notches
 * deeper than 20 dB inside the band don't count. The grid is refined around every root and every hump.
 *
 * @param upToHz upper end in Hz, at most half the rate
 * @param options.removeDelay take the best constant delay over the band off first (see {@link departure})
 * @throws DesignError `range` with the nearest end that works
 */
export function worstDeparture(
  analog: Filter<'s'>,
  digital: DigitalFilter,
  upToHz: number,
  options: { readonly fromHz?: number; readonly removeDelay?: boolean } = {},
): WorstDeparture {
  const fromHz = options.fromHz ?? useBandOf(analog).fromHz
  const fold = digital.sampleRateHz / 2
  if (!(upToHz > fromHz && upToHz <= fold)) {
    const message = `The end must lie above ${fromHz} Hz, where the filter comes into use, and not above ${fold} Hz (half the rate).`
    throw new DesignError('range', 'upToHz', message, upToHz > fold ? fold : fromHz * 1.01 || fold)
  }
  const grid = departureGrid(fromHz, upToHz, analog, digital)
  return worstOnGrid(analog, { by: 'roots', filter: digital }, analogCurve(analog, grid), options.removeDelay === true)
}
