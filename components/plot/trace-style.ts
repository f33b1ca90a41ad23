import type { Ink } from './palette'

/* A trace is told by ink, dash and marker together, never by colour alone. */

export type TraceId =
  'analog' | 'bilinear' | 'impulse-invariant' | 'matched-z' | 'step-invariant' | 'fitted' | 'fir' | 'candidate'
export type MarkerShape = 'circle' | 'triangle' | 'square' | 'diamond' | 'wedge'

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
  'step-invariant': { ink: 'slate', widthPixels: 1.5, dash: [4, 3], marker: 'wedge' },
  fitted: { ink: 'slate', widthPixels: 1.7, dash: [10, 4, 2, 4], marker: 'diamond' },
  fir: { ink: 'spruce', widthPixels: 1.7, dash: [], marker: 'square' },
  /** A filter held up beside the design to compare. */
  candidate: { ink: 'pencil', widthPixels: 1.5, dash: [7, 3], marker: 'wedge' },
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
    case 'wedge':
      return [
        [0, 1.15 * radius],
        [1.1 * radius, -0.8 * radius],
        [-1.1 * radius, -0.8 * radius],
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
