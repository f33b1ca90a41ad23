import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { tracePath, type Box } from '@/components/plot/path'
import { linearScale, type Scale, type Span } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import { valueTicks, type Tick } from '@/components/plot/ticks'
import { traceStyles, type TraceId, type TraceStyle } from '@/components/plot/trace-style'
import { formatQuantity } from '@/lib/format/quantity'
import type { WindowReading } from './shapes'

/* The recording in time: a lane before, a lane after, one axis under both. */

export interface TimeSceneInput {
  readonly width: number
  readonly sampleRateHz: number
  /** Length of the record in samples. */
  readonly frames: number
  readonly view: { readonly from: number; readonly to: number }
  readonly before: WindowReading | null
  readonly after: WindowReading | null
  readonly unit: string
  /** How the digital version is drawn in the studio. */
  readonly trace: TraceId
  /** What stands in the corner of the lane of the result. */
  readonly afterWords: string
  /** Samples at the beginning that are start-up, and at either end that rest on the extension. */
  readonly startUpFrames: number
  /** Samples by which the result is drawn earlier than it is. */
  readonly shiftFrames: number
  readonly extensionFrames: number
  readonly sameScale: boolean
}

export interface TimePicture {
  readonly scene: Scene
  /** Seconds to pixels. */
  readonly x: Scale
  readonly before: { readonly box: Box; readonly y: Scale }
  readonly after: { readonly box: Box; readonly y: Scale }
}

const LANE_PIXELS = 128
const GAP_PIXELS = 10
const AXIS_PIXELS = 22
const NARROW = 560

const plain: TraceStyle = { ink: 'pencil', widthPixels: 1.25, dash: [], marker: null }

/** Left of the plots there is room for the value labels; the plot is the rest. */
export const plotLeft = (width: number): number => (width < NARROW ? 46 : 58)

export function timeScene(input: TimeSceneInput): TimePicture {
  const { width, view, sampleRateHz } = input
  const left = plotLeft(width)
  const top: Box = { left, top: 4, right: width - 1, bottom: 4 + LANE_PIXELS }
  const bottom: Box = { ...top, top: top.bottom + GAP_PIXELS, bottom: top.bottom + GAP_PIXELS + LANE_PIXELS }
  const height = bottom.bottom + AXIS_PIXELS
  const x = linearScale(
    [view.from / sampleRateHz, Math.max(view.from + 1, view.to - 1) / sampleRateHz],
    [left, top.right],
  )
  const spans = laneSpans(input)
  const before = { box: top, y: linearScale(spans.before, [top.bottom, top.top]) }
  const after = { box: bottom, y: linearScale(spans.after, [bottom.bottom, bottom.top]) }
  const ticks = timeTicks(x, width)
  const marks = [
    ...laneMarks(
      before,
      x,
      ticks,
      input.before,
      plain,
      sampleRateHz,
      { under: [], over: [] },
      laneTitle('Before', input.unit),
    ),
    ...laneMarks(
      after,
      x,
      ticks,
      input.after,
      traceStyles[input.trace],
      sampleRateHz,
      shading(input, bottom, x),
      laneTitle(input.afterWords, input.unit),
    ),
    ...frequencyLabels(height - 6, width, x, ticks),
  ]
  return { scene: { width, height, marks }, x, before, after }
}

const laneTitle = (words: string, unit: string): string => (unit === '' ? words : `${words}, ${unit}`)

/** Seconds, milliseconds or microseconds, as the view is wide; one unit for the whole axis. */
function timeTicks(x: Scale, width: number): Tick[] {
  const span = x.domain[1] - x.domain[0]
  const [perUnit, symbol] = span >= 0.5 ? [1, 's'] : span >= 5e-4 ? [1e-3, 'ms'] : [1e-6, 'µs']
  return valueTicks('plain', x, width < NARROW ? 74 : 96, perUnit).map((tick) => ({
    ...tick,
    label: tick.label === null ? null : `${tick.label}\u2009${symbol}`,
  }))
}

function laneSpans({ before, after, sameScale }: TimeSceneInput): { before: Span; after: Span } {
  const a = extremes(before)
  const b = extremes(after)
  if (!sameScale) return { before: roomy(a ?? [-1, 1]), after: roomy(b ?? a ?? [-1, 1]) }
  const both = roomy(a && b ? [Math.min(a[0], b[0]), Math.max(a[1], b[1])] : (a ?? b ?? [-1, 1]))
  return { before: both, after: both }
}

function extremes(reading: WindowReading | null): Span | null {
  if (!reading) return null
  const [lows, highs] = reading.kind === 'samples' ? [reading.values, reading.values] : [reading.low, reading.high]
  let low = Infinity
  let high = -Infinity
  for (const value of lows) if (value < low) low = value
  for (const value of highs) if (value > high) high = value
  return low <= high ? [low, high] : null
}

function roomy([low, high]: Span): Span {
  const room = high > low ? (high - low) * 0.06 : Math.abs(high) * 0.1 || 1
  return [low - room, high + room]
}

