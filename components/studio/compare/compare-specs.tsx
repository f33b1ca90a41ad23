'use client'

import { useMemo, useRef, useState } from 'react'
import { DesignError, type DesignSpec } from '@/dsp'
import { Notice } from '@/components/ui/notice'
import { changedParts } from '@/lib/designs/statement-changes'
import { formatDegrees, formatFixed, formatHz, formatSeconds } from '@/lib/format/quantity'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { DataTable, ScrollRegion } from '../panels/chart/data-table'
import { PlotSheet } from '../panels/chart/plot-sheet'
import { useWidth } from '../stack/use-width'
import { curvesOf, valueRows } from './curves'
import { figureRows, sideOf, type Side } from './figures'
import { MarkedStatement } from './marked-statement'
import { overlayScene, type DifferenceUnit } from './overlay-scene'
import { SideSwatch } from './side-swatch'

export interface ComparedSpec {
  readonly label: string
  readonly spec: DesignSpec
}

/**
 * Two specs beside each other: the later statement with its changed words marked, the responses overlaid with their difference, and the
 * figures that follow. `left` is the earlier one; differences are right minus left.
 */
export function CompareSpecs({ left, right }: { left: ComparedSpec; right: ComparedSpec }) {
  const changed = useMemo(() => changedParts(left.spec, right.spec), [left.spec, right.spec])
  const sides = useMemo(() => computed(left, right), [left, right])
  return (
    <div className="flex min-w-0 flex-col gap-4">
      <div>
        <p className="font-heading text-[20px] leading-snug">
          <MarkedStatement before={left.spec} after={right.spec} />
        </p>
        <p className="mt-1 text-[14px] text-pencil">
          {changed.length === 0 ? (
            'Both state the same design.'
          ) : (
            <>
              Changed: <strong className="text-ink">{changed.join(', ')}</strong>
            </>
          )}
        </p>
      </div>
      {'refused' in sides ? (
        <Notice kind="caution">{sides.refused}</Notice>
      ) : (
        <>
          <FiguresTable left={sides.left} right={sides.right} />
          <Overlay left={sides.left} right={sides.right} />
        </>
      )}
    </div>
  )
}

function computed(left: ComparedSpec, right: ComparedSpec): { left: Side; right: Side } | { refused: string } {
  const sides: Side[] = []
  for (const compared of [left, right]) {
    try {
      sides.push(sideOf(compared))
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
      return { refused: `${compared.label} makes no filter with this engine: ${error.message}` }
    }
  }
  const [one, other] = sides
  return one && other ? { left: one, right: other } : { refused: 'Nothing to compare.' }
}

function FiguresTable({ left, right }: { left: Side; right: Side }) {
  const rows = useMemo(() => figureRows(left, right), [left, right])
  return (
    <ScrollRegion label="Figures of both">
      <table className="w-full max-w-3xl border-t border-graph-strong text-[14px]">
        <thead>
          <tr className="text-left text-[13px] text-pencil">
            <th scope="col" className="py-1 pr-3 font-normal">
              Figure
            </th>
            <th scope="col" className="px-3 py-1 text-right font-normal">
              {left.label}
            </th>
            <th scope="col" className="px-3 py-1 text-right font-normal">
              {right.label}
            </th>
            <th scope="col" className="py-1 pl-3 text-right font-normal">
              Change
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.name} className="border-t border-graph">
              <th scope="row" className="py-1 pr-3 text-left font-normal">
                {row.name}
              </th>
              <td className="numeric px-3 py-1 text-right text-[13px]">{row.left}</td>
              <td className="numeric px-3 py-1 text-right text-[13px]">
                {row.differs ? <mark className="bg-spruce-wash font-semibold text-ink">{row.right}</mark> : row.right}
              </td>
              <td className="numeric py-1 pl-3 text-right text-[13px] text-pencil">
                {row.differs ? row.change || 'differs' : 'same'}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

const units = [
  { value: 'db', label: 'dB' },
  { value: 'degrees', label: '°' },
  { value: 'microseconds', label: 'µs' },
] as const

function Overlay({ left, right }: { left: Side; right: Side }) {
  const [unit, setUnit] = useState<DifferenceUnit>('db')
  const place = useRef<HTMLDivElement>(null)
  const width = useWidth(place)
  const curves = useMemo(() => curvesOf(left, right), [left, right])
  const folds = { left: left.spec.sampleRateHz / 2, right: right.spec.sampleRateHz / 2 }
  const scene = useMemo(
    () => overlayScene(curves, { left: folds.left, right: folds.right }, unit, width),
    [curves, folds.left, folds.right, unit, width],
  )
  return (
    <section aria-label="Responses overlaid" className="flex min-w-0 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-1 text-[13px]">
        <span className="flex items-center gap-2">
          <SideSwatch side="left" /> {left.label}
        </span>
        <span className="flex items-center gap-2">
          <SideSwatch side="right" /> {right.label}
        </span>
        <ChoiceGroup legend="Difference in" inline choices={units} value={unit} onChange={(next) => setUnit(next)} />
      </div>
      <div
        ref={place}
        className="overflow-hidden"
        role="img"
        aria-label={`Magnitude, phase and group delay of ${left.label} and ${right.label}, and their difference, over frequency; the values are in the table below`}
      >
        <PlotSheet scene={scene} />
      </div>
      <DataTable
        summary="Values of the plots"
        columns={[
          'frequency',
          `${left.label}, dB`,
          `${right.label}, dB`,
          'difference, dB',
          `${left.label}, °`,
          `${right.label}, °`,
          'difference, °',
          `${left.label}, delay`,
          `${right.label}, delay`,
          'difference, µs',
        ]}
        rows={() =>
          valueRows(left, right).map(({ hertz, left: one, right: other }) => [
            formatHz(hertz, 4),
            formatFixed(one[0], 3),
            formatFixed(other[0], 3),
            formatFixed(other[0] - one[0], 3),
            formatDegrees(one[1], 2),
            formatDegrees(other[1], 2),
            formatDegrees(other[1] - one[1], 2),
            formatSeconds(one[2], 4),
            formatSeconds(other[2], 4),
            formatFixed((other[2] - one[2]) * 1e6, 2),
          ])
        }
      />
    </section>
  )
}
