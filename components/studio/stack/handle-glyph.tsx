import type { HandlePlace } from './handle-places'
import type { HandleLook } from './spec-handles'

/** What a handle looks like, around 0, 0. */
export function HandleGlyph({ look, angle, outside }: { look: HandleLook } & Pick<HandlePlace, 'angle' | 'outside'>) {
  switch (look) {
    case 'edge':
      return (
        <>
          <circle r={7} fill="var(--sheet)" stroke="var(--ink)" strokeWidth={1.6} />
          <circle r={2.4} fill="var(--ink)" />
        </>
      )
    case 'pass-level':
    case 'stop-level':
      return (
        <>
          <rect
            x={-11}
            y={-5}
            width={22}
            height={10}
            rx={2}
            fill="var(--sheet)"
            stroke="var(--ink)"
            strokeWidth={1.3}
          />
          <path d="M-5 -1.6H5M-5 1.6H5" stroke="var(--ink)" strokeWidth={1.1} />
        </>
      )
    case 'slope':
      return (
        <g transform={`rotate(${angle + 90})`}>
          <rect
            x={-9}
            y={-3.4}
            width={18}
            height={6.8}
            rx={2}
            fill="var(--sheet)"
            stroke="var(--ink)"
            strokeWidth={1.4}
          />
        </g>
      )
    case 'hold':
      return <path d="M-6.5 -7H6.5V0L0 6.5L-6.5 0Z" fill="var(--sheet)" stroke="var(--spruce)" strokeWidth={1.5} />
    case 'fit':
      return <path d="M-6.5 -7H6.5V0L0 6.5L-6.5 0Z" fill="var(--sheet)" stroke="var(--slate)" strokeWidth={1.5} />
    case 'limit-edge':
      return <path d="M-4 -7H4V7H-4Z" fill="var(--sheet)" stroke="var(--vermilion)" strokeWidth={1.3} />
    case 'limit-level':
      return <path d="M-7 -4H7V4H-7Z" fill="var(--sheet)" stroke="var(--vermilion)" strokeWidth={1.3} />
    case 'fold': {
      // Out of view it points to where the line stands, and keeps within the sheet.
      const words = outside === 'right' ? 'fs/2→' : outside === 'left' ? '←fs/2' : 'fs/2'
      const width = outside === null ? 38 : 46
      const shift = outside === 'right' ? -width / 2 : outside === 'left' ? width / 2 : 0
      return (
        <g transform={`translate(${shift} 0)`}>
          <rect
            x={-width / 2}
            y={-10}
            width={width}
            height={19}
            rx={2}
            fill="var(--sheet)"
            stroke="var(--vermilion)"
            strokeWidth={1.4}
          />
          <text y={3.6} textAnchor="middle" fontSize={11} className="font-mono" fill="var(--vermilion)">
            {words}
          </text>
        </g>
      )
    }
  }
}
