import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { tracePath, type Box } from '@/components/plot/path'
import { logScale, type Scale, type Span } from '@/components/plot/scale'
import type { Mark, Scene } from '@/components/plot/scene'
import { frequencyTicks, type Tick } from '@/components/plot/ticks'
import { traceStyles, type TraceId } from '@/components/plot/trace-style'
import type { SpectrumReading } from './shapes'
import { plotLeft } from './time-scene'

/* Power spectral densities before and after, both axes logarithmic. */

export interface SpectrumPicture {
  readonly scene: Scene
  readonly x: Scale
  readonly y: Scale
  readonly box: Box
}

const HEIGHT = 292
/** Densities further below the greatest than this are rounding, not signal. */
const DEPTH = 1e-16

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const powerLabel = (power: number): string =>
  power === 0
    ? '1'
    : `10${power < 0 ? '⁻' : ''}${[...String(Math.abs(power))].map((digit) => SUPERSCRIPTS[Number(digit)] ?? '').join('')}`

/** The widest view: from the first line above 0 to half the rate. */
export const wholeSpan = (reading: SpectrumReading): Span => [
  reading.frequenciesHz[1] ?? 1,
  reading.frequenciesHz.at(-1) ?? 2,
]

export function spectrumScene(
  reading: SpectrumReading,
  span: Span,
  unit: string,
  trace: TraceId,
  width: number,
): SpectrumPicture {
  const box: Box = { left: plotLeft(width), top: 4, right: width - 1, bottom: HEIGHT - 22 }
  const x = logScale(span, [box.left, box.right])
  const y = logScale(densitySpan(reading, span), [box.bottom, box.top])
  const xTicks = frequencyTicks({ scale: x, normalised: false }, width < 560 ? 50 : 58)
  const yTicks = powerTicks(y)
  const after = traceStyles[trace]
  const unitWords = unit === '' ? '1/Hz' : `(${unit})²/Hz`
  const marks: Mark[] = [
    { kind: 'fill', box, ink: 'sheet' },
    {
      kind: 'clip',
      box,
      marks: [
        ...gridMarks(box, { scale: x, ticks: xTicks }, { scale: y, ticks: yTicks }),
        {
          kind: 'path',
          points: densityPath(reading, reading.before, x, y, box),
          // wide and pale, so that it can be seen under a result that equals it
          stroke: { ink: 'pencil', widthPixels: 3.5, opacity: 0.55 },
        },
        ...(reading.after
          ? [
              {
                kind: 'path' as const,
                points: densityPath(reading, reading.after, x, y, box),
                stroke: { ink: after.ink, widthPixels: after.widthPixels, dash: after.dash },
              },
              ...lineMarkers(reading.after, reading, after, x, y, box),
            ]
          : []),
      ],
    },
    frameMark(box),
    ...valueLabels(box, y, yTicks),
    ...frequencyLabels(HEIGHT - 6, width, x, xTicks),
    {
      kind: 'text',
      x: box.left + 8,
      y: box.bottom - 9,
      text: `Density, ${unitWords}`,
      face: 'text',
      sizePixels: 12.5,
      weight: 600,
      ink: 'ink',
      anchor: 'start',
      halo: 'sheet',
    },
  ]
  return { scene: { width, height: HEIGHT, marks }, x, y, box }
}

function densityPath(reading: SpectrumReading, density: Float64Array, x: Scale, y: Scale, box: Box): Float64Array {
  const floor = y.domain[0] * 1e-3
  const xs = Float64Array.from(reading.frequenciesHz.subarray(1), (hz) => x.toPixel(hz))
  const values = Float64Array.from(density.subarray(1), (value) => Math.max(value, floor))
  return tracePath(xs, values, y, box)
}

/** A few markers along the curve, so that it is told by shape as well. */
function lineMarkers(
  density: Float64Array,
  reading: SpectrumReading,
  style: (typeof traceStyles)[TraceId],
  x: Scale,
  y: Scale,
  box: Box,
): Mark[] {
  const { marker } = style
  if (!marker) return []
  const marks: Mark[] = []
  for (let at = box.left + 40; at < box.right - 10; at += 130) {
    const line = nearestLine(reading, x.toValue(at))
    const value = density[line] ?? 0
    if (value < y.domain[0]) continue
    marks.push({
      kind: 'marker',
      shape: marker,
      x: x.toPixel(reading.frequenciesHz[line] ?? 0),
      y: y.toPixel(value),
      radius: 3.5,
      stroke: { ink: style.ink, widthPixels: 1.4 },
      fill: 'sheet',
    })
  }
  return marks
}

/** Index of the line nearest to a frequency, the one at 0 Hz left out. */
export function nearestLine(reading: SpectrumReading, hz: number): number {
  const step = reading.frequenciesHz[1] ?? 1
  return Math.max(1, Math.min(reading.frequenciesHz.length - 1, Math.round(hz / step)))
}

/** From a decade under the least to a decade over the greatest that is in view. */
function densitySpan({ frequenciesHz, before, after }: SpectrumReading, [fromHz, toHz]: Span): Span {
  let least = Infinity
  let greatest = 0
  for (const density of after ? [before, after] : [before]) {
    for (let k = 1; k < density.length; k += 1) {
      const hz = frequenciesHz[k]!
      if (hz < fromHz || hz > toHz) continue
      const value = density[k]!
      if (value > greatest) greatest = value
      if (value > 0 && value < least) least = value
    }
  }
  if (greatest === 0) return [1e-12, 1]
  const high = Math.ceil(Math.log10(greatest) + 0.1)
  const low = Math.floor(Math.log10(Math.max(least, greatest * DEPTH)))
  return [10 ** Math.min(low, high - 2), 10 ** high]
}

function powerTicks(y: Scale): Tick[] {
  const from = Math.round(Math.log10(y.domain[0]))
  const to = Math.round(Math.log10(y.domain[1]))
  const perDecade = Math.abs(y.range[1] - y.range[0]) / (to - from)
  const every = Math.max(1, Math.ceil(24 / perDecade))
  return Array.from({ length: to - from + 1 }, (_, k) => from + k).map((power) => ({
    value: 10 ** power,
    label: power % every === 0 ? powerLabel(power) : null,
    strong: power % every === 0,
  }))
}
