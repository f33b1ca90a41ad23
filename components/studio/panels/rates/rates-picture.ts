import { frameMark, gridMarks, valueLabels } from '@/components/plot/axes'
import { tracePath, type Box } from '@/components/plot/path'
import { logScale, pixelsOf, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import type { Tick } from '@/components/plot/ticks'
import { traceStyles } from '@/components/plot/trace-style'
import type { MethodName } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { interpolated } from './curves'
import type { DepartureUnit, RateCurve } from './questions'

/* The static layer: the worst departure of every method over the sampling rate, both logarithmic. */

export interface RatesFrame {
  readonly width: number
  readonly height: number
  readonly box: Box
  /** Sampling rate in Hz to pixels. */
  readonly x: Scale
  /** The departure in its unit to pixels. */
  readonly y: Scale
}

const AXIS_PIXELS = 36
const isNarrow = (width: number): boolean => width < 560

export function ratesFrame(width: number, ratesHz: Span, levels: Span): RatesFrame {
  const height = isNarrow(width) ? 240 : 264
  const box = { left: isNarrow(width) ? 52 : 64, top: 22, right: width - 1, bottom: height - AXIS_PIXELS }
  return { width, height, box, x: logScale(ratesHz, [box.left, box.right]), y: logScale(levels, [box.bottom, box.top]) }
}

export const unitSign: Record<DepartureUnit, string> = { db: '\u2009dB', degrees: '°', microseconds: '\u2009µs' }

export interface RatesPlan {
  readonly curves: readonly RateCurve[]
  readonly unit: DepartureUnit
  readonly edgeHz: number
  readonly stated: MethodName
  /** Lowest rates that keep the budget. */
  readonly kept: readonly { readonly id: MethodName; readonly sampleRateHz: number }[]
  /** An answer to an older question, shown until the new one is there. */
  readonly faded: boolean
}

export function ratesScene(plan: RatesPlan, frame: RatesFrame): Scene {
  const { box, x, y, width, height } = frame
  const xTicks = rateTicks(x, plan.edgeHz, isNarrow(width) ? 50 : 62)
  const yTicks = levelTicks(y, unitSign[plan.unit])
  const curves = [...plan.curves].sort((a, b) => Number(a.id === plan.stated) - Number(b.id === plan.stated))
  const inside = [
    ...gridMarks(box, { scale: x, ticks: xTicks }, { scale: y, ticks: yTicks }),
    ...curves.map((curve) => curveMark(curve, plan, frame)),
    ...(plan.faded ? [] : curves.flatMap((curve, index) => spacedMarkers(curve, index, plan, frame))),
    ...(plan.faded ? [] : plan.kept.flatMap((answer) => keptMarks(answer, plan, frame))),
  ]
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box, ink: 'sheet' },
      { kind: 'clip', box, marks: inside },
      frameMark(box),
      ...valueLabels(box, y, yTicks),
      ...rateLabels(frame, xTicks, plan.edgeHz),
    ],
  }
}

function curveMark(curve: RateCurve, { unit, faded }: RatesPlan, { x, y, box }: RatesFrame): Mark {
  const { ink, widthPixels, dash } = traceStyles[curve.id]
  const points = tracePath(pixelsOf(x, curve.ratesHz), curve[unit], y, box)
  return { kind: 'path', points, stroke: { ink, widthPixels, dash, ...(faded ? { opacity: 0.35 } : {}) } }
}

const MARKER_RADIUS = 3.5

function spacedMarkers(curve: RateCurve, index: number, { unit }: RatesPlan, { x, y, box, width }: RatesFrame): Mark[] {
  const { marker, ink } = traceStyles[curve.id]
  if (!marker) return []
  const gap = isNarrow(width) ? 100 : 170
  const marks: Mark[] = []
  for (let at = box.left + gap * (0.3 + index / 5); at < box.right; at += gap) {
    const level = y.toPixel(interpolated(curve, unit, x.toValue(at)))
    if (!(level > box.top + MARKER_RADIUS && level < box.bottom - MARKER_RADIUS)) continue
    marks.push({
      kind: 'marker',
      shape: marker,
      x: at,
      y: level,
      radius: MARKER_RADIUS,
      stroke: { ink, widthPixels: 1.4 },
      fill: 'sheet',
    })
  }
  return marks
}

