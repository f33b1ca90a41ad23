import { describe, expect, it } from 'vitest'
import { cascadeCost, directFormCost, parallelCost } from '@/components/studio/panels/sections/cost'
import { poleFigures, sectionFacts } from '@/components/studio/panels/sections/section-facts'
import { polynomialRoots, rootsBySection } from '@/components/studio/panels/sections/section-roots'
import { costsOf, ratioOf, structuresOf, usualStructure } from '@/components/studio/panels/sections/structures'
import { fullDigits, ratioAsText, sectionsAsText, zeroText } from '@/components/studio/panels/sections/written'
import { discretize, magnitudeDb, toSections, type AnalogSpec, type Section } from '@/dsp'

const lowpass = (order: number, edgeHz = 120): AnalogSpec => ({
  family: 'butterworth',
  response: 'lowpass',
  order,
  edgesHz: [edgeHz],
})

const section = (values: Partial<Section>): Section => ({ b0: 0, b1: 0, b2: 0, a1: 0, a2: 0, ...values })

describe('roots of a section', () => {
  it('solves quadratics without cancellation', () => {
    // x² − (1e8 + 1e-8)x + 1 has the roots 1e8 and 1e-8; the textbook formula loses the small one.
    const [large, small] = polynomialRoots([1, -(1e8 + 1e-8), 1])
    expect(large?.re).toBeCloseTo(1e8, 6)
    expect(Math.abs((small?.re ?? 0) / 1e-8 - 1)).toBeLessThan(1e-12)
  })

  it('lowers the degree for leading zeros and knows constants have no roots', () => {
    expect(polynomialRoots([0, 2, -1])).toEqual([{ re: 0.5, im: 0 }])
    expect(polynomialRoots([0, 0, 3])).toEqual([])
    expect(polynomialRoots([0, 0, 0])).toEqual([])
  })

  it('gives every root of the filter to exactly one section', () => {
    const filter = discretize(
      { family: 'elliptic', response: 'bandpass', order: 4, edgesHz: [80, 120], rippleDb: 0.5, attenuationDb: 50 },
      1200,
      {
        method: 'bilinear',
        hold: 'edges',
      },
    )
    const held = rootsBySection(filter, filter.sections)
    const key = ({ re, im }: { re: number; im: number }) => `${re} ${im}`
    expect(held.flatMap(({ poles }) => poles.map(key)).sort()).toEqual(filter.poles.map(key).sort())
    expect(held.flatMap(({ zeros }) => zeros.map(key)).sort()).toEqual(filter.zeros.map(key).sort())
    const gain = held.reduce((product, part) => product * part.gain, 1)
    expect(Math.abs(gain / filter.gain - 1)).toBeLessThan(1e-12)
  })
})

describe('facts of a section', () => {
  it('maps matched poles back to the analog frequency and Q', () => {
    // Butterworth of order 4: Q = 1/(2·sin((2k−1)π/8)), all poles at the corner (Butterworth 1930).
    const filter = discretize(lowpass(4), 1200, { method: 'matched-z' })
    const facts = sectionFacts(filter, filter.sections)
    const qs = facts.map(({ q }) => q ?? 0).sort((a, b) => a - b)
    for (const { poleHz } of facts) expect(Math.abs(poleHz / 120 - 1)).toBeLessThan(1e-12)
    expect(qs[0]).toBeCloseTo(1 / (2 * Math.sin((3 * Math.PI) / 8)), 10)
    expect(qs[1]).toBeCloseTo(1 / (2 * Math.sin(Math.PI / 8)), 10)
  })

  it('keeps the digits of poles very near z = 1', () => {
    const filter = discretize(lowpass(2, 0.2), 100_000, { method: 'matched-z' })
    const [fact] = sectionFacts(filter, filter.sections)
    // Rounding of the pole itself: ε over its distance from 1.
    const rounding = 2 ** -52 / ((2 * Math.PI * 0.2) / 100_000)
    expect(Math.abs((fact?.poleHz ?? 0) / 0.2 - 1)).toBeLessThan(8 * rounding)
  })

  it('takes two real poles as a pair with Q up to one half', () => {
    const pole = (hertz: number) => ({ re: Math.exp((-2 * Math.PI * hertz) / 1000), im: 0 })
    expect(poleFigures([pole(20), pole(20)], 1000).q).toBeCloseTo(0.5, 10)
    const apart = poleFigures([pole(10), pole(40)], 1000)
    expect(apart.poleHz).toBeCloseTo(20, 9)
    expect(apart.q).toBeCloseTo(20 / 50, 9)
  })

  it('finds the peak of every node, the last of which is the output', () => {
    const filter = discretize(
      { family: 'chebyshev1', response: 'lowpass', order: 6, edgesHz: [120], rippleDb: 1 },
      1200,
      {
        method: 'bilinear',
        hold: 'edges',
      },
    )
    const facts = sectionFacts(filter, filter.sections)
    // Chebyshev I as designed: the ripple's upper end is 0 dB.
    expect(facts.at(-1)?.nodePeakDb).toBeCloseTo(0, 6)
    const grid = Float64Array.from({ length: 20_001 }, (_, k) => (k / 20_000) * 600)
    const direct = Math.max(...magnitudeDb(filter, grid))
    expect(facts.at(-1)?.nodePeakDb ?? 0).toBeGreaterThanOrEqual(direct - 1e-9)
  })

  it('sees each node at 0 dB once the cascade is scaled to its largest gain', () => {
    const filter = discretize(lowpass(8), 1200, { method: 'bilinear', hold: 'edges' })
    const sections = toSections(filter, { scale: 'linf' })
    const peaks = sectionFacts(filter, sections).map(({ nodePeakDb }) => nodePeakDb)
    expect(peaks).toHaveLength(4)
    for (const peak of peaks) expect(Math.abs(peak)).toBeLessThan(1e-4)
  })

  it('says where the zeros are', () => {
    const bilinear = discretize(lowpass(4), 1200, { method: 'bilinear', hold: 'edges' })
    for (const { zeros } of sectionFacts(bilinear, bilinear.sections)) {
      expect(zeros).toEqual([{ hertz: 600, radius: 1, isDouble: true }])
      expect(zeros.map(zeroText)).toEqual(['600\u2009Hz, double'])
    }
    const stop = discretize({ family: 'butterworth', response: 'bandstop', order: 2, edgesHz: [90, 110] }, 1000, {
      method: 'matched-z',
    })
    for (const { zeros } of sectionFacts(stop, stop.sections)) {
      expect(zeros).toHaveLength(1)
      expect(zeros[0]?.hertz).toBeCloseTo(Math.sqrt(90 * 110), 6)
    }
  })
})

