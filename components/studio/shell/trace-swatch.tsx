import type { TraceId } from '../view'

const looks: Record<TraceId, { readonly stroke: string; readonly dash?: string; readonly width: number }> = {
  analog: { stroke: 'var(--ink)', width: 2.25 },
  bilinear: { stroke: 'var(--spruce)', width: 1.6 },
  'impulse-invariant': { stroke: 'var(--ochre)', dash: '7 3', width: 1.6 },
  'matched-z': { stroke: 'var(--plum)', dash: '1.5 2.5', width: 1.8 },
  'step-invariant': { stroke: 'var(--slate)', dash: '6 2.5 1.5 2.5', width: 1.6 },
}

/** A short piece of a trace with its dash and marker, so that a version is never told by colour alone. */
export function TraceSwatch({ id }: { id: TraceId }) {
  const { stroke, dash, width } = looks[id]
  return (
    <svg width="26" height="12" viewBox="0 0 26 12" fill="none" aria-hidden className="shrink-0">
      <path d="M0 6h26" stroke={stroke} strokeWidth={width} strokeDasharray={dash} />
      <g stroke={stroke} strokeWidth="1.4" fill="var(--sheet)">
        {id === 'bilinear' ? <circle cx="13" cy="6" r="3" /> : null}
        {id === 'impulse-invariant' ? <path d="M13 2.4 16.6 9H9.4z" /> : null}
        {id === 'matched-z' ? <path d="M10 3h6v6h-6z" /> : null}
        {id === 'step-invariant' ? <path d="m13 2 4 4-4 4-4-4z" /> : null}
      </g>
    </svg>
  )
}
