import { createElement } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { cascadeCost, directFormCost, parallelCost } from '@/components/studio/panels/sections/cost'
import { poleFigures, sectionFacts } from '@/components/studio/panels/sections/section-facts'
import { polynomialRoots, rootsBySection } from '@/components/studio/panels/sections/section-roots'
import { costsOf, ratioOf, structuresOf, usualStructure } from '@/components/studio/panels/sections/structures'
import { fullDigits, ratioAsText, sectionsAsText, zeroText } from '@/components/studio/panels/sections/written'
import {
  delayWords,
  mirrorOf,
  tapsAsText,
  tapsCosts,
  tapsSums,
  zeroRows,
} from '@/components/studio/panels/sections/taps-facts'
import { TapsPanel } from '@/components/studio/panels/sections/taps-panel'
import { tapsFrame, tapsScene } from '@/components/studio/panels/sections/taps-picture'
import { tapAfterKey, tapText } from '@/components/studio/panels/sections/taps-plot'
import type { Mark } from '@/components/plot/scene'
import {
  designFromSpec,
  discretize,
  frequencyResponse,
  isFir,
  magnitudeDb,
  toSections,
  type AnalogSpec,
  type FirDesign,
  type FirFilter,
  type Section,
} from '@/dsp'
import { firDesign, firKinds, fittedLowPass, ownKinds } from '../helpers/export-sources'

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

const firOf = (spec: FirDesign) => {
  const { digital } = designFromSpec(spec)
  if (!isFir(digital)) throw new Error('Taps were stated.')
  return digital
}
const plainFir = (taps: readonly number[], symmetry: FirFilter['symmetry']): FirFilter => ({
  domain: 'z',
  taps: Float64Array.from(taps),
  sampleRateHz: 1000,
  symmetry,
  diagnostics: [],
})
const halfBand = firKinds.find(({ fir }) => fir.kind === 'half-band')!

describe('cost of taps', () => {
  it('halves the multiplications of symmetric taps, and no addition', () => {
    expect(tapsCosts(plainFir([0.25, 0.5, 0.25], 'even'))).toEqual([
      { name: 'direct', cost: { multiplies: 3, adds: 2, stateWords: 2 } },
      { name: 'folded by symmetry', cost: { multiplies: 2, adds: 2, stateWords: 2 } },
    ])
    expect(tapsCosts(plainFir([0.5, 0, -0.5], 'odd'))[1]?.cost).toEqual({ multiplies: 1, adds: 1, stateWords: 2 })
    expect(tapsCosts(plainFir([0.5, 0.2, 0.1], 'none'))).toHaveLength(1)
  })

  it('counts no zeros of a half-band filter: of N = 4m + 3 taps m + 1 pairs and the middle are left', () => {
    const filter = firOf(halfBand)
    const m = (filter.taps.length - 3) / 4
    const exactZeros = filter.taps.filter((tap) => tap === 0).length
    expect(exactZeros).toBe(2 * m)
    const [direct, folded] = tapsCosts(filter)
    expect(direct?.cost.multiplies).toBe(filter.taps.length - exactZeros)
    expect(folded?.cost.multiplies).toBe(m + 2)
  })
})

describe('facts of taps', () => {
  it('say the delay, the mirror image and the sums', () => {
    expect(delayWords(plainFir([1, 2, 1], 'even'))).toBe('delays every frequency by 1 sample, 1\u2009ms')
    expect(delayWords(plainFir([1, 1], 'even'))).toBe('delays every frequency by 0.5 samples, 500\u2009µs')
    expect(delayWords(plainFir([1, 2], 'none'))).toMatch(/changes with frequency/)
    expect([0, 1, 2].map((k) => mirrorOf(plainFir([1, 2, 1], 'even'), k))).toEqual([2, null, 0])
    expect(mirrorOf(plainFir([1, 2], 'none'), 0)).toBeNull()
    expect(tapsSums(plainFir([0.5, -0.25, 0.5], 'even'))).toEqual({ plain: 0.75, ofMagnitudes: 1.25 })
    expect(tapText(plainFir([0.5, 0, -0.5], 'odd'), 0)).toBe('h0 = 0.5, its negative at h2')
    const filter = firOf(firDesign())
    expect(tapsSums(filter).plain).toBeCloseTo(frequencyResponse(filter, [0]).re[0] ?? 0, 12)
  })

  it('say where the zeros are: z⁻¹ + 1 stops half the rate, 1 + z⁻² a quarter of it', () => {
    expect(zeroRows(plainFir([1, 1], 'even'))).toEqual([{ where: '500\u2009Hz', radius: 'on the circle', times: 1 }])
    expect(zeroRows(plainFir([1, 0, 1], 'even'))).toEqual([{ where: '250\u2009Hz', radius: 'on the circle', times: 1 }])
    expect(zeroRows(plainFir([1, -0.5], 'none'))).toEqual([{ where: '0\u2009Hz', radius: '0.5', times: 1 }])
    expect(zeroRows(plainFir([1], 'even'))).toMatch(/no zeros/)
    expect(zeroRows(firOf(firKinds.find(({ fir }) => fir.taps === 151)!))).toMatch(/more than 128 taps/)
    const rows = zeroRows(firOf(firDesign()))
    if (typeof rows === 'string') throw new Error(rows)
    // All that stops lies in the stop band, from 200 Hz on; the zeros about the pass band are off the circle.
    for (const { where, radius } of rows) if (radius === 'on the circle') expect(parseFloat(where)).toBeGreaterThan(200)
    const count = rows.reduce((sum, { where, times }) => sum + (/^(0|600)\u2009/.test(where) ? times : 2 * times), 0)
    expect(count).toBe(40)
  })

  it('bring every tap back as itself', () => {
    const filter = firOf(firDesign())
    const [head, ...lines] = tapsAsText(filter.taps).trimEnd().split('\n')
    expect(head).toBe('k\th')
    expect(lines.map((line) => line.split('\t').map(Number))).toEqual(Array.from(filter.taps, (tap, k) => [k, tap]))
  })
})

