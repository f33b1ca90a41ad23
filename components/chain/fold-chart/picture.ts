import { tracePath } from '@/components/plot/path'
import { pixelsOf } from '@/components/plot/scale'
import { crisp, line, type Mark, type Scene } from '@/components/plot/scene'
import type { Ink } from '@/components/plot/palette'
import { shifted } from '@/components/plot/shifted'
import type { ComputedChain, FoldChart } from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import { endsHz, type AliasFloor, type FoldFrame, type FoldRow } from './layout'
import { foldMaker, stripWords } from './words'

/* The static layer: the strips, their folds and their words. What is traced lies on a layer of its own and repaints nothing here. */

export interface FoldPlan {
  readonly chain: ComputedChain
  readonly chart: FoldChart
  readonly floors: readonly AliasFloor[]
}

export function foldScene(plan: FoldPlan, frame: FoldFrame): Scene {
  const { rows, width, height } = frame
  return {
    width,
    height,
    marks: [
      ...rows.flatMap((row, index) => joint(row, rows[index - 1], plan, frame)),
      ...rows.flatMap((row) => stripMarks(row, plan, frame)),
    ],
  }
}

const inkOf = (row: FoldRow, { chart }: FoldPlan): Ink =>
  row.strip.strip === 0 ? 'moss' : row.strip.strip === chart.weakStrip ? 'vermilion' : 'ink'

function stripMarks(row: FoldRow, plan: FoldPlan, frame: FoldFrame): Mark[] {
  const { strip, top, bottom, y } = row
  const { left, right, x } = frame
  const box = { left, top, right, bottom }
  const ink = inkOf(row, plan)
  const isBase = strip.strip === 0
  const path = tracePath(pixelsOf(x, plan.chart.outputHz), strip.levelDb, y, box)
  return [
    { kind: 'fill', box, ink: 'sheet' },
    {
      kind: 'clip',
      box,
      marks: [
        ...(isBase ? keptGround(row, plan, frame) : []),
        { kind: 'wash', outline: closedBelow(path, bottom), ink, opacity: isBase ? 0.1 : 0.14 },
        ...(isBase ? [] : floorMarks(row, plan, frame)),
        { kind: 'path', points: path, stroke: { ink, widthPixels: 1.5 } },
      ],
    },
    {
      kind: 'frame',
      box: { left: crisp(left), top: crisp(top), right: crisp(right), bottom: crisp(bottom) },
      stroke: { ink: isBase ? 'moss' : 'graph-strong', widthPixels: 1 },
    },
    line(left, crisp(bottom), right, crisp(bottom), { ink, widthPixels: 1 }),
    ...stripLabels(row, plan, frame),
  ]
}

/** A curve's path closed along the strip's lower edge; lifted pens are bridged there. */
function closedBelow(path: Float64Array, bottom: number): Float64Array {
  const points: number[] = []
  let firstX = Number.NaN
  let lastX = Number.NaN
  for (let i = 0; i + 1 < path.length; i += 2) {
    const pixel = path[i] ?? Number.NaN
    const level = path[i + 1] ?? Number.NaN
    if (Number.isNaN(pixel)) continue
    if (Number.isNaN(firstX)) {
      firstX = pixel
      points.push(pixel, bottom)
    }
    points.push(pixel, level)
    lastX = pixel
  }
  if (!Number.isNaN(lastX)) points.push(lastX, bottom)
  return Float64Array.from(points)
}

function keptGround({ top, bottom }: FoldRow, { chain }: FoldPlan, { x }: FoldFrame): Mark[] {
  const { fromHz, toHz } = chain.spec.kept
  const box = { left: x.toPixel(fromHz), top, right: x.toPixel(Math.min(toHz, x.domain[1])), bottom }
  return [
    { kind: 'fill', box, ink: 'moss', opacity: 0.12 },
    line(crisp(box.right), top, crisp(box.right), bottom, { ink: 'moss', widthPixels: 1 }),
  ]
}

const dashed = { ink: 'vermilion', widthPixels: 1, dash: [4, 3] } as const

/** How far down each image has to be where it lands. */
const floorMarks = ({ y }: FoldRow, { floors, chain }: FoldPlan, { x }: FoldFrame): Mark[] =>
  floors.map(({ toHz, atLeastDb }) =>
    line(
      x.toPixel(Math.min(chain.spec.kept.fromHz, toHz)),
      crisp(y.toPixel(-atLeastDb)),
      x.toPixel(Math.min(toHz, x.domain[1])),
      crisp(y.toPixel(-atLeastDb)),
      dashed,
    ),
  )

const LABEL_PIXELS = 10.5

const label = (
  x: number,
  y: number,
  text: string,
  anchor: 'start' | 'middle' | 'end',
  look: { readonly ink?: Ink; readonly weight?: number; readonly halo?: Ink } = {},
): Mark => ({
  kind: 'text',
  x,
  y,
  text,
  face: 'mono',
  sizePixels: LABEL_PIXELS,
  weight: look.weight ?? 400,
  ink: look.ink ?? 'pencil',
  anchor,
  ...(look.halo ? { halo: look.halo } : {}),
})

