import type { Box } from './path'
import type { Face, Ink } from './palette'
import type { MarkerShape } from './trace-style'

/*
 * A picture as data: what is to be seen, in CSS pixels and named inks. Two painters render it, one onto a canvas and one into SVG text,
 * so that the download is the picture on the screen.
 */

export interface Stroke {
  readonly ink: Ink
  readonly widthPixels: number
  readonly dash?: readonly number[]
  readonly opacity?: number
}

export type Mark =
  | { readonly kind: 'fill'; readonly box: Box; readonly ink: Ink; readonly opacity?: number }
  | {
      readonly kind: 'frame'
      readonly box: Box
      readonly stroke: Stroke
      readonly fill?: Ink
      readonly cornerPixels?: number
    }
  /** x₀, y₀, x₁, y₁ …; a NaN pair lifts the pen. */
  | { readonly kind: 'path'; readonly points: Float64Array; readonly stroke: Stroke }
  /** Closed outline filled with a wash of an ink. */
  | { readonly kind: 'wash'; readonly outline: Float64Array; readonly ink: Ink; readonly opacity: number }
  /** Closed outline of a ground that is ruled with lines. */
  | {
      readonly kind: 'hatch'
      readonly outline: Float64Array
      readonly ruling: Ruling
      readonly gapPixels: number
      readonly stroke: Stroke
    }
  | {
      readonly kind: 'text'
      readonly x: number
      /** Of the baseline. */
      readonly y: number
      readonly text: string
      readonly face: Face
      readonly sizePixels: number
      readonly weight: number
      readonly ink: Ink
      readonly anchor: 'start' | 'middle' | 'end'
      /** Ground painted behind the letters, so that lines don't run through them. */
      readonly halo?: Ink
    }
  | {
      readonly kind: 'marker'
      readonly shape: MarkerShape
      readonly x: number
      readonly y: number
      readonly radius: number
      readonly stroke: Stroke
      readonly fill: Ink
    }
  | { readonly kind: 'clip'; readonly box: Box; readonly marks: readonly Mark[] }

export type Ruling = 'rising' | 'falling' | 'crossed'

export interface Scene {
  readonly width: number
  readonly height: number
  readonly marks: readonly Mark[]
}

/** A straight line as a path mark. */
export const line = (x1: number, y1: number, x2: number, y2: number, stroke: Stroke): Mark => ({
  kind: 'path',
  points: Float64Array.of(x1, y1, x2, y2),
  stroke,
})

/** A position as it is written into markup: server and browser may differ in the last bits of a logarithm, not in a hundredth of a pixel. */
export const written = (pixel: number): number => Math.round(pixel * 100) / 100

/** Half-pixel positions keep one-pixel lines sharp. */
export const crisp = (pixel: number): number => Math.round(pixel - 0.5) + 0.5

/**
 * The lines that rule a box, fixed to the page rather than to the box: dragging an edge uncovers more of them and moves none.
 * Flat x₁, y₁, x₂, y₂ per line.
 */
export function rulingLines(box: Box, ruling: Ruling, gapPixels: number): Float64Array {
  const lines: number[] = []
  const step = gapPixels * Math.SQRT2
  if (ruling !== 'falling') {
    // x + y = k
    for (let k = Math.ceil((box.left + box.top) / step) * step; k < box.right + box.bottom; k += step) {
      const y1 = Math.min(box.bottom, k - box.left)
      const y2 = Math.max(box.top, k - box.right)
      if (y1 > y2) lines.push(k - y1, y1, k - y2, y2)
    }
  }
  if (ruling !== 'rising') {
    // x − y = k
    for (let k = Math.ceil((box.left - box.bottom) / step) * step; k < box.right - box.top; k += step) {
      const y1 = Math.max(box.top, box.left - k)
      const y2 = Math.min(box.bottom, box.right - k)
      if (y2 > y1) lines.push(k + y1, y1, k + y2, y2)
    }
  }
  return Float64Array.from(lines)
}

export function outlineBox(outline: Float64Array): Box {
  let left = Number.POSITIVE_INFINITY
  let top = Number.POSITIVE_INFINITY
  let right = Number.NEGATIVE_INFINITY
  let bottom = Number.NEGATIVE_INFINITY
  for (let i = 0; i + 1 < outline.length; i += 2) {
    const x = outline[i] ?? 0
    const y = outline[i + 1] ?? 0
    left = Math.min(left, x)
    right = Math.max(right, x)
    top = Math.min(top, y)
    bottom = Math.max(bottom, y)
  }
  return { left, top, right, bottom }
}
