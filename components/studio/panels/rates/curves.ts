import type { DepartureBudget } from '@/dsp'
import type { Span } from '@/components/plot/scale'
import { departureUnits, type DepartureUnit, type RateCurve } from './questions'

/** Of a curve between its points, on the straight line of the logarithmic plot; NaN beside its ends and where the method refuses. */
export function interpolated(curve: RateCurve, unit: DepartureUnit, rateHz: number): number {
  const { ratesHz } = curve
  const values = curve[unit]
  const after = ratesHz.findIndex((hertz) => hertz >= rateHz)
  const right = values[after] ?? Number.NaN
  const rightHz = ratesHz[after] ?? Number.NaN
  if (after <= 0) return rightHz === rateHz ? right : Number.NaN
  const left = values[after - 1] ?? Number.NaN
  const leftHz = ratesHz[after - 1] ?? Number.NaN
  const part = Math.log(rateHz / leftHz) / Math.log(rightHz / leftHz)
  // A departure of exactly 0 has no logarithm.
  return left > 0 && right > 0 ? left * (right / left) ** part : left + (right - left) * part
}

/** The budget in the plot's unit: degrees at the highest judged frequency are so many microseconds there. */
export function limitIn(unit: DepartureUnit, budget: DepartureBudget, upToHz: number): number {
  if (unit === 'db') return budget.magnitudeDb
  return unit === 'degrees' ? budget.phaseDegrees : (budget.phaseDegrees / 360 / upToHz) * 1e6
}

/** The budget with its limit in that unit moved. */
export function withLimit(
  budget: DepartureBudget,
  unit: DepartureUnit,
  limit: number,
  upToHz: number,
): DepartureBudget {
  if (unit === 'db') return { ...budget, magnitudeDb: limit }
  return { ...budget, phaseDegrees: unit === 'degrees' ? limit : limit * 1e-6 * 360 * upToHz }
}

/** Decades around the limit that are worth seeing, and no more than the curves fill. */
const DECADES_BELOW = 3
const DECADES_ABOVE = 3

export function levelSpan(curves: readonly RateCurve[], unit: DepartureUnit, limit: number): Span {
  let low = limit
  let high = limit
  for (const curve of curves) {
    for (const value of curve[unit]) {
      if (!(value > 0)) continue
      low = Math.min(low, value)
      high = Math.max(high, value)
    }
  }
  const nearest = Math.round(Math.log10(limit))
  const from = Math.max(Math.floor(Math.log10(low)), nearest - DECADES_BELOW)
  const to = Math.min(Math.ceil(Math.log10(high)), nearest + DECADES_ABOVE)
  return [10 ** Math.min(from, Math.floor(Math.log10(limit)) - 1), 10 ** Math.max(to, Math.ceil(Math.log10(limit)) + 1)]
}

/** Curves in pieces, put together along the rates. */
export function joined(pieces: readonly (readonly RateCurve[])[]): readonly RateCurve[] {
  const [first] = pieces
  if (!first) return []
  return first.map(({ id }, index) => {
    const parts = pieces.flatMap((piece) => piece[index] ?? [])
    const all = (key: DepartureUnit | 'ratesHz') => Float64Array.from(parts.flatMap((part) => [...part[key]]))
    const [db, degrees, microseconds] = departureUnits.map(all)
    const none = new Float64Array(0)
    return { id, ratesHz: all('ratesHz'), db: db ?? none, degrees: degrees ?? none, microseconds: microseconds ?? none }
  })
}