function laneMarks(
  { box, y }: { box: Box; y: Scale },
  x: Scale,
  ticks: readonly Tick[],
  reading: WindowReading | null,
  style: TraceStyle,
  sampleRateHz: number,
  ground: Ground,
  title: string,
): Mark[] {
  const yTicks = valueTicks('plain', y, 24)
  return [
    { kind: 'fill', box, ink: 'sheet' },
    {
      kind: 'clip',
      box,
      marks: [
        ...gridMarks(box, { scale: x, ticks }, { scale: y, ticks: yTicks }),
        ...ground.under,
        ...(reading ? traceMarks(reading, style, x, y, box, sampleRateHz) : []),
        ...ground.over,
      ],
    },
    frameMark(box),
    ...valueLabels(box, y, yTicks),
    {
      kind: 'text',
      x: box.left + 8,
      y: box.top + 16,
      text: title,
      face: 'text',
      sizePixels: 12.5,
      weight: 600,
      ink: 'ink',
      anchor: 'start',
      halo: 'sheet',
    },
  ]
}

function traceMarks(
  reading: WindowReading,
  style: TraceStyle,
  x: Scale,
  y: Scale,
  box: Box,
  sampleRateHz: number,
): Mark[] {
  if (reading.kind === 'envelope') {
    return [
      {
        kind: 'path',
        points: envelopePath(reading, x, y, sampleRateHz),
        stroke: { ink: style.ink, widthPixels: 1.25 },
      },
    ]
  }
  const { from, values } = reading
  const xs = Float64Array.from(values, (_, i) => x.toPixel((from + i) / sampleRateHz))
  const points = tracePath(xs, values, y, box)
  const marks: Mark[] = [
    { kind: 'path', points, stroke: { ink: style.ink, widthPixels: style.widthPixels, dash: style.dash } },
  ]
  const { marker } = style
  // samples stand as markers once they are far enough apart to be told from each other
  if (marker && values.length * 9 < box.right - box.left) {
    const stroke = { ink: style.ink, widthPixels: 1.4 }
    values.forEach((value, i) => {
      if (!Number.isNaN(value))
        marks.push({
          kind: 'marker',
          shape: marker,
          x: xs[i] ?? 0,
          y: y.toPixel(value),
          radius: 3,
          stroke,
          fill: 'sheet',
        })
    })
  }
  return marks
}

/** An upright stroke for each column, long enough to meet its neighbour: a steep edge leaves no hole. */
function envelopePath(
  reading: Extract<WindowReading, { kind: 'envelope' }>,
  x: Scale,
  y: Scale,
  sampleRateHz: number,
): Float64Array {
  const { low, high, from, to } = reading
  const columns = low.length
  const points = new Float64Array(columns * 6)
  let lastLow = NaN
  let lastHigh = NaN
  for (let k = 0; k < columns; k += 1) {
    const at = x.toPixel((from + ((to - from) * (k + 0.5)) / columns) / sampleRateHz)
    const least = low[k]!
    const greatest = high[k]!
    const joinedHigh = lastLow > greatest ? lastLow : greatest
    const joinedLow = lastHigh < least ? lastHigh : least
    const middle = (y.toPixel(joinedHigh) + y.toPixel(joinedLow)) / 2
    const half = Math.max(0.6, (y.toPixel(joinedLow) - y.toPixel(joinedHigh)) / 2)
    points.set([at, middle - half, at, middle + half, NaN, NaN], k * 6)
    lastLow = least
    lastHigh = greatest
  }
  return points
}

interface Ground {
  readonly under: readonly Mark[]
  /** Words that no trace may run through. */
  readonly over: readonly Mark[]
}

/** Hatched ground where the result is not the filter's steady work yet. */
function shading(input: TimeSceneInput, box: Box, x: Scale): Ground {
  const { sampleRateHz, startUpFrames, shiftFrames, extensionFrames, frames } = input
  const under: Mark[] = []
  const over: Mark[] = []
  const strip = (from: number, to: number, words: string, side: 'start' | 'end') => {
    const left = Math.max(box.left, x.toPixel(from / sampleRateHz))
    const right = Math.min(box.right, x.toPixel(to / sampleRateHz))
    if (!(right > left)) return
    under.push(
      {
        kind: 'hatch',
        outline: Float64Array.of(left, box.top, right, box.top, right, box.bottom, left, box.bottom),
        ruling: 'falling',
        gapPixels: 6,
        stroke: { ink: 'ochre', widthPixels: 1, opacity: 0.5 },
      },
      side === 'start'
        ? line(crisp(right), box.top, crisp(right), box.bottom, edge)
        : line(crisp(left), box.top, crisp(left), box.bottom, edge),
    )
    const fits = right - left > words.length * 6.2 + 12
    if (fits || side === 'start') {
      const text = {
        kind: 'text',
        y: box.bottom - 8,
        text: words,
        face: 'text',
        sizePixels: 11.5,
        weight: 400,
        ink: 'ink',
        halo: 'sheet',
      } as const
      // beside a strip that is too narrow for its words there is always room at the beginning
      over.push(
        side === 'start'
          ? { ...text, x: fits ? left + 6 : right + 6, anchor: 'start' }
          : { ...text, x: right - 6, anchor: 'end' },
      )
    }
  }
  if (startUpFrames > 0)
    strip(
      -shiftFrames,
      startUpFrames - shiftFrames,
      `start-up, ${formatQuantity(startUpFrames / sampleRateHz, 's', 3)}`,
      'start',
    )
  if (extensionFrames > 0) {
    const words = `${extensionFrames} samples rest on the extension`
    strip(0, extensionFrames, words, 'start')
    strip(frames - extensionFrames, frames, words, 'end')
  }
  return { under, over }
}

const edge = { ink: 'ochre', widthPixels: 1 } as const
