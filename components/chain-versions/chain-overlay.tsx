'use client'

import { useMemo, useRef, useState } from 'react'
import { ChoiceGroup } from '@/components/handover/choice-group'
import type { Curves } from '@/components/studio/compare/curves'
import { overlayScene, type DifferenceUnit } from '@/components/studio/compare/overlay-scene'
import { SideSwatch } from '@/components/studio/compare/side-swatch'
import { DataTable } from '@/components/studio/panels/chart/data-table'
import { PlotSheet } from '@/components/studio/panels/chart/plot-sheet'
import { useOnPage } from '@/components/ui/use-on-page'
import { useWidth } from '@/components/studio/stack/use-width'
import type { ChainSpec } from '@/dsp'
import { formatDegrees, formatFixed, formatHz, formatSeconds } from '@/lib/format/quantity'
import { chainCurves } from './chain-curves'

const units = [
  { value: 'db', label: 'dB' },
  { value: 'degrees', label: '°' },
  { value: 'microseconds', label: 'µs' },
] as const

const TABLE_ROWS = 24

/** The responses of two versions of a chain over each other, computed on the page, where their values are shown to the last digit. */
export function ChainOverlay({
  left,
  right,
  labels,
}: {
  left: ChainSpec
  right: ChainSpec
  labels: readonly [string, string]
}) {
  const isOnPage = useOnPage()
  const curves = useMemo(() => (isOnPage ? chainCurves(left, right) : 'not yet'), [isOnPage, left, right])
  if (curves === 'not yet') return <p className="text-[14px] text-pencil">Computing both responses…</p>
  if (curves === null)
    return (
      <p className="text-[14px] text-pencil">
        This engine can’t compute one of the two any more, so that their responses can’t be drawn.
      </p>
    )
  return <Plots curves={curves} labels={labels} />
}

/** The responses, the difference under them, and the table of what is plotted. */
function Plots({ curves, labels }: { curves: Curves; labels: readonly [string, string] }) {
  const [unit, setUnit] = useState<DifferenceUnit>('db')
  const place = useRef<HTMLDivElement>(null)
  const width = useWidth(place)
  const [base, other] = labels
  const scene = useMemo(() => overlayScene(curves, { unit, base }, width), [curves, unit, base, width])
  return (
    <div className="flex min-w-0 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-1 text-[13px]">
        {labels.map((label, at) => (
          <span key={at} className="flex items-center gap-2">
            <SideSwatch place={at} /> {label}
          </span>
        ))}
        <ChoiceGroup
          legend={`Difference from ${base} in`}
          inline
          choices={units}
          value={unit}
          onChange={(next) => setUnit(next)}
        />
      </div>
      <div
        ref={place}
        className="overflow-hidden"
        role="img"
        aria-label={`Magnitude, phase and group delay of ${base} and ${other} from the sensor to the stored sample, and their difference, over frequency; the values are in the table below`}
      >
        <PlotSheet scene={scene} />
      </div>
      <DataTable
        summary="Values of the plots"
        columns={['version', 'frequency', 'magnitude, dB', 'phase, °', 'delay']}
        rows={() => tableRows(curves, labels)}
      />
    </div>
  )
}

function tableRows({ sides }: Curves, labels: readonly [string, string]) {
  return sides.flatMap((curve, at) => {
    const { length } = curve.frequenciesHz
    const rows = Math.min(TABLE_ROWS, length)
    return Array.from({ length: rows }, (_, row) => {
      const k = Math.round((row * (length - 1)) / (rows - 1))
      const value = (of: Float64Array) => of[k] ?? Number.NaN
      return [
        labels[at] ?? '',
        formatHz(value(curve.frequenciesHz), 4),
        formatFixed(value(curve.magnitudeDb), 3),
        formatDegrees(value(curve.phaseDegrees), 2),
        formatSeconds(value(curve.delaySeconds), 4),
      ]
    })
  })
}
