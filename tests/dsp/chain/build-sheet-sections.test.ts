import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { analogSections, designAnalog, type AnalogSection, type AnalogSpec, type DesignLink, type Filter } from '@/dsp'
import { plainGain, splitAnalog } from '@/dsp/chain/analog-sections'
import { analogChain } from '../../helpers/analog-chain'
import { analogAt } from '../../helpers/dsp'
import besselTable from '../../reference/proto_bessel.json'
import butterworthTable from '../../reference/proto_butterworth.json'

type Split = Pick<AnalogSection, 'order' | 'f0Hz' | 'q' | 'zeros' | 'gain'>

/** H of one section from f0, Q and zeros alone, relative to powers of ω₀ so that nothing overflows. */
function sectionAt({ order, f0Hz, q, zeros, gain }: Split, hz: number): { re: number; im: number } {
  const omega = 2 * Math.PI * hz
  const omega0 = 2 * Math.PI * f0Hz
  let [re, im] = [gain, 0]
  for (const zero of zeros) {
    const [a, b] = [-zero.re, omega - zero.im]
    ;[re, im] = [re * a - im * b, re * b + im * a]
  }
  const [a, b] = order === 1 ? [omega0, omega] : [omega0 ** 2 - omega ** 2, (omega * omega0) / (q ?? Number.NaN)]
  const power = a * a + b * b
  return { re: (re * a + im * b) / power, im: (im * a - re * b) / power }
}

function productAt(sections: readonly Split[], hz: number): { re: number; im: number } {
  return sections.reduce(
    (product, section) => {
      const h = sectionAt(section, hz)
      return { re: product.re * h.re - product.im * h.im, im: product.re * h.im + product.im * h.re }
    },
    { re: 1, im: 0 },
  )
}

function expectSame(filter: Filter<'s'>, frequencies: readonly number[]): void {
  const sections = splitAnalog(filter)
  expect(sections.reduce((order, section) => order + section.order, 0)).toBe(filter.poles.length)
  for (const hz of frequencies) {
    const [whole, product] = [analogAt(filter, hz), productAt(sections, hz)]
    const size = Math.hypot(whole.re, whole.im)
    expect(Math.hypot(whole.re - product.re, whole.im - product.im)).toBeLessThan(1e-9 * size + 1e-14)
  }
}

const lowpass = (family: AnalogSpec['family'], order: number, more: Partial<AnalogSpec> = {}): AnalogSpec => ({
  family,
  response: 'lowpass',
  order,
  edgesHz: [1000],
  ...more,
})

