import { createElement } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import type { AnalogSpec, DesignSpec, FirDesign, OwnDesign } from '@/dsp'
import { edgesHzOf } from '@/lib/designs/outline'
import { CompareSides, CompareSpecs } from '@/components/studio/compare/compare-specs'
import { curvesOf, valueRows } from '@/components/studio/compare/curves'
import { figureRows, halfPowerPoints, sideOf, type Side } from '@/components/studio/compare/figures'
import { valueCells, valueColumns } from '@/components/studio/compare/overlay'
import { differenceValues, overlayScene } from '@/components/studio/compare/overlay-scene'
import type { Mark } from '@/components/plot/scene'
import { everyKind, lowPass } from '../helpers/export-sources'

const sidesOf = (...specs: readonly (readonly [label: string, spec: DesignSpec])[]): readonly Side[] =>
  specs.map(([label, spec], place) => sideOf({ label, spec }, place))

const { budget } = lowPass()

/** 21 taps between 100 and 200 Hz at 1 kHz. */
const fir: FirDesign = {
  format: 1,
  fir: {
    kind: 'windowed',
    window: 'kaiser',
    response: 'lowpass',
    taps: 21,
    bands: [
      { fromHz: 0, toHz: 100, gain: 1 },
      { fromHz: 200, toHz: 500, gain: 0 },
    ],
    attenuationDb: 40,
  },
  sampleRateHz: 1000,
  budget,
}

/** One real pole at 100 Hz. */
const own: OwnDesign = {
  format: 1,
  own: {
    given: 'polynomials',
    name: 'Charge amplifier',
    numerator: [200 * Math.PI],
    denominator: [1, 200 * Math.PI],
  },
  how: { method: 'bilinear', hold: 'none' },
  sampleRateHz: 2400,
  budget,
}

describe('−3 dB points', () => {
  const points = (spec: DesignSpec) => {
    const [side] = sidesOf(['x', spec])
    return side ? halfPowerPoints(side.design.digital, edgesHzOf(spec)) : []
  }

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

  it('of an FIR filter lie between its bands, near the middle where the window’s gain is a half', () => {
    const [point = 0, ...others] = points(fir)
    expect(others).toEqual([])
    // Windowed ideal low-pass: −6.02 dB close to the cut-off at 150 Hz (Oppenheim & Schafer, 3rd ed., sec. 7.5), −3 dB before it.
    expect(point).toBeGreaterThan(100)
    expect(point).toBeLessThan(150)
  })
})

describe('figures', () => {
  const rowOf = (rows: ReturnType<typeof figureRows>, name: string) => rows.find((one) => one.name === name)?.cells

  it('say what changed from the base and by how much, for each other side', () => {
    const rows = figureRows(
      sidesOf(['Version 3', lowPass()], ['Version 4', lowPass({}, 600)], ['The draft', lowPass({ order: 6 })]),
    )
    expect(rowOf(rows, 'Sampling rate')).toEqual([
      { text: '1.2\u2009kHz', differs: false, change: '' },
      { text: '600\u2009Hz', differs: true, change: '−600\u2009Hz' },
      { text: '1.2\u2009kHz', differs: false, change: '' },
    ])
    expect(rowOf(rows, 'Trusted band')?.[1]?.differs).toBe(true)
    expect(rowOf(rows, 'Delay at DC')?.[1]?.differs).toBe(true)
    expect(rowOf(rows, '−3 dB point')?.map(({ text }) => text)).toEqual(Array(3).fill('120\u2009Hz'))
    expect(rowOf(rows, 'Sections')).toMatchObject([
      { text: '2' },
      { text: '2', change: '' },
      { text: '3', change: '+1' },
    ])
  })

  it('are all the same between a design and itself', () => {
    for (const spec of [...everyKind([2]), fir, own]) {
      const rows = figureRows(sidesOf(['a', spec], ['b', structuredClone(spec)]))
      expect(rows.flatMap(({ cells }) => cells).filter(({ differs }) => differs)).toEqual([])
      expect(rows.every(({ cells: [cell] }) => cell && cell.text !== '' && !cell.text.includes('NaN'))).toBe(true)
    }
  })

  it('count taps where there are no sections, and say where nothing can be trusted against', () => {
    const rows = figureRows(sidesOf(['Version 1', lowPass()], ['Candidate 1', fir]))
    expect(rowOf(rows, 'Sections')).toMatchObject([{ text: '2' }, { text: 'none', change: '' }])
    expect(rowOf(rows, 'Taps')).toMatchObject([{ text: 'none' }, { text: '21', change: '' }])
    expect(rowOf(rows, 'Trusted band')?.[1]).toMatchObject({ text: 'no analog original', change: '' })
    // Half of 20 samples at 1 kHz.
    expect(rowOf(rows, 'Delay at DC')?.[1]?.text).toBe('10\u2009ms')
  })
})

