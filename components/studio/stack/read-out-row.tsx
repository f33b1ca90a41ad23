import { versionLabels } from '@/lib/designs/words'
import { classNames } from '@/lib/format/class-names'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { traceStyles } from '@/components/plot/trace-style'
import type { StackView, Trace, TraceId } from '../view'
import type { PlotId } from './props'
import { formatPlotted, plottedValue } from './read-out'
import { TraceSample } from './trace-sample'

const traceIds = Object.keys(traceStyles) as readonly TraceId[]

const traceLabel = (id: TraceId): string => (id === 'analog' || id === 'candidate' ? id : versionLabels[id])

const plotWords: Readonly<Record<PlotId, string>> = {
  magnitude: 'magnitude',
  phase: 'phase',
  'group-delay': 'group delay',
  departure: 'departure',
}

/** Above the plots: the crosshair's frequency, and every trace with its sample, name and value there. Pressing an entry hides the trace. */
export function ReadOutRow({
  traces,
  view,
  sampleRateHz,
  plot,
  onToggle,
}: {
  traces: readonly Trace[]
  view: StackView
  sampleRateHz: number
  /** The plot whose values are read. */
  plot: PlotId
  onToggle(id: TraceId): void
}) {
  const hz = view.crosshairHz
  // Versions of an analog original that are hidden can be brought back; an FIR filter has none.
  const isFir = traces.some(({ id }) => id === 'fir')
  const known = traceIds.filter(
    (id) => traces.some((trace) => trace.id === id) || (view.hidden.includes(id) && (!isFir || id === 'analog')),
  )
  return (
    <div role="group" aria-label="Traces" className="flex flex-wrap items-center gap-x-2.5 text-[12px] leading-[24px]">
      <span className="min-w-[19ch] font-mono whitespace-nowrap tabular-nums">
        {hz === null ? (
          <span className="text-pencil">move over the plots to read</span>
        ) : (
          <>
            at {formatHz(hz, 4)}, {formatNumber(hz / sampleRateHz, 3)}
            {'\u2009fs'}
          </>
        )}
      </span>
      {known.map((id) => {
        const hidden = view.hidden.includes(id)
        const trace = hidden ? undefined : traces.find((candidate) => candidate.id === id)
        const label = trace?.label ?? traceLabel(id)
        const value = trace && hz !== null ? plottedValue(trace, plot, hz, view) : Number.NaN
        return (
          <button
            key={id}
            type="button"
            aria-pressed={!hidden}
            title={hidden ? `Show ${label}` : `Hide ${label}; values of the ${plotWords[plot]}`}
            onClick={() => onToggle(id)}
            className="inline-flex min-h-[24px] items-center gap-1.5 whitespace-nowrap hover:text-ink text-pencil"
          >
            <span className={classNames('inline-flex', hidden && 'opacity-40')}>
              <TraceSample id={id} />
            </span>
            <span className="text-[13px]">{label}</span>
            {hidden ? null : (
              <span className="min-w-[8.6ch] text-left font-mono text-[12px] font-semibold tabular-nums text-ink">
                {hz === null ? '' : formatPlotted(value, plot, view.departureUnit)}
              </span>
            )}
          </button>
        )
      })}
    </div>
  )
}