function stripLabels(row: FoldRow, plan: FoldPlan, frame: FoldFrame): Mark[] {
  const { strip, top, bottom } = row
  const { left, right, x, isNarrow } = frame
  const { leftHz, rightHz } = endsHz(strip)
  const baseline = bottom - 7
  // Where there is no room beside the strips, the stage that folds stands beside the frequency it folds at.
  const maker = isNarrow ? foldMaker(plan.chain, strip.toHz) : null
  const named = (hertz: number) => `${formatHz(hertz, 6)}${maker !== null && hertz === strip.toHz ? ` · ${maker}` : ''}`
  // Whatever is loud enough to reach them passes behind the words.
  const look = { halo: 'sheet' as const }
  const ends = [
    label(left + 8, baseline, named(leftHz), 'start', look),
    label(right - 8, baseline, named(rightHz), 'end', look),
  ]
  if (strip.strip === 0) {
    const { kept } = plan.chain.spec
    const keptTo = Math.min(kept.toHz, x.domain[1])
    const at = Math.min(Math.max(x.toPixel(keptTo / 2), left + 110), right - 130)
    return [...ends, label(at, top + 15, `kept to ${formatHz(kept.toHz, 6)}`, 'middle', { ink: 'moss', halo: 'sheet' })]
  }
  const isWeak = strip.strip === plan.chart.weakStrip
  return [
    ...ends,
    label((left + right) / 2, top + 14, stripWords(strip, isWeak, isNarrow), 'middle', {
      ink: isWeak ? 'vermilion' : 'ink',
      weight: isWeak ? 700 : 400,
      halo: 'sheet',
    }),
  ]
}

/** The fold between two strips, or the tear where strips are left out. */
function joint(row: FoldRow, above: FoldRow | undefined, plan: FoldPlan, frame: FoldFrame): Mark[] {
  if (!above) return []
  const { left, right, isNarrow } = frame
  const middle = (above.bottom + row.top) / 2
  if (!row.isJoined) {
    const count = row.strip.strip - above.strip.strip - 1
    const words = `${count} ${count === 1 ? 'strip' : 'strips'} not drawn here`
    return [
      line(left, middle - 5, left, middle + 5, { ink: 'pencil', widthPixels: 1, dash: [2, 2] }),
      line(right, middle - 5, right, middle + 5, { ink: 'pencil', widthPixels: 1, dash: [2, 2] }),
      label((left + right) / 2, middle + 4, words, 'middle'),
    ]
  }
  // Even strips end on the right, where the next one begins.
  const isRight = !above.strip.mirrored
  const from = (above.top + above.bottom) / 2
  const to = (row.top + row.bottom) / 2
  const points = halfTurn(isRight ? right : left, from, to, (isRight ? 1 : -1) * (isNarrow ? 13 : (to - from) / 2))
  const arc: Mark = { kind: 'path', points, stroke: { ink: 'pencil', widthPixels: 1 } }
  const maker = foldMaker(plan.chain, above.strip.toHz)
  if (isNarrow || maker === null) return [arc]
  const beside = (to - from) / 2 + 6
  const at = isRight ? right + beside : left - beside
  const anchor = isRight ? 'start' : 'end'
  return [arc, label(at, middle - 2, 'folds at', anchor), label(at, middle + 11, maker, anchor, { ink: 'ink' })]
}

const ARC_STEPS = 24

function halfTurn(x: number, from: number, to: number, reach: number): Float64Array {
  const points = new Float64Array(2 * (ARC_STEPS + 1))
  for (let k = 0; k <= ARC_STEPS; k++) {
    const angle = (Math.PI * k) / ARC_STEPS
    points[2 * k] = x + reach * Math.sin(angle)
    points[2 * k + 1] = (from + to) / 2 - ((to - from) / 2) * Math.cos(angle)
  }
  return points
}

const MARGIN = 24
const HEADING_PIXELS = 30
const FOOT_PIXELS = 24

/** The picture to take away, with its heading, its scale and what is traced, on paper. */
export function foldExport(
  plan: FoldPlan,
  frame: FoldFrame,
  words: { readonly heading: string; readonly foot: string },
): Scene {
  const width = frame.width + 2 * MARGIN
  const height = frame.height + 2 * MARGIN + HEADING_PIXELS + FOOT_PIXELS
  const text = (y: number, words: string, sizePixels: number, ink: Ink): Mark => ({
    kind: 'text',
    x: MARGIN,
    y,
    text: words,
    face: 'text',
    sizePixels,
    weight: 500,
    ink,
    anchor: 'start',
  })
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box: { left: 0, top: 0, right: width, bottom: height }, ink: 'paper' },
      text(MARGIN + 14, words.heading, 15, 'ink'),
      ...shifted(foldScene(plan, frame).marks, MARGIN, MARGIN + HEADING_PIXELS),
      text(height - MARGIN, words.foot, 12, 'pencil'),
    ],
  }
}
