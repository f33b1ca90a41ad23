import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import type { Ink } from '@/components/plot/palette'
import { tracePath, type Box } from '@/components/plot/path'
import { pixelsOf, scaleOf, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import { frequencyTicks, valueTicks, type Quantity, type Tick } from '@/components/plot/ticks'
import type { MarkerShape } from '@/components/plot/trace-style'
import { formatNumber } from '@/lib/format/quantity'

/* One plot of the drawer as data: curves, bands and limits over one axis. All panels of a chain draw theirs this way. */

export interface Curve {
  readonly name: string
  readonly x: Float64Array
  readonly y: Float64Array
  readonly ink: Ink
  readonly dash?: readonly number[]
  readonly widthPixels?: number
  /** Drawn at each point, so that few points are seen as such. */
  readonly marker?: MarkerShape
}

/** The ground between two curves over one axis. */
export interface Band {
  readonly x: Float64Array
  readonly low: Float64Array
  readonly high: Float64Array
  readonly ink: Ink
  readonly opacity: number
}

export interface LinesPlan {
  readonly title: string
  readonly x: { readonly kind: Scale['kind']; readonly span: Span; readonly are: 'hertz' | 'plain' }
  readonly y: {
    readonly span: Span
    readonly kind?: Scale['kind']
    readonly quantity: Quantity
    readonly sign: string
    readonly perUnit?: number
  }
  readonly curves: readonly Curve[]
  readonly bands?: readonly Band[]
  /** A stretch of the axis shaded over the whole height: the kept band. */
  readonly kept?: Span
  /** What a value may not pass, over a stretch of the axis. */
  readonly limits?: readonly { readonly from: number; readonly to: number; readonly at: number }[]
  /** Belongs to what no longer holds. */
  readonly faded?: boolean
}

export interface LinesFrame {
  readonly width: number
  readonly height: number
  readonly box: Box
  readonly x: Scale
  readonly y: Scale
}

const AXIS_PIXELS = 22

export function linesFrame(width: number, { x, y }: LinesPlan): LinesFrame {
  const isNarrow = width < 560
  const height = isNarrow ? 210 : 236
  const box = { left: isNarrow ? 54 : 62, top: 6, right: width - 1, bottom: height - AXIS_PIXELS }
  return {
    width,
    height,
    box,
    x: scaleOf(x.kind, x.span, [box.left, box.right]),
    y: scaleOf(y.kind ?? 'linear', y.span, [box.bottom, box.top]),
  }
}

export function linesScene(plan: LinesPlan, frame: LinesFrame): Scene {
  const { box, x, y, width, height } = frame
  const room = width < 560 ? 62 : 78
  const xTicks =
    plan.x.are === 'hertz' ? frequencyTicks({ scale: x, normalised: false }, room) : valueTicks('plain', x, room)
  const yTicks = (
    plan.y.kind === 'log' ? decades(y, plan.y.perUnit) : valueTicks(plan.y.quantity, y, 26, plan.y.perUnit)
  ).map((tick): Tick => ({ ...tick, label: tick.label === null ? null : `${tick.label}${plan.y.sign}` }))
  const opacity = plan.faded ? 0.4 : 1
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box, ink: 'sheet' },
      {
        kind: 'clip',
        box,
        marks: [
          ...gridMarks(box, { scale: x, ticks: xTicks }, { scale: y, ticks: yTicks }),
          ...(plan.kept ? keptMarks(plan.kept, frame) : []),
          ...(plan.bands ?? []).map((band): Mark => ({
            kind: 'wash',
            outline: bandOutline(band, frame),
            ink: band.ink,
            opacity: band.opacity * opacity,
          })),
          ...plan.curves.flatMap((curve) => curveMarks(curve, frame, opacity)),
          ...(plan.limits ?? []).flatMap((limit) => limitMarks(limit, frame)),
        ],
      },
      frameMark(box),
      ...valueLabels(box, y, yTicks),
      ...frequencyLabels(height - 6, width, x, xTicks),
    ],
  }
}

function keptMarks([from, to]: Span, { x, box }: LinesFrame): Mark[] {
  const within = (value: number) => Math.min(x.domain[1], Math.max(x.domain[0], value))
  const [left, right] = [x.toPixel(within(from)), x.toPixel(within(to))]
  const edge = { ink: 'moss', widthPixels: 1 } as const
  return [
    { kind: 'fill', box: { ...box, left, right }, ink: 'moss', opacity: 0.08 },
    ...(from > x.domain[0] ? [line(crisp(left), box.top, crisp(left), box.bottom, edge)] : []),
    ...(to < x.domain[1] ? [line(crisp(right), box.top, crisp(right), box.bottom, edge)] : []),
  ]
}

