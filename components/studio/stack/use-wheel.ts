import { useEffect, useRef, type RefObject } from 'react'
import type { StackView } from '../view'
import type { StackFrame } from './frame'
import { pannedView, zoomedView } from './framing'

const ZOOM_PER_PIXEL = 0.0022
const PIXELS_PER_LINE = 16

/**
 * The wheel zooms over the axis strip, and over the plots with Ctrl or ⌘ (which is also what a pinched touchpad sends); turned sideways
 * over the strip it pans. Anywhere else it scrolls the page as usual.
 */
export function useWheel(
  stage: RefObject<HTMLElement | null>,
  frame: StackFrame,
  onView: (change: Partial<StackView>) => void,
): void {
  const latest = useRef({ frame, onView })
  useEffect(() => {
    latest.current = { frame, onView }
  })
  useEffect(() => {
    const element = stage.current
    if (!element) return
    function onWheel(event: WheelEvent) {
      const { frame: now, onView: show } = latest.current
      const { left, top } = element?.getBoundingClientRect() ?? { left: 0, top: 0 }
      const overStrip = event.clientY - top > now.layout.axis.top
      if (!overStrip && !event.ctrlKey && !event.metaKey) return
      event.preventDefault()
      const unit = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? PIXELS_PER_LINE : 1
      if (overStrip && Math.abs(event.deltaX) > Math.abs(event.deltaY)) {
        const [fromHz, toHz] = now.x.domain
        show(pannedView(now.x, { fromHz, toHz }, -event.deltaX * unit))
        return
      }
      const turn = Math.max(-120, Math.min(120, event.deltaY * unit))
      show(zoomedView(now.x, Math.exp(turn * ZOOM_PER_PIXEL), event.clientX - left))
    }
    // React's own wheel listeners are passive and could not keep the page from scrolling.
    element.addEventListener('wheel', onWheel, { passive: false })
    return () => element.removeEventListener('wheel', onWheel)
  }, [stage])
}
