import { isFir, type AnyDigital, type Filter } from '../forms/filter'
import { departureGrid } from '../response/departure-grid'

/*
 * The largest value of a curve over a band, found so that no dip or hump is stepped over: the grid crowds at every root as closely as the
 * root is sharp (a filter of finite impulse response, which is a polynomial in cos ω, gets many points for each of its ripples), and every
 * hump of importance is then closed in on.
 */

/** Values of a curve at frequencies in Hz; a fresh array each time. */
export type Curve = (frequenciesHz: Float64Array) => Float64Array

export interface Extreme {
  readonly value: number
  readonly hz: number
}

const NO_ROOTS: Filter<'s'> = { domain: 's', zeros: [], poles: [], gain: 1 }
const EVEN = 128
const POINTS_PER_TAP = 8
const FEWEST = 64

/** Frequencies at which a digital filter is looked at from `fromHz` to `toHz`, both included. */
export function bandGrid(digital: AnyDigital, fromHz: number, toHz: number): Float64Array {
  if (!isFir(digital)) return departureGrid(fromHz, toHz, NO_ROOTS, digital, EVEN)
  const part = (toHz - fromHz) / (digital.sampleRateHz / 2)
  const even = Math.max(FEWEST, Math.ceil(POINTS_PER_TAP * digital.taps.length * part))
  return departureGrid(fromHz, toHz, NO_ROOTS, null, even)
}

/** Humps that are closed in on; of equal ripples all are as high, so that a few suffice. */
const MOST_HUMPS = 6
const INSIDE = 9
const ROUNDS = 12

/** Height of the parabola through three points at the middle one's hump: enough to tell which humps matter. */
function vertex(values: Float64Array, n: number): number {
  const [a, b, c] = [values[n - 1]!, values[n]!, values[n + 1]!]
  const bend = a - 2 * b + c
  return bend < 0 ? b - (a - c) ** 2 / (8 * bend) : b
}

function humpsOf(values: Float64Array): number[] {
  const found: { readonly n: number; readonly height: number }[] = []
  for (let n = 0; n < values.length; n++) {
    const here = values[n]!
    const inside = n > 0 && n + 1 < values.length
    if ((n > 0 && values[n - 1]! > here) || (n + 1 < values.length && values[n + 1]! >= here)) continue
    const height = inside ? vertex(values, n) : here
    found.push({ n, height: Number.isFinite(height) ? height : here })
  }
  return found
    .sort((left, right) => right.height - left.height)
    .slice(0, MOST_HUMPS)
    .map(({ n }) => n)
}

/**
 * The largest value of a curve on a grid and between its points, and where it stands, to about 1e-8 of the distance between two points.
 * @param grid sorted frequencies in Hz, one or more
 */
export function largest(curve: Curve, grid: Float64Array): Extreme {
  const values = curve(grid)
  let best: Extreme = { value: values[0]!, hz: grid[0]! }
  for (let n = 1; n < grid.length; n++) if (values[n]! > best.value) best = { value: values[n]!, hz: grid[n]! }
  if (grid.length < 3 || !Number.isFinite(best.value)) return best
  const brackets = humpsOf(values).map((n) => ({
    low: grid[Math.max(n - 1, 0)]!,
    high: grid[Math.min(n + 1, grid.length - 1)]!,
  }))
  for (let round = 0; round < ROUNDS; round++) {
    const inside = new Float64Array(brackets.length * INSIDE)
    brackets.forEach(({ low, high }, i) => {
      for (let k = 0; k < INSIDE; k++) inside[i * INSIDE + k] = low + ((high - low) * (k + 1)) / (INSIDE + 1)
    })
    const found = curve(inside)
    brackets.forEach((bracket, i) => {
      let top = 0
      for (let k = 1; k < INSIDE; k++) if (found[i * INSIDE + k]! > found[i * INSIDE + top]!) top = k
      const hz = inside[i * INSIDE + top]!
      const value = found[i * INSIDE + top]!
      if (value > best.value) best = { value, hz }
      const part = (bracket.high - bracket.low) / (INSIDE + 1)
      bracket.low = Math.max(hz - part, bracket.low)
      bracket.high = Math.min(hz + part, bracket.high)
    })
  }
  return best
}

/** The same for several curves' least value. */
export function least(curve: Curve, grid: Float64Array): Extreme {
  const { value, hz } = largest((at) => curve(at).map((each) => -each), grid)
  return { value: -value, hz }
}