function bandOutline({ x: values, low, high }: Band, { x, y, box }: LinesFrame): Float64Array {
  const points: number[] = []
  const clamped = (value: number) => Math.min(box.bottom + 4, Math.max(box.top - 4, y.toPixel(value)))
  for (let i = 0; i < values.length; i++)
    points.push(x.toPixel(values[i] ?? Number.NaN), clamped(high[i] ?? Number.NaN))
  for (let i = values.length - 1; i >= 0; i--)
    points.push(x.toPixel(values[i] ?? Number.NaN), clamped(low[i] ?? Number.NaN))
  return Float64Array.from(points)
}

function curveMarks(curve: Curve, { x, y, box }: LinesFrame, opacity: number): Mark[] {
  const { ink, dash, widthPixels = 1.6, marker } = curve
  const xs = pixelsOf(x, curve.x)
  const path: Mark = {
    kind: 'path',
    points: tracePath(xs, curve.y, y, box),
    stroke: { ink, widthPixels, opacity, ...(dash ? { dash } : {}) },
  }
  if (!marker) return [path]
  const marks: Mark[] = [path]
  curve.y.forEach((value, i) => {
    const at = y.toPixel(value)
    if (!Number.isFinite(at)) return
    marks.push({
      kind: 'marker',
      shape: marker,
      x: xs[i] ?? 0,
      y: at,
      radius: 4,
      stroke: { ink, widthPixels: 1.4, opacity },
      fill: 'sheet',
    })
  })
  return marks
}

function limitMarks({ from, to, at }: { from: number; to: number; at: number }, { x, y, box }: LinesFrame): Mark[] {
  const stroke = { ink: 'vermilion', widthPixels: 1.25 } as const
  const level = crisp(y.toPixel(at))
  const within = (value: number) => Math.min(x.domain[1], Math.max(x.domain[0], value))
  const end = x.toPixel(within(to))
  const away = at >= 0 ? box.top : box.bottom
  return [
    line(x.toPixel(within(from)), level, end, level, stroke),
    ...(to < x.domain[1] ? [line(crisp(end), level, crisp(end), away, stroke)] : []),
  ]
}

function decades(scale: Scale, perUnit = 1): Tick[] {
  const [from, to] = scale.domain
  const ticks: Tick[] = []
  for (let power = Math.floor(Math.log10(from)); power <= Math.ceil(Math.log10(to)); power++)
    for (const digit of [1, 2, 5]) {
      const value = Number((digit * 10 ** power).toPrecision(12))
      if (value < from * (1 - 1e-9) || value > to * (1 + 1e-9)) continue
      ticks.push({ value, label: formatNumber(value / perUnit, 3), strong: digit === 1 })
    }
  return ticks
}

/** A span that holds all finite values, with a little room; at least `least` wide. */
export function spanOf(arrays: readonly Float64Array[], least: number, within: Span = [-1e300, 1e300]): Span {
  let low = Number.POSITIVE_INFINITY
  let high = Number.NEGATIVE_INFINITY
  for (const values of arrays)
    for (const value of values) {
      if (!Number.isFinite(value)) continue
      low = Math.min(low, value)
      high = Math.max(high, value)
    }
  if (low > high) [low, high] = [0, 0]
  const short = Math.max(0, least - (high - low)) / 2
  const room = 0.06 * Math.max(least, high - low)
  return [Math.max(within[0], low - short - room), Math.min(within[1], high + short + room)]
}

/** The values of a curve at one place by linear interpolation; NaN beyond its ends. */
export function curveAt({ x, y }: Pick<Curve, 'x' | 'y'>, at: number): number {
  let low = 0
  let high = x.length - 1
  if (high < 0 || at < (x[0] ?? Number.NaN) * (1 - 1e-12) || at > (x[high] ?? Number.NaN) * (1 + 1e-12))
    return Number.NaN
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if ((x[middle] ?? 0) <= at) low = middle
    else high = middle
  }
  const [x0 = 0, x1 = 0, y0 = Number.NaN, y1 = Number.NaN] = [x[low], x[high], y[low], y[high]]
  return x1 === x0 ? y0 : y0 + (y1 - y0) * Math.min(1, Math.max(0, (at - x0) / (x1 - x0)))
}
