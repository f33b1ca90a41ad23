import type { Box } from './path'
import type { Scale } from './scale'
import { crisp, type Mark, type Stroke } from './scene'
import type { Tick } from './ticks'

/* The graph paper of one plot and the words along its sides. */

const faint: Stroke = { ink: 'graph', widthPixels: 1 }
const strong: Stroke = { ink: 'graph-strong', widthPixels: 1 }

/** All lines of one weight are one path: two strokes a plot, however fine the grid. */
export function gridMarks(
  box: Box,
  x: { readonly scale: Scale; readonly ticks: readonly Tick[] },
  y: { readonly scale: Scale; readonly ticks: readonly Tick[] },
): Mark[] {
  const lines = (isStrong: boolean): Float64Array => {
    const points: number[] = []
    for (const tick of x.ticks) {
      if (tick.strong !== isStrong) continue
      const at = crisp(x.scale.toPixel(tick.value))
      points.push(at, box.top, at, box.bottom, Number.NaN, Number.NaN)
    }
    for (const tick of y.ticks) {
      if (tick.strong !== isStrong) continue
      const at = crisp(y.scale.toPixel(tick.value))
      points.push(box.left, at, box.right, at, Number.NaN, Number.NaN)
    }
    return Float64Array.from(points)
  }
  return [
    { kind: 'path', points: lines(false), stroke: faint },
    { kind: 'path', points: lines(true), stroke: strong },
  ]
}

export const frameMark = (box: Box): Mark => ({
  kind: 'frame',
  box: { left: crisp(box.left), top: crisp(box.top), right: crisp(box.right), bottom: crisp(box.bottom) },
  stroke: strong,
})

const LABEL_PIXELS = 10.5

/** Right-aligned beside the plot's left side. */
export const valueLabels = (box: Box, scale: Scale, ticks: readonly Tick[]): Mark[] =>
  ticks.flatMap((tick) =>
    tick.label === null
      ? []
      : [
          {
            kind: 'text' as const,
            x: box.left - 7,
            y: scale.toPixel(tick.value) + 3.5,
            text: tick.label,
            face: 'mono' as const,
            sizePixels: LABEL_PIXELS,
            weight: 400,
            ink: 'pencil' as const,
            anchor: 'end' as const,
          },
        ],
  )

/** Centred under their lines; those that would run over the picture's edge are pushed in. */
export function frequencyLabels(baseline: number, width: number, scale: Scale, ticks: readonly Tick[]): Mark[] {
  return ticks.flatMap((tick) => {
    if (tick.label === null) return []
    const half = (tick.label.length * LABEL_PIXELS * 0.6) / 2
    return [
      {
        kind: 'text' as const,
        x: Math.min(Math.max(scale.toPixel(tick.value), half), width - half),
        y: baseline,
        text: tick.label,
        face: 'mono' as const,
        sizePixels: LABEL_PIXELS,
        weight: 400,
        ink: 'pencil' as const,
        anchor: 'middle' as const,
      },
    ]
  })
}
