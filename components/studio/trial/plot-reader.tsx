'use client'

import { useEffect, useRef, useState, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react'
import { sliderKey } from '@/components/plot/handle'
import type { Box } from '@/components/plot/path'
import type { Scale } from '@/components/plot/scale'

/** How far a press must be pulled before it marks a part to look at. */
const PULL_PIXELS = 6
const ZOOM_PER_PIXEL = 0.0022
const KEY_PIXELS = { fine: 1, plain: 6, coarse: 60 } as const

type Pull =
  | { readonly kind: 'mark'; readonly pointerId: number; readonly from: number; readonly to: number }
  | { readonly kind: 'move'; readonly pointerId: number; readonly last: number }

/**
 * The ground over a plot: a crosshair by pointer and keys, and looking closer. Pulling marks the part to look at (Escape drops it);
 * with Shift, or on the axis, it moves the paper. The wheel zooms over the axis, with Ctrl or ⌘ over the plot, and anywhere once the
 * plot has the focus. What is read and how the view changes is for the plot to say.
 */
export function PlotReader({
  box,
  x,
  label,
  axisHeight,
  readOut,
  onSpan,
  onZoom,
  onMove,
  onWhole,
}: {
  box: Box
  x: Scale
  label: string
  axisHeight: number
  /** The values under a pixel, in words. */
  readOut(pixel: number): { readonly valueText: string; readonly words: ReactNode }
  onSpan(fromPixel: number, toPixel: number): void
  /** Below 1 shows less. */
  onZoom(factor: number, aroundPixel: number): void
  /** The paper was pulled to the right by so much. */
  onMove(pixels: number): void
  onWhole(): void
}) {
  const stage = useRef<HTMLDivElement>(null)
  const [at, setAt] = useState<number | null>(null)
  const [pull, setPull] = useState<Pull | null>(null)
  useWheelZoom(stage, box, onZoom, onMove)

  const pixelOf = (event: PointerEvent): number => {
    const left = stage.current?.getBoundingClientRect().left ?? 0
    return Math.max(box.left, Math.min(box.right, event.clientX - left))
  }

  function press(event: PointerEvent<HTMLDivElement>, onAxis: boolean) {
    if (event.button > 1) return
    event.currentTarget.setPointerCapture(event.pointerId)
    const pixel = pixelOf(event)
    const moves = onAxis || event.shiftKey || event.button === 1
    setPull(
      moves
        ? { kind: 'move', pointerId: event.pointerId, last: event.clientX }
        : { kind: 'mark', pointerId: event.pointerId, from: pixel, to: pixel },
    )
  }

  function move(event: PointerEvent) {
    const pixel = pixelOf(event)
    setAt(pixel)
    if (pull?.pointerId !== event.pointerId) return
    if (pull.kind === 'mark') setPull({ ...pull, to: pixel })
    else {
      onMove(event.clientX - pull.last)
      setPull({ ...pull, last: event.clientX })
    }
  }

  function release() {
    if (pull?.kind === 'mark' && Math.abs(pull.to - pull.from) >= PULL_PIXELS)
      onSpan(Math.min(pull.from, pull.to), Math.max(pull.from, pull.to))
    setPull(null)
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey) return
    const here = at ?? (box.left + box.right) / 2
    const zoom = { '+': 0.5, '=': 0.5, '-': 2, _: 2 }[event.key]
    const key = sliderKey(event.key, { shift: event.shiftKey, alt: event.altKey })
    if (event.key === 'Escape') {
      if (!pull && at === null) return
      setPull(null)
      setAt(null)
    } else if (zoom !== undefined) onZoom(zoom, here)
    else if (event.key === '0') onWhole()
    else if (key) step(key, here)
    else return
    event.preventDefault()
  }

  function step(key: NonNullable<ReturnType<typeof sliderKey>>, here: number) {
    if (key.kind === 'end') return setAt(key.which === 'min' ? box.left : box.right)
    const target = here + KEY_PIXELS[key.size] * key.direction
    // at the side of the view the paper moves along
    if (target > box.right) onMove(box.right - target)
    if (target < box.left) onMove(box.left - target)
    setAt(Math.max(box.left, Math.min(box.right, target)))
  }

  const reading = readOut(at ?? (box.left + box.right) / 2)
  const now = x.toValue(at ?? (box.left + box.right) / 2)
  return (
    <div ref={stage} className="absolute inset-0">
      <div
        role="slider"
        tabIndex={0}
        aria-label={label}
        aria-valuemin={x.domain[0]}
        aria-valuemax={x.domain[1]}
        aria-valuenow={now}
        aria-valuetext={reading.valueText}
        className="absolute cursor-crosshair touch-pan-y select-none"
        style={{ left: box.left, top: box.top, width: box.right - box.left, height: box.bottom - box.top }}
        onPointerDown={(event) => press(event, false)}
        onPointerMove={move}
        onPointerUp={release}
        onPointerCancel={() => setPull(null)}
        onPointerLeave={() => {
          if (!pull && document.activeElement !== stage.current?.firstElementChild) setAt(null)
        }}
        onKeyDown={onKeyDown}
      />
      <div
        className="absolute cursor-grab touch-none select-none active:cursor-grabbing"
        style={{ left: box.left, top: box.bottom, width: box.right - box.left, height: Math.max(24, axisHeight) }}
        title="Pull to move along, turn the wheel to zoom"
        onPointerDown={(event) => press(event, true)}
        onPointerMove={(event) => {
          if (pull) move(event)
        }}
        onPointerUp={release}
        onPointerCancel={() => setPull(null)}
      />
      {pull?.kind === 'mark' && Math.abs(pull.to - pull.from) >= PULL_PIXELS ? (
        <div
          className="pointer-events-none absolute border-x border-spruce bg-spruce-wash opacity-60"
          style={{
            left: Math.min(pull.from, pull.to),
            top: box.top,
            width: Math.abs(pull.to - pull.from),
            height: box.bottom - box.top,
          }}
        />
      ) : null}
      {at === null ? null : (
        <div
          className="pointer-events-none absolute w-px bg-ink"
          style={{ left: Math.round(at), top: box.top, height: box.bottom - box.top }}
        />
      )}
      <p
        className="numeric pointer-events-none absolute right-0 -top-5 truncate text-[12px] text-ink"
        style={{ maxWidth: box.right - box.left }}
      >
        {at === null ? null : reading.words}
      </p>
    </div>
  )
}

