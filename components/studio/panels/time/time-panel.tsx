'use client'

import { useMemo, useState } from 'react'
import type { Span } from '@/components/plot/scale'
import type { TraceId } from '@/components/plot/trace-style'
import { Button } from '@/components/ui/button'
import type { DesignSpec } from '@/dsp'
import { versionLabels } from '@/lib/designs/words'
import { classNames } from '@/lib/format/class-names'
import { formatNumber, formatSeconds } from '@/lib/format/quantity'
import type { Versions } from '../../derive'
import { Choice } from '../../stack/choice'
import { useOnPage } from '@/components/ui/use-on-page'
import { useQuiet } from '../chart/use-quiet'
import { DataTable } from '../chart/data-table'
import { FiguresTable, type VersionFigures } from './figures-table'
import { stepCurve } from './step-curve'
import { timeFigures } from './time-figures'
import { timeCurves, valuesAt, type TimeKind } from './time-curves'
import { valueUnit } from './time-picture'
import { TimePlot, ZOOM_STEP, type Crosshair } from './time-plot'
import { timeRows } from './time-table'
import { panned, showing, usualSpan, zoomed } from './time-view'
import { VersionKeys } from './version-keys'

const kinds = [
  { value: 'step', word: 'step' },
  { value: 'impulse', word: 'impulse' },
] as const
const tolerances = [1, 2, 5].map((value) => ({ value, word: `±${value}\u2009%`, name: `Settled within ±${value} %` }))

/** Impulse and step response of the analog prototype and its digital versions, with what is said of them in figures. */
export function TimePanel(props: { spec: DesignSpec; versions: Versions }) {
  return useOnPage() ? <TimeResponses {...props} /> : null
}

