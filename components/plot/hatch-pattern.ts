import type { Palette } from './palette'
import type { Ruling, Stroke } from './scene'

/* Ruled ground as a tile: filling with it costs a small part of what stroking every line does, and a drag repaints it each frame. */

export interface HatchLook {
  readonly ruling: Ruling
  readonly gapPixels: number
  readonly stroke: Stroke
}

const kept = new Map<string, CanvasPattern>()
/** Colours change with the theme; more looks than this at one time there are not. */
const MOST_KEPT = 24

/**
 * A repeating tile of 45° lines, anchored at the canvas's corner; null where there is no canvas to make one on. One dot of the tile is one
 * of the bitmap, and its opacity is in it: a tile that must be scaled or faded as it is laid takes several times as long. The gap gives by
 * a fraction of a dot for that.
 */
export function hatchPattern(
  brush: { createPattern(tile: OffscreenCanvas, repeat: 'repeat'): CanvasPattern | null },
  { ruling, gapPixels, stroke }: HatchLook,
  palette: Palette,
  devicePixelRatio: number,
): CanvasPattern | null {
  if (typeof OffscreenCanvas === 'undefined' || stroke.dash?.length) return null
  const colour = palette.inks[stroke.ink]
  const opacity = stroke.opacity ?? 1
  const key = [ruling, gapPixels, stroke.widthPixels, opacity, colour, devicePixelRatio].join()
  const known = kept.get(key)
  if (known) return known
  // The gap is measured across the lines.
  const size = Math.max(1, Math.round(gapPixels * Math.SQRT2 * devicePixelRatio))
  const tile = new OffscreenCanvas(size, size)
  const pen = tile.getContext('2d')
  if (!pen) return null
  pen.strokeStyle = colour
  pen.globalAlpha = opacity
  pen.lineWidth = stroke.widthPixels * devicePixelRatio
  pen.beginPath()
  // The line and its neighbours, whose edges reach into this tile's corners.
  for (const shift of [-size, 0, size]) {
    if (ruling !== 'falling') {
      pen.moveTo(shift - size, 2 * size)
      pen.lineTo(shift + 2 * size, -size)
    }
    if (ruling !== 'rising') {
      pen.moveTo(shift - size, -size)
      pen.lineTo(shift + 2 * size, 2 * size)
    }
  }
  pen.stroke()
  const pattern = brush.createPattern(tile, 'repeat')
  if (!pattern) return null
  pattern.setTransform(new DOMMatrix().scale(1 / devicePixelRatio))
  if (kept.size >= MOST_KEPT) kept.clear()
  kept.set(key, pattern)
  return pattern
}
