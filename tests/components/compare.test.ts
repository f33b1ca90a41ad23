import { createElement } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import type { DesignSpec } from '@/dsp'
import { CompareSpecs } from '@/components/studio/compare/compare-specs'
import { curvesOf, valueRows } from '@/components/studio/compare/curves'
import { figureRows, halfPowerPoints, sideOf } from '@/components/studio/compare/figures'
import { differenceValues, overlayScene } from '@/components/studio/compare/overlay-scene'
import type { Mark } from '@/components/plot/scene'
import { everyKind, lowPass } from '../helpers/export-sources'

const side = (label: string, spec: DesignSpec) => sideOf({ label, spec })

describe('−3 dB points', () => {
  const points = (spec: DesignSpec) => halfPowerPoints(side('x', spec).design.digital, spec.analog.edgesHz)

  it('are the edges of a Butterworth filter held at its edges', () => {
    expect(points(lowPass())).toEqual([expect.closeTo(120, 6)])
    expect(points(lowPass({ response: 'highpass', edgesHz: [40] }))).toEqual([expect.closeTo(40, 6)])
    expect(points(lowPass({ response: 'bandpass', edgesHz: [60, 180] }))).toEqual([
      expect.closeTo(60, 6),
      expect.closeTo(180, 6),
    ])
    expect(points(lowPass({ response: 'bandstop', edgesHz: [90, 130] }))).toEqual([
      expect.closeTo(90, 6),
      expect.closeTo(130, 6),
    ])
  })

  it('are found in a very narrow band, and far below the rate', () => {
    expect(points(lowPass({ response: 'bandpass', order: 2, edgesHz: [99.99, 100.01] }))).toEqual([
      expect.closeTo(99.99, 5),
      expect.closeTo(100.01, 5),
    ])
    expect(points(lowPass({ edgesHz: [0.1] }, 48_000))).toEqual([expect.closeTo(0.1, 7)])
  })

  it('lie beyond the ripple edge of a Chebyshev filter', () => {
    // Analog −3 dB point: edge · cosh(arcosh(1/ε)/n) with ε² = 10^(ripple/10) − 1 (Van Valkenburg, Analog Filter Design, ch. 8).
    const epsilon = Math.sqrt(10 ** 0.05 - 1)
    const analog = 120 * Math.cosh(Math.acosh(1 / epsilon) / 4)
    const found = points(lowPass({ family: 'chebyshev1', rippleDb: 0.5 }, 1_200_000))
    expect(found[0]).toBeCloseTo(analog, 2)
  })
})

describe('figures', () => {
  it('say what changed and by how much', () => {
    const rows = figureRows(side('Version 3', lowPass()), side('Version 4', lowPass({}, 600)))
    const row = (name: string) => rows.find((one) => one.name === name)
    expect(row('Sampling rate')).toMatchObject({
      left: '1.2\u2009kHz',
      right: '600\u2009Hz',
      change: '−600\u2009Hz',
      differs: true,
    })
    expect(row('Trusted band')?.differs).toBe(true)
    expect(row('Delay at DC')).toMatchObject({ differs: true })
    expect(row('−3 dB point')).toMatchObject({ left: '120\u2009Hz', right: '120\u2009Hz', differs: false })
    expect(row('Sections')).toMatchObject({ left: '2', right: '2', differs: false, change: '' })
  })

  it('are all the same between a design and itself', () => {
    for (const spec of everyKind([2])) {
      const rows = figureRows(side('a', spec), side('b', structuredClone(spec)))
      expect(rows.filter(({ differs }) => differs)).toEqual([])
      expect(rows.every(({ left }) => left !== '' && !left.includes('NaN'))).toBe(true)
    }
  })
})

