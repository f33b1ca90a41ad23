import type { KeyboardEvent, PointerEvent } from 'react'
import type { ComputedChain, FoldPath } from '@/dsp'
import { written } from '@/components/plot/scene'
import type { FoldFrame } from './layout'
import { inputOf } from './layout'
import { tracedAt, tracedByKey } from './trace'
import { spokenTrace } from './words'

/** The line through all strips at one output frequency, and where it meets their curves. */
export function TracePicture({
  frame,
  hz,
  paths,
}: {
  frame: FoldFrame
  hz: number | null
  paths: readonly FoldPath[]
}) {
  if (hz === null) return null
  const { x, rows, width, height } = frame
  const at = written(x.toPixel(hz))
  return (
    <svg aria-hidden className="pointer-events-none absolute top-0 left-0" width={width} height={height}>
      <line x1={at} x2={at} y1={0} y2={height} stroke="var(--ink)" opacity={0.75} />
      {rows.map(({ strip, top, bottom, y }) => {
        const input = inputOf(strip, hz)
        const path = paths.find(
          (one) => one.strip === strip.strip && Math.abs(one.inputHz - input) < 1e-6 * (1 + input),
        )
        const level = path && Number.isFinite(path.levelDb) ? y.toPixel(path.levelDb) : bottom
        return (
          <circle
            key={strip.strip}
            cx={at}
            cy={written(Math.min(bottom, Math.max(top, level)))}
            r={3}
            fill="var(--sheet)"
            stroke="var(--ink)"
            strokeWidth={1.4}
          />
        )
      })}
    </svg>
  )
}

/** Takes pointer and keys over the strips: moving traces, a press keeps the trace when the pointer leaves. */
export function TraceGround({
  frame,
  chain,
  hz,
  paths,
  onPoint,
  onKeep,
  onLeave,
}: {
  frame: FoldFrame
  chain: ComputedChain
  hz: number | null
  paths: readonly FoldPath[]
  onPoint(hz: number): void
  /** Null lets go of what was kept. */
  onKeep(hz: number | null): void
  onLeave(): void
}) {
  const { left, right, height, x } = frame
  const { outputRateHz } = chain

  const under = (event: PointerEvent<HTMLDivElement>): number =>
    tracedAt(x.toValue(event.clientX - event.currentTarget.getBoundingClientRect().left + left), outputRateHz)

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const next = tracedByKey(event.key, event.shiftKey, hz, chain)
    if (next === undefined || (next === null && hz === null)) return
    event.preventDefault()
    onKeep(next)
  }

  return (
    <div
      role="slider"
      tabIndex={0}
      aria-label="Output frequency traced; arrows step, Page Up and Page Down stride, Escape clears"
      aria-valuemin={0}
      aria-valuemax={outputRateHz / 2}
      aria-valuenow={hz ?? 0}
      aria-valuetext={hz === null ? 'not set' : spokenTrace(hz, paths)}
      className="absolute cursor-crosshair touch-pan-y"
      style={{ left, top: 0, width: right - left, height }}
      onPointerDown={(event) => event.button === 0 && onKeep(under(event))}
      onPointerMove={(event) => onPoint(under(event))}
      onPointerLeave={(event) => event.pointerType === 'mouse' && onLeave()}
      onKeyDown={onKeyDown}
    />
  )
}
