import { useLayoutEffect, useRef } from 'react'
import type { PageLook } from '@/components/plot/page-look'
import { paintCanvas, paintCounts } from '@/components/plot/paint-canvas'
import type { Scene } from '@/components/plot/scene'

/** The canvas under everything. It is painted when its scene or the page's look changes, and at no other time. */
export function StaticLayer({ scene, look }: { scene: Scene; look: PageLook }) {
  const canvas = useRef<HTMLCanvasElement>(null)
  useLayoutEffect(() => {
    const element = canvas.current
    const brush = element?.getContext('2d')
    if (!element || !brush) return
    const width = Math.round(scene.width * look.devicePixelRatio)
    const height = Math.round(scene.height * look.devicePixelRatio)
    // Setting a size throws the bitmap away, so only when it differs.
    if (element.width !== width) element.width = width
    if (element.height !== height) element.height = height
    paintCanvas(brush, scene, look.palette, look.devicePixelRatio)
    element.dataset.paints = String(paintCounts.canvas)
  }, [scene, look])
  return (
    <canvas
      ref={canvas}
      aria-hidden="true"
      className="pointer-events-none absolute top-0 left-0"
      style={{ width: scene.width, height: scene.height }}
    />
  )
}
