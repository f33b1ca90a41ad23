'use client'

import { useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import type { FirFilter } from '@/dsp'
import { useWidth } from '../../stack/use-width'
import { PlotSheet } from '../chart/plot-sheet'
import { mirrorOf } from './taps-facts'
import { tapsFrame, tapsScene } from './taps-picture'
import { fullDigits } from './written'

const STRIDE = 10

/** The taps as stems; a line by pointer or arrow keys reads one, and marks its mirror image. */
export function TapsPlot({ filter }: { filter: FirFilter }) {
  const ref = useRef<HTMLDivElement>(null)
  const width = useWidth(ref)
  const [chosen, setChosen] = useState<number | null>(null)
  const frame = useMemo(() => tapsFrame(width, filter.taps), [width, filter])
  const scene = useMemo(() => tapsScene(filter, frame), [filter, frame])
  const { box, x, y } = frame
  const last = filter.taps.length - 1
  // A shorter filter may have come meanwhile.
  const tap = chosen === null ? null : Math.min(chosen, last)
  const text = tap === null ? 'no tap is read' : tapText(filter, tap)

  const inside = (k: number) => Math.min(last, Math.max(0, k))

  function onPointer(event: PointerEvent<HTMLDivElement>) {
    const pixel = event.clientX - event.currentTarget.getBoundingClientRect().left + box.left
    setChosen(inside(Math.round(x.toValue(pixel))))
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const next = tapAfterKey(event.key, event.shiftKey ? STRIDE : 1, tap, last)
    if (next === undefined) return
    event.preventDefault()
    setChosen(next)
  }

  return (
    <div ref={ref} className="min-w-0">
      <PlotSheet scene={scene}>
        {tap === null ? null : (
          <svg
            aria-hidden
            className="pointer-events-none absolute top-0 left-0"
            width={frame.width}
            height={frame.height}
          >
            <line x1={x.toPixel(tap)} x2={x.toPixel(tap)} y1={box.top} y2={box.bottom} stroke="var(--ink)" />
            {[tap, mirrorOf(filter, tap) ?? tap].map((k, index) => (
              <circle
                key={index}
                cx={x.toPixel(k)}
                cy={y.toPixel(filter.taps[k] ?? 0)}
                r={4.5}
                fill="none"
                stroke="var(--ink)"
                strokeWidth={1.4}
              />
            ))}
          </svg>
        )}
        <div
          role="slider"
          tabIndex={0}
          aria-label="Tap to read; arrows step from tap to tap"
          aria-valuemin={0}
          aria-valuemax={last}
          aria-valuenow={tap ?? 0}
          aria-valuetext={text}
          className="absolute cursor-crosshair touch-pan-y -outline-offset-2"
          style={{ left: box.left, top: box.top, width: box.right - box.left, height: box.bottom - box.top }}
          onPointerDown={onPointer}
          onPointerMove={onPointer}
          onPointerLeave={(event) => event.pointerType === 'mouse' && setChosen(null)}
          onKeyDown={onKeyDown}
        />
      </PlotSheet>
      <p className="numeric min-h-5 text-[12.5px] text-pencil">{tap === null ? '' : text}</p>
    </div>
  )
}

/** The tap that a key moves to; null drops the line; undefined is no key of the plot. */
export function tapAfterKey(key: string, stride: number, tap: number | null, last: number): number | null | undefined {
  switch (key) {
    case 'ArrowRight':
    case 'ArrowUp':
      return tap === null ? 0 : Math.min(last, tap + stride)
    case 'ArrowLeft':
    case 'ArrowDown':
      return tap === null ? last : Math.max(0, tap - stride)
    case 'Home':
      return 0
    case 'End':
      return last
    case 'Escape':
      return tap === null ? undefined : null
    default:
      return undefined
  }
}

export function tapText(filter: FirFilter, k: number): string {
  const mirror = mirrorOf(filter, k)
  const same = filter.symmetry === 'odd' ? 'its negative at' : 'the same at'
  return `h${k} = ${fullDigits(filter.taps[k] ?? 0)}${mirror === null ? '' : `, ${same} h${mirror}`}`
}
