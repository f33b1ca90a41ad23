import { firBandMagnitudes } from '../fir/band-magnitudes'
import { undescribed } from '../fir/design-fir'
import type { RequirementSheet } from '../requirements/requirement'
import type { FirSpec } from '../spec'

/*
 * Where to cut a windowed FIR filter of so many taps, and which attenuation to give a window that has one. Its pass and stop errors are not
 * equally far from what their lines allow when it is cut in the middle of the room; so the cut slides to where they are, for each of some
 * attenuations. Judged by the magnitude over the lines' own bands; whoever uses what is found judges it in full.
 */

/** What a windowed filter is made with, beside its taps. */
export interface WindowSetting {
  /** −1 to 1: how far the bands reach into the room between them, those of what is lost (above 0) or those of what is kept. */
  readonly part: number
  readonly attenuationDb: number
}

interface Fit extends WindowSetting {
  /** Decibels by which the worst line's error is larger than allowed; below 0 when all hold. */
  readonly overDb: number
}

/** Bands of the magnitude lines; a tone is a band without width. */
interface LevelLine {
  readonly isKept: boolean
  readonly fromHz: number
  readonly toHz: number
  readonly db: number
}

export function levelLinesOf(sheet: RequirementSheet, sampleRateHz: number): LevelLine[] {
  return sheet.flatMap((line): LevelLine[] => {
    if (line.kind === 'pass') return [{ isKept: true, fromHz: line.fromHz, toHz: line.toHz, db: line.withinDb }]
    if (line.kind === 'keep-tone') return [{ isKept: true, fromHz: line.hz, toHz: line.hz, db: line.withinDb }]
    if (line.kind === 'lose-tone') return [{ isKept: false, fromHz: line.hz, toHz: line.hz, db: line.attenuationDb }]
    if (line.kind !== 'stop') return []
    return [{ isKept: false, fromHz: line.fromHz, toHz: line.toHz ?? sampleRateHz / 2, db: line.attenuationDb }]
  })
}

/** Room that ends the search, in dB of the error. */
const ENOUGH_DB = -0.002
/** Pass and stop errors this equally far from what is allowed are in balance. */
const BALANCED_DB = 0.05
const MOST_CUTS = 10
/**
 * Attenuations looked at, from so much below to so much above what the lines need. A Dolph–Chebyshev window's is that of its own side lobes,
 * which a filter made with it goes far below.
 */
const RANGE_DB = { kaiser: [-4, 12], 'dolph-chebyshev': [-24, 6] } as const
const COARSE_DB = 2
const FINE_DB = [1, 0.5, 0.25] as const
/** From what came nearest with a similar number of taps the best is mostly not far; where this much is missing, no other helps. */
const FINE_FROM_HINT_DB = [1, 0.5] as const
const HOPELESS_DB = 6

export interface WindowSearch {
  readonly lines: readonly LevelLine[]
  readonly sampleRateHz: number
  /** What the lines need. */
  readonly attenuationDb: number
  readonly specOf: (setting: WindowSetting) => FirSpec
}

/** Errors of what is kept and what is lost, in dB of what is allowed. */
function errorsOf({ lines, sampleRateHz, specOf }: WindowSearch, setting: WindowSetting): readonly [number, number] {
  const found = firBandMagnitudes(undescribed(specOf(setting), sampleRateHz), lines)
  let [kept, lost] = [-Infinity, -Infinity]
  lines.forEach(({ isKept, db }, index) => {
    const { least, most } = found[index]!
    const mostDb = 20 * Math.log10(most)
    if (!isKept) lost = Math.max(lost, mostDb + db)
    else kept = Math.max(kept, 20 * Math.log10(Math.max(-20 * Math.log10(least), mostDb) / db))
  })
  return [kept, lost]
}

/** The best cut for an attenuation; no better than `than` where it can't beat that. */
function bestCut(search: WindowSearch, attenuationDb: number, than: number, first: number): Fit {
  let [inner, outer] = [1, -1]
  let best: Fit = { part: 0, attenuationDb, overDb: Infinity }
  for (let round = 0; round < MOST_CUTS; round++) {
    const part = round === 0 ? first : (inner + outer) / 2
    const [kept, lost] = errorsOf(search, { part, attenuationDb })
    const overDb = Math.max(kept, lost)
    if (overDb < best.overDb) best = { part, attenuationDb, overDb }
    // One error falls and the other grows as the cut slides: the lesser of the two is a bound for every cut.
    if (overDb <= ENOUGH_DB || Math.abs(kept - lost) <= BALANCED_DB || Math.min(kept, lost) >= than) break
    if (kept > lost) inner = part
    else outer = part
  }
  return best
}

/**
 * The setting with which a windowed filter of a given number of taps comes nearest to the magnitude lines, or the first that holds them.
 *
 * @param search whose `specOf` gives the statement of a setting
 * @param hint what came nearest with a similar number of taps
 */
export function fitWindow(search: WindowSearch, hint?: WindowSetting): WindowSetting {
  const { window } = search.specOf({ part: 0, attenuationDb: search.attenuationDb })
  const from = hint?.attenuationDb ?? search.attenuationDb
  let best = bestCut(search, from, Infinity, hint?.part ?? 0)
  if (window !== 'kaiser' && window !== 'dolph-chebyshev') return best
  const look = (attenuationDb: number): void => {
    if (best.overDb <= ENOUGH_DB || !(attenuationDb >= LEAST_ATTENUATION_DB)) return
    const found = bestCut(search, attenuationDb, best.overDb, best.part)
    if (found.overDb < best.overDb) best = found
  }
  const closeIn = (steps: readonly number[]): void => {
    for (const step of steps) {
      const middle = best.attenuationDb
      look(middle - step)
      look(middle + step)
    }
  }
  if (hint !== undefined) closeIn(FINE_FROM_HINT_DB)
  if (hint !== undefined && best.overDb > HOPELESS_DB) return best
  const [below, above] = RANGE_DB[window]
  for (let db = below; db <= above; db += COARSE_DB) look(search.attenuationDb + db)
  closeIn(FINE_DB)
  return best
}

/** A window's own limit is 5 dB; below this it's of no use. */
const LEAST_ATTENUATION_DB = 10