describe('the picture of taps', () => {
  const flat = (marks: readonly Mark[]): Mark[] =>
    marks.flatMap((mark) => (mark.kind === 'clip' ? flat(mark.marks) : [mark]))

  it('has a stem from the ground to each tap, its head and the axis of symmetry', () => {
    const filter = firOf(firDesign())
    const frame = tapsFrame(800, filter.taps)
    const marks = flat(tapsScene(filter, frame).marks)
    const stems = marks.find((mark) => mark.kind === 'path' && mark.stroke.widthPixels === 1.3)
    if (stems?.kind !== 'path') throw new Error('There are no stems.')
    expect(stems.points).toHaveLength(6 * 41)
    filter.taps.forEach((tap, k) => {
      expect([...stems.points.slice(6 * k, 6 * k + 1)]).toEqual([frame.x.toPixel(k)])
      expect(stems.points[6 * k + 3]).toBe(frame.y.toPixel(tap))
      expect(frame.y.toPixel(tap)).toBeGreaterThanOrEqual(frame.box.top)
      expect(frame.y.toPixel(tap)).toBeLessThanOrEqual(frame.box.bottom)
    })
    expect(marks.filter(({ kind }) => kind === 'marker')).toHaveLength(41)
    const dashed = (of: FirFilter) =>
      flat(tapsScene(of, tapsFrame(800, of.taps)).marks).filter(
        (mark) => mark.kind === 'path' && (mark.stroke.dash?.length ?? 0) > 0,
      ).length
    expect(dashed(filter)).toBe(1)
    expect(dashed(plainFir([1, 0.5, 0.2], 'none'))).toBe(0)
  })

  it('draws many taps as one curve, and numbers none but whole taps', () => {
    const many = plainFir(
      Array.from({ length: 1024 }, (_, k) => Math.sin(k / 9)),
      'none',
    )
    const marks = flat(tapsScene(many, tapsFrame(900, many.taps)).marks)
    expect(marks.filter(({ kind }) => kind === 'marker')).toHaveLength(0)
    const few = plainFir([1, 2, 1], 'even')
    const frame = tapsFrame(900, few.taps)
    const labels = tapsScene(few, frame).marks.flatMap((mark) =>
      mark.kind === 'text' && mark.anchor === 'middle' ? [mark.text] : [],
    )
    expect(labels).toEqual(['0', '1', '2'])
  })

  it('keeps the numbers of its axis short, whatever size the taps are', () => {
    for (const size of [1e-9, 1, 300, 4e8]) {
      const filter = plainFir([0.3 * size, -size, 0.3 * size], 'even')
      const texts = tapsScene(filter, tapsFrame(900, filter.taps)).marks.flatMap((mark) =>
        mark.kind === 'text' ? [mark] : [],
      )
      const labels = texts.filter(({ anchor }) => anchor === 'end')
      expect(labels.length).toBeGreaterThan(2)
      for (const { text } of labels) expect(text.length).toBeLessThan(6)
      expect(texts.some(({ text }) => text.startsWith('in units of'))).toBe(size < 1e-3 || size > 1e4)
    }
  })

  it('is read by keys within its taps', () => {
    expect(tapAfterKey('ArrowRight', 1, null, 9)).toBe(0)
    expect(tapAfterKey('ArrowRight', 10, 4, 9)).toBe(9)
    expect(tapAfterKey('ArrowLeft', 1, 0, 9)).toBe(0)
    expect(tapAfterKey('End', 1, 3, 9)).toBe(9)
    expect(tapAfterKey('Escape', 1, 3, 9)).toBeNull()
    expect(tapAfterKey('Escape', 1, null, 9)).toBeUndefined()
    expect(tapAfterKey('x', 1, 3, 9)).toBeUndefined()
  })

  it('stands in the drawer with costs, zeros and what should be known', () => {
    const filter = firOf(firDesign())
    const known = { code: 'c', severity: 'caution', message: 'Mind the gap.' } as const
    const html = renderToStaticMarkup(createElement(TapsPanel, { filter: { ...filter, diagnostics: [known] } }))
    for (const words of [
      '41 taps at 1.2\u2009kHz, symmetric: linear phase',
      'delays every frequency by 20 samples',
      'folded by symmetry',
      'Zeros by frequency',
      'Mind the gap.',
      'Copy taps',
      'role="slider"',
    ])
      expect(html).toContain(words)
  })
})

describe('the cascade of originals of one’s own', () => {
  it('is as whole as that of a family', () => {
    for (const spec of [...ownKinds, fittedLowPass]) {
      const { digital } = designFromSpec(spec)
      if (isFir(digital)) throw new Error('This has feedback.')
      const { sections, facts, start } = structuresOf(digital, usualStructure)
      expect(sections).toBe(digital.sections)
      expect(facts.flatMap(({ zeros }) => zeros).every(({ radius }) => Number.isFinite(radius))).toBe(true)
      for (const { nodePeakDb, radius } of facts) {
        expect(Number.isFinite(nodePeakDb)).toBe(true)
        expect(radius).toBeLessThan(1)
      }
      expect(start).toHaveLength(2 * sections.length)
      expect(costsOf(digital, sections, ratioOf(digital)).map(({ name }) => name)).toContain('cascade')
    }
  })
})
