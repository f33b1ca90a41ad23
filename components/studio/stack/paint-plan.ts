import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { groundMarks, type Ground } from '@/components/plot/ground'
import { tracePath, wrappedDegrees, type Box } from '@/components/plot/path'
import { pixelsOf, scaleOf, type Scale } from '@/components/plot/scale'
import { crisp, type Mark, type Scene } from '@/components/plot/scene'
import { frequencyTicks, valueTicks, type Tick } from '@/components/plot/ticks'
import { traceStyles } from '@/components/plot/trace-style'
import type { DesignSpec } from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import type { StackView, Trace } from '../view'
import type { StackFrame } from './frame'
import { isNarrow, plotIds } from './layout'
import type { PlotId, TrustedBand } from './props'
import { microsecondsOf } from './ranges'
import { valueAt } from './read-out'

/*
 * The static layer of the stack as a scene: graph paper, grounds, traces, markers, the fold line and the trusted band. Nothing in here
 * depends on the pointer or the crosshair.
 */

export interface PaintInput {
  readonly spec: DesignSpec
  readonly traces: readonly Trace[]
  readonly trusted: readonly TrustedBand[]
  /** The crosshair of this view is not looked at. */
  readonly view: StackView
  readonly grounds: readonly Ground<PlotId>[]
  /** Something is being pulled: curves are pencilled as hairlines, which paint several times as fast as ink, until it is let go. */
  readonly pencilled?: boolean
}

export interface StackPicture {
  readonly scene: Scene
  /** Stroke of the analog magnitude, by which its slope is grabbed. */
  readonly analogSlope: Float64Array
}

export function stackPicture(input: PaintInput, frame: StackFrame): StackPicture {
  const { spec, view } = input
  const { layout, x } = frame
  const frequencyAxis = frequencyAxisOf(frame, view, spec.sampleRateHz)
  const xTicks = frequencyAxis.ticks
  const ordered = paintOrder(input.traces)
  const columns = columnsOf(ordered, x)
  const grounds = [...foldGround(frame), ...budgetGrounds(spec, view, frame), ...input.grounds]
  const marks: Mark[] = []
  let analogSlope: Float64Array = new Float64Array(0)
  for (const plot of plotIds) {
    const box = layout.plots[plot]
    const y = frame.y[plot]
    const yTicks = ticksOf(plot, frame, view)
    marks.push({ kind: 'fill', box, ink: 'sheet' })
    marks.push({
      kind: 'clip',
      box,
      marks: gridMarks(box, { scale: frequencyAxis.scale, ticks: xTicks }, { scale: y, ticks: yTicks }),
    })
    for (const ground of grounds) if (ground.plot === plot) marks.push(...groundMarks(ground, box, x, y))
    for (const trace of ordered) {
      const xs = columns.get(trace.frequenciesHz)
      if (!xs) continue
      const stroked = traceMarks(trace, plot, xs, frame, input)
      marks.push(...stroked.marks)
      if (trace.id === 'analog' && plot === 'magnitude') analogSlope = stroked.path
    }
    if (plot === 'magnitude') marks.push(...spacedMarkers(ordered, frame, box))
    marks.push(frameMark(box), ...valueLabels(box, y, yTicks))
  }
  marks.push(...frequencyLabels(layout.axis.labelBaseline, layout.width, frequencyAxis.scale, xTicks))
  marks.push(...trustedMarks(input, frame), ...foldLine(frame))
  return { scene: { width: layout.width, height: layout.height, marks }, analogSlope }
}

/** Pixel positions of each frequency grid; digital versions share theirs. */
function columnsOf(traces: readonly Trace[], x: Scale): ReadonlyMap<Float64Array, Float64Array> {
  const columns = new Map<Float64Array, Float64Array>()
  for (const { frequenciesHz } of traces) {
    if (!columns.has(frequenciesHz)) columns.set(frequenciesHz, pixelsOf(x, frequenciesHz))
  }
  return columns
}

/** The analog ink lies lowest, the stated version on top. */
const paintOrder = (traces: readonly Trace[]): readonly Trace[] => {
  const rank = (trace: Trace) => (trace.id === 'analog' ? 0 : trace.stated ? 2 : 1)
  return [...traces].sort((a, b) => rank(a) - rank(b))
}

function frequencyAxisOf(
  frame: StackFrame,
  view: StackView,
  sampleRateHz: number,
): { scale: Scale; ticks: readonly Tick[] } {
  const { x } = frame
  const unit = view.normalised ? sampleRateHz : 1
  const scale = scaleOf(x.kind, [x.domain[0] / unit, x.domain[1] / unit], x.range)
  return {
    scale,
    ticks: frequencyTicks({ scale, normalised: view.normalised }, isNarrow(frame.layout.width) ? 52 : 58),
  }
}

