import { frameMark, frequencyLabels, gridMarks, valueLabels } from '@/components/plot/axes'
import { tracePath, type Box } from '@/components/plot/path'
import { linearScale, pixelsOf, type Scale } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import { valueTicks } from '@/components/plot/ticks'
import { traceStyles } from '@/components/plot/trace-style'
import type { FirFilter } from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'

/* The taps as stems over their numbers: what the impulse response is, sample by sample. */

export interface TapsFrame {
  readonly width: number
  readonly height: number
  readonly box: Box
  /** Number of a tap to pixels. */
  readonly x: Scale
  readonly y: Scale
}

const HEIGHT = 210
const AXIS_PIXELS = 22
/** Stems closer together than this would be a ground; they are drawn as a curve. */
const STEMS_APART_PIXELS = 2.5
const MARKERS_APART_PIXELS = 7

export function tapsFrame(width: number, taps: Float64Array): TapsFrame {
  const box = { left: width < 560 ? 52 : 66, top: 6, right: width - 1, bottom: HEIGHT - AXIS_PIXELS }
  const low = Math.min(0, ...taps)
  const high = Math.max(0, ...taps)
  const room = (high - low || 1) * 0.08
  return {
    width,
    height: HEIGHT,
    box,
    x: linearScale([-0.75, taps.length - 0.25], [box.left, box.right]),
    y: linearScale([low - room, high + room], [box.bottom, box.top]),
  }
}

/** What the axis counts in: 1, or a power of ten where its numbers would be long. */
function axisUnit(y: Scale): number {
  const exponent = Math.floor(Math.log10(Math.max(...y.domain.map(Math.abs))))
  return exponent < -3 || exponent > 4 ? 10 ** exponent : 1
}

export function tapsScene({ taps, symmetry }: FirFilter, frame: TapsFrame): Scene {
  const { box, x, y, width, height } = frame
  // Half a tap is none.
  const xTicks = valueTicks('plain', x, 46).flatMap(({ value, strong }) =>
    Number.isInteger(value) && value >= 0 ? [{ value, label: String(value), strong }] : [],
  )
  const unit = axisUnit(y)
  const yTicks = valueTicks('plain', y, 28, unit)
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box, ink: 'sheet' },
      {
        kind: 'clip',
        box,
        marks: [
          ...gridMarks(box, { scale: x, ticks: [] }, { scale: y, ticks: yTicks }),
          ...(symmetry === 'none' ? [] : [axisOfSymmetry(taps.length, frame)]),
          ...tapMarks(taps, frame),
        ],
      },
      frameMark(box),
      ...valueLabels(box, y, yTicks),
      ...(unit === 1 ? [] : [unitLabel(unit, box)]),
      ...frequencyLabels(height - 6, width, x, xTicks),
    ],
  }
}

const unitLabel = (unit: number, box: Box): Mark => ({
  kind: 'text',
  x: box.left + 8,
  y: box.top + 16,
  text: `in units of ${formatNumber(unit, 1)}`,
  face: 'text',
  sizePixels: 12,
  weight: 400,
  ink: 'pencil',
  anchor: 'start',
  halo: 'sheet',
})

function axisOfSymmetry(count: number, { x, box }: TapsFrame): Mark {
  const at = x.toPixel((count - 1) / 2)
  return line(at, box.top, at, box.bottom, { ink: 'pencil', widthPixels: 1, dash: [3, 4] })
}

function tapMarks(taps: Float64Array, { x, y, box }: TapsFrame): Mark[] {
  const { ink, widthPixels, marker } = traceStyles.fir
  const xs = pixelsOf(
    x,
    taps.map((_, k) => k),
  )
  const apart = x.toPixel(1) - x.toPixel(0)
  if (apart < STEMS_APART_PIXELS)
    return [{ kind: 'path', points: tracePath(xs, taps, y, box), stroke: { ink, widthPixels } }]
  const ground = crisp(y.toPixel(0))
  const points: number[] = []
  xs.forEach((at, k) => points.push(at, ground, at, y.toPixel(taps[k]!), Number.NaN, Number.NaN))
  const stems: Mark = { kind: 'path', points: Float64Array.from(points), stroke: { ink, widthPixels: 1.3 } }
  if (apart < MARKERS_APART_PIXELS || !marker) return [stems]
  const heads = Array.from(xs, (at, k): Mark => ({
    kind: 'marker',
    shape: marker,
    x: at,
    y: y.toPixel(taps[k]!),
    radius: 2.8,
    stroke: { ink, widthPixels: 1.3 },
    fill: 'sheet',
  }))
  return [stems, ...heads]
}
