'use client'

import { useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { written } from '@/components/plot/scene'
import { PlotSheet } from '@/components/studio/panels/chart/plot-sheet'
import { useWidth } from '@/components/studio/stack/use-width'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { curveAt, linesFrame, linesScene, type Curve, type LinesFrame, type LinesPlan } from './lines-picture'

/** A plot with a crosshair that reads its curves, by the pointer or the arrow keys. Reading repaints no curve. */
export function LinesPlot({ plan, writeValue }: { plan: LinesPlan; writeValue(value: number): string }) {
  const ref = useRef<HTMLDivElement>(null)
  const width = useWidth(ref)
  const [at, setAt] = useState<number | null>(null)
  const frame = useMemo(() => linesFrame(width, plan), [width, plan])
  const scene = useMemo(() => linesScene(plan, frame), [plan, frame])
  const [from, to] = frame.x.domain
  const place = at !== null && at >= from && at <= to ? at : null
  const writePlace = (value: number) => (plan.x.are === 'hertz' ? formatHz(value) : formatNumber(value, 4))
  const words =
    place === null
      ? null
      : `${writePlace(place)}: ${plan.curves
          .map((curve) => [curve, curveAt(curve, place)] as const)
          .filter(([, value]) => !Number.isNaN(value))
          .map(([{ name }, value]) => `${plan.curves.length > 1 ? `${name} ` : ''}${writeValue(value)}`)
          .join(', ')}`
  return (
    <figure className="flex min-w-0 flex-col">
      <figcaption className="flex min-h-6 flex-wrap items-baseline justify-between gap-x-4 text-[12px]">
        <span className="font-medium">{plan.title}</span>
        <span className="numeric text-pencil">{words ?? 'point or use the arrow keys to read'}</span>
      </figcaption>
      {plan.curves.length > 1 ? <CurveKeys curves={plan.curves} /> : null}
      <div ref={ref} className="min-w-0">
        <PlotSheet scene={scene}>
          {place === null ? null : <ReadLine frame={frame} curves={plan.curves} place={place} />}
          <ReadGround title={plan.title} frame={frame} place={place} words={words ?? 'not set'} onPlace={setAt} />
        </PlotSheet>
      </div>
    </figure>
  )
}

/** Which curve is which: ink and dash as drawn. */
function CurveKeys({ curves }: { curves: readonly Curve[] }) {
  return (
    <ul className="flex flex-wrap gap-x-4 text-[12px]">
      {curves.map(({ name, ink, dash }) => (
        <li key={name} className="inline-flex items-center gap-1.5">
          <svg aria-hidden width={26} height={8}>
            <path
              d="M0 4H26"
              stroke={`var(--${ink})`}
              strokeWidth={1.8}
              {...(dash ? { strokeDasharray: dash.join(' ') } : {})}
            />
          </svg>
          {name}
        </li>
      ))}
    </ul>
  )
}

function ReadLine({ frame, curves, place }: { frame: LinesFrame; curves: readonly Curve[]; place: number }) {
  const { box, x, y, width, height } = frame
  const at = written(x.toPixel(place))
  return (
    <svg aria-hidden className="pointer-events-none absolute top-0 left-0" width={width} height={height}>
      <line x1={at} x2={at} y1={box.top} y2={box.bottom} stroke="var(--ink)" opacity={0.75} />
      {curves.map((curve) => {
        const level = y.toPixel(curveAt(curve, place))
        if (!(level >= box.top && level <= box.bottom)) return null
        return (
          <circle
            key={curve.name}
            cx={at}
            cy={written(level)}
            r={3}
            fill="var(--sheet)"
            stroke={`var(--${curve.ink})`}
            strokeWidth={1.4}
          />
        )
      })}
    </svg>
  )
}

const KEY_PIXELS = 4

function ReadGround({
  title,
  frame,
  place,
  words,
  onPlace,
}: {
  title: string
  frame: LinesFrame
  place: number | null
  words: string
  onPlace(place: number | null): void
}) {
  const { box, x } = frame
  const [from, to] = x.domain
  const at = (pixel: number) => Math.min(to, Math.max(from, x.toValue(pixel)))
  const point = (event: PointerEvent<HTMLDivElement>) =>
    onPlace(at(event.clientX - event.currentTarget.getBoundingClientRect().left + box.left))

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const now = place === null ? (box.left + box.right) / 2 : x.toPixel(place)
    const stride = event.shiftKey || event.key.startsWith('Page') ? 40 : place === null ? 0 : KEY_PIXELS
    switch (event.key) {
      case 'ArrowRight':
      case 'ArrowUp':
      case 'PageUp':
        onPlace(at(now + stride))
        break
      case 'ArrowLeft':
      case 'ArrowDown':
      case 'PageDown':
        onPlace(at(now - stride))
        break
      case 'Home':
        onPlace(from)
        break
      case 'End':
        onPlace(to)
        break
      case 'Escape':
        if (place === null) return
        onPlace(null)
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
      aria-label={`Crosshair on ${title}`}
      aria-valuemin={from}
      aria-valuemax={to}
      aria-valuenow={place ?? from}
      aria-valuetext={words}
      className="absolute cursor-crosshair touch-pan-y -outline-offset-2"
      style={{ left: box.left, top: box.top, width: box.right - box.left, height: box.bottom - box.top }}
      onPointerDown={point}
      onPointerMove={point}
      onPointerLeave={(event) => event.pointerType === 'mouse' && onPlace(null)}
      onKeyDown={onKeyDown}
    />
  )
}
