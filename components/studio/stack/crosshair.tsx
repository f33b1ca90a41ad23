import { written } from '@/components/plot/scene'
import type { StackView, Trace } from '../view'
import type { StackFrame } from './frame'
import { plotIds } from './layout'
import { formatFrequency, plottedValue } from './read-out'
import { MarkerGlyph } from './trace-sample'

/** The line through all plots, its frequency, and each trace's marker on its curve. */
export function Crosshair({
  traces,
  view,
  frame,
  sampleRateHz,
}: {
  traces: readonly Trace[]
  view: StackView
  frame: StackFrame
  sampleRateHz: number
}) {
  const hz = view.crosshairHz
  if (hz === null) return null
  const { plots } = frame.layout
  const x = written(frame.x.toPixel(hz))
  if (!(x >= plots.magnitude.left - 0.5 && x <= plots.magnitude.right + 0.5)) return null
  const text = formatFrequency(hz, sampleRateHz, view.normalised)
  const isLate = x + 10 + text.length * 6.6 > plots.magnitude.right
  return (
    <svg
      aria-hidden="true"
      className="pointer-events-none absolute top-0 left-0 overflow-visible"
      width={frame.layout.width}
      height={frame.layout.height}
    >
      <line
        x1={x}
        x2={x}
        y1={plots.magnitude.top}
        y2={plots.departure.bottom}
        stroke="var(--ink)"
        strokeWidth={1}
        opacity={0.75}
      />
      <text
        x={isLate ? x - 6 : x + 6}
        y={plots.magnitude.top + 14}
        textAnchor={isLate ? 'end' : 'start'}
        className="font-mono"
        fontSize={11}
        fill="var(--ink)"
        stroke="var(--sheet)"
        strokeWidth={4}
        strokeLinejoin="round"
        paintOrder="stroke"
      >
        {text}
      </text>
      {plotIds.map((plot) => (
        <g key={plot}>
          {traces.map((trace) => {
            const y = written(frame.y[plot].toPixel(plottedValue(trace, plot, hz, view)))
            const box = plots[plot]
            if (!(y >= box.top - 2 && y <= box.bottom + 2)) return null
            return (
              <g key={trace.id} transform={`translate(${x} ${y})`}>
                <MarkerGlyph id={trace.id} radius={plot === 'magnitude' ? 3.5 : 2.8} />
              </g>
            )
          })}
        </g>
      ))}
    </svg>
  )
}