function TimeResponses({ spec, versions: latest }: { spec: DesignSpec; versions: Versions }) {
  const versions = useQuiet(latest)
  const sampleRateHz = versions.digital[0]?.filter.sampleRateHz ?? spec.sampleRateHz
  const [kind, setKind] = useState<TimeKind>('step')
  const [tolerancePercent, setTolerancePercent] = useState(2)
  const [hiddenByHand, setHiddenByHand] = useState<readonly TraceId[] | null>(null)
  const [spanByHand, setSpanByHand] = useState<Span | null>(null)
  const [sample, setSample] = useState<number | null>(null)

  const known = useMemo(() => knownVersions(versions), [versions])
  const rows = useMemo(
    (): readonly VersionFigures[] =>
      known.map(({ curve, ...version }) => ({ ...version, figures: timeFigures(curve, tolerancePercent / 100) })),
    [known, tolerancePercent],
  )
  const usual = useMemo(() => {
    const telling = known.filter(({ id, stated }) => stated || id === 'analog')
    return usualSpan(
      telling.map(({ curve }) => timeFigures(curve, 0.02)),
      sampleRateHz,
    )
  }, [known, sampleRateHz])

  const isStepInvariantStated = known.some(({ id, stated }) => stated && id === 'step-invariant')
  const hidden = useMemo(
    () => hiddenByHand ?? (isStepInvariantStated ? [] : (['step-invariant'] as const)),
    [hiddenByHand, isStepInvariantStated],
  )
  const span = spanByHand ?? usual
  const curves = useMemo(() => timeCurves(versions, hidden, kind, span), [versions, hidden, kind, span])
  const crosshair = useMemo(
    (): Crosshair | null =>
      sample === null ? null : { sample, values: valuesAt(versions, curves, kind, sample, sampleRateHz) },
    [versions, curves, kind, sample, sampleRateHz],
  )
  const unit = useMemo(() => valueUnit(kind, curves), [kind, curves])
  const written = (value: number) => `${formatNumber(value / unit.perUnit, 4)}${unit.symbol && `\u2009${unit.symbol}`}`

  function moveTo(next: number | null) {
    setSample(next)
    const seconds = (next ?? 0) / sampleRateHz
    if (next !== null && (seconds < span[0] || seconds > span[1])) setSpanByHand(showing(span, seconds))
  }
  const zoom = (factor: number, around: number) => setSpanByHand(zoomed(span, factor, around, usual, sampleRateHz))
  const anchor = sample === null ? Math.max(0, span[0]) : sample / sampleRateHz

  const at = sample === null ? null : `${formatSeconds(sample / sampleRateHz, 4)}, sample ${sample}`
  const values = crosshair ? [...crosshair.values].map(([id, value]) => `${id} ${written(value)}`).join(', ') : ''
  const impulseArea = kind === 'impulse' ? (curves.analog?.impulseArea ?? 0) : 0
  return (
    <div
      className={classNames(
        'grid gap-x-8 gap-y-4 lg:grid-cols-[minmax(0,1fr)_minmax(0,32rem)]',
        versions !== latest && 'opacity-50',
      )}
    >
      <div className="flex min-w-0 flex-col gap-1">
        <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
          <span className="inline-flex items-center gap-1 text-[13px]">
            Response to a unit{' '}
            <Choice label="Response to" options={kinds} value={kind} onChange={(next) => setKind(next)} />
          </span>
          <span className="inline-flex items-center gap-1" role="group" aria-label="Time axis">
            <Button small kind="quiet" aria-label="Show less time" onClick={() => zoom(1 / ZOOM_STEP, anchor)}>
              +
            </Button>
            <Button small kind="quiet" aria-label="Show more time" onClick={() => zoom(ZOOM_STEP, anchor)}>
              −
            </Button>
            <Button small kind="quiet" disabled={spanByHand === null} onClick={() => setSpanByHand(null)}>
              Until settled
            </Button>
          </span>
          <span className="font-mono text-[12px] whitespace-nowrap tabular-nums">
            {at === null ? <span className="text-pencil">move over the plot to read</span> : `at ${at}`}
          </span>
        </div>
        <VersionKeys
          versions={known}
          hidden={hidden}
          valueWidth={kind === 'step' ? 'min-w-[7ch]' : 'min-w-[11ch]'}
          valueOf={(id) => {
            const value = crosshair?.values.get(id)
            return value === undefined ? null : written(value)
          }}
          onToggle={(id) =>
            setHiddenByHand(hidden.includes(id) ? hidden.filter((other) => other !== id) : [...hidden, id])
          }
        />
        <TimePlot
          kind={kind}
          title={kind === 'step' ? 'Step response' : `Impulse response h(t), ${unit.symbol}; samples as h[n]/T`}
          span={span}
          curves={curves}
          sampleRateHz={sampleRateHz}
          crosshair={crosshair}
          crosshairText={at === null ? 'not set' : `${at}: ${values}`}
          onSample={moveTo}
          onZoom={zoom}
          onReset={() => setSpanByHand(null)}
          onPan={(seconds) => setSpanByHand(panned(span, seconds, usual, sampleRateHz))}
        />
        {impulseArea === 0 ? null : (
          <p className="text-[13px] text-pencil">
            The analog filter passes part of an impulse straight through: the arrow at t = 0 is an impulse of area{' '}
            <span className="numeric text-ink">{formatNumber(impulseArea, 5)}</span>, and the first sample, which stands
            for it, may lie off the sheet.
          </p>
        )}
        <DataTable
          summary="Values as a table"
          columns={['sample', 'time', ...known.filter(({ id }) => !hidden.includes(id)).map(({ label }) => label)]}
          rows={() => timeRows(versions, curves, kind, span, sampleRateHz, unit.perUnit)}
        />
      </div>
      <div className="flex min-w-0 flex-col gap-2">
        <span className="inline-flex items-center gap-1 text-[13px]">
          Settled within{' '}
          <Choice
            label="Settling band"
            options={tolerances}
            value={tolerancePercent}
            onChange={(next) => setTolerancePercent(next)}
          />
        </span>
        <FiguresTable
          rows={rows}
          refused={versions.refused.map(({ id, message }) => ({ id, label: versionLabels[id], message }))}
          tolerancePercent={tolerancePercent}
        />
      </div>
    </div>
  )
}

function knownVersions(versions: Versions) {
  return [
    ...(versions.analog
      ? [{ id: 'analog' as const, label: 'analog', stated: false, curve: stepCurve(versions.analog) }]
      : []),
    ...versions.digital.map(({ id, filter, stated }) => ({
      id,
      label: versionLabels[id],
      stated,
      curve: stepCurve(filter),
    })),
  ]
}
