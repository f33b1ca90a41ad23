import { paintCanvas } from '@/components/plot/paint-canvas'
import { paintSvg } from '@/components/plot/paint-svg'
import { daylight, type Palette } from '@/components/plot/palette'
import type { Scene } from '@/components/plot/scene'

/* Files made on the page itself. */

/** Offers bytes as a download under a name. */
export function offerFile(name: string, content: Blob): void {
  const address = URL.createObjectURL(content)
  const anchor = document.createElement('a')
  anchor.href = address
  anchor.download = name
  anchor.click()
  // The click only queues the download; the address must outlive it.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}

/** The SVG names the typefaces, not this page's private names for them. */
export const svgFile = (scene: Scene, palette: Palette, title: string): Blob =>
  new Blob([paintSvg(scene, { ...palette, faces: daylight.faces }, title)], { type: 'image/svg+xml' })

const PNG_DENSITY = 2

export async function pngFile(scene: Scene, palette: Palette): Promise<Blob> {
  const canvas = document.createElement('canvas')
  canvas.width = Math.round(scene.width * PNG_DENSITY)
  canvas.height = Math.round(scene.height * PNG_DENSITY)
  const brush = canvas.getContext('2d')
  if (!brush) throw new Error('This browser gives no canvas to paint the PNG on; the SVG needs none.')
  paintCanvas(brush, scene, palette, PNG_DENSITY)
  return new Promise((resolve, reject) => {
    canvas.toBlob((blob) => {
      if (blob) resolve(blob)
      else reject(new Error('The browser could not write the PNG; the SVG holds the same picture.'))
    }, 'image/png')
  })
}

export const csvFile = (text: string): Blob => new Blob([text], { type: 'text/csv' })
