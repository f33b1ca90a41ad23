'use client'

import { useMemo, useRef, useState } from 'react'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { formatDegrees, formatFixed, formatHz, formatSeconds } from '@/lib/format/quantity'
import { DataTable } from '../panels/chart/data-table'
import { PlotSheet } from '../panels/chart/plot-sheet'
import { useWidth } from '../stack/use-width'
import { curvesOf, valueRows, type Values } from './curves'
import type { Side } from './figures'
import { overlayScene, type DifferenceUnit } from './overlay-scene'
import { SideSwatch } from './side-swatch'
import { inSentence, listed } from './sides'

const units = [
  { value: 'db', label: 'dB' },
  { value: 'degrees', label: '°' },
  { value: 'microseconds', label: 'µs' },
] as const

/** The responses of all sides over each other, the others' differences from the base, and the table of what is plotted. */
export function Overlay({ sides }: { sides: readonly Side[] }) {
  const [unit, setUnit] = useState<DifferenceUnit>('db')
  const place = useRef<HTMLDivElement>(null)
  const width = useWidth(place)
  const base = sides[0]?.label ?? ''
  const curves = useMemo(() => curvesOf(sides), [sides])
  const scene = useMemo(() => overlayScene(curves, { unit, base }, width), [curves, unit, base, width])
  const names = listed(sides.map(({ label }, at) => (at === 0 ? label : inSentence(label))))
  const hasDifferences = sides.length > 1
  return (
    <section aria-label="Responses overlaid" className="flex min-w-0 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-1 text-[13px]">
        {sides.map((side) => (
          <span key={side.label} className="flex items-center gap-2">
            <SideSwatch place={side.place} /> {side.label}
          </span>
        ))}
        {hasDifferences ? (
          <ChoiceGroup
            legend={`Difference from ${inSentence(base)} in`}
            inline
            choices={units}
            value={unit}
            onChange={(next) => setUnit(next)}
          />
        ) : null}
      </div>
      <div
        ref={place}
        className="overflow-hidden"
        role="img"
        aria-label={`Magnitude, phase and group delay of ${names}${hasDifferences ? `, and the differences from ${inSentence(base)}` : ''}, over frequency; the values are in the table below`}
      >
        <PlotSheet scene={scene} />
      </div>
      <DataTable summary="Values of the plots" columns={valueColumns(sides)} rows={() => valueCells(sides)} />
    </section>
  )
}

const quantities = [
  {
    unit: 'dB',
    difference: 'dB',
    text: ({ db }: Values) => formatFixed(db, 3),
    minus: (other: Values, base: Values) => formatFixed(other.db - base.db, 3),
  },
  {
    unit: '°',
    difference: '°',
    text: ({ degrees }: Values) => formatDegrees(degrees, 2),
    minus: (other: Values, base: Values) => formatDegrees(other.degrees - base.degrees, 2),
  },
  {
    unit: 'delay',
    difference: 'µs',
    text: ({ seconds }: Values) => formatSeconds(seconds, 4),
    minus: (other: Values, base: Values) => formatFixed((other.seconds - base.seconds) * 1e6, 2),
  },
] as const

export function valueColumns(sides: readonly Side[]): readonly string[] {
  const [base, ...others] = sides
  return [
    'frequency',
    ...quantities.flatMap(({ unit, difference }) => [
      ...sides.map(({ label }) => `${label}, ${unit}`),
      ...others.map(({ label }) => `${label} minus ${inSentence(base?.label ?? '')}, ${difference}`),
    ]),
  ]
}

/** The rows under these columns; "—" above a side's fold line. */
export const valueCells = (sides: readonly Side[]): readonly (readonly string[])[] =>
  valueRows(sides).map(({ hertz, values }) => {
    const [base, ...others] = values
    return [
      formatHz(hertz, 4),
      ...quantities.flatMap(({ text, minus }) => [
        ...values.map((value) => (value ? text(value) : '—')),
        ...others.map((other) => (base && other ? minus(other, base) : '—')),
      ]),
    ]
  })