describe('f0 and Q of the sections', () => {
  // Q of the quadratic factors, handbook tables of the Butterworth prototype (tests/reference/proto_butterworth.json).
  it.each(butterworthTable.rows)('Butterworth, order $n', ({ n, value }) => {
    const sections = analogSections(analogChain({ analog: [lowpass('butterworth', n)] }))
    const second = sections.filter(({ order }) => order === 2)
    const wanted = [...value.quadratic_Q].sort((a, b) => a - b)
    expect(second).toHaveLength(wanted.length)
    second.forEach(({ q, f0Hz }, k) => {
      expect(q! / wanted[k]! - 1).toBeCloseTo(0, 10)
      expect(f0Hz / 1000 - 1).toBeCloseTo(0, 12)
    })
    const first = sections.filter(({ order }) => order === 1)
    expect(first).toHaveLength(n % 2)
    for (const { f0Hz, q } of first) expect([f0Hz, q]).toEqual([expect.closeTo(1000, 8), null])
  })

  // Q and f0 over the −3 dB frequency, handbook tables of the Bessel prototype (tests/reference/proto_bessel.json).
  it.each(besselTable.rows)('Bessel, order $n', ({ n, value }) => {
    const spec = lowpass('bessel', n, { normalization: 'magnitude' })
    const second = analogSections(analogChain({ analog: [spec] })).filter(({ order }) => order === 2)
    const wanted = value.section_Q.map((q, k) => ({ q, f0: value.section_f0_over_f3dB[k]! }))
    wanted.sort((a, b) => a.q - b.q)
    expect(second).toHaveLength(wanted.length)
    second.forEach(({ q, f0Hz }, k) => {
      expect(q! / wanted[k]!.q - 1).toBeCloseTo(0, 9)
      expect(f0Hz / 1000 / wanted[k]!.f0 - 1).toBeCloseTo(0, 9)
    })
  })

  it('comes in signal order, and in ascending Q within a stage', () => {
    const chain = analogChain({
      highPass: { cornerHz: 0.5, order: 3 },
      resonance: { f0Hz: 30_000, q: 50 },
      analog: [lowpass('butterworth', 5), lowpass('bessel', 4)],
    })
    const sections = analogSections(chain)
    expect(
      sections.map(({ stageId, stageIndex, index, order, response }) => [stageId, stageIndex, index, order, response]),
    ).toEqual([
      ['sensor', 0, 0, 1, 'high-pass'],
      ['sensor', 0, 1, 2, 'high-pass'],
      ['analog0', 1, 0, 1, 'low-pass'],
      ['analog0', 1, 1, 2, 'low-pass'],
      ['analog0', 1, 2, 2, 'low-pass'],
      ['analog1', 2, 0, 2, 'low-pass'],
      ['analog1', 2, 1, 2, 'low-pass'],
    ])
    expect(sections[1]).toMatchObject({ f0Hz: expect.closeTo(0.5, 12), q: expect.closeTo(1, 12) })
  })

  it('leaves bypassed stages out, and the resonance of a sensor', () => {
    expect(analogSections(analogChain({ analog: [lowpass('butterworth', 4)], bypassed: true }))).toEqual([])
    expect(analogSections(analogChain({ resonance: { f0Hz: 30_000, q: 50 } }))).toEqual([])
  })

  it('takes the analog original of a linked design', () => {
    const link: DesignLink = {
      designId: '00000000-0000-4000-8000-000000000000',
      version: 1,
      drawing: 'PW-1',
      title: 'Anti-alias',
      spec: {
        format: 1,
        sampleRateHz: 51_200,
        budget: { magnitudeDb: 0.1, phaseDegrees: 2, removeDelay: true },
        analog: lowpass('butterworth', 2),
        how: { method: 'bilinear', hold: 'edges' },
      },
    }
    const chain = analogChain({ analog: [link] })
    expect(analogSections(chain)).toMatchObject([{ stageId: 'analog0', order: 2, q: expect.closeTo(Math.SQRT1_2, 12) }])
  })
})