/** The unit that a delay axis up to `seconds` is written in. */
export function delayUnit(seconds: number): { readonly symbol: string; readonly perUnit: number } {
  const units = [
    { symbol: 's', perUnit: 1 },
    { symbol: 'ms', perUnit: 1e-3 },
    { symbol: 'µs', perUnit: 1e-6 },
    { symbol: 'ns', perUnit: 1e-9 },
  ] as const
  return units.find(({ perUnit }) => seconds >= perUnit * 0.999) ?? units[3]
}

function ticksOf(plot: PlotId, frame: StackFrame, view: StackView): Tick[] {
  const scale = frame.y[plot]
  switch (plot) {
    case 'magnitude':
      return valueTicks('decibels', scale, 30)
    case 'phase':
      return valueTicks('degrees', scale, 19)
    case 'group-delay':
      return valueTicks('plain', scale, 19, delayUnit(scale.domain[1]).perUnit)
    case 'departure':
      return valueTicks(
        view.departureUnit === 'db' ? 'decibels' : view.departureUnit === 'degrees' ? 'degrees' : 'plain',
        scale,
        20,
      )
  }
}

const HAIRLINE_PIXELS = 1
const DEGREES = 180 / Math.PI

function plottedCurve(trace: Trace, plot: PlotId, view: StackView): Float64Array | null {
  switch (plot) {
    case 'magnitude':
      return trace.magnitudeDb
    case 'phase':
      return trace.phaseRadians.map((radians) => radians * DEGREES)
    case 'group-delay':
      return trace.groupDelaySeconds
    case 'departure':
      return trace.departure ? trace.departure[view.departureUnit] : null
  }
}

function traceMarks(trace: Trace, plot: PlotId, xs: Float64Array, frame: StackFrame, { view, pencilled }: PaintInput) {
  const box = frame.layout.plots[plot]
  const y = frame.y[plot]
  const style = traceStyles[trace.id]
  const values = plottedCurve(trace, plot, view)
  const empty = new Float64Array(0)
  if (!values) return { path: empty, marks: [] }
  const folds = plot === 'phase' && !view.unwrapped ? wrappedDegrees(xs, values) : { xs, values }
  const path = tracePath(folds.xs, folds.values, y, box)
  const stroke = { ink: style.ink, widthPixels: pencilled ? HAIRLINE_PIXELS : style.widthPixels, dash: style.dash }
  const inner: Mark[] = [{ kind: 'path', points: path, stroke }]
  if (plot === 'magnitude' && trace.image) {
    const image = tracePath(pixelsOf(frame.x, trace.image.frequenciesHz), trace.image.magnitudeDb, y, box)
    inner.unshift({
      kind: 'path',
      points: image,
      stroke: { ...stroke, widthPixels: pencilled ? HAIRLINE_PIXELS : 1.25, opacity: 0.38 },
    })
  }
  const marks: Mark[] = [{ kind: 'clip', box, marks: inner }]
  return { path, marks }
}

const MARKER_GAP_PIXELS = 150
export const MARKER_RADIUS = 3.5

/** Markers stand at even distances, each trace's shifted against the others', so that curves that coincide are still told apart. */
function spacedMarkers(traces: readonly Trace[], frame: StackFrame, box: Box): Mark[] {
  const digital = traces.filter((trace) => traceStyles[trace.id].marker !== null)
  const gap = isNarrow(frame.layout.width) ? 90 : MARKER_GAP_PIXELS
  return digital.flatMap((trace, index) => {
    const style = traceStyles[trace.id]
    if (!style.marker) return []
    const marks: Mark[] = []
    for (let at = box.left + gap * (0.35 + index / (digital.length + 1)); at < box.right; at += gap) {
      const y = frame.y.magnitude.toPixel(valueAt(trace.frequenciesHz, trace.magnitudeDb, frame.x.toValue(at)))
      if (!(y > box.top + MARKER_RADIUS && y < box.bottom - MARKER_RADIUS)) continue
      const stroke = { ink: style.ink, widthPixels: 1.4 }
      marks.push({ kind: 'marker', shape: style.marker, x: at, y, radius: MARKER_RADIUS, stroke, fill: 'sheet' })
    }
    return marks
  })
}

