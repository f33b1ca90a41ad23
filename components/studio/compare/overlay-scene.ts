import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { groundMarks } from '@/components/plot/ground'
import { tracePath, type Box } from '@/components/plot/path'
import { linearScale, logScale, pixelsOf, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene, type Stroke } from '@/components/plot/scene'
import { frequencyTicks, valueTicks, type Quantity } from '@/components/plot/ticks'
import type { Curve, Curves, PlacedCurve } from './curves'
import { sideStyle } from './side-styles'
import { inSentence } from './sides'

export type DifferenceUnit = 'db' | 'degrees' | 'microseconds'

const foldStroke: Stroke = { ink: 'vermilion', widthPixels: 1.2, dash: [5, 4] }

const gutter = { left: 54, right: 8, top: 6, between: 10, below: 22 } as const

interface PlotPlan {
  readonly title: string
  readonly heightPixels: number
  readonly quantity: Quantity
  /** What the axis counts in, in the unit of the values: 0.001 for milliseconds. */
  readonly perUnit: number
  readonly traces: readonly { readonly curve: PlacedCurve; readonly values: Float64Array }[]
  readonly domain: Span
}

export interface OverlayWords {
  readonly unit: DifferenceUnit
  /** Label of the side that differences are taken from. */
  readonly base: string
}

/** The overlaid responses, and under them the differences from the base, as a picture of that width; heights are fixed. */
export function overlayScene(curves: Curves, words: OverlayWords, widthPixels: number): Scene {
  const plans = plansOf(curves, words)
  const foldsHz = curves.sides.map(({ frequenciesHz }) => frequenciesHz.at(-1) ?? curves.toHz)
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
  foldsHz: readonly number[],
): Mark[] {
  const yScale = linearScale(plan.domain, [box.bottom, box.top])
  const yTicks = valueTicks(plan.quantity, yScale, 26, plan.perUnit)
  const lowerFold = Math.min(...foldsHz)
  const traces = plan.traces.flatMap(({ curve, values }): Mark[] => {
    const xs = pixelsOf(xScale, curve.frequenciesHz)
    const { stroke } = sideStyle(curve.place)
    const path: Mark = { kind: 'path', points: tracePath(xs, values, yScale, box), stroke }
    return [path, ...markers(curve.place, xs, values, yScale, box)]
  })
  const folds = [...new Set(foldsHz)].map((hertz) => {
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

/** Six markers along a trace, set off from the others' so that all are seen where traces coincide. */
function markers(place: number, xs: Float64Array, values: Float64Array, yScale: Scale, box: Box): Mark[] {
  const { stroke, marker } = sideStyle(place)
  const first = xs[0] ?? 0
  const reach = (xs.at(-1) ?? 0) - first
  const marks: Mark[] = []
  for (let k = 0; k < 6; k++) {
    const wanted = first + (reach * (k + 0.14 + 0.24 * place)) / 6
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

function plansOf({ sides, differences }: Curves, { unit, base }: OverlayWords): readonly PlotPlan[] {
  const all = (values: (curve: Curve) => Float64Array) => sides.map((curve) => ({ curve, values: values(curve) }))
  const magnitudes = all((curve) => curve.magnitudeDb)
  const phases = all((curve) => curve.phaseDegrees)
  const delays = all((curve) => curve.delaySeconds)
  const delayUnit = delayScale(delays)
  const plans: PlotPlan[] = [
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
  ]
  if (differences.length === 0) return plans
  const traces = differences.map((curve) => ({ curve, values: differenceValues(curve, unit) }))
  return [
    ...plans,
    {
      title: `${differenceTitles[unit]} from ${inSentence(base)}, ${unitSymbols[unit]}`,
      heightPixels: 150,
      quantity: unit === 'db' ? 'decibels' : unit === 'degrees' ? 'degrees' : 'plain',
      perUnit: 1,
      traces,
      domain: unit === 'db' ? differenceSpan(traces) : spanOf(traces, 0.01),
    },
  ]
}

const differenceTitles: Readonly<Record<DifferenceUnit, string>> = {
  db: 'Difference of magnitude',
  degrees: 'Difference of phase',
  microseconds: 'Difference of group delay',
}
const unitSymbols: Readonly<Record<DifferenceUnit, string>> = { db: 'dB', degrees: '°', microseconds: 'µs' }

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
