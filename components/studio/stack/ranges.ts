import { bisectLeft } from 'd3'
import type { Span } from '@/components/plot/scale'
import { roundedUp } from '@/components/plot/ticks'
import { isFirDesign, type DesignSpec } from '@/dsp'
import { edgesHzOf, highestEdgeHz, responseOf } from '@/lib/designs/outline'
import type { StackView, Trace } from '../view'
import type { PlotId } from './props'

/*
 * What each plot shows upwards and downwards. Only the analog prototype and the stated version have a say: a version that strays may
 * leave the plot, so that it can't flatten the others.
 */

export type Ranges = Readonly<Record<PlotId, Span>>

const DEGREES = 180 / Math.PI

/** Frequencies that the design lets through, lowest first. */
export function passBands(spec: DesignSpec): readonly Span[] {
  if (isFirDesign(spec))
    return spec.fir.bands.filter(({ gain }) => gain !== 0).map(({ fromHz, toHz }): Span => [fromHz, toHz])
  const [first = 0, second = first] = edgesHzOf(spec)
  switch (responseOf(spec)) {
    default:
      return [[0, second]]
    case 'lowpass':
      return [[0, first]]
    case 'highpass':
      return [[first, Number.POSITIVE_INFINITY]]
    case 'bandpass':
      return [[first, second]]
    case 'bandstop':
      return [
        [0, first],
        [second, Number.POSITIVE_INFINITY],
      ]
  }
}

/** Least and most finite value of a curve over the given bands; null when none lies there. Frequencies rise. */
function extremes(frequenciesHz: Float64Array, values: Float64Array, bands: readonly Span[]): Span | null {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (const [from, to] of bands) {
    for (let i = bisectLeft(frequenciesHz, from); i < frequenciesHz.length; i++) {
      if ((frequenciesHz[i] ?? Number.NaN) > to) break
      const value = values[i] ?? Number.NaN
      if (!Number.isFinite(value)) continue
      if (value < low) low = value
      if (value > high) high = value
    }
  }
  return low <= high ? [low, high] : null
}

const joined = (spans: readonly (Span | null)[]): Span | null =>
  spans.reduce<Span | null>(
    (sum, span) => (!span ? sum : !sum ? span : [Math.min(sum[0], span[0]), Math.max(sum[1], span[1])]),
    null,
  )

export function autoRanges(spec: DesignSpec, traces: readonly Trace[], view: StackView): Ranges {
  const telling = traces.filter((trace) => trace.id === 'analog' || trace.id === 'candidate' || trace.stated)
  const seen: readonly Span[] = [[view.fromHz, view.toHz]]
  const seenPass = passBands(spec).map(([from, to]): Span => [Math.max(from, view.fromHz), Math.min(to, view.toHz)])
  return {
    magnitude: magnitudeRange(
      joined(telling.map((trace) => extremes(trace.frequenciesHz, trace.magnitudeDb, seen))),
      view,
    ),
    phase: phaseRange(joined(telling.map((trace) => extremes(trace.frequenciesHz, trace.phaseRadians, seen))), view),
    'group-delay': delayRange(
      joined(telling.map((trace) => extremes(trace.frequenciesHz, trace.groupDelaySeconds, seenPass))),
    ),
    departure: departureRange(spec, telling, passBands(spec), view.departureUnit),
  }
}

/** From the floor to a little above the highest of both curves. */
function magnitudeRange(found: Span | null, view: StackView): Span {
  const floor = Math.min(view.magnitudeFloorDb, -1)
  // A close look at the pass band keeps its proportions; elsewhere the highest of the curves must find room.
  if (floor > -6) return [floor, -floor / 2]
  const headroom = Math.max(Math.abs(floor) / 10, 6)
  const highest = found ? Math.min(Math.ceil((found[1] + 1) / 6) * 6, 240) : 0
  return [floor, Math.max(headroom, highest)]
}

function phaseRange(found: Span | null, view: StackView): Span {
  if (!view.unwrapped) return [-200, 200]
  if (!found) return [-200, 20]
  const low = Math.min(0, found[0] * DEGREES)
  const high = Math.max(0, found[1] * DEGREES)
  const room = Math.max((high - low) * 0.06, 6)
  return [low - room, high + room]
}

function delayRange(found: Span | null): Span {
  if (!found) return [0, 1e-3]
  const high = roundedUp(Math.max(found[1], 1e-12) * 1.08)
  return [found[0] < 0 ? -roundedUp(-found[0] * 1.08) : 0, high]
}

/** What a degree of phase at `hz` is as a phase delay, in microseconds. */
export const microsecondsOf = (degrees: number, hz: number): number => (degrees / 360 / hz) * 1e6

/** Symmetrical, and a whole multiple of the budget where there is one in that unit. */
function departureRange(
  spec: DesignSpec,
  telling: readonly Trace[],
  bands: readonly Span[],
  unit: StackView['departureUnit'],
): Span {
  let most = 0
  for (const trace of telling) {
    if (!trace.departure) continue
    const found = extremes(trace.frequenciesHz, trace.departure[unit], bands)
    if (found) most = Math.max(most, -found[0], found[1])
  }
  const reach = departureReach(spec, unit, most)
  return [-reach, reach]
}

function departureReach(spec: DesignSpec, unit: StackView['departureUnit'], most: number): number {
  if (unit === 'microseconds') {
    return roundedUp(Math.max(most * 1.1, 3 * microsecondsOf(spec.budget.phaseDegrees, highestEdgeHz(spec))))
  }
  const budget = unit === 'db' ? spec.budget.magnitudeDb : spec.budget.phaseDegrees
  const parts = Math.max(3, (most * 1.1) / budget)
  return roundedUp(parts) * budget
}

/** While a drag lasts the ranges only grow, so that the paper stands still under the hand. */
export const grownRanges = (held: Ranges, now: Ranges): Ranges => {
  const grow = (plot: PlotId): Span => [Math.min(held[plot][0], now[plot][0]), Math.max(held[plot][1], now[plot][1])]
  return {
    magnitude: grow('magnitude'),
    phase: grow('phase'),
    'group-delay': grow('group-delay'),
    departure: grow('departure'),
  }
}
