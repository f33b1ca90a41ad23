'use client'

import { useMemo, useState } from 'react'
import type { Span } from '@/components/plot/scale'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { DataTable } from '@/components/studio/panels/chart/data-table'
import { useOnPage } from '@/components/ui/use-on-page'
import { delayUnit } from '@/components/studio/stack/paint-plan'
import type { ChainRequirement } from '@/dsp'
import { formatDb, formatDegrees, formatHz, formatSeconds } from '@/lib/format/quantity'
import { spanOf, type LinesPlan } from './chart/lines-picture'
import { LinesPlot } from './chart/lines-plot'
import type { ChainPanelProps } from './props'
import { responseCurves, responseSpan, type ResponseCurves } from './response-curves'

export const responseViews = [
  { value: 'magnitude', label: 'magnitude' },
  { value: 'phase', label: 'phase' },
  { value: 'departure', label: 'departure from linear phase' },
  { value: 'delay', label: 'group delay' },
] as const
export type ResponseView = (typeof responseViews)[number]['value']

/** Magnitude, phase and delay from the sensor to the stored sample, with the kept band shaded. */
export function ResponsePanel(props: ChainPanelProps) {
  return useOnPage() ? <Response {...props} /> : null
}

function Response({ chain }: ChainPanelProps) {
  const [view, setView] = useState<ResponseView>('magnitude')
  const curves = useMemo(() => responseCurves(chain), [chain])
  const { sheet, kept } = chain.spec
  const plan = useMemo(
    () => responsePlan(view, curves, responseSpan(chain), [kept.fromHz, kept.toHz], sheet),
    [view, curves, chain, kept, sheet],
  )
  return (
    <div className="flex min-w-0 flex-col gap-2">
      <ChoiceGroup legend="Show" inline choices={responseViews} value={view} onChange={(next) => setView(next)} />
      <LinesPlot plan={plan} writeValue={(value) => writtenIn(view, value)} />
      <p className="text-[13px] text-pencil">
        From the sensor to the stored sample; {formatHz(kept.fromHz)} to {formatHz(kept.toHz)} is kept.
        {view === 'departure'
          ? ` A constant delay of ${formatSeconds(curves.removedDelaySeconds, 4)} is removed, which best explains the phase in the kept band.`
          : ''}
      </p>
      <DataTable
        summary="Values as a table"
        columns={['frequency', 'magnitude', 'phase', 'departure', 'group delay']}
        rows={() => responseRows(curves)}
      />
    </div>
  )
}

export function writtenIn(view: ResponseView, value: number): string {
  switch (view) {
    case 'magnitude':
      return formatDb(value, 3)
    case 'phase':
      return formatDegrees(value, 2)
    case 'departure':
      return formatDegrees(value, 3)
    case 'delay':
      return formatSeconds(value, 4)
  }
}

export function responsePlan(
  view: ResponseView,
  curves: ResponseCurves,
  span: Span,
  kept: Span,
  sheet: readonly ChainRequirement[],
): LinesPlan {
  const values = {
    magnitude: curves.magnitudeDb,
    phase: curves.phaseDegrees,
    departure: curves.departureDegrees,
    delay: curves.groupDelaySeconds,
  }[view]
  const inKept = values.filter((_, n) => {
    const hz = curves.frequenciesHz[n] ?? 0
    return hz >= kept[0] && hz <= kept[1]
  })
  const look = {
    title: responseViews.find(({ value }) => value === view)?.label ?? '',
    x: { kind: 'log', span, are: 'hertz' } as const,
    curves: [{ name: 'chain', x: curves.frequenciesHz, y: values, ink: 'ink' as const, widthPixels: 2 }],
    kept,
  }
  switch (view) {
    case 'magnitude': {
      const [, high] = spanOf([inKept], 3)
      return {
        ...look,
        title: 'Magnitude, sensor to stored sample',
        y: { span: [-100, Math.max(6, high)], quantity: 'decibels', sign: '\u2009dB' },
        limits: sheet.flatMap((line) =>
          line.kind === 'flatness'
            ? [-1, 1].map((side) => ({ from: line.fromHz, to: line.toHz, at: side * line.withinDb }))
            : [],
        ),
      }
    }
    case 'phase':
      return {
        ...look,
        title: 'Phase, sensor to stored sample',
        y: { span: spanOf([values], 90), quantity: 'degrees', sign: '°' },
      }
    case 'departure':
      return {
        ...look,
        title: 'Departure from linear phase',
        // Beyond the kept band it may be anything: the scale is the kept band's.
        y: { span: spanOf([inKept], 1), quantity: 'degrees', sign: '°' },
        limits: sheet.flatMap((line) =>
          line.kind === 'phase'
            ? [-1, 1].map((side) => ({ from: line.fromHz, to: line.toHz, at: side * line.withinDegrees }))
            : [],
        ),
      }
    case 'delay':
      return {
        ...look,
        title: 'Group delay, sensor to stored sample',
        ...delayAxis(inKept),
        limits: sheet.flatMap((line) =>
          line.kind === 'delay' ? [{ from: line.atHz / 1.06, to: line.atHz * 1.06, at: line.atMostSeconds }] : [],
        ),
      }
  }
}

function delayAxis(seconds: Float64Array): { readonly y: LinesPlan['y'] } {
  const most = seconds.reduce((high, value) => (Number.isFinite(value) ? Math.max(high, Math.abs(value)) : high), 0)
  const unit = delayUnit(most)
  const [low, high] = spanOf([seconds], Math.max(most * 0.2, 1e-9))
  return {
    y: {
      span: [Math.min(0, low), high],
      quantity: 'plain',
      sign: `\u2009${unit.symbol}`,
      perUnit: unit.perUnit,
    },
  }
}

/** One row in eight of the curves: enough to read from, short enough to hear. */
export const responseRows = (curves: ResponseCurves): readonly (readonly string[])[] =>
  [...curves.frequenciesHz].flatMap((hz, n) =>
    n % 8 === 0 || n === curves.frequenciesHz.length - 1
      ? [
          [
            formatHz(hz, 4),
            formatDb(curves.magnitudeDb[n] ?? Number.NaN, 3),
            formatDegrees(curves.phaseDegrees[n] ?? Number.NaN, 2),
            formatDegrees(curves.departureDegrees[n] ?? Number.NaN, 3),
            formatSeconds(curves.groupDelaySeconds[n] ?? Number.NaN, 4),
          ],
        ]
      : [],
  )
