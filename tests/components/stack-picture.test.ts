import { describe, expect, it } from 'vitest'
import { daylight } from '@/components/plot/palette'
import { paintSvg } from '@/components/plot/paint-svg'
import type { Mark } from '@/components/plot/scene'
import { exportScene } from '@/components/studio/stack/export-scene'
import { stackFrame } from '@/components/studio/stack/frame'
import { stackLayout } from '@/components/studio/stack/layout'
import { budgetGrounds, stackPicture } from '@/components/studio/stack/paint-plan'
import { autoRanges, grownRanges, microsecondsOf, passBands } from '@/components/studio/stack/ranges'
import { plotTitle } from '@/components/studio/stack/titles'
import { ellipticSpec, plainSpec, stackOf } from './stack-fixture'

const flat = (marks: readonly Mark[]): Mark[] =>
  marks.flatMap((mark) => (mark.kind === 'clip' ? flat(mark.marks) : [mark]))
const words = (marks: readonly Mark[]) =>
  flat(marks).flatMap((mark) => (mark.kind === 'text' ? [mark.text.replaceAll('\u2009', ' ')] : []))

describe('the static picture', () => {
  it('is the same wherever the crosshair stands', () => {
    const here = stackOf(plainSpec, { crosshairHz: 20 })
    const there = stackOf(plainSpec, { crosshairHz: 250 })
    expect(stackPicture(there.input, there.frame).scene).toEqual(stackPicture(here.input, here.frame).scene)
  })

  it('holds the fold line, the trusted band and the beyond, and nothing that is not a number', () => {
    const { input, frame } = stackOf(plainSpec)
    const marks = flat(stackPicture(input, frame).scene.marks)
    const dashed = marks.filter((mark) => mark.kind === 'path' && mark.stroke.ink === 'vermilion' && mark.stroke.dash)
    expect(dashed).toHaveLength(1)
    const [fold] = dashed
    expect(fold?.kind === 'path' && fold.points[0]).toBeCloseTo(frame.x.toPixel(300), 0)
    expect(marks.filter((mark) => mark.kind === 'hatch' && mark.ruling === 'falling')).toHaveLength(4)
    expect(words(marks).some((text) => text.startsWith('trusted to '))).toBe(true)
    const svg = paintSvg(stackPicture(input, frame).scene, daylight, 'x')
    expect(svg).not.toMatch(/NaN|Infinity|undefined/)
  })

  it('leaves out what is out of view: no fold line beyond the axis', () => {
    const { input, frame } = stackOf(plainSpec, { fromHz: 1, toHz: 100 })
    const marks = flat(stackPicture(input, frame).scene.marks)
    expect(marks.some((mark) => mark.kind === 'path' && mark.stroke.ink === 'vermilion' && mark.stroke.dash)).toBe(
      false,
    )
    expect(marks.some((mark) => mark.kind === 'hatch' && mark.ruling === 'falling')).toBe(false)
  })

  it('survives exact zeros, wrapped phase, a linear axis from 0 and a narrow sheet', () => {
    for (const spec of [plainSpec, ellipticSpec]) {
      for (const change of [
        {},
        { unwrapped: false },
        { logFrequency: false, fromHz: 0 },
        { normalised: true },
      ] as const) {
        for (const departureUnit of ['db', 'degrees', 'microseconds'] as const) {
          const { input, frame } = stackOf(spec, { ...change, departureUnit }, 358)
          const svg = paintSvg(stackPicture(input, frame).scene, daylight, 'x')
          expect(svg).not.toMatch(/NaN|Infinity|undefined/)
        }
      }
    }
  })

  it('keeps each trace to few strokes', () => {
    const { input, frame } = stackOf(plainSpec)
    const curves = flat(stackPicture(input, frame).scene.marks).filter(
      (mark) => mark.kind === 'path' && mark.points.length > 40,
    )
    for (const curve of curves) expect(curve.kind === 'path' && curve.points.length / 2).toBeLessThan(400)
  })
})

