import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { tracePath, type Box } from '@/components/plot/path'
import { linearScale, pixelsOf, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import { valueTicks, type Tick } from '@/components/plot/ticks'
import { traceStyles, type TraceId } from '@/components/plot/trace-style'
import { delayUnit } from '../../stack/paint-plan'
import { valueSpan, type DigitalSamples, type TimeCurves, type TimeKind } from './time-curves'

/* The static layer of the time plot: paper, the analog curve in ink, the samples of the digital versions. */

export interface TimeFrame {
  readonly width: number
  readonly height: number
  readonly box: Box
  /** Seconds to pixels. */
  readonly x: Scale
  readonly y: Scale
}

const AXIS_PIXELS = 22
const LEFT_PIXELS = 58

const plotHeight = (width: number): number => (width < 560 ? 230 : 300)

export function timeFrame(width: number, span: Span, curves: TimeCurves): TimeFrame {
  const height = plotHeight(width)
  const box = { left: width < 560 ? 44 : LEFT_PIXELS, top: 6, right: width, bottom: height - AXIS_PIXELS }
  return {
    width,
    height,
    box,
    x: linearScale(span, [box.left, box.right]),
    y: linearScale(valueSpan(curves), [box.bottom, box.top]),
  }
}

/** h(t) is a density in time: per second, per millisecond …, so that its numbers stay short. */
function densityUnit(most: number): { readonly symbol: string; readonly perUnit: number } {
  if (most >= 5e6) return { symbol: '1/µs', perUnit: 1e6 }
  return most >= 5e3 ? { symbol: '1/ms', perUnit: 1e3 } : { symbol: '1/s', perUnit: 1 }
}

/** Unit of the values: none for a step response. */
export function valueUnit(kind: TimeKind, curves: TimeCurves): { readonly symbol: string; readonly perUnit: number } {
  if (kind === 'step') return { symbol: '', perUnit: 1 }
  const [low, high] = valueSpan(curves)
  return densityUnit(Math.max(-low, high))
}

export function timeScene(kind: TimeKind, curves: TimeCurves, frame: TimeFrame): Scene {
  const { box, x, y, width, height } = frame
  const timeUnit = delayUnit(Math.max(Math.abs(x.domain[0]), Math.abs(x.domain[1])))
  const xTicks = valueTicks('plain', x, width < 560 ? 64 : 84, timeUnit.perUnit).map((tick): Tick => ({
    ...tick,
    label: tick.label === null ? null : `${tick.label}\u2009${timeUnit.symbol}`,
  }))
  const yTicks = valueTicks('plain', y, 26, valueUnit(kind, curves).perUnit)
  const samples = [...curves.digital].sort((left, right) => Number(left.stated) - Number(right.stated))
  const inside: Mark[] = [
    ...gridMarks(box, { scale: x, ticks: xTicks }, { scale: y, ticks: yTicks }),
    ...analogMarks(curves, frame),
    ...samples.flatMap((version, index) => sampleMarks(version, kind, frame, index)),
  ]
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box, ink: 'sheet' },
      { kind: 'clip', box, marks: inside },
      frameMark(box),
      ...valueLabels(box, y, yTicks),
      ...frequencyLabels(height - 6, width, x, xTicks),
    ],
  }
}

function analogMarks({ analog }: TimeCurves, { x, y, box }: TimeFrame): Mark[] {
  if (!analog) return []
  const { ink, widthPixels } = traceStyles.analog
  const stroke = { ink, widthPixels }
  const marks: Mark[] = [
    { kind: 'path', points: tracePath(pixelsOf(x, analog.timesSeconds), analog.values, y, box), stroke },
  ]
  if (analog.impulseArea === 0) return marks
  // An arrow stands for what has area but no height.
  const at = x.toPixel(0)
  const up = analog.impulseArea > 0
  const tip = up ? box.top + 6 : box.bottom - 6
  const barb = up ? 8 : -8
  marks.push(line(at, y.toPixel(0), at, tip, stroke), {
    kind: 'path',
    points: Float64Array.of(at - 4.5, tip + barb, at, tip, at + 4.5, tip + barb),
    stroke,
  })
  return marks
}

/** Samples closer together than this are drawn as a curve. */
const APART_PIXELS = 7
const MARKER_GAP_PIXELS = 150
const MARKER_RADIUS = 3.2

function sampleMarks(version: DigitalSamples, kind: TimeKind, frame: TimeFrame, index: number): Mark[] {
  const { x, y, box } = frame
  const pixelsApart = x.toPixel(1 / version.sampleRateHz) - x.toPixel(0)
  const times = Float64Array.from(version.values, (_, k) => (version.first + k) / version.sampleRateHz)
  const xs = pixelsOf(x, times)
  const style = traceStyles[version.id]
  const stroke = { ink: style.ink, widthPixels: style.widthPixels, dash: style.dash }
  if (pixelsApart < APART_PIXELS) {
    const path: Mark = { kind: 'path', points: tracePath(xs, version.values, y, box), stroke }
    const every = Math.max(1, Math.round(MARKER_GAP_PIXELS / pixelsApart))
    const offset = Math.round(every * (0.35 + index / 5))
    return [path, ...markers(version.id, xs, version.values, y, (n) => (version.first + n) % every === offset % every)]
  }
  const joined = version.stated
    ? kind === 'step'
      ? heldSteps(xs, version.values, pixelsApart, y)
      : stems(xs, version.values, y)
    : tracePath(xs, version.values, y, box)
  const thin = { ...stroke, widthPixels: 1.2, ...(version.stated ? { dash: [] } : { opacity: 0.55 }) }
  return [{ kind: 'path', points: joined, stroke: thin }, ...markers(version.id, xs, version.values, y, () => true)]
}

function markers(
  id: TraceId,
  xs: Float64Array,
  values: Float64Array,
  y: Scale,
  wanted: (k: number) => boolean,
): Mark[] {
  const { marker, ink } = traceStyles[id]
  if (!marker) return []
  const marks: Mark[] = []
  xs.forEach((at, k) => {
    const value = values[k] ?? Number.NaN
    if (!wanted(k) || !Number.isFinite(value)) return
    marks.push({
      kind: 'marker',
      shape: marker,
      x: at,
      y: y.toPixel(value),
      radius: MARKER_RADIUS,
      stroke: { ink, widthPixels: 1.3 },
      fill: 'sheet',
    })
  })
  return marks
}

/** As a converter holds each value until the next. */
function heldSteps(xs: Float64Array, values: Float64Array, pixelsApart: number, y: Scale): Float64Array {
  const points: number[] = []
  xs.forEach((at, k) => {
    const level = y.toPixel(values[k] ?? Number.NaN)
    points.push(at, level, at + pixelsApart, level)
  })
  return Float64Array.from(points)
}

function stems(xs: Float64Array, values: Float64Array, y: Scale): Float64Array {
  const ground = crisp(y.toPixel(0))
  const points: number[] = []
  xs.forEach((at, k) => points.push(at, ground, at, y.toPixel(values[k] ?? Number.NaN), Number.NaN, Number.NaN))
  return Float64Array.from(points)
}
