import { crisp, type Mark, type Scene } from '@/components/plot/scene'
import { shifted } from '@/components/plot/shifted'
import { traceStyles } from '@/components/plot/trace-style'
import { formatHz } from '@/lib/format/quantity'
import type { PaintInput } from './paint-plan'
import { MARKER_RADIUS } from './paint-plan'
import type { StackFrame } from './frame'
import { plotIds } from './layout'
import { plotTitle } from './titles'

/*
 * The picture to take away: the static layer with the words that the page adds in its own type (titles, legend, statement), on paper.
 */

const MARGIN = 24
const LEGEND_PIXELS = 26
const HEADING_PIXELS = 28

export function exportScene(input: PaintInput, frame: StackFrame, picture: Scene, heading: string): Scene {
  const width = picture.width + 2 * MARGIN
  const top = MARGIN + HEADING_PIXELS + LEGEND_PIXELS
  const height = top + picture.height + MARGIN
  const inner: Mark[] = [...picture.marks, ...titleMarks(input, frame), ...foldTag(frame)]
  return {
    width,
    height,
    marks: [
      { kind: 'fill', box: { left: 0, top: 0, right: width, bottom: height }, ink: 'paper' },
      text(MARGIN, MARGIN + 14, heading, { sizePixels: 15, weight: 500 }),
      ...shifted(legendMarks(input, frame), MARGIN, MARGIN + HEADING_PIXELS + 12),
      ...shifted(inner, MARGIN, top),
    ],
  }
}

function text(x: number, y: number, words: string, look: { sizePixels: number; weight: number }): Mark {
  return { kind: 'text', x, y, text: words, face: 'text', ink: 'ink', anchor: 'start', ...look }
}

const titleMarks = ({ view }: PaintInput, frame: StackFrame): Mark[] =>
  plotIds.map((plot) => {
    const { left, bottom } = frame.layout.plots[plot]
    return {
      ...text(left + 8, bottom - 8, plotTitle(plot, view, frame), { sizePixels: 12, weight: 500 }),
      halo: 'sheet',
    } as Mark
  })

function legendMarks({ traces }: PaintInput, frame: StackFrame): Mark[] {
  const marks: Mark[] = []
  let x = frame.layout.plots.magnitude.left
  for (const trace of traces) {
    const style = traceStyles[trace.id]
    const stroke = { ink: style.ink, widthPixels: style.widthPixels, dash: style.dash }
    marks.push({ kind: 'path', points: Float64Array.of(x, 0, x + 30, 0), stroke })
    if (style.marker) {
      const outline = { ink: style.ink, widthPixels: 1.4 }
      marks.push({
        kind: 'marker',
        shape: style.marker,
        x: x + 15,
        y: 0,
        radius: MARKER_RADIUS,
        stroke: outline,
        fill: 'paper',
      })
    }
    marks.push(text(x + 36, 4, trace.label, { sizePixels: 13, weight: 400 }))
    x += 36 + trace.label.length * 7 + 24
  }
  return marks
}

function foldTag(frame: StackFrame): Mark[] {
  if (frame.foldHz <= frame.x.domain[0] || frame.foldHz >= frame.x.domain[1]) return []
  const x = crisp(frame.x.toPixel(frame.foldHz))
  const y = frame.layout.plots.departure.bottom
  const words = `fs/2 = ${formatHz(frame.foldHz)}`
  const half = words.length * 3.3 + 6
  return [
    {
      kind: 'frame',
      box: { left: x - half, top: y - 10, right: x + half, bottom: y + 9 },
      stroke: { ink: 'vermilion', widthPixels: 1.4 },
      fill: 'sheet',
      cornerPixels: 2,
    },
    {
      kind: 'text',
      x,
      y: y + 3.5,
      text: words,
      face: 'mono',
      sizePixels: 11,
      weight: 400,
      ink: 'vermilion',
      anchor: 'middle',
    },
  ]
}