describe('ranges', () => {
  it('hear only the analog prototype and the stated version', () => {
    const { traces, view } = stackOf(plainSpec)
    const loud = traces.map((trace) =>
      trace.id === 'matched-z'
        ? { ...trace, groupDelaySeconds: trace.groupDelaySeconds.map((value) => value * 1000) }
        : trace,
    )
    expect(autoRanges(plainSpec, loud, view)).toEqual(autoRanges(plainSpec, traces, view))
  })

  it('show the departure symmetrically, in whole budgets', () => {
    const { frame } = stackOf(plainSpec)
    const [low, high] = frame.ranges.departure
    expect(low).toBe(-high)
    expect(high).toBeGreaterThanOrEqual(3 * plainSpec.budget.phaseDegrees)
    expect((high / plainSpec.budget.phaseDegrees) % 1).toBeCloseTo(0, 9)
  })

  it('reach from the floor to a little above the pass band', () => {
    expect(stackOf(plainSpec, { magnitudeFloorDb: -100 }).frame.ranges.magnitude).toEqual([-100, 10])
    expect(stackOf(plainSpec).frame.ranges.magnitude).toEqual([-60, 6])
  })

  it('only grow while a drag holds them', () => {
    const now = stackOf(plainSpec).frame.ranges
    const held = { ...now, phase: [-2000, 10] as const }
    expect(grownRanges(held, now).phase).toEqual([-2000, Math.max(10, now.phase[1])])
    const { spec, traces, view } = stackOf(plainSpec)
    expect(stackFrame(spec, traces, view, 946, held).ranges.phase[0]).toBe(-2000)
  })

  it('know the pass bands', () => {
    const spec = (response: 'lowpass' | 'highpass' | 'bandpass' | 'bandstop', edgesHz: number[]) => ({
      ...plainSpec,
      analog: { ...plainSpec.analog, response, edgesHz },
    })
    expect(passBands(spec('lowpass', [10]))).toEqual([[0, 10]])
    expect(passBands(spec('bandstop', [10, 20]))).toEqual([
      [0, 10],
      [20, Number.POSITIVE_INFINITY],
    ])
  })
})

describe('the departure budget', () => {
  it('is ground above and below, up to the fold line', () => {
    const { spec, view, frame } = stackOf(plainSpec)
    const [above, below] = budgetGrounds(spec, view, frame)
    expect(above).toMatchObject({ plot: 'departure', fromY: 1, toHz: 300 })
    expect(below).toMatchObject({ toY: -1 })
  })

  it('is a longer delay at a lower frequency', () => {
    const { spec, view, frame } = stackOf(plainSpec, { departureUnit: 'microseconds' })
    const [above] = budgetGrounds(spec, view, frame)
    const limit = typeof above?.fromY === 'function' ? above.fromY : () => Number.NaN
    expect(limit(100)).toBeCloseTo(1e6 / 360 / 100, 9)
    expect(microsecondsOf(1, 10)).toBeCloseTo(10 * microsecondsOf(1, 100), 9)
  })
})

describe('the layout', () => {
  it('has the reference proportions at the reference width, and no plot wider than the sheet', () => {
    const { plots } = stackLayout(946)
    expect(plots.magnitude.right - plots.magnitude.left).toBe(890)
    expect(Object.values(plots).map(({ top, bottom }) => bottom - top)).toEqual([196, 111, 79, 105])
    for (const width of [240, 358, 700, 2000]) {
      for (const box of Object.values(stackLayout(width).plots)) expect(box.right).toBeLessThanOrEqual(width)
    }
  })
})

describe('the picture to take away', () => {
  it('adds the words that the page sets in its own type, and escapes them', () => {
    const { input, frame, view } = stackOf(plainSpec)
    const scene = exportScene(input, frame, stackPicture(input, frame).scene, 'A <statement> & more')
    const said = words(scene.marks)
    for (const plot of ['magnitude', 'phase', 'group-delay', 'departure'] as const)
      expect(said).toContain(plotTitle(plot, view, frame))
    expect(said).toContain('impulse-invariant')
    expect(said).toContain('fs/2 = 300 Hz')
    const svg = paintSvg(scene, daylight, 'A <statement> & more')
    expect(svg).toContain('A &lt;statement&gt; &amp; more')
    expect(svg).not.toContain('<statement>')
  })
})