describe('cost of a sample', () => {
  it('counts neither zeros nor ones', () => {
    const first = section({ b0: 0.5, b1: 1, b2: 0.5, a1: -0.3, a2: 0.2 })
    const second = section({ b0: 0.5, b1: 0.5, a1: -0.9 })
    expect(cascadeCost([first])).toEqual({ multiplies: 4, adds: 4, stateWords: 2 })
    expect(cascadeCost([first, second])).toEqual({ multiplies: 7, adds: 6, stateWords: 3 })
    expect(directFormCost([1, 0, 0, 2], [1, 0.5])).toEqual({ multiplies: 2, adds: 2, stateWords: 3 })
    expect(directFormCost([1], [1])).toEqual({ multiplies: 0, adds: 0, stateWords: 0 })
  })

  it('adds the outputs of parallel paths', () => {
    const term = section({ b0: 0.2, b1: 0.1, a1: -0.8, a2: 0.4 })
    expect(parallelCost({ direct: 0, terms: [term, term] })).toEqual({ multiplies: 8, adds: 7, stateWords: 4 })
    expect(parallelCost({ direct: 0.3, terms: [term] })).toEqual({ multiplies: 5, adds: 4, stateWords: 2 })
  })
})

describe('structures', () => {
  it('hands the design’s own sections over when nothing else is asked', () => {
    const filter = discretize(lowpass(6), 1200, { method: 'bilinear', hold: 'edges' })
    expect(structuresOf(filter, usualStructure).sections).toBe(filter.sections)
    const first = structuresOf(filter, { order: 'peak-first', scale: 'none' })
    const radii = first.facts.map(({ radius }) => radius)
    expect(radii).toEqual([...radii].sort((a, b) => b - a))
  })

  it('keeps b/a while it is well conditioned and refuses it with the deviation otherwise', () => {
    const kept = ratioOf(discretize(lowpass(4), 1200, { method: 'bilinear', hold: 'edges' }))
    expect(kept.kept && kept.polynomials.worstDeviationDb < 1e-9).toBe(true)
    const narrow = discretize(lowpass(10, 20), 48_000, { method: 'bilinear', hold: 'edges' })
    const refused = ratioOf(narrow)
    expect(refused.kept).toBe(false)
    expect(refused.kept ? '' : refused.reason).toMatch(/dB|unit circle/)
    expect(costsOf(narrow, narrow.sections, refused).map(({ name }) => name)).toEqual(['cascade'])
  })

  it('shows a parallel form where the method keeps one', () => {
    const filter = discretize(lowpass(4), 1200, { method: 'impulse-invariant' })
    expect(costsOf(filter, filter.sections, ratioOf(filter)).map(({ name }) => name)).toContain('parallel')
  })

  it('starts steadily: run on a constant, the output never moves', () => {
    const filter = discretize(lowpass(5), 1200, { method: 'bilinear', hold: 'edges' })
    const { sections, start } = structuresOf(filter, { order: 'peak-first', scale: 'l2' })
    const state = Float64Array.from(start ?? [])
    // The equations as the panel prints them.
    for (let n = 0; n < 50; n++) {
      let value = 1
      sections.forEach(({ b0, b1, b2, a1, a2 }, k) => {
        const y = b0 * value + (state[2 * k] ?? 0)
        state[2 * k] = b1 * value - a1 * y + (state[2 * k + 1] ?? 0)
        state[2 * k + 1] = b2 * value - a2 * y
        value = y
      })
      expect(value).toBeCloseTo(1, 10)
    }
  })
})

describe('coefficients as text', () => {
  it('brings every double back as itself', () => {
    const { sections } = discretize(lowpass(7, 33.3), 1200, { method: 'bilinear', hold: 'edges' })
    const [, ...lines] = sectionsAsText(sections).trimEnd().split('\n')
    const read = lines.map((line) => line.split('\t').slice(1).map(Number))
    expect(read).toEqual(sections.map(({ b0, b1, b2, a1, a2 }) => [b0, b1, b2, a1, a2]))
    expect(Number(fullDigits(-1.2345678901234567e-9).replace(/−/g, '-'))).toBe(-1.2345678901234567e-9)
  })

  it('writes one line for each power of the ratio', () => {
    expect(ratioAsText([1, 2], [1, -0.5, 0.25])).toBe('delay\tb\ta\n0\t1\t1\n1\t2\t-0.5\n2\t0\t0.25\n')
  })
})
