import { largest, type Curve } from '../requirements/extremes'
import { chainGrid } from './band-grid'
import type { ComputedChain, UsableBand } from './chain'
import { lookedUpTo, stripsUpTo } from './reach'
import { chainResponse } from './response'
import { strongestImage } from './strongest'

/** A line met exactly by design is off by rounding alone. */
const SLACK_DB = 1e-9
const BISECTIONS = 50

/** Magnitude against unity, sizes alone. */
export const departureOf =
  (chain: ComputedChain): Curve =>
  (at) =>
    chainResponse(chain, at).magnitudeDb.map(Math.abs)

/** Where a curve comes to its limit between a place that is within and one that is not. */
function crossing(curve: Curve, limit: number, within: number, beyond: number): number {
  let [low, high] = [within, beyond]
  for (let round = 0; round < BISECTIONS && low !== high; round++) {
    const middle = (low + high) / 2
    if (curve(Float64Array.of(middle))[0]! <= limit) low = middle
    else high = middle
  }
  return low
}

/** Up to where a curve that begins within its limit stays there; null when it does so over the whole grid. */
function endOf(curve: Curve, limit: number, grid: Float64Array): number | null {
  const values = curve(grid)
  for (let n = 1; n < grid.length; n++) {
    if (values[n]! > limit) return crossing(curve, limit, grid[n - 1]!, grid[n]!)
    const isHump = n > 1 && values[n - 1]! >= values[n]! && values[n - 1]! >= values[n - 2]!
    // A hump that nearly touches is looked at between the points.
    if (!isHump || values[n - 1]! < 0.8 * limit - 1) continue
    const top = largest(curve, grid.slice(n - 2, n + 1))
    if (top.value > limit) return crossing(curve, limit, grid[n - 2]!, top.hz)
  }
  return null
}

/**
 * The band from the kept band's lower edge upwards (or, where the response isn't flat there, from where it comes to be) in which the magnitude
 * stays within ± `rippleDb` of unity and every image is `aliasDb` down.
 *
 * @returns null when nothing is usable
 */
export function usableBand(
  chain: ComputedChain,
  { rippleDb, aliasDb }: { readonly rippleDb: number; readonly aliasDb: number },
): UsableBand | null {
  const half = chain.outputRateHz / 2
  const departure = departureOf(chain)
  const ripple = rippleDb + SLACK_DB
  const whole = chainGrid(chain, chain.spec.kept.fromHz, half)
  const first = departure(whole).findIndex((size) => size <= ripple)
  if (first < 0) return null
  const fromHz = first === 0 ? whole[0]! : crossing(departure, ripple, whole[first]!, whole[first - 1]!)
  const grid = Float64Array.of(...(first === 0 ? [] : [fromHz]), ...whole.slice(first))
  const rippleEnd = endOf(departure, ripple, grid)
  const flatTo = rippleEnd ?? half
  if (flatTo <= fromHz) return null
  const image = strongestImage(chain, fromHz, flatTo, stripsUpTo(chain, lookedUpTo(chain)))
  const floor = -aliasDb + SLACK_DB
  if (image(Float64Array.of(fromHz))[0]! > floor) return null
  const aliasEnd = endOf(image, floor, Float64Array.of(...grid.filter((hertz) => hertz < flatTo), flatTo))
  if (aliasEnd !== null) return { fromHz, toHz: aliasEnd, endedBy: 'alias' }
  return { fromHz, toHz: flatTo, endedBy: rippleEnd === null ? 'half the output rate' : 'ripple' }
}
