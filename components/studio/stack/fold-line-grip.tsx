import type { PointerEvent } from 'react'
import { written } from '@/components/plot/scene'
import type { GestureEvent } from '../interact/gesture'
import type { StackFrame } from './frame'
import { isFoldInView } from './paint-plan'
import type { Point, SpecHandle } from './spec-handles'

const GRIP_PIXELS = 11

/** The whole fold line can be pulled, not only its tag; the tag is the slider that keys and screen readers meet. */
export function FoldLineGrip({
  frame,
  handles,
  dispatch,
  pointOf,
}: {
  frame: StackFrame
  handles: readonly SpecHandle[]
  dispatch(event: GestureEvent): void
  pointOf(event: PointerEvent): Point
}) {
  const handle = handles.find(({ id }) => id === 'fold')
  if (!handle) return null
  // Out of view it keeps its place in the page, since it may be in the hand that pulled it there.
  const width = isFoldInView(frame) ? GRIP_PIXELS : 0
  const x = written(frame.x.toPixel(frame.foldHz))
  const { top } = frame.layout.plots.magnitude
  const { bottom } = frame.layout.plots.departure
  return (
    <div
      aria-hidden="true"
      data-grip="fold"
      className="absolute cursor-ew-resize touch-pan-y"
      style={{ left: Math.min(x - width / 2, frame.layout.width - width), top, width, height: bottom - top }}
      onPointerDown={(event) => {
        if (event.button !== 0) return
        event.currentTarget.setPointerCapture(event.pointerId)
        dispatch({
          kind: 'grab-handle',
          pointerId: event.pointerId,
          point: pointOf(event),
          centre: { x, y: bottom },
          handle,
        })
      }}
      onPointerMove={(event) =>
        dispatch({ kind: 'move', pointerId: event.pointerId, point: pointOf(event), fine: event.altKey })
      }
      onPointerUp={(event) => dispatch({ kind: 'release', pointerId: event.pointerId })}
      onPointerCancel={(event) => dispatch({ kind: 'lose', pointerId: event.pointerId })}
    />
  )
}
