import { useLayoutEffect, useState, type RefObject } from 'react'

/** Width of the stack before it has been measured: that of the reference page. */
const USUAL_WIDTH = 946

/** The element's width in whole CSS pixels, kept up with. */
export function useWidth(element: RefObject<HTMLElement | null>): number {
  const [width, setWidth] = useState(USUAL_WIDTH)
  useLayoutEffect(() => {
    const measured = element.current
    if (!measured) return
    const measure = () => setWidth(Math.max(240, Math.round(measured.clientWidth)))
    measure()
    const observer = new ResizeObserver(measure)
    observer.observe(measured)
    return () => observer.disconnect()
  }, [element])
  return width
}
