import { bisectLeft } from 'd3'
import type { Ground } from '@/components/plot/ground'
import type { Requirement, RequirementSheet } from '@/dsp'
import type { PlotId } from '../stack/props'
import type { StackView, Trace } from '../view'

/* Where a requirement sheet forbids a curve to go, as hatched ground on the plots. */

/** A tone has no width of its own; its ground reaches this part to either side. */
const TONE_HALF_WIDTH = 0.01

type Limit = Omit<Ground<PlotId>, 'kind' | 'plot'>

const over = (plot: PlotId, fromHz: number, toHz: number, fromY: number): Ground<PlotId> =>
  ground(plot, { fromHz, toHz, fromY, toY: Number.POSITIVE_INFINITY })

const under = (plot: PlotId, fromHz: number, toHz: number, toY: number): Ground<PlotId> =>
  ground(plot, { fromHz, toHz, fromY: Number.NEGATIVE_INFINITY, toY })

/** From 0 Hz on, a ground reaches to the side of the plot, which on a logarithmic axis is nowhere near it. */
const ground = (plot: PlotId, limit: Limit): Ground<PlotId> => ({
  plot,
  kind: 'limit',
  ...limit,
  fromHz: limit.fromHz > 0 ? limit.fromHz : Number.NEGATIVE_INFINITY,
})

const aroundTone = (hz: number): readonly [number, number] => [hz * (1 - TONE_HALF_WIDTH), hz * (1 + TONE_HALF_WIDTH)]

export type GroundView = Pick<StackView, 'departureUnit' | 'removeDelay'>

/**
 * The grounds of a sheet. Bands and tones lie on the magnitude plot; delays on that of the group delay, where the spread stands over the
 * stated version's least delay in its band; departures show while the plot has their unit and treats delay as they do.
 */
export function sheetGrounds(
  sheet: RequirementSheet,
  view: GroundView,
  leastDelaySeconds: (fromHz: number, toHz: number) => number | null,
): readonly Ground<PlotId>[] {
  return sheet.flatMap((line) => lineGrounds(line, view, leastDelaySeconds))
}

function lineGrounds(
  line: Requirement,
  view: GroundView,
  leastDelaySeconds: (fromHz: number, toHz: number) => number | null,
): readonly Ground<PlotId>[] {
  switch (line.kind) {
    case 'pass':
      return both('magnitude', line.fromHz, line.toHz, line.withinDb)
    case 'stop':
      return [over('magnitude', line.fromHz, line.toHz ?? Number.POSITIVE_INFINITY, -line.attenuationDb)]
    case 'keep-tone':
      return both('magnitude', ...aroundTone(line.hz), line.withinDb)
    case 'lose-tone':
      return [over('magnitude', ...aroundTone(line.hz), -line.attenuationDb)]
    case 'magnitude-departure':
      return view.departureUnit === 'db' ? both('departure', 0, line.upToHz, line.withinDb) : []
    case 'phase-departure':
      return view.departureUnit === 'degrees' && view.removeDelay === line.removeDelay
        ? both('departure', 0, line.upToHz, line.withinDegrees)
        : []
    case 'delay': {
      if (line.toHz === 0) return []
      const [fromHz, toHz] = line.fromHz === line.toHz ? aroundTone(line.toHz) : [line.fromHz, line.toHz]
      return [over('group-delay', fromHz, toHz, line.atMostSeconds)]
    }
    case 'delay-spread': {
      const least = leastDelaySeconds(line.fromHz, line.toHz)
      return least === null ? [] : [over('group-delay', line.fromHz, line.toHz, least + line.atMostSeconds)]
    }
    default:
      return []
  }
}

const both = (plot: PlotId, fromHz: number, toHz: number, within: number): readonly Ground<PlotId>[] => [
  over(plot, fromHz, toHz, within),
  under(plot, fromHz, toHz, -within),
]

/** Whether a sheet's grounds depend on the curves at all: only then need they be laid anew with them. */
export const readsDelay = (sheet: RequirementSheet): boolean => sheet.some(({ kind }) => kind === 'delay-spread')

/** The least group delay that the stated version has in a band, as drawn; null where nothing of it is drawn there. */
export function leastDrawnDelay(traces: readonly Trace[], fromHz: number, toHz: number): number | null {
  const stated = traces.find((trace) => trace.stated)
  if (!stated) return null
  const { frequenciesHz, groupDelaySeconds } = stated
  let least = Number.POSITIVE_INFINITY
  for (let at = bisectLeft(frequenciesHz, fromHz); at < frequenciesHz.length; at++) {
    if ((frequenciesHz[at] ?? Number.POSITIVE_INFINITY) > toHz) break
    least = Math.min(least, groupDelaySeconds[at] ?? Number.POSITIVE_INFINITY)
  }
  return Number.isFinite(least) ? least : null
}