describe('the overlaid curves', () => {
  const left = side('Version 3', lowPass())
  const right = side('Version 4', lowPass({}, 600))
  const curves = curvesOf(left, right)

  it('each reach their own half rate, the difference the lower one', () => {
    expect(curves.left.frequenciesHz.at(-1)).toBe(600)
    expect(curves.right.frequenciesHz.at(-1)).toBe(300)
    expect(curves.difference.frequenciesHz.at(-1)).toBe(300)
    expect(curves.toHz).toBe(600)
  })

  it('differ by right minus left', () => {
    const at = curves.difference.frequenciesHz.findIndex((hertz) => hertz >= 100)
    const hertz = curves.difference.frequenciesHz[at] ?? 0
    // Bilinear, both held at 120 Hz: |H|² = 1 / (1 + (tan(πf/fs)/tan(π·120/fs))⁸).
    const level = (rate: number) =>
      -10 * Math.log10(1 + (Math.tan((Math.PI * hertz) / rate) / Math.tan((Math.PI * 120) / rate)) ** 8)
    expect(curves.difference.magnitudeDb[at]).toBeCloseTo(level(600) - level(1200), 9)
    expect(differenceValues(curves.difference, 'microseconds')[at]).toBeCloseTo(
      (curves.difference.delaySeconds[at] ?? 0) * 1e6,
      9,
    )
  })

  it('are nothing for the same design, zeros on the circle included', () => {
    const spec = lowPass({ family: 'elliptic', rippleDb: 0.5, attenuationDb: 60, order: 5 })
    const { difference } = curvesOf(side('a', spec), side('b', spec))
    for (const values of [difference.magnitudeDb, difference.phaseDegrees, difference.delaySeconds])
      expect(values.every((value) => value === 0 || Number.isNaN(value))).toBe(true)
    expect(difference.magnitudeDb.filter(Number.isNaN).length).toBeLessThan(4)
  })

  it('come with their values at the edges and in between', () => {
    const rows = valueRows(left, right)
    expect(rows.length).toBeGreaterThan(15)
    expect(rows.find(({ hertz }) => hertz === 120)?.left[0]).toBeCloseTo(-3.0103, 3)
    expect(rows.find(({ hertz }) => hertz === 120)?.right[0]).toBeCloseTo(-3.0103, 3)
  })
})

describe('the picture', () => {
  const all = (marks: readonly Mark[]): Mark[] =>
    marks.flatMap((mark) => (mark.kind === 'clip' ? all(mark.marks) : [mark]))

  it.each([340, 900])('stands in %d pixels, with both traces by dash and marker', (width) => {
    for (const unit of ['db', 'degrees', 'microseconds'] as const) {
      const left = side('a', lowPass())
      const right = side('b', lowPass({ family: 'bessel', normalization: 'magnitude', order: 6 }, 600))
      const scene = overlayScene(curvesOf(left, right), { left: 600, right: 300 }, unit, width)
      const marks = all(scene.marks)
      expect(scene.width).toBe(width)
      const texts = marks.flatMap((mark) => (mark.kind === 'text' ? [mark.text] : []))
      expect(texts).toEqual(expect.arrayContaining(['Magnitude, dB', 'Phase, °', 'Group delay, ms']))
      expect(texts.some((text) => text.startsWith('Difference of'))).toBe(true)
      expect(new Set(marks.flatMap((mark) => (mark.kind === 'marker' ? [mark.shape] : [])))).toEqual(
        new Set(['square', 'circle']),
      )
      for (const mark of marks) {
        if (mark.kind !== 'path') continue
        expect(mark.points.every((value) => !Number.isFinite(value) || Math.abs(value) < 1e5)).toBe(true)
      }
      for (const mark of marks) if (mark.kind === 'text') expect(mark.x).toBeLessThanOrEqual(width)
    }
  })
})

describe('the comparison on the page', () => {
  const markup = (left: DesignSpec, right: DesignSpec) =>
    renderToStaticMarkup(
      createElement(CompareSpecs, {
        left: { label: 'Version 3', spec: left },
        right: { label: 'The draft', spec: right },
      }),
    )

  it('strikes the old words and marks the new ones', () => {
    const html = markup(lowPass(), lowPass({}, 600))
    expect(html).toMatch(/<del[^>]*>.*1\.2\u2009kHz.*<\/del>/)
    expect(html).toMatch(/<ins[^>]*>600\u2009Hz<\/ins>/)
    expect(html).toContain('sampling rate')
    expect(html).toContain('Values of the plots')
  })

  it('marks no words that both say, be they a choice in one and a joint in the other', () => {
    const bessel = lowPass({ family: 'bessel', normalization: 'magnitude' })
    for (const html of [markup(lowPass(), bessel), markup(bessel, lowPass())]) {
      expect(html).toContain('Bessel–Thomson')
      expect(html).not.toMatch(/<(?:del|ins)[^>]*>(?:<span[^>]*>was <\/span>)?[, ]*down 3/)
    }
  })

  it('says so when nothing differs', () => {
    expect(markup(lowPass(), lowPass())).toContain('Both state the same design')
  })

  it('says which one makes no filter, and why', () => {
    const html = markup(lowPass(), lowPass({ edgesHz: [900] }))
    expect(html).toContain('The draft makes no filter')
    expect(html).toContain('<del')
  })
})
