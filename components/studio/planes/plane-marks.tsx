import type { ReactNode } from 'react'
import { written } from '@/components/plot/scene'
import { traceStyles, type TraceId } from '@/components/plot/trace-style'
import type { Complex } from '@/dsp'
import type { PlaneFrame } from './plane-frames'
import { grouped } from './root-groups'

/**
 * Poles × and zeros ○ of one filter in its ink. Versions that share a root differ in size, so that each stays visible in the other; a root
 * beyond the square is held at its side and pointed outwards.
 */
export function RootMarks({
  id,
  poles,
  zeros,
  frame,
  radius,
}: {
  id: TraceId
  poles: readonly Complex[]
  zeros: readonly Complex[]
  frame: PlaneFrame
  radius: number
}) {
  const ink = `var(--${traceStyles[id].ink})`
  return (
    <g fill="none" stroke={ink} strokeWidth={1.7}>
      {grouped(zeros).map(({ at, multiplicity }) => (
        <RootMark key={`zero ${at.re} ${at.im}`} at={at} multiplicity={multiplicity} frame={frame} ink={ink}>
          <circle r={radius} />
        </RootMark>
      ))}
      {grouped(poles).map(({ at, multiplicity }) => (
        <RootMark key={`pole ${at.re} ${at.im}`} at={at} multiplicity={multiplicity} frame={frame} ink={ink}>
          <path d={`M${-radius} ${-radius}L${radius} ${radius}M${radius} ${-radius}L${-radius} ${radius}`} />
        </RootMark>
      ))}
    </g>
  )
}

const SIDE = 8

function RootMark({
  at,
  multiplicity,
  frame,
  ink,
  children,
}: {
  at: Complex
  multiplicity: number
  frame: PlaneFrame
  ink: string
  children: ReactNode
}) {
  const x = written(frame.x(at.re))
  const y = written(frame.y(at.im))
  const inside = Math.min(frame.size - SIDE, Math.max(SIDE, x))
  const insideY = Math.min(frame.size - SIDE, Math.max(SIDE, y))
  const isBeyond = inside !== x || insideY !== y
  return (
    <g transform={`translate(${inside} ${insideY})`}>
      {children}
      {isBeyond ? (
        <path
          d="M8 0L4 -3V3Z"
          fill={ink}
          stroke="none"
          transform={`rotate(${written((Math.atan2(y - insideY, x - inside) * 180) / Math.PI)})`}
        />
      ) : null}
      {multiplicity > 1 ? (
        <text x={6} y={-7} fontSize={10.5} className="font-mono" fill={ink} stroke="none">
          {multiplicity}
        </text>
      ) : null}
    </g>
  )
}
