import { useMemo } from 'react'
import type { Ground } from '@/components/plot/ground'
import type { DesignSpec, RequirementSheet } from '@/dsp'
import type { PlotId } from '../stack/props'
import type { Trace } from '../view'
import { leastDrawnDelay, readsDelay, sheetGrounds, type GroundView } from './sheet-grounds'

const noSheet: RequirementSheet = []
const noTraces: readonly Trace[] = []

/** The sheet's grounds, the same object until the sheet, the unit or – for a delay spread – the curves change: a pointer repaints nothing. */
export function useSheetGrounds(
  spec: DesignSpec,
  { departureUnit, removeDelay }: GroundView,
  traces: readonly Trace[],
): readonly Ground<PlotId>[] {
  const sheet = spec.sheet ?? noSheet
  const read = readsDelay(sheet) ? traces : noTraces
  return useMemo(
    () => sheetGrounds(sheet, { departureUnit, removeDelay }, (fromHz, toHz) => leastDrawnDelay(read, fromHz, toHz)),
    [sheet, departureUnit, removeDelay, read],
  )
}
