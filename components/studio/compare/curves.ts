import { groupDelay, magnitudeDb, phaseResponse, type DigitalFilter } from '@/dsp'
import type { Side } from './figures'

/* The two responses and their difference on one frequency axis. */

export interface Curve {
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  readonly phaseDegrees: Float64Array
  readonly delaySeconds: Float64Array
}

export interface Curves {
  readonly fromHz: number
  readonly toHz: number
  readonly left: Curve
  readonly right: Curve
  /** Right minus left, up to the lower of the two fold lines. */
  readonly difference: Curve
}

const points = 900
const degree = 180 / Math.PI

export function curvesOf(left: Side, right: Side): Curves {
  const edges = [...left.spec.analog.edgesHz, ...right.spec.analog.edgesHz]
  const folds = [left.spec.sampleRateHz / 2, right.spec.sampleRateHz / 2]
  const toHz = Math.max(...folds)
  const fromHz = Math.min(Math.min(...edges) / 15, toHz / 40)
  const shared = gridUpTo(fromHz, Math.min(...folds), edges)
  const one = curveOn(left.design.digital, shared)
  const other = curveOn(right.design.digital, shared)
  return {
    fromHz,
    toHz,
    left: curveOn(left.design.digital, gridUpTo(fromHz, left.spec.sampleRateHz / 2, edges)),
    right: curveOn(right.design.digital, gridUpTo(fromHz, right.spec.sampleRateHz / 2, edges)),
    difference: {
      frequenciesHz: shared,
      // Where both are −∞ there is no difference to speak of: NaN, a gap in the trace.
      magnitudeDb: minus(other.magnitudeDb, one.magnitudeDb),
      phaseDegrees: minus(other.phaseDegrees, one.phaseDegrees),
      delaySeconds: minus(other.delaySeconds, one.delaySeconds),
    },
  }
}

function gridUpTo(fromHz: number, toHz: number, edgesHz: readonly number[]): Float64Array {
  const start = Math.min(fromHz, toHz / 2)
  const grid = Array.from({ length: points }, (_, k) => start * (toHz / start) ** (k / (points - 1)))
  grid[points - 1] = toHz
  return Float64Array.from([...grid, ...edgesHz.filter((edge) => edge > start && edge < toHz)]).sort()
}

function curveOn(filter: DigitalFilter, frequenciesHz: Float64Array): Curve {
  return {
    frequenciesHz,
    magnitudeDb: magnitudeDb(filter, frequenciesHz),
    phaseDegrees: phaseResponse(filter, frequenciesHz).map((radians) => radians * degree),
    delaySeconds: groupDelay(filter, frequenciesHz),
  }
}

const minus = (other: Float64Array, one: Float64Array): Float64Array =>
  other.map((value, k) => value - (one[k] ?? Number.NaN))

/** One row of the table of values. */
export interface ValueRow {
  readonly hertz: number
  readonly left: readonly [db: number, degrees: number, seconds: number]
  readonly right: readonly [db: number, degrees: number, seconds: number]
}

/** The values at about twenty frequencies of the shared band, the edges among them. */
export function valueRows(left: Side, right: Side): readonly ValueRow[] {
  const { difference } = curvesOf(left, right)
  const every = Math.floor(difference.frequenciesHz.length / 18)
  const edges = new Set([...left.spec.analog.edgesHz, ...right.spec.analog.edgesHz])
  const chosen = difference.frequenciesHz.filter((hertz, k) => k % every === 0 || edges.has(hertz))
  const one = curveOn(left.design.digital, chosen)
  const other = curveOn(right.design.digital, chosen)
  const at = (curve: Curve, k: number) =>
    [
      curve.magnitudeDb[k] ?? Number.NaN,
      curve.phaseDegrees[k] ?? Number.NaN,
      curve.delaySeconds[k] ?? Number.NaN,
    ] as const
  return Array.from(chosen, (hertz, k) => ({ hertz, left: at(one, k), right: at(other, k) }))
}
