import type { KeyboardEvent, PointerEvent } from 'react'
import { distanceToPath } from '@/components/plot/path'
import { sliderKey } from '@/components/plot/handle'
import { classNames } from '@/lib/format/class-names'
import type { Gesture, GestureEvent } from '../interact/gesture'
import type { StackView } from '../view'
import type { StackFrame } from './frame'
import { pannedView, zoomedView } from './framing'
import { zoomCentre } from './handle-places'
import { formatFrequency } from './read-out'
import type { Point } from './spec-handles'

const GRAB_PIXELS = 7
/** The slope can be taken hold of from here down. */
const SLOPE_FROM_DB = -6

/** True where a pointer is on the analog slope: steep enough below the pass band, above the floor. */
function isOnSlope(slope: Float64Array, point: Point, frame: StackFrame): boolean {
  const { bottom, left, right } = frame.layout.plots.magnitude
  const from = frame.y.magnitude.toPixel(SLOPE_FROM_DB)
  if (point.y < from || point.y > bottom || point.x < left || point.x > right) return false
  return distanceToPath(slope, point.x, point.y, (y) => y >= from && y <= bottom) <= GRAB_PIXELS
}

/** Plot ground under the handles: reads by pointer and by keys, takes the slope, pans and zooms. */
export function Surface({
  frame,
  view,
  sampleRateHz,
  slope,
  gesture,
  readOnly,
  dispatch,
  grabSlope,
  pointOf,
  onView,
  onResetView,
  onKeyRead,
}: {
  frame: StackFrame
  view: StackView
  sampleRateHz: number
  slope: Float64Array
  gesture: Gesture
  readOnly: boolean
  dispatch(event: GestureEvent): void
  grabSlope(pointerId: number, point: Point): void
  pointOf(event: PointerEvent): Point
  onView(change: Partial<StackView>): void
  onResetView(): void
  /** The crosshair was moved by a key. */
  onKeyRead(): void
}) {
  const { plots, axis, width } = frame.layout
  const [from, to] = frame.x.domain
  const hz = view.crosshairHz ?? frame.x.toValue((plots.magnitude.left + plots.magnitude.right) / 2)

  function onPointerDown(event: PointerEvent<HTMLElement>, on: 'plots' | 'axis') {
    if (event.button !== 0 && event.button !== 1) return
    event.currentTarget.setPointerCapture(event.pointerId)
    const point = pointOf(event)
    const takesSlope =
      on === 'plots' && event.pointerType !== 'touch' && !event.shiftKey && !readOnly && event.button === 0
    if (takesSlope && isOnSlope(slope, point, frame)) grabSlope(event.pointerId, point)
    else dispatch({ kind: 'press', pointerId: event.pointerId, point, on, shift: event.shiftKey || event.button === 1 })
  }

  function onPointerMove(event: PointerEvent<HTMLElement>) {
    const point = pointOf(event)
    dispatch({ kind: 'move', pointerId: event.pointerId, point, fine: event.altKey })
    if (gesture.name === 'resting') {
      // Straight to the element: a cursor is no reason to render.
      event.currentTarget.style.cursor = !readOnly && isOnSlope(slope, point, frame) ? 'ns-resize' : ''
    }
  }

  const pointing = {
    onPointerUp: (event: PointerEvent) => dispatch({ kind: 'release', pointerId: event.pointerId }),
    onPointerCancel: (event: PointerEvent) => dispatch({ kind: 'lose', pointerId: event.pointerId }),
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey) return
    const zoom = { '+': 0.8, '=': 0.8, '-': 1.25, _: 1.25 }[event.key]
    if (zoom !== undefined) {
      event.preventDefault()
      onView(zoomedView(frame.x, zoom, zoomCentre(frame.x, view.crosshairHz)))
      return
    }
    if (event.key === '0') {
      event.preventDefault()
      onResetView()
      return
    }
    if (event.key === 'Escape' && view.crosshairHz !== null) {
      event.preventDefault()
      onView({ crosshairHz: null })
      return
    }
    const key = sliderKey(event.key, { shift: event.shiftKey, alt: event.altKey })
    if (!key) return
    event.preventDefault()
    onKeyRead()
    if (key.kind === 'end') {
      onView({ crosshairHz: key.which === 'min' ? from : to })
      return
    }
    const pixels = { fine: 0.5, plain: 4, coarse: 40 }[key.size] * key.direction
    const target = frame.x.toPixel(hz) + pixels
    const { left, right } = plots.magnitude
    // At the side of the view the paper moves along.
    const overhang = target > right ? target - right : target < left ? target - left : 0
    const moved = overhang === 0 ? {} : pannedView(frame.x, { fromHz: from, toHz: to }, -overhang)
    onView({ ...moved, crosshairHz: Math.max(frame.x.toValue(target), 0) })
  }

  return (
    <>
      <div
        role="slider"
        tabIndex={0}
        aria-label="Crosshair frequency"
        aria-orientation="horizontal"
        aria-valuemin={from}
        aria-valuemax={to}
        aria-valuenow={Number(hz.toPrecision(6))}
        aria-valuetext={formatFrequency(hz, sampleRateHz, view.normalised)}
        data-surface="plots"
        className="absolute cursor-crosshair touch-pan-y -outline-offset-1 select-none"
        style={{
          left: plots.magnitude.left,
          top: plots.magnitude.top,
          width: plots.magnitude.right - plots.magnitude.left,
          height: plots.departure.bottom - plots.magnitude.top,
        }}
        onPointerDown={(event) => onPointerDown(event, 'plots')}
        onPointerMove={onPointerMove}
        onKeyDown={onKeyDown}
        {...pointing}
      />
      <div
        data-surface="axis"
        className={classNames(
          'absolute touch-none select-none',
          gesture.name === 'panning' ? 'cursor-grabbing' : 'cursor-grab',
        )}
        style={{
          left: plots.magnitude.left,
          top: axis.top,
          width: width - plots.magnitude.left,
          height: axis.bottom - axis.top,
        }}
        title="Pull to move along the frequencies, turn the wheel to zoom"
        onPointerDown={(event) => onPointerDown(event, 'axis')}
        onPointerMove={(event) => {
          if (gesture.name !== 'resting')
            dispatch({ kind: 'move', pointerId: event.pointerId, point: pointOf(event), fine: false })
        }}
        {...pointing}
      />
    </>
  )
}
