import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { groundMarks } from '@/components/plot/ground'
import { tracePath, type Box } from '@/components/plot/path'
import { linearScale, logScale, pixelsOf, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene, type Stroke } from '@/components/plot/scene'
import { frequencyTicks, valueTicks, type Quantity } from '@/components/plot/ticks'
import type { MarkerShape } from '@/components/plot/trace-style'
import type { Curve, Curves } from './curves'

export type DifferenceUnit = 'db' | 'degrees' | 'microseconds'

/** The earlier one is thin, dashed and square; the later one full and round. */
const sideStyles = {
  left: { stroke: { ink: 'slate', widthPixels: 1.6, dash: [7, 4] }, marker: 'square' },
  right: { stroke: { ink: 'spruce', widthPixels: 1.9 }, marker: 'circle' },
} as const satisfies Record<'left' | 'right', { stroke: Stroke; marker: MarkerShape }>

const differenceStroke: Stroke = { ink: 'ink', widthPixels: 1.6 }
const foldStroke: Stroke = { ink: 'vermilion', widthPixels: 1.2, dash: [5, 4] }

const gutter = { left: 54, right: 8, top: 6, between: 10, below: 22 } as const

interface PlotPlan {
  readonly title: string
  readonly heightPixels: number
  readonly quantity: Quantity
  /** What the axis counts in, in the unit of the values: 0.001 for milliseconds. */
  readonly perUnit: number
  readonly traces: readonly {
    readonly of: 'left' | 'right' | 'difference'
    readonly curve: Curve
    readonly values: Float64Array
  }[]
  readonly domain: Span
}

/** The overlaid responses as a picture of that width; heights are fixed. */
export function overlayScene(
  curves: Curves,
  foldsHz: { readonly left: number; readonly right: number },
  unit: DifferenceUnit,
  widthPixels: number,
): Scene {
  const plans = plansOf(curves, unit)
  const right = widthPixels - gutter.right
  const scale = logScale([curves.fromHz, curves.toHz], [gutter.left, right])
  const ticks = frequencyTicks({ scale, normalised: false })
  const marks: Mark[] = []
  let top: number = gutter.top
  for (const plan of plans) {
    const box: Box = { left: gutter.left, top, right, bottom: top + plan.heightPixels }
    marks.push(...plotMarks(plan, box, scale, ticks, foldsHz))
    top = box.bottom + gutter.between
  }
  const bottom = top - gutter.between
  marks.push(...frequencyLabels(bottom + 16, widthPixels, scale, ticks))
  return { width: widthPixels, height: bottom + gutter.below, marks }
}

function plotMarks(
  plan: PlotPlan,
  box: Box,
  xScale: Scale,
  xTicks: ReturnType<typeof frequencyTicks>,
  foldsHz: { readonly left: number; readonly right: number },
): Mark[] {
  const yScale = linearScale(plan.domain, [box.bottom, box.top])
  const yTicks = valueTicks(plan.quantity, yScale, 26, plan.perUnit)
  const lowerFold = Math.min(foldsHz.left, foldsHz.right)
  const traces = plan.traces.flatMap(({ of, curve, values }) => {
    const xs = pixelsOf(xScale, curve.frequenciesHz)
    const stroke = of === 'difference' ? differenceStroke : sideStyles[of].stroke
    const path: Mark = { kind: 'path', points: tracePath(xs, values, yScale, box), stroke }
    return of === 'difference' ? [path] : [path, ...markers(of, xs, values, yScale, box)]
  })
  const folds = [...new Set([foldsHz.left, foldsHz.right])].map((hertz) => {
    const x = Math.min(crisp(xScale.toPixel(hertz)), box.right - 0.5)
    return line(x, box.top, x, box.bottom, foldStroke)
  })
  return [
    { kind: 'fill', box, ink: 'sheet' },
    ...gridMarks(box, { scale: xScale, ticks: xTicks }, { scale: yScale, ticks: yTicks }),
    ...groundMarks(
      {
        plot: 'any',
        kind: 'beyond-fold',
        fromHz: lowerFold,
        toHz: Number.POSITIVE_INFINITY,
        fromY: -Infinity,
        toY: Infinity,
      },
      box,
      xScale,
      yScale,
    ),
    { kind: 'clip', box, marks: [...traces, ...folds] },
    frameMark(box),
    ...valueLabels(box, yScale, yTicks),
    {
      kind: 'text',
      x: box.left + 8,
      y: box.bottom - 8,
      text: plan.title,
      face: 'text',
      sizePixels: 12,
      weight: 500,
      ink: 'ink',
      anchor: 'start',
      halo: 'sheet',
    },
  ]
}