describe('what kind a section is', () => {
  const responses = (spec: AnalogSpec) => splitAnalog(designAnalog(spec)).map(({ response }) => response)

  it('pairs equal real poles to Q = 1/2', () => {
    const sections = splitAnalog(designAnalog(lowpass('critically-damped', 5)))
    expect(sections.map(({ q }) => q)).toEqual([null, expect.closeTo(0.5, 14), expect.closeTo(0.5, 14)])
  })

  it('knows high-pass, band-pass and notch sections', () => {
    expect(responses({ ...lowpass('butterworth', 3), response: 'highpass' })).toEqual(['high-pass', 'high-pass'])
    const narrow: AnalogSpec = { ...lowpass('butterworth', 2), response: 'bandpass', edgesHz: [900, 1100] }
    expect(responses(narrow)).toEqual(['band-pass', 'band-pass'])
    expect(responses({ ...narrow, order: 1, response: 'bandstop' })).toEqual(['notch'])
    expect(responses({ ...narrow, response: 'bandstop' })).toEqual(['other', 'other'])
  })

  it('builds a wide band of a high-pass and a low-pass', () => {
    const wide: AnalogSpec = { ...lowpass('butterworth', 2), response: 'bandpass', edgesHz: [10, 1000] }
    const sections = splitAnalog(designAnalog(wide))
    expect(sections.map(({ response, f0Hz }) => [response, f0Hz < 100]).sort()).toEqual([
      ['high-pass', true],
      ['low-pass', false],
    ])
    // Real poles a hundred times apart: two of first order rather than one of Q = 0.1.
    expect(responses({ ...wide, order: 1 }).sort()).toEqual(['high-pass', 'low-pass'])
  })

  it('calls sections with zeros on the axis “other”, and says where the zeros are', () => {
    const filter = designAnalog(lowpass('elliptic', 5, { rippleDb: 0.1, attenuationDb: 60 }))
    const sections = splitAnalog(filter)
    expect(sections.map(({ response }) => response)).toEqual(['low-pass', 'other', 'other'])
    const zeros = sections.flatMap((section) => section.zeros.map(({ im }) => im)).sort((a, b) => a - b)
    expect(zeros).toEqual(filter.zeros.map(({ im }) => im).sort((a, b) => a - b))
    // The most peaked poles have the nearest zeros.
    expect(sections[2]!.zeros[0]!.im).toBeLessThan(sections[1]!.zeros[0]!.im)
  })

  it('finds a pair of real poles for zeros on the axis', () => {
    // A wide order-1 band-stop has two real poles far apart and one pair of zeros.
    const sections = splitAnalog(
      designAnalog({ ...lowpass('butterworth', 1), response: 'bandstop', edgesHz: [10, 1000] }),
    )
    expect(sections).toHaveLength(1)
    expect(sections[0]).toMatchObject({ order: 2, response: 'notch', f0Hz: expect.closeTo(100, 9) })
  })
})

describe('the product of the sections', () => {
  const frequencies = [1e-3, 1, 50, 420, 999, 1000, 1001, 1500, 2600, 1e5]

  it('is the analog filter, for every family and response', () => {
    fc.assert(
      fc.property(
        fc.constantFrom<AnalogSpec['family']>(
          'butterworth',
          'chebyshev1',
          'chebyshev2',
          'elliptic',
          'bessel',
          'critically-damped',
        ),
        fc.constantFrom<AnalogSpec['response']>('lowpass', 'highpass', 'bandpass', 'bandstop'),
        fc.integer({ min: 1, max: 8 }),
        fc.double({ min: 1.02, max: 30, noNaN: true }),
        (family, response, order, ratio) => {
          const isBand = response === 'bandpass' || response === 'bandstop'
          expectSame(
            designAnalog({
              family,
              response,
              order,
              edgesHz: isBand ? [1000 / ratio, 1000 * ratio] : [1000],
              ...(family === 'chebyshev1' || family === 'elliptic' ? { rippleDb: 0.5 } : {}),
              ...(family === 'chebyshev2' || family === 'elliptic' ? { attenuationDb: 60 } : {}),
            }),
            frequencies,
          )
        },
      ),
      { numRuns: 120 },
    )
  })

  it('is the analog filter for roots of one’s own, real zeros on either side among them', () => {
    const filter: Filter<'s'> = {
      domain: 's',
      zeros: [
        { re: 0, im: 0 },
        { re: 4000, im: 0 },
        { re: -90, im: 0 },
        { re: 300, im: 5000 },
        { re: 300, im: -5000 },
      ],
      poles: [
        { re: -3, im: 0 },
        { re: -4000, im: 0 },
        { re: -300, im: 5000 },
        { re: -300, im: -5000 },
        { re: -5000, im: 0 },
        { re: -70, im: 0 },
      ],
      gain: -7.5,
    }
    expectSame(filter, frequencies)
  })

  it('leaves what a filter lacks to unity to its first section', () => {
    const filter = designAnalog(lowpass('chebyshev1', 4, { rippleDb: 1 }))
    const levels = splitAnalog(filter).map((section) => section.gain / plainGain(section))
    expect(levels).toEqual([expect.closeTo(10 ** (-1 / 20), 10), 1])
  })
})
