import { largest } from '../requirements/extremes'
import { ripplesOver } from './band-grid'
import type { ComputedChain } from './chain'
import { partMostAboveDb } from './analog-bound'
import { keptForPath } from './same-path'
import { converterStrips, outputOf, partsAhead, stripsOver, type Strips } from './strips'

/** Where a strip comes through strongest. */
export interface StripWorst {
  readonly strip: number
  readonly levelDb: number
  readonly outputHz: number
}

export interface Weakest {
  /** Strips but the base band, the worst first; those above the last multiple looked at can't be among the first 32. */
  readonly strips: readonly StripWorst[]
  /** Where any strip comes through strongest, on the grid. */
  readonly worstIn: (strip: number) => StripWorst
  /** Most that the digital parts let through from any strip below half the converter's rate, on the grid. */
  readonly mostDigitalDb: number
}

const FEWEST_POINTS = 49
const MOST_POINTS = 513
const POINTS_A_RIPPLE = 6
/** With more strips than this all are looked at on few frequencies first, and the worst again on the whole grid. */
export const MOST_ON_FULL_GRID = 192
export const FEW_POINTS = 5
/** Strips between two looks at whether any further one could matter. */
export const STRIDE = 256
const LOOKED_AT_AGAIN = 32
const REFINED = 4

export const evenGrid = (fromHz: number, toHz: number, points: number): Float64Array =>
  fromHz === toHz
    ? Float64Array.of(fromHz)
    : Float64Array.from({ length: points }, (_, n) =>
        n === points - 1 ? toHz : fromHz + ((toHz - fromHz) * n) / (points - 1),
      )

function worstOf(strips: Strips, strip: number, grid: Float64Array): StripWorst {
  const levels = strips.levelDb(strip)
  let at = 0
  for (let n = 1; n < levels.length; n++) if (levels[n]! > levels[at]!) at = n
  return { strip, levelDb: levels[at]!, outputHz: grid[at]! }
}

const worstFirst = (a: StripWorst, b: StripWorst): number =>
  a.levelDb === b.levelDb ? a.strip - b.strip : a.levelDb > b.levelDb ? -1 : 1

/** Most that the digital parts let through at places of the output, from any strip. */
export function mostDigital(chain: ComputedChain, strips: Strips): number {
  let most = -Infinity
  for (let strip = 0; strip < converterStrips(chain); strip++) {
    for (const level of strips.digitalDb(strip)) if (level > most) most = level
  }
  return most
}

/** Most that the parts ahead of the quantiser have anywhere above a strip. */
export const mostAboveDb = (chain: ComputedChain, strip: number): number =>
  partsAhead(chain).reduce((sum, part) => sum + partMostAboveDb(part, (strip * chain.outputRateHz) / 2), 0)

/** The highest level of a strip anywhere on the grid and between its points; never less than what the grid had. */
function refined(chain: ComputedChain, found: StripWorst, grid: Float64Array): StripWorst {
  const { value, hz } = largest((at) => stripsOver(chain, at).levelDb(found.strip), grid)
  return value > found.levelDb ? { ...found, levelDb: value, outputHz: hz } : found
}

/** Where analog resonances land, which may be sharper than a grid. */
const peaksLanding = (chain: ComputedChain): number[] =>
  partsAhead(chain).flatMap((part) => {
    if (part.kind !== 'analog') return []
    const upper = part.filter.poles.filter(({ im }) => im > 0)
    return upper.map(({ im }) => outputOf(im / (2 * Math.PI), chain.outputRateHz).landsHz)
  })

function look(chain: ComputedChain, fromHz: number, toHz: number, count: number): Weakest {
  const points = Math.ceil(POINTS_A_RIPPLE * ripplesOver(chain, fromHz, toHz))
  const even = evenGrid(fromHz, toHz, Math.min(MOST_POINTS, Math.max(FEWEST_POINTS, points)))
  const peaks = peaksLanding(chain).filter((hertz) => hertz > fromHz && hertz < toHz)
  const grid = Float64Array.of(...even, ...peaks).sort()
  const isFew = count > MOST_ON_FULL_GRID
  const firstGrid = isFew ? Float64Array.of(...evenGrid(fromHz, toHz, FEW_POINTS), ...peaks).sort() : grid
  const first = stripsOver(chain, firstGrid)
  const mostDigitalDb = mostDigital(chain, first)
  const found: StripWorst[] = []
  for (let strip = 1; strip < count; strip++) {
    found.push(worstOf(first, strip, firstGrid))
    if (strip % STRIDE !== 0) continue
    found.sort(worstFirst)
    if (mostAboveDb(chain, strip) + mostDigitalDb < found[LOOKED_AT_AGAIN]!.levelDb) break
  }
  found.sort(worstFirst)
  const again = stripsOver(chain, grid)
  const near = found.slice(0, isFew ? LOOKED_AT_AGAIN : found.length)
  const looked = isFew ? near.map(({ strip }) => worstOf(again, strip, grid)).sort(worstFirst) : near
  const nearest = looked
    .slice(0, REFINED)
    .map((one) => refined(chain, one, grid))
    .sort(worstFirst)
  const rest = [...looked.slice(REFINED), ...(isFew ? found.slice(LOOKED_AT_AGAIN) : [])]
  return { strips: [...nearest, ...rest], mostDigitalDb, worstIn: (strip) => worstOf(again, strip, grid) }
}

/**
 * Strips by how strongly they come through to a band, the foremost refined between the points looked at. Kept, since its chart,
 * its sheet and its figures all ask for it.
 *
 * @param count strips looked at, the base band included
 */
export function weakestStrips(chain: ComputedChain, fromHz: number, toHz: number, count: number): Weakest {
  return keptForPath(chain, ['weakest', fromHz, toHz, count], () => look(chain, fromHz, toHz, count))
}