describe('the overlaid curves', () => {
  const sides = sidesOf(['Version 3', lowPass()], ['Version 4', lowPass({}, 600)], ['Candidate 1', fir])
  const curves = curvesOf(sides)

  it('each reach their own half rate, each difference the lower one', () => {
    expect(curves.sides.map(({ frequenciesHz }) => frequenciesHz.at(-1))).toEqual([600, 300, 500])
    expect(curves.differences.map(({ place, frequenciesHz }) => [place, frequenciesHz.at(-1)])).toEqual([
      [1, 300],
      [2, 500],
    ])
    expect(curves.toHz).toBe(600)
  })

  it('differ by the other minus the base', () => {
    const [difference] = curves.differences
    if (!difference) throw new Error('There is no difference.')
    const at = difference.frequenciesHz.findIndex((hertz) => hertz >= 100)
    const hertz = difference.frequenciesHz[at] ?? 0
    // Bilinear, both held at 120 Hz: |H|² = 1 / (1 + (tan(πf/fs)/tan(π·120/fs))⁸).
    const level = (rate: number) =>
      -10 * Math.log10(1 + (Math.tan((Math.PI * hertz) / rate) / Math.tan((Math.PI * 120) / rate)) ** 8)
    expect(difference.magnitudeDb[at]).toBeCloseTo(level(600) - level(1200), 9)
    expect(differenceValues(difference, 'microseconds')[at]).toBeCloseTo((difference.delaySeconds[at] ?? 0) * 1e6, 9)
  })

  it('turn over when another side is the base', () => {
    const [one, two] = [lowPass(), lowPass({ family: 'bessel', normalization: 'magnitude' })]
    const there = curvesOf(sidesOf(['a', one], ['b', two])).differences[0]
    const back = curvesOf(sidesOf(['b', two], ['a', one])).differences[0]
    expect(Array.from(back?.magnitudeDb ?? [])).toEqual(Array.from(there?.magnitudeDb ?? [], (value) => 0 - value))
  })

  it('are nothing for the same design, zeros on the circle included', () => {
    const spec = lowPass({ family: 'elliptic', rippleDb: 0.5, attenuationDb: 60, order: 5 })
    const [difference] = curvesOf(sidesOf(['a', spec], ['b', spec])).differences
    if (!difference) throw new Error('There is no difference.')
    for (const values of [difference.magnitudeDb, difference.phaseDegrees, difference.delaySeconds])
      expect(values.every((value) => value === 0 || Number.isNaN(value))).toBe(true)
    expect(difference.magnitudeDb.filter(Number.isNaN).length).toBeLessThan(4)
  })

  it('come with their values at the edges and in between, and none above a fold line', () => {
    const rows = valueRows(sides)
    expect(rows.length).toBeGreaterThan(15)
    const at = (hertz: number) => rows.find((row) => row.hertz === hertz)?.values
    expect(at(120)?.[0]?.db).toBeCloseTo(-3.0103, 3)
    expect(at(120)?.[1]?.db).toBeCloseTo(-3.0103, 3)
    // Linear phase: −360°·120 Hz·10 ms.
    expect(at(120)?.[2]?.degrees).toBeCloseTo(-432, 6)
    expect(at(500)?.map((values) => values !== null)).toEqual([true, false, true])
    expect(at(600)?.map((values) => values !== null)).toEqual([true, false, false])
  })

  it('are told in a table with a column for each side and each difference', () => {
    const columns = valueColumns(sides)
    expect(columns).toHaveLength(1 + 3 * (3 + 2))
    expect(new Set(columns).size).toBe(columns.length)
    expect(columns).toContain('Candidate 1 minus version 3, µs')
    const cells = valueCells(sides)
    expect(cells.every((row) => row.length === columns.length && !row.join().includes('NaN'))).toBe(true)
    expect(cells.find(([hertz]) => hertz === '600\u2009Hz')?.slice(2, 6)).toEqual(['—', '—', '—', '—'])
  })
})

