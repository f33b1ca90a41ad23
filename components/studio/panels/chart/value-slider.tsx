'use client'

import { useRef, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react'
import { clamped, sliderKey, steppedDigit } from '@/components/plot/handle'
import type { Scale } from '@/components/plot/scale'
import { classNames } from '@/lib/format/class-names'

/** What a slider reports: previews while it moves, then one end. */
export interface SliderEvents {
  onPreview(value: number): void
  onCommit(value: number): void
  onCancel(): void
}

/**
 * A handle on a plot by the ARIA slider pattern. Pulling it, or stepping it with the keys, previews; letting go, Enter or leaving it
 * commits; Escape brings the old value back.
 */
export function ValueSlider({
  scale,
  orientation,
  min,
  max,
  value,
  valueText,
  label,
  disabled = false,
  left,
  top,
  className,
  round,
  children,
  onPreview,
  onCommit,
  onCancel,
}: SliderEvents & {
  scale: Scale
  orientation: 'horizontal' | 'vertical'
  min: number
  max: number
  /** As previewed. */
  value: number
  valueText: string
  label: string
  disabled?: boolean
  left: number
  top: number
  className?: string
  /** A pulled value as it should be kept. */
  round(value: number): number
  children: ReactNode
}) {
  const gesture = useRef<{ readonly pointerId: number; readonly offset: number } | 'keys' | null>(null)
  // The last preview may not have been rendered yet when the hand lets go.
  const last = useRef(value)
  const along = (event: PointerEvent) => (orientation === 'horizontal' ? event.clientX : event.clientY)

  function preview(next: number) {
    last.current = next
    onPreview(next)
  }

  function onPointerDown(event: PointerEvent<HTMLDivElement>) {
    if (disabled || event.button !== 0) return
    last.current = value
    event.currentTarget.setPointerCapture(event.pointerId)
    gesture.current = { pointerId: event.pointerId, offset: along(event) - scale.toPixel(value) }
  }

  function onPointerMove(event: PointerEvent) {
    const held = gesture.current
    if (held === null || held === 'keys' || held.pointerId !== event.pointerId) return
    preview(clamped(round(clamped(scale.toValue(along(event) - held.offset), { min, max })), { min, max }))
  }

  function end(commit: boolean) {
    if (gesture.current === null) return
    gesture.current = null
    if (commit) onCommit(last.current)
    else onCancel()
  }

  function onKeyDown(event: KeyboardEvent) {
    if (disabled || event.ctrlKey || event.metaKey) return
    if (event.key === 'Escape' && gesture.current !== null) {
      event.preventDefault()
      end(false)
      return
    }
    if (event.key === 'Enter') {
      end(true)
      return
    }
    const key = sliderKey(event.key, { shift: event.shiftKey, alt: event.altKey })
    if (!key || (gesture.current !== null && gesture.current !== 'keys')) return
    event.preventDefault()
    if (gesture.current === null) last.current = value
    gesture.current = 'keys'
    preview(
      key.kind === 'end'
        ? { min, max }[key.which]
        : steppedDigit({ value: last.current, min, max }, key.size, key.direction),
    )
  }

  return (
    <div
      role="slider"
      tabIndex={disabled ? -1 : 0}
      aria-label={label}
      aria-orientation={orientation}
      aria-valuemin={min}
      aria-valuemax={max}
      aria-valuenow={value}
      aria-valuetext={valueText}
      aria-disabled={disabled || undefined}
      className={classNames(
        'absolute grid min-h-[24px] min-w-[24px] -translate-x-1/2 -translate-y-1/2 touch-none place-items-center rounded select-none focus-visible:z-10',
        !disabled && (orientation === 'horizontal' ? 'cursor-ew-resize' : 'cursor-ns-resize'),
        className,
      )}
      style={{ left, top }}
      onPointerDown={onPointerDown}
      onPointerMove={onPointerMove}
      onPointerUp={() => end(true)}
      onPointerCancel={() => end(false)}
      onKeyDown={onKeyDown}
      onBlur={() => end(true)}
    >
      {children}
    </div>
  )
}
