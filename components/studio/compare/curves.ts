import { groupDelay, magnitudeDb, phaseResponse, type AnyDigital } from '@/dsp'
import { edgesHzOf } from '@/lib/designs/outline'
import type { Side } from './figures'

/* The responses of all sides, and what the others differ from the base, on one frequency axis. */

export interface Curve {
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  readonly phaseDegrees: Float64Array
  readonly delaySeconds: Float64Array
}

/** A trace belongs to a side by the side's place. */
export interface PlacedCurve extends Curve {
  readonly place: number
}

export interface Curves {
  readonly fromHz: number
  readonly toHz: number
  /** Each up to its own fold line. */
  readonly sides: readonly PlacedCurve[]
  /** Each other side minus the base, up to the lower of their two fold lines. */
  readonly differences: readonly PlacedCurve[]
}

const points = 900
const degree = 180 / Math.PI

const foldOf = ({ spec }: Side): number => spec.sampleRateHz / 2
const edgesOf = (sides: readonly Side[]): number[] => sides.flatMap(({ spec }) => [...edgesHzOf(spec)])

/** @param sides one or more, the base first */
export function curvesOf(sides: readonly Side[]): Curves {
  const edges = edgesOf(sides)
  const toHz = Math.max(...sides.map(foldOf))
  const fromHz = Math.min(Math.min(...edges) / 15, toHz / 40)
  const [base, ...others] = sides
  return {
    fromHz,
    toHz,
    sides: sides.map((side) => ({
      place: side.place,
      ...curveOn(side.design.digital, gridUpTo(fromHz, foldOf(side), edges)),
    })),
    differences: base ? others.map((other) => differenceOf(base, other, fromHz, edges)) : [],
  }
}

function differenceOf(base: Side, other: Side, fromHz: number, edges: readonly number[]): PlacedCurve {
  const shared = gridUpTo(fromHz, Math.min(foldOf(base), foldOf(other)), edges)
  const [one, two] = [curveOn(base.design.digital, shared), curveOn(other.design.digital, shared)]
  return {
    place: other.place,
    frequenciesHz: shared,
    // Where both are −∞ there is no difference to speak of: NaN, a gap in the trace.
    magnitudeDb: minus(two.magnitudeDb, one.magnitudeDb),
    phaseDegrees: minus(two.phaseDegrees, one.phaseDegrees),
    delaySeconds: minus(two.delaySeconds, one.delaySeconds),
  }
}

function gridUpTo(fromHz: number, toHz: number, edgesHz: readonly number[]): Float64Array {
  const start = Math.min(fromHz, toHz / 2)
  const grid = Array.from({ length: points }, (_, k) => start * (toHz / start) ** (k / (points - 1)))
  grid[points - 1] = toHz
  return Float64Array.from(new Set([...grid, ...edgesHz.filter((edge) => edge > start && edge < toHz)])).sort()
}

function curveOn(filter: AnyDigital, frequenciesHz: Float64Array): Curve {
  return {
    frequenciesHz,
    magnitudeDb: magnitudeDb(filter, frequenciesHz),
    phaseDegrees: phaseResponse(filter, frequenciesHz).map((radians) => radians * degree),
    delaySeconds: groupDelay(filter, frequenciesHz),
  }
}

const minus = (other: Float64Array, one: Float64Array): Float64Array =>
  other.map((value, k) => value - (one[k] ?? Number.NaN))

export interface Values {
  readonly db: number
  readonly degrees: number
  readonly seconds: number
}

/** One row of the table of values: a side's values by its position among the sides; null above its fold line. */
export interface ValueRow {
  readonly hertz: number
  readonly values: readonly (Values | null)[]
}

/** The values at about twenty frequencies up to the highest fold line, every edge and every fold line among them. */
export function valueRows(sides: readonly Side[]): readonly ValueRow[] {
  const edges = edgesOf(sides)
  const folds = sides.map(foldOf)
  const toHz = Math.max(...folds)
  const fromHz = Math.min(Math.min(...edges) / 15, toHz / 40)
  const grid = gridUpTo(fromHz, toHz, [...edges, ...folds])
  const every = Math.floor(grid.length / 18)
  const exactly = new Set([...edges, ...folds])
  const chosen = grid.filter((hertz, k) => k % every === 0 || exactly.has(hertz))
  const columns = sides.map((side) =>
    curveOn(
      side.design.digital,
      chosen.filter((hertz) => hertz <= foldOf(side)),
    ),
  )
  return Array.from(chosen, (hertz, k) => ({
    hertz,
    values: columns.map((curve) => {
      const [db, degrees, seconds] = [curve.magnitudeDb[k], curve.phaseDegrees[k], curve.delaySeconds[k]]
      return db === undefined || degrees === undefined || seconds === undefined ? null : { db, degrees, seconds }
    }),
  }))
}
