import type { ComputedChain } from './chain'
import { converterStrips, stripsOver, type Strips } from './strips'

/** Where a strip comes through strongest. */
export interface StripWorst {
  readonly strip: number
  readonly levelDb: number
  readonly outputHz: number
  /** Index in the grid it was found on. */
  readonly at: number
}

export interface Weakest {
  /** Every strip but the base band, the worst first. */
  readonly strips: readonly StripWorst[]
  /** Output frequencies that the first of them were found on. */
  readonly grid: Float64Array
  /** Most that the digital parts let through from any strip below half the converter's rate, on the grid. */
  readonly mostDigitalDb: number
}

const GRID_POINTS = 129
/** With more strips than this all are looked at on few frequencies first, and the worst again on the whole grid. */
const MOST_ON_FULL_GRID = 192
const FEW_POINTS = 5
const LOOKED_AT_AGAIN = 32

const evenGrid = (fromHz: number, toHz: number, points: number): Float64Array =>
  fromHz === toHz
    ? Float64Array.of(fromHz)
    : Float64Array.from({ length: points }, (_, n) =>
        n === points - 1 ? toHz : fromHz + ((toHz - fromHz) * n) / (points - 1),
      )

function worstOf(strips: Strips, strip: number, grid: Float64Array): StripWorst {
  const levels = strips.levelDb(strip)
  let at = 0
  for (let n = 1; n < levels.length; n++) if (levels[n]! > levels[at]!) at = n
  return { strip, levelDb: levels[at]!, outputHz: grid[at]!, at }
}

const worstFirst = (a: StripWorst, b: StripWorst): number =>
  a.levelDb === b.levelDb ? a.strip - b.strip : a.levelDb > b.levelDb ? -1 : 1

function mostDigital(chain: ComputedChain, strips: Strips): number {
  let most = -Infinity
  for (let strip = 0; strip < converterStrips(chain); strip++) {
    for (const level of strips.digitalDb(strip)) if (level > most) most = level
  }
  return most
}

/**
 * Strips by how strongly they come through to a band.
 *
 * @param count strips looked at, the base band included
 * @param given a grid to look at all of them on; without it one of 129 points, or few points first where there are very many strips
 */
export function weakestStrips(
  chain: ComputedChain,
  fromHz: number,
  toHz: number,
  count: number,
  given: Float64Array | null,
): Weakest {
  const grid = given ?? evenGrid(fromHz, toHz, GRID_POINTS)
  const isFew = given === null && count > MOST_ON_FULL_GRID
  const firstGrid = isFew ? evenGrid(fromHz, toHz, FEW_POINTS) : grid
  const first = stripsOver(chain, firstGrid)
  const found = Array.from({ length: count - 1 }, (_, n) => worstOf(first, n + 1, firstGrid)).sort(worstFirst)
  const mostDigitalDb = mostDigital(chain, first)
  if (!isFew) return { strips: found, grid, mostDigitalDb }
  const again = stripsOver(chain, grid)
  const looked = found
    .slice(0, LOOKED_AT_AGAIN)
    .map(({ strip }) => worstOf(again, strip, grid))
    .sort(worstFirst)
  return { strips: [...looked, ...found.slice(LOOKED_AT_AGAIN)], grid, mostDigitalDb }
}

const GOLDEN = (Math.sqrt(5) - 1) / 2
const STEPS = 40

/** The highest level between the neighbours of a grid point, by golden section; never less than what the grid had. */
export function refineInStrip(chain: ComputedChain, found: StripWorst, grid: Float64Array): StripWorst {
  let low = grid[Math.max(0, found.at - 1)]!
  let high = grid[Math.min(grid.length - 1, found.at + 1)]!
  let best = found
  for (let step = 0; step < STEPS && high - low > 1e-9 * high; step++) {
    const left = high - GOLDEN * (high - low)
    const right = low + GOLDEN * (high - low)
    const [atLeft = -Infinity, atRight = -Infinity] = stripsOver(chain, Float64Array.of(left, right)).levelDb(
      found.strip,
    )
    const isLeft = atLeft > atRight
    const levelDb = isLeft ? atLeft : atRight
    if (levelDb > best.levelDb) best = { ...best, levelDb, outputHz: isLeft ? left : right }
    if (isLeft) high = right
    else low = left
  }
  return best
}
