import { describe, expect, it } from 'vitest'
import { groundMarks } from '@/components/plot/ground'
import { paintCanvas, paintCounts, type Brush } from '@/components/plot/paint-canvas'
import { escapeText, paintSvg, pathData } from '@/components/plot/paint-svg'
import { daylight } from '@/components/plot/palette'
import { linearScale } from '@/components/plot/scale'
import { rulingLines, type Mark, type Scene } from '@/components/plot/scene'

const box = { left: 10, top: 10, right: 110, bottom: 60 }
const stroke = { ink: 'vermilion', widthPixels: 1.5, dash: [5, 3] } as const
const marks: readonly Mark[] = [
  { kind: 'fill', box, ink: 'sheet' },
  {
    kind: 'clip',
    box,
    marks: [{ kind: 'path', points: Float64Array.of(0, 0, 50, 50, Number.NaN, Number.NaN, 60, 60, 70, 20), stroke }],
  },
  { kind: 'hatch', outline: Float64Array.of(10, 10, 60, 10, 60, 60, 10, 60), ruling: 'crossed', gapPixels: 6, stroke },
  { kind: 'marker', shape: 'triangle', x: 30, y: 30, radius: 4, stroke, fill: 'sheet' },
  { kind: 'marker', shape: 'circle', x: 40, y: 30, radius: 4, stroke, fill: 'sheet' },
  {
    kind: 'text',
    x: 5,
    y: 9,
    text: 'a < b & "c"',
    face: 'mono',
    sizePixels: 11,
    weight: 400,
    ink: 'ink',
    anchor: 'end',
    halo: 'paper',
  },
  { kind: 'frame', box, stroke, cornerPixels: 2 },
]
const scene: Scene = { width: 120, height: 80, marks }

/** A brush that writes down what it is asked to do. */
function recordingBrush(): { brush: Brush; calls: string[] } {
  const calls: string[] = []
  const note =
    (name: string) =>
    (...values: unknown[]): void => {
      calls.push(`${name} ${values.map(String).join(' ')}`.trim())
    }
  const brush: Brush = {
    save: note('save'),
    restore: note('restore'),
    setTransform: note('setTransform'),
    clearRect: note('clearRect'),
    beginPath: note('beginPath'),
    closePath: note('closePath'),
    moveTo: note('moveTo'),
    lineTo: note('lineTo'),
    arc: note('arc'),
    rect: note('rect'),
    roundRect: note('roundRect'),
    clip: note('clip'),
    fill: note('fill'),
    stroke: note('stroke'),
    fillRect: note('fillRect'),
    fillText: note('fillText'),
    strokeText: note('strokeText'),
    setLineDash: note('setLineDash'),
    createPattern: () => null,
    strokeStyle: '',
    fillStyle: '',
    lineWidth: 1,
    lineJoin: 'miter',
    lineCap: 'butt',
    globalAlpha: 1,
    font: '',
    textAlign: 'start',
    textBaseline: 'alphabetic',
  }
  return { brush, calls }
}

describe('the canvas painter', () => {
  it('scales by the device pixels, lifts the pen at NaN, balances its clips and counts', () => {
    const { brush, calls } = recordingBrush()
    const before = paintCounts.canvas
    paintCanvas(brush, scene, daylight, 2)
    expect(paintCounts.canvas).toBe(before + 1)
    expect(calls[0]).toBe('setTransform 2 0 0 2 0 0')
    expect(calls).toContain('moveTo 60 60')
    expect(calls).toContain('lineTo 70 20')
    expect(calls.filter((call) => call === 'save')).toHaveLength(2)
    expect(calls.filter((call) => call === 'restore')).toHaveLength(2)
    expect(calls).toContain('fillText a < b & "c" 5 9')
    expect(brush.globalAlpha).toBe(1)
  })
})

describe('the SVG painter', () => {
  const text = paintSvg(scene, daylight, 'Response of <a> & "b"')

  it('paints every mark of the same scene', () => {
    expect(text.match(/<(rect|path|polygon|circle|text)\b/g)?.length).toBeGreaterThanOrEqual(marks.length)
    expect(text).toContain('d="M0 0L50 50M60 60L70 20"')
    expect(text).toContain('stroke-dasharray="5 3"')
    expect(text).toContain(daylight.inks.vermilion)
  })

  it('escapes words, so that no label can become markup', () => {
    expect(text).toContain('<title>Response of &lt;a&gt; &amp; &quot;b&quot;</title>')
    expect(text).toContain('a &lt; b &amp; &quot;c&quot;')
    expect(escapeText(`<script>'"&`)).toBe('&lt;script&gt;&#39;&quot;&amp;')
  })

  it('opens and closes what it opens, and names each clip once', () => {
    expect(text.match(/<g\b/g)?.length).toBe(text.match(/<\/g>/g)?.length)
    const ids = [...text.matchAll(/clipPath id="([^"]+)"/g)].map(([, id]) => id)
    expect(new Set(ids).size).toBe(ids.length)
    for (const [, id] of text.matchAll(/url\(#([^)]+)\)/g)) expect(ids).toContain(id)
  })

  it('writes two decimals', () => {
    expect(pathData(Float64Array.of(1.23456, 2, 3, 4.999))).toBe('M1.23 2L3 5')
  })
})

describe('ruled ground', () => {
  it('keeps its lines to the page while its edges move', () => {
    const intercepts = (left: number) => {
      const lines = rulingLines({ left, top: 0, right: 200, bottom: 50 }, 'rising', 6)
      return new Set(
        Array.from({ length: lines.length / 4 }, (_, i) => ((lines[4 * i] ?? 0) + (lines[4 * i + 1] ?? 0)).toFixed(6)),
      )
    }
    const wide = intercepts(0)
    for (const line of intercepts(37)) expect(wide.has(line)).toBe(true)
  })

  it('keeps its lines inside the box', () => {
    const lines = rulingLines(box, 'crossed', 6)
    for (let i = 0; i < lines.length; i += 2) {
      expect(lines[i]).toBeGreaterThanOrEqual(box.left - 1e-9)
      expect(lines[i]).toBeLessThanOrEqual(box.right + 1e-9)
      expect(lines[i + 1]).toBeGreaterThanOrEqual(box.top - 1e-9)
      expect(lines[i + 1]).toBeLessThanOrEqual(box.bottom + 1e-9)
    }
  })

  it('follows an edge that changes over frequency, and draws nothing outside its frequencies', () => {
    const x = linearScale([0, 100], [10, 110])
    const y = linearScale([0, 10], [60, 10])
    const ground = {
      plot: 'departure',
      kind: 'limit',
      fromHz: 20,
      toHz: 60,
      fromY: (hz: number) => hz / 10,
      toY: Number.POSITIVE_INFINITY,
    } as const
    const [clip] = groundMarks(ground, box, x, y)
    const inner = clip?.kind === 'clip' ? clip.marks : []
    const edge = inner.find((mark) => mark.kind === 'path')
    const points = edge?.kind === 'path' ? edge.points : new Float64Array(0)
    expect(points[0]).toBeCloseTo(30, 9)
    expect(points[1]).toBeCloseTo(y.toPixel(2), 9)
    expect(points.at(-1)).toBeCloseTo(y.toPixel(6), 9)
    expect(groundMarks({ ...ground, fromHz: 200, toHz: 300 }, box, x, y)).toEqual([])
  })
})