/** Six markers along a trace, set off from the other's so that both are seen where the traces coincide. */
function markers(of: 'left' | 'right', xs: Float64Array, values: Float64Array, yScale: Scale, box: Box): Mark[] {
  const { stroke, marker } = sideStyles[of]
  const first = xs[0] ?? 0
  const reach = (xs.at(-1) ?? 0) - first
  const marks: Mark[] = []
  for (let k = 0; k < 6; k++) {
    const wanted = first + (reach * (k + (of === 'left' ? 0.3 : 0.7))) / 6
    const at = xs.findIndex((x) => x >= wanted)
    const y = yScale.toPixel(values[at] ?? Number.NaN)
    if (!(y > box.top && y < box.bottom)) continue
    marks.push({
      kind: 'marker',
      shape: marker,
      x: xs[at] ?? 0,
      y,
      radius: 3.4,
      stroke: { ink: stroke.ink, widthPixels: 1.4 },
      fill: 'sheet',
    })
  }
  return marks
}

function plansOf({ left, right, difference }: Curves, unit: DifferenceUnit): readonly PlotPlan[] {
  const both = (values: (curve: Curve) => Float64Array) =>
    [
      { of: 'left', curve: left, values: values(left) },
      { of: 'right', curve: right, values: values(right) },
    ] as const
  const magnitudes = both((curve) => curve.magnitudeDb)
  const phases = both((curve) => curve.phaseDegrees)
  const delays = both((curve) => curve.delaySeconds)
  const delayUnit = delayScale(delays)
  const differences = [{ of: 'difference', curve: difference, values: differenceValues(difference, unit) }] as const
  return [
    {
      title: 'Magnitude, dB',
      heightPixels: 190,
      quantity: 'decibels',
      perUnit: 1,
      traces: magnitudes,
      domain: levelSpan(magnitudes),
    },
    {
      title: 'Phase, °',
      heightPixels: 110,
      quantity: 'degrees',
      perUnit: 1,
      traces: phases,
      domain: spanOf(phases, 1),
    },
    {
      title: `Group delay, ${delayUnit.name}`,
      heightPixels: 110,
      quantity: 'plain',
      perUnit: delayUnit.perUnit,
      traces: delays,
      domain: spanOf(delays, delayUnit.perUnit / 1000),
    },
    {
      title: differenceTitles[unit],
      heightPixels: 120,
      quantity: unit === 'db' ? 'decibels' : unit === 'degrees' ? 'degrees' : 'plain',
      perUnit: 1,
      traces: differences,
      domain: unit === 'db' ? differenceSpan(differences) : spanOf(differences, 0.01),
    },
  ]
}

const differenceTitles: Readonly<Record<DifferenceUnit, string>> = {
  db: 'Difference of magnitude, dB',
  degrees: 'Difference of phase, °',
  microseconds: 'Difference of group delay, µs',
}

export function differenceValues(difference: Curve, unit: DifferenceUnit): Float64Array {
  if (unit === 'db') return difference.magnitudeDb
  if (unit === 'degrees') return difference.phaseDegrees
  return difference.delaySeconds.map((seconds) => seconds * 1e6)
}

type Traces = readonly { readonly values: Float64Array }[]

const finite = (traces: Traces) => traces.flatMap(({ values }) => Array.from(values).filter(Number.isFinite))

/** From 66 dB below the peak to a little above it. */
function levelSpan(traces: Traces): Span {
  const peak = Math.max(...finite(traces), -300)
  const top = Math.ceil(peak / 6) * 6 + 4
  return [top - 70, top]
}

/** Differences of level grow without bound where one of the two fades out; what lies within 40 dB is shown. */
function differenceSpan(traces: Traces): Span {
  const [low, high] = spanOf(traces, 0.01)
  return [Math.max(low, -40), Math.min(high, 40)]
}

/** All finite values with a margin; at least `least` to either side of what is flat. */
function spanOf(traces: Traces, least: number): Span {
  const values = finite(traces)
  const low = values.reduce((so, value) => Math.min(so, value), Number.POSITIVE_INFINITY)
  const high = values.reduce((so, value) => Math.max(so, value), Number.NEGATIVE_INFINITY)
  if (!(high >= low)) return [-1, 1]
  const margin = Math.max((high - low) * 0.08, least)
  return [low - margin, high + margin]
}

function delayScale(traces: Traces): { name: string; perUnit: number } {
  const most = finite(traces).reduce((so, value) => Math.max(so, Math.abs(value)), 0)
  if (most >= 1) return { name: 's', perUnit: 1 }
  return most >= 1e-3 ? { name: 'ms', perUnit: 1e-3 } : { name: 'µs', perUnit: 1e-6 }
}
