'use client'

import { useMemo, useRef, type KeyboardEvent, type PointerEvent } from 'react'
import type { Span } from '@/components/plot/scale'
import type { TraceId } from '@/components/plot/trace-style'
import { formatSeconds } from '@/lib/format/quantity'
import { MarkerGlyph } from '../../stack/trace-sample'
import { useWidth } from '../../stack/use-width'
import { PlotSheet } from '../chart/plot-sheet'
import type { TimeCurves, TimeKind } from './time-curves'
import { timeFrame, timeScene, type TimeFrame } from './time-picture'

export interface Crosshair {
  /** The sample it stands on. */
  readonly sample: number
  readonly values: ReadonlyMap<TraceId, number>
}

/** Curves over time with one crosshair, which steps from sample to sample by the pointer or the arrow keys. */
export function TimePlot({
  kind,
  title,
  span,
  curves,
  sampleRateHz,
  crosshair,
  crosshairText,
  onSample,
  onZoom,
  onReset,
  onPan,
}: {
  kind: TimeKind
  title: string
  span: Span
  curves: TimeCurves
  sampleRateHz: number
  crosshair: Crosshair | null
  crosshairText: string
  onSample(sample: number | null): void
  /** A factor below 1 shows less, around a time. */
  onZoom(factor: number, aroundSeconds: number): void
  onReset(): void
  /** The picture was pulled to the right by so much time. */
  onPan(seconds: number): void
}) {
  const ref = useRef<HTMLDivElement>(null)
  const width = useWidth(ref)
  const frame = useMemo(() => timeFrame(width, span, curves), [width, span, curves])
  const scene = useMemo(() => timeScene(kind, curves, frame), [kind, curves, frame])
  return (
    <div ref={ref} className="min-w-0">
      <PlotSheet scene={scene}>
        <span
          className="pointer-events-none absolute rounded bg-sheet/80 px-2 text-[12px] leading-6 font-medium"
          style={{ right: 4, top: frame.box.top + 2 }}
        >
          {title}
        </span>
        <CrosshairPicture frame={frame} crosshair={crosshair} sampleRateHz={sampleRateHz} />
        <CrosshairGround
          frame={frame}
          sample={crosshair?.sample ?? null}
          text={crosshairText}
          sampleRateHz={sampleRateHz}
          onSample={onSample}
          onZoom={onZoom}
          onReset={onReset}
          onPan={(pixels) => onPan(frame.x.toValue(pixels) - frame.x.toValue(0))}
        />
      </PlotSheet>
    </div>
  )
}

function CrosshairPicture({
  frame,
  crosshair,
  sampleRateHz,
}: {
  frame: TimeFrame
  crosshair: Crosshair | null
  sampleRateHz: number
}) {
  if (!crosshair) return null
  const { box, x, y } = frame
  const seconds = crosshair.sample / sampleRateHz
  const at = x.toPixel(seconds)
  if (at < box.left - 0.5 || at > box.right + 0.5) return null
  const isLate = at > box.right - 90
  return (
    <svg aria-hidden className="pointer-events-none absolute top-0 left-0" width={frame.width} height={frame.height}>
      <line x1={at} x2={at} y1={box.top} y2={box.bottom} stroke="var(--ink)" opacity={0.75} />
      <text
        x={isLate ? at - 6 : at + 6}
        y={box.bottom - 8}
        textAnchor={isLate ? 'end' : 'start'}
        className="font-mono"
        fontSize={11}
        fill="var(--ink)"
        stroke="var(--sheet)"
        strokeWidth={4}
        paintOrder="stroke"
      >
        {formatSeconds(seconds, 4)}
      </text>
      {[...crosshair.values].map(([id, value]) => {
        const level = y.toPixel(value)
        return level >= box.top && level <= box.bottom ? (
          <g key={id} transform={`translate(${at} ${level})`}>
            <MarkerGlyph id={id} radius={3.5} />
          </g>
        ) : null
      })}
    </svg>
  )
}

/** How much one press shows less or more. */
export const ZOOM_STEP = 1.5

/** Takes pointer and keys: moving reads, pulling pans, + and − zoom. */
function CrosshairGround({
  frame,
  sample,
  text,
  sampleRateHz,
  onSample,
  onZoom,
  onReset,
  onPan,
}: {
  frame: TimeFrame
  sample: number | null
  text: string
  sampleRateHz: number
  onSample(sample: number | null): void
  onZoom(factor: number, aroundSeconds: number): void
  onReset(): void
  onPan(pixels: number): void
}) {
  const { box, x } = frame
  const pull = useRef<{ readonly pointerId: number; readonly clientX: number } | null>(null)
  const [firstInView, lastInView] = x.domain.map((seconds) => Math.max(0, Math.round(seconds * sampleRateHz)))

  function sampleAt(event: PointerEvent<HTMLDivElement>): number {
    const pixel = event.clientX - event.currentTarget.getBoundingClientRect().left + box.left
    return Math.max(0, Math.round(x.toValue(pixel) * sampleRateHz))
  }

  function onPointerMove(event: PointerEvent<HTMLDivElement>) {
    const held = pull.current
    if (held && held.pointerId === event.pointerId && event.pointerType === 'mouse') {
      onPan(event.clientX - held.clientX)
      pull.current = { pointerId: event.pointerId, clientX: event.clientX }
      return
    }
    onSample(sampleAt(event))
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const stride = event.shiftKey ? Math.max(10, Math.round(((lastInView ?? 0) - (firstInView ?? 0)) / 20)) : 1
    const middle = (x.domain[0] + x.domain[1]) / 2
    const around = sample === null ? middle : sample / sampleRateHz
    const now = sample ?? firstInView ?? 0
    switch (event.key) {
      case 'ArrowRight':
      case 'ArrowUp':
        onSample(sample === null ? now : now + stride)
        break
      case 'ArrowLeft':
      case 'ArrowDown':
        onSample(Math.max(0, sample === null ? now : now - stride))
        break
      case 'Home':
        onSample(firstInView ?? 0)
        break
      case 'End':
        onSample(lastInView ?? 0)
        break
      case '+':
      case '=':
        onZoom(1 / ZOOM_STEP, around)
        break
      case '-':
      case '−':
        onZoom(ZOOM_STEP, around)
        break
      case '0':
        onReset()
        break
      case 'Escape':
        if (sample === null) return
        onSample(null)
        break
      default:
        return
    }
    event.preventDefault()
  }

  return (
    <div
      role="slider"
      tabIndex={0}
      aria-label="Crosshair; arrows step through samples, plus, minus and 0 zoom"
      aria-valuemin={firstInView}
      aria-valuemax={lastInView}
      aria-valuenow={sample ?? firstInView}
      aria-valuetext={text}
      className="absolute cursor-crosshair touch-pan-y -outline-offset-2 active:cursor-grabbing"
      style={{ left: box.left, top: box.top, width: box.right - box.left, height: box.bottom - box.top }}
      onPointerDown={(event) => {
        if (event.button !== 0) return
        event.currentTarget.setPointerCapture(event.pointerId)
        pull.current = { pointerId: event.pointerId, clientX: event.clientX }
        onSample(sampleAt(event))
      }}
      onPointerMove={onPointerMove}
      onPointerUp={() => (pull.current = null)}
      onPointerCancel={() => (pull.current = null)}
      onPointerLeave={(event) => event.pointerType === 'mouse' && !pull.current && onSample(null)}
      onKeyDown={onKeyDown}
    />
  )
}