describe('the picture', () => {
  const all = (marks: readonly Mark[]): Mark[] =>
    marks.flatMap((mark) => (mark.kind === 'clip' ? all(mark.marks) : [mark]))
  const four = sidesOf(
    ['Version 1', lowPass()],
    ['Version 2', lowPass({ family: 'bessel', normalization: 'magnitude', order: 6 }, 600)],
    ['The draft', own],
    ['Candidate 1', fir],
  )

  it.each([340, 900])('stands in %d pixels, with every trace told by dash and marker', (width) => {
    for (const unit of ['db', 'degrees', 'microseconds'] as const) {
      const scene = overlayScene(curvesOf(four), { unit, base: 'Version 1' }, width)
      const marks = all(scene.marks)
      expect(scene.width).toBe(width)
      const texts = marks.flatMap((mark) => (mark.kind === 'text' ? [mark.text] : []))
      expect(texts).toEqual(expect.arrayContaining(['Magnitude, dB', 'Phase, °', 'Group delay, ms']))
      expect(texts.some((text) => /^Difference of .* from version 1, /.test(text))).toBe(true)
      expect(new Set(marks.flatMap((mark) => (mark.kind === 'marker' ? [mark.shape] : [])))).toEqual(
        new Set(['square', 'circle', 'triangle', 'diamond']),
      )
      // Three plots of four sides and the differences of three, no two sides in one dash.
      const traces = marks.filter(
        (mark) => mark.kind === 'path' && mark.stroke.dash !== undefined && mark.stroke.ink !== 'vermilion',
      )
      expect(traces).toHaveLength(3 * 4 + 3)
      const dashes = traces.map((mark) => (mark.kind === 'path' ? mark.stroke.dash?.join() : undefined))
      expect(new Set(dashes).size).toBe(4)
      for (const mark of marks) {
        if (mark.kind !== 'path') continue
        expect(mark.points.every((value) => !Number.isFinite(value) || Math.abs(value) < 1e5)).toBe(true)
      }
      for (const mark of marks) if (mark.kind === 'text') expect(mark.x).toBeLessThanOrEqual(width)
    }
  })

  it('has no plot of differences for one side alone', () => {
    const scene = overlayScene(curvesOf(four.slice(0, 1)), { unit: 'db', base: 'Version 1' }, 600)
    expect(all(scene.marks).some((mark) => mark.kind === 'text' && mark.text.startsWith('Difference'))).toBe(false)
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

  it('states the base in full, then strikes the old words and marks the new ones', () => {
    const html = markup(lowPass(), lowPass({}, 600))
    expect(html.indexOf('A low-pass Butterworth of order 4')).toBeGreaterThan(-1)
    expect(html.indexOf('A low-pass Butterworth of order 4')).toBeLessThan(html.indexOf('<del'))
    expect(html).toMatch(/<del[^>]*>.*1\.2\u2009kHz.*<\/del>/)
    expect(html).toMatch(/<ins[^>]*>600\u2009Hz<\/ins>/)
    expect(html).toMatch(/Changed from version 3: <strong[^>]*>sampling rate</)
    expect(html).toContain('Values of the plots')
  })

  it('marks no words that both say, be they a choice in one and a joint in the other', () => {
    const bessel = lowPass({ family: 'bessel', normalization: 'magnitude' })
    for (const html of [markup(lowPass(), bessel), markup(bessel, lowPass())]) {
      expect(html).toContain('Bessel–Thomson')
      expect(html).not.toMatch(/<(?:del|ins)[^>]*>(?:<span[^>]*>was <\/span>)?[, ]*down 3/)
    }
  })

  it('strikes nothing between designs of different kinds, and says which kind it is', () => {
    for (const [left, right, kind] of [
      [lowPass({}, 1000), fir, 'an FIR filter'],
      [fir, lowPass({}, 1000), 'a filter of a known family'],
      [fir, own, 'a filter from a response of its own'],
    ] as const) {
      const html = markup(left, right)
      expect(html).not.toContain('<del')
      expect(html).toContain('<ins')
      expect(html).toMatch(new RegExp(`Of another kind than version 3: <strong[^>]*>${kind}<`))
      expect(html).not.toMatch(/<ins[^>]*>1\u2009kHz</)
    }
  })

  it('says so when nothing differs', () => {
    expect(markup(lowPass(), lowPass())).toContain('States the same design as version 3')
  })

  it('says which one makes no filter, and why', () => {
    const html = markup(lowPass(), lowPass({ edgesHz: [900] }))
    expect(html).toContain('The draft makes no filter')
    expect(html).toContain('<del')
  })

  it('goes on with the others when the base makes no filter, each keeping its trace', () => {
    const refused: Partial<AnalogSpec> = { edgesHz: [900] }
    const html = renderToStaticMarkup(
      createElement(CompareSides, {
        sides: [
          { label: 'Version 1', spec: lowPass(refused) },
          { label: 'Version 2', spec: lowPass() },
          { label: 'The draft', spec: lowPass({ order: 5 }) },
        ],
      }),
    )
    expect(html).toContain('Version 1 makes no filter')
    expect(html).toContain('Differences below are from version 2.')
    const figures = html.slice(html.indexOf('aria-label="Figures of all sides"'))
    expect(figures.match(/<th scope="col"[^>]*>/g)).toHaveLength(3)
  })
})
