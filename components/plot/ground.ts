import type { Box } from './path'
import type { Scale } from './scale'
import { crisp, type Mark, type Ruling, type Stroke } from './scene'

/* Ground that a curve must not enter, or that holds no truth: ruled areas with their limiting edges drawn. */

/** A level, or one that changes over frequency; ±Infinity reaches to the plot's own edge. */
type GroundEdge = number | ((hz: number) => number)

type GroundKind = 'budget' | 'limit' | 'beyond-fold'

export interface Ground<Plot extends string> {
  readonly plot: Plot
  readonly kind: GroundKind
  /** −Infinity and Infinity: to the end of the axis. */
  readonly fromHz: number
  readonly toHz: number
  readonly fromY: GroundEdge
  readonly toY: GroundEdge
}

interface GroundLook {
  readonly ruling: Ruling
  readonly gapPixels: number
  readonly stroke: Stroke
  readonly edge: Stroke | null
  /** Draws the ends along frequency too. */
  readonly hasEnds: boolean
}

const looks: Readonly<Record<GroundKind, GroundLook>> = {
  budget: {
    ruling: 'rising',
    gapPixels: 6,
    stroke: { ink: 'vermilion', widthPixels: 1, opacity: 0.26 },
    edge: { ink: 'vermilion', widthPixels: 1.25 },
    hasEnds: false,
  },
  limit: {
    ruling: 'rising',
    gapPixels: 6,
    stroke: { ink: 'vermilion', widthPixels: 1, opacity: 0.26 },
    edge: { ink: 'vermilion', widthPixels: 1.25 },
    hasEnds: true,
  },
  'beyond-fold': {
    ruling: 'falling',
    gapPixels: 6,
    stroke: { ink: 'graph-strong', widthPixels: 1, opacity: 0.75 },
    edge: null,
    hasEnds: false,
  },
}

/** Marks of one ground in its plot, clipped to it. */
export function groundMarks(ground: Ground<string>, box: Box, xScale: Scale, yScale: Scale): Mark[] {
  const left = Math.max(box.left, pixelOrEnd(xScale, ground.fromHz, box.left, box.right))
  const right = Math.min(box.right, pixelOrEnd(xScale, ground.toHz, box.left, box.right))
  if (!(right > left)) return []
  const upper = edgePoints(ground.toY, left, right, box, xScale, yScale)
  const lower = edgePoints(ground.fromY, left, right, box, xScale, yScale)
  const look = looks[ground.kind]
  const outline = Float64Array.from([...upper.points, ...reversed(lower.points)])
  const marks: Mark[] = [
    { kind: 'hatch', outline, ruling: look.ruling, gapPixels: look.gapPixels, stroke: look.stroke },
  ]
  if (look.edge) {
    for (const edge of [upper, lower]) {
      if (edge.isLimit) marks.push({ kind: 'path', points: Float64Array.from(edge.points), stroke: look.edge })
    }
    // The ends stand as well, where they lie inside the plot.
    for (const [hz, at] of [
      [ground.fromHz, left],
      [ground.toHz, right],
    ] as const) {
      if (!look.hasEnds || !Number.isFinite(hz) || at <= box.left || at >= box.right) continue
      const index = at === left ? 0 : upper.points.length - 2
      const points = Float64Array.of(at, upper.points[index + 1] ?? box.top, at, lower.points[index + 1] ?? box.bottom)
      marks.push({ kind: 'path', points, stroke: look.edge })
    }
  }
  return [{ kind: 'clip', box, marks }]
}

function pixelOrEnd(scale: Scale, hz: number, left: number, right: number): number {
  if (hz === Number.POSITIVE_INFINITY) return right
  const pixel = scale.toPixel(hz)
  return Number.isFinite(pixel) ? pixel : left
}

function edgePoints(edge: GroundEdge, left: number, right: number, box: Box, xScale: Scale, yScale: Scale) {
  const pixel = (value: number): number =>
    value === Number.POSITIVE_INFINITY
      ? box.top - 4
      : value === Number.NEGATIVE_INFINITY
        ? box.bottom + 4
        : Math.min(Math.max(yScale.toPixel(value), box.top - 4), box.bottom + 4)
  if (typeof edge === 'number') {
    const y = Number.isFinite(edge) ? crisp(pixel(edge)) : pixel(edge)
    return { points: [left, y, right, y], isLimit: Number.isFinite(edge) }
  }
  const points: number[] = []
  const pieces = Math.max(1, Math.ceil((right - left) / 4))
  for (let i = 0; i <= pieces; i++) {
    const x = left + ((right - left) * i) / pieces
    points.push(x, pixel(edge(xScale.toValue(x))))
  }
  return { points, isLimit: true }
}

function reversed(points: readonly number[]): number[] {
  const out: number[] = []
  for (let i = points.length - 2; i >= 0; i -= 2) out.push(points[i] ?? 0, points[i + 1] ?? 0)
  return out
}
