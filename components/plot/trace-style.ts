import type { Ink } from './palette'

/* A trace is told by ink, dash and marker together, never by colour alone. */

export type TraceId = 'analog' | 'bilinear' | 'impulse-invariant' | 'matched-z' | 'step-invariant'
export type MarkerShape = 'circle' | 'triangle' | 'square' | 'diamond'

export interface TraceStyle {
  readonly ink: Ink
  readonly widthPixels: number
  readonly dash: readonly number[]
  readonly marker: MarkerShape | null
}

export const traceStyles: Readonly<Record<TraceId, TraceStyle>> = {
  analog: { ink: 'ink', widthPixels: 2.25, dash: [], marker: null },
  bilinear: { ink: 'spruce', widthPixels: 1.6, dash: [], marker: 'circle' },
  'impulse-invariant': { ink: 'ochre', widthPixels: 1.6, dash: [9, 5], marker: 'triangle' },
  'matched-z': { ink: 'plum', widthPixels: 1.8, dash: [1.8, 4.2], marker: 'square' },
  'step-invariant': { ink: 'slate', widthPixels: 1.6, dash: [10, 4, 2, 4], marker: 'diamond' },
}

/** Outline of a marker around 0, 0 with the given radius; the circle is drawn as such. */
export function markerOutline(
  shape: Exclude<MarkerShape, 'circle'>,
  radius: number,
): readonly (readonly [number, number])[] {
  switch (shape) {
    case 'triangle':
      return [
        [0, -1.15 * radius],
        [1.1 * radius, 0.8 * radius],
        [-1.1 * radius, 0.8 * radius],
      ]
    case 'square':
      return [
        [-0.9 * radius, -0.9 * radius],
        [0.9 * radius, -0.9 * radius],
        [0.9 * radius, 0.9 * radius],
        [-0.9 * radius, 0.9 * radius],
      ]
    case 'diamond':
      return [
        [0, -1.3 * radius],
        [1.3 * radius, 0],
        [0, 1.3 * radius],
        [-1.3 * radius, 0],
      ]
  }
}