function useWheelZoom(
  stage: React.RefObject<HTMLDivElement | null>,
  box: Box,
  onZoom: (factor: number, aroundPixel: number) => void,
  onMove: (pixels: number) => void,
): void {
  const latest = useRef({ box, onZoom, onMove })
  useEffect(() => {
    latest.current = { box, onZoom, onMove }
  })
  useEffect(() => {
    const element = stage.current
    if (!element) return
    const onWheel = (event: WheelEvent) => {
      const { box: now, onZoom: zoom, onMove: move } = latest.current
      const { left, top } = element.getBoundingClientRect()
      const overAxis = event.clientY - top > now.bottom
      const focused = element.contains(document.activeElement)
      if (!overAxis && !focused && !event.ctrlKey && !event.metaKey) return
      event.preventDefault()
      const unit = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 16 : 1
      if (Math.abs(event.deltaX) > Math.abs(event.deltaY)) move(-event.deltaX * unit)
      else zoom(Math.exp(Math.max(-120, Math.min(120, event.deltaY * unit)) * ZOOM_PER_PIXEL), event.clientX - left)
    }
    // React's own wheel listeners are passive and could not keep the page from scrolling
    element.addEventListener('wheel', onWheel, { passive: false })
    return () => element.removeEventListener('wheel', onWheel)
  }, [stage])
}
