import { markerOutline, traceStyles, type TraceId } from '@/components/plot/trace-style'

/** A marker as an SVG shape around 0, 0. */
export function MarkerGlyph({ id, radius, fill = 'var(--sheet)' }: { id: TraceId; radius: number; fill?: string }) {
  const { marker, ink } = traceStyles[id]
  const look = { fill, stroke: `var(--${ink})`, strokeWidth: 1.4 }
  if (marker === null) return <circle r={radius * 0.75} fill={`var(--${ink})`} stroke="var(--sheet)" strokeWidth={1} />
  if (marker === 'circle') return <circle r={radius} {...look} />
  return (
    <polygon
      points={markerOutline(marker, radius)
        .map((point) => point.join(','))
        .join(' ')}
      {...look}
    />
  )
}

/** A short piece of a trace as it is drawn on the plots. */
export function TraceSample({ id }: { id: TraceId }) {
  const { ink, widthPixels, dash, marker } = traceStyles[id]
  return (
    <svg width="28" height="12" viewBox="0 0 28 12" aria-hidden="true" className="shrink-0">
      <path
        d="M0 6H28"
        stroke={`var(--${ink})`}
        strokeWidth={widthPixels}
        strokeDasharray={dash.join(' ') || undefined}
        fill="none"
      />
      {marker ? (
        <g transform="translate(14 6)">
          <MarkerGlyph id={id} radius={3.5} fill="var(--paper)" />
        </g>
      ) : null}
    </svg>
  )
}
