import type { Filter } from '../forms/filter'
import { magnitudeDb } from './frequency'

/*
 * Where an analog filter is in use, and so where its digital version is held against it. It is in use wherever it is within 20 dB of its
 * peak: what lies deeper passes less than a hundredth of the power. A comparison begins at 0 Hz when the filter is in use there, else
 * at the low end of its pass band.
 */

export const USE_DEPTH_DB = 20
/** Half the power; a hair more, so that a corner stated there is inside. */
const PASS_DEPTH_DB = 10 * Math.log10(2) + 1e-9

export interface UseBand {
  readonly peakDb: number
  /** Where comparisons begin: 0 for low-pass and band-stop filters, the lower −3 dB point for high-pass and band-pass ones. */
  readonly fromHz: number
  /** Highest frequency in use; Infinity for high-pass and band-stop filters. */
  readonly toHz: number
}

const BISECTIONS = 60

/** Walks from a frequency in use outwards until it is out of use, and halves the last step until it is found. */
function edge(
  level: (hertz: number) => number,
  floorDb: number,
  start: number,
  firstStep: number,
  down: boolean,
): number {
  let inside = start
  let step = firstStep
  for (;;) {
    const next = down ? Math.max(inside - step, 0) : inside + step
    if (level(next) < floorDb) {
      let outside = next
      for (let round = 0; round < BISECTIONS; round++) {
        const middle = (inside + outside) / 2
        if (middle === inside || middle === outside) break
        if (level(middle) < floorDb) outside = middle
        else inside = middle
      }
      return inside
    }
    inside = next
    step *= 1.2
    if (next === 0) return 0
  }
}

function find(analog: Filter<'s'>): UseBand {
  const level = (hertz: number): number => magnitudeDb(analog, [hertz])[0]!
  const turn = 2 * Math.PI
  const sizes = analog.poles.map(({ re, im }) => Math.hypot(re, im) / turn)
  const peaks = analog.poles.filter(({ im }) => im > 0).map(({ im }) => im / turn)
  const probes = [0, ...sizes, ...peaks].sort((left, right) => left - right)
  const levels = magnitudeDb(analog, probes)
  const atInfinity = analog.zeros.length === analog.poles.length ? 20 * Math.log10(Math.abs(analog.gain)) : -Infinity
  const peakDb = levels.reduce((most, value) => Math.max(most, value), atInfinity)
  const floorDb = peakDb - USE_DEPTH_DB
  const used = probes.filter((_, i) => levels[i]! >= floorDb)
  const highest = probes[probes.length - 1]!
  const narrowest = analog.poles.reduce((least, { re }) => Math.min(least, Math.abs(re) / turn), highest || 1)
  const step = Math.max(narrowest / 4, highest * 1e-9)
  const last = used[used.length - 1] ?? highest
  const fromZero = levels[0]! >= floorDb
  const passDb = peakDb - PASS_DEPTH_DB
  const passing = probes.find((_, i) => levels[i]! >= passDb) ?? highest
  return {
    peakDb,
    fromHz: fromZero ? 0 : edge(level, passDb, passing, step, true),
    toHz: atInfinity >= floorDb ? Infinity : edge(level, floorDb, last, step, false),
  }
}

const known = new WeakMap<Filter<'s'>, UseBand>()

/** Found once for each filter. */
export function useBandOf(analog: Filter<'s'>): UseBand {
  const before = known.get(analog)
  if (before !== undefined) return before
  const fresh = find(analog)
  known.set(analog, fresh)
  return fresh
}