const foldGround = (frame: StackFrame): readonly Ground<PlotId>[] =>
  plotIds.map((plot) => ({
    plot,
    kind: 'beyond-fold',
    fromHz: frame.foldHz,
    toHz: Number.POSITIVE_INFINITY,
    fromY: Number.NEGATIVE_INFINITY,
    toY: Number.POSITIVE_INFINITY,
  }))

/** Where the departure is more than its budget, up to the fold line. */
export function budgetGrounds(spec: DesignSpec, view: StackView, frame: StackFrame): readonly Ground<PlotId>[] {
  const { magnitudeDb, phaseDegrees } = spec.budget
  const unit = view.departureUnit
  const limit = (sign: 1 | -1) => {
    if (unit === 'db') return sign * magnitudeDb
    if (unit === 'degrees') return sign * phaseDegrees
    // One phase is a longer delay at a lower frequency.
    return (hz: number) => sign * microsecondsOf(phaseDegrees, hz)
  }
  const reach = { plot: 'departure', kind: 'budget', fromHz: Number.NEGATIVE_INFINITY, toHz: frame.foldHz } as const
  return [
    { ...reach, fromY: limit(1), toY: Number.POSITIVE_INFINITY },
    { ...reach, fromY: Number.NEGATIVE_INFINITY, toY: limit(-1) },
  ]
}

export const isFoldInView = (frame: StackFrame): boolean =>
  frame.foldHz > frame.x.domain[0] && frame.foldHz < frame.x.domain[1]

function foldLine(frame: StackFrame): Mark[] {
  if (!isFoldInView(frame)) return []
  const at = crisp(frame.x.toPixel(frame.foldHz))
  const points = Float64Array.of(at, 0, at, frame.layout.plots.departure.bottom)
  return [{ kind: 'path', points, stroke: { ink: 'vermilion', widthPixels: 1.5, dash: [5, 3.5] } }]
}

const LABEL_PIXELS = 10.5
const FOLD_TAG_HALF_PIXELS = 24

/** A bar under the departure plot as far as the stated version keeps its budget, with the others' ends as their markers. */
function trustedMarks({ spec, trusted, traces }: PaintInput, frame: StackFrame): Mark[] {
  const { layout, x } = frame
  const { left, right } = layout.plots.departure
  const y = layout.axis.trustedY
  const marks: Mark[] = []
  const end = (hz: number) => (hz > x.domain[0] ? Math.min(right, x.toPixel(hz)) : left)
  const statedId = traces.find((trace) => trace.stated)?.id
  for (const band of trusted) {
    const style = traceStyles[band.id]
    if (band.id === statedId || !style.marker || !traces.some((trace) => trace.id === band.id)) continue
    if (band.upToHz <= x.domain[0] || band.upToHz > x.domain[1]) continue
    const stroke = { ink: style.ink, widthPixels: 1.3 }
    marks.push({ kind: 'marker', shape: style.marker, x: end(band.upToHz), y, radius: 2.6, stroke, fill: 'paper' })
  }
  const stated = trusted.find((band) => band.id === statedId)
  if (!stated) return marks
  const from = end(stated.fromHz ?? 0)
  const to = end(stated.upToHz)
  const text = stated.upToHz > 0 ? `trusted to ${formatHz(stated.upToHz, 3)}` : 'not trusted'
  const length = text.length * LABEL_PIXELS * 0.6
  const foldAt = x.toPixel(spec.sampleRateHz / 2)
  // The fold line's tag hangs into this lane: keep out of its way.
  const meetsTag = to + 8 < foldAt + FOLD_TAG_HALF_PIXELS && to + 8 + length > foldAt - FOLD_TAG_HALF_PIXELS
  const after = meetsTag ? foldAt + FOLD_TAG_HALF_PIXELS + 6 : to + 8
  const isAfter = after + length <= right
  const before = to - 10 - length
  const moss = { ink: 'moss', widthPixels: 2.5 } as const
  const bar = (a: number, b: number): Mark[] =>
    b > a ? [{ kind: 'path', points: Float64Array.of(a, y, b, y), stroke: moss }] : []
  // Words that find no room after the bar interrupt it.
  marks.unshift(...(isAfter ? bar(from, to) : [...bar(from, before - 5), ...bar(to - 6, to)]))
  marks.push({ kind: 'path', points: Float64Array.of(to, y - 4.5, to, y + 4.5), stroke: { ...moss, widthPixels: 2 } })
  marks.push({
    kind: 'text',
    x: isAfter ? after : Math.max(before, from),
    y: y + 3.5,
    text,
    face: 'mono',
    sizePixels: LABEL_PIXELS,
    weight: 400,
    ink: 'moss',
    anchor: 'start',
    halo: 'paper',
  })
  return marks
}
