import type { Curve } from '../requirements/extremes'
import type { ComputedChain } from './chain'
import { stripsOver } from './strips'
import { evenGrid, FEW_POINTS, mostAboveDb, mostDigital, MOST_ON_FULL_GRID, STRIDE } from './weakest'

/** The strongest strips at one place, strongest first. */
interface Front {
  readonly strips: number[]
  readonly levels: number[]
}

const STRONGEST_AT_EACH = 4
const PLACES = 17

function take({ strips, levels }: Front, strip: number, level: number): void {
  let at = levels.length
  while (at > 0 && levels[at - 1]! < level) at -= 1
  if (at >= STRONGEST_AT_EACH) return
  strips.splice(at, 0, strip)
  levels.splice(at, 0, level)
  strips.length = Math.min(strips.length, STRONGEST_AT_EACH)
  levels.length = Math.min(levels.length, STRONGEST_AT_EACH)
}

/** Strips that are among the strongest somewhere in a band; those above which the analog parts bound lower are not looked at. */
function foremost(chain: ComputedChain, fromHz: number, toHz: number, count: number): Set<number> {
  const places = evenGrid(fromHz, toHz, count > MOST_ON_FULL_GRID ? FEW_POINTS : PLACES)
  const over = stripsOver(chain, places)
  const fronts = Array.from(places, (): Front => ({ strips: [], levels: [] }))
  let digitalDb: number | null = null
  for (let strip = 1; strip < count; strip++) {
    over.levelDb(strip).forEach((level, n) => take(fronts[n]!, strip, level))
    if (strip % STRIDE !== 0) continue
    digitalDb ??= mostDigital(chain, over)
    const bound = mostAboveDb(chain, strip) + digitalDb
    // A place where nothing lands at all says nothing.
    if (fronts.every(({ levels }) => levels.at(-1) === -Infinity || bound < levels.at(-1)!)) break
  }
  return new Set(fronts.flatMap(({ strips }) => strips))
}

/**
 * The level of the strongest image over output frequencies of a band, from the strips that are among the four strongest at any of a few places
 * in it.
 *
 * @param count strips looked at, the base band included
 */
export function strongestImage(chain: ComputedChain, fromHz: number, toHz: number, count: number): Curve {
  const strips = foremost(chain, fromHz, toHz, count)
  return (at) => {
    const over = stripsOver(chain, at)
    const most = new Float64Array(at.length).fill(-Infinity)
    for (const strip of strips) {
      over.levelDb(strip).forEach((level, n) => {
        if (level > most[n]!) most[n] = level
      })
    }
    return most
  }
}