/** From the curve down to the axis at the lowest rate that keeps the budget. */
function keptMarks(answer: RatesPlan['kept'][number], { curves, unit }: RatesPlan, { x, y, box }: RatesFrame): Mark[] {
  const curve = curves.find(({ id }) => id === answer.id)
  const at = x.toPixel(answer.sampleRateHz)
  if (!curve || at < box.left || at > box.right) return []
  const { ink, marker } = traceStyles[answer.id]
  const level = Math.min(box.bottom - 2, Math.max(box.top, y.toPixel(interpolated(curve, unit, answer.sampleRateHz))))
  const marks: Mark[] = [line(crisp(at), level, crisp(at), box.bottom, { ink, widthPixels: 1, dash: [2, 3] })]
  if (marker) {
    marks.push({
      kind: 'marker',
      shape: marker,
      x: at,
      y: level,
      radius: 4.5,
      stroke: { ink, widthPixels: 1.4 },
      fill: ink,
    })
  }
  return marks
}

/** Decades, and between them 2 and 5 where there is room for their lines. */
export function levelTicks(y: Scale, sign: string): Tick[] {
  const [from, to] = y.domain
  const pixelsPerDecade = Math.abs(y.range[1] - y.range[0]) / Math.log10(to / from)
  const everyNth = Math.max(1, Math.ceil(20 / pixelsPerDecade))
  const ticks: Tick[] = []
  for (let power = Math.floor(Math.log10(from)); power <= Math.ceil(Math.log10(to)); power++) {
    for (const digit of pixelsPerDecade > 36 ? [1, 2, 5] : [1]) {
      const value = Number((digit * 10 ** power).toPrecision(12))
      if (value < from * (1 - 1e-9) || value > to * (1 + 1e-9)) continue
      const isLabelled = digit === 1 && power % everyNth === 0
      ticks.push({
        value,
        label: isLabelled ? `${formatNumber(value, 3)}${sign}` : null,
        strong: digit === 1 && isLabelled,
      })
    }
  }
  return ticks
}

const digitSets = [
  { digits: [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8], tightest: Math.log10(6 / 5) },
  { digits: [1, 1.5, 2, 3, 4, 6, 8], tightest: Math.log10(10 / 8) },
  { digits: [1, 2, 3, 5, 7], tightest: Math.log10(7 / 5) },
  { digits: [1, 2, 5], tightest: Math.log10(2) },
] as const

/** At round multiples of the highest edge; the label is the multiple. */
export function rateTicks(x: Scale, edgeHz: number, labelPixels: number): Tick[] {
  const [from, to] = x.domain.map((hertz) => hertz / edgeHz)
  if (from === undefined || to === undefined) return []
  const pixelsPerDecade = Math.abs(x.range[1] - x.range[0]) / Math.log10(to / from)
  const { digits } = digitSets.find(({ tightest }) => tightest * pixelsPerDecade >= labelPixels) ?? { digits: [1] }
  const ticks: Tick[] = []
  for (let power = Math.floor(Math.log10(from)); power <= Math.ceil(Math.log10(to)); power++) {
    for (const digit of digits) {
      const multiple = Number((digit * 10 ** power).toPrecision(12))
      if (multiple < from || multiple > to) continue
      ticks.push({ value: multiple * edgeHz, label: `${formatNumber(multiple, 3)}×`, strong: digit === 1 })
    }
  }
  return ticks
}

const LABEL_PIXELS = 10.5

/** Two rows under the plot: the multiple of the edge, and the rate itself. */
function rateLabels({ x, height, width }: RatesFrame, ticks: readonly Tick[], edgeHz: number): Mark[] {
  const words = (text: string, at: number, baseline: number): Mark => {
    const half = (text.length * LABEL_PIXELS * 0.6) / 2
    return {
      kind: 'text',
      x: Math.min(Math.max(at, half), width - half),
      y: baseline,
      text,
      face: 'mono',
      sizePixels: LABEL_PIXELS,
      weight: 400,
      ink: 'pencil',
      anchor: 'middle',
    }
  }
  return ticks.flatMap(({ value, label }) => {
    const at = x.toPixel(value)
    return [words(label ?? formatNumber(value / edgeHz, 3), at, height - 20), words(formatHz(value, 3), at, height - 6)]
  })
}
