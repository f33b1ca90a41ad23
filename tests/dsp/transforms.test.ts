import { describe, expect, it } from 'vitest'
import { designAnalog, type AnalogSpec } from '@/dsp'
import { analogAt, decibels, size } from '../helpers/dsp'

const HALF_POWER_DB = -10 * Math.log10(2)

const FAMILIES = [
  { family: 'butterworth' },
  { family: 'chebyshev1', rippleDb: 1 },
  { family: 'chebyshev2', attenuationDb: 45 },
  { family: 'elliptic', rippleDb: 0.5, attenuationDb: 50 },
  { family: 'bessel' },
  { family: 'critically-damped' },
] as const

type Part = Pick<AnalogSpec, 'response' | 'edgesHz'>
const PARTS: readonly Part[] = [
  { response: 'lowpass', edgesHz: [120] },
  { response: 'highpass', edgesHz: [120] },
  { response: 'bandpass', edgesHz: [80, 200] },
  { response: 'bandstop', edgesHz: [80, 200] },
  { response: 'bandpass', edgesHz: [99.9, 100.1] },
  { response: 'bandstop', edgesHz: [0.01, 1000] },
]

/** The prototype's frequency that a frequency comes from, with the pass (or stop) edge at 1. */
function lowpassFrequency({ response, edgesHz }: Part, hz: number): number {
  const [low = 1, high = 1] = edgesHz
  switch (response) {
    case 'lowpass':
      return hz / low
    case 'highpass':
      return low / hz
    case 'bandpass':
      return Math.abs(((hz - Math.sqrt(low * high)) * (hz + Math.sqrt(low * high))) / ((high - low) * hz))
    case 'bandstop':
      return Math.abs(((high - low) * hz) / ((hz - Math.sqrt(low * high)) * (hz + Math.sqrt(low * high))))
  }
}

describe.each(FAMILIES)('$family', (levels) => {
  it.each(PARTS)('$response at $edgesHz is its low-pass seen through the band transform', (part) => {
    for (const order of [1, 2, 5, 8, 13, 24]) {
      const filter = designAnalog({ ...levels, ...part, order })
      const lowpass = designAnalog({ ...levels, response: 'lowpass', edgesHz: [1], order })
      expect(filter.poles.length).toBe(part.edgesHz.length * order)
      for (const hz of [50, 79, 81, 99.95, 110, 119, 121, 150, 210, 500]) {
        const through = size(analogAt(lowpass, lowpassFrequency(part, hz)))
        const got = size(analogAt(filter, hz))
        expect(Math.abs(got - through), `${order} at ${hz} Hz`).toBeLessThan(1e-9)
      }
    }
  })

  it('is stable, with exact conjugate pairs and no zeros right of the axis', () => {
    for (const part of PARTS) {
      for (let order = 1; order <= 24; order += 1) {
        const filter = designAnalog({ ...levels, ...part, order })
        for (const pole of filter.poles) expect(pole.re).toBeLessThan(0)
        for (const roots of [filter.poles, filter.zeros]) {
          const upper = roots.filter((root) => root.im > 0)
          const lower = roots.filter((root) => root.im < 0)
          expect(upper.map(({ re, im }) => `${re} ${im}`).sort()).toEqual(
            lower.map(({ re, im }) => `${re} ${-im}`).sort(),
          )
        }
        for (const zero of filter.zeros) expect(zero.re).toBe(0)
      }
    }
  })
})

describe('edges', () => {
  it.each(PARTS)('−3 dB stands at every edge: $response $edgesHz', (part) => {
    for (const family of ['butterworth', 'bessel', 'critically-damped'] as const) {
      for (const order of [1, 4, 7, 24]) {
        const filter = designAnalog({ family, ...part, order })
        for (const edge of part.edgesHz) expect(decibels(analogAt(filter, edge))).toBeCloseTo(HALF_POWER_DB, 7)
      }
    }
  })

  it('blocks DC and passes infinity exactly where it should', () => {
    const highpass = designAnalog({ family: 'butterworth', response: 'highpass', order: 5, edgesHz: [10] })
    expect(highpass.zeros).toEqual(Array.from({ length: 5 }, () => ({ re: 0, im: 0 })))
    expect(highpass.gain).toBe(1)
    const notch = designAnalog({ family: 'butterworth', response: 'bandstop', order: 2, edgesHz: [45, 55] })
    for (const zero of notch.zeros) expect(Math.abs(zero.im)).toBeCloseTo(2 * Math.PI * Math.sqrt(45 * 55), 10)
    expect(notch.gain).toBe(1)
  })

  it('keeps an even order of equal ripple at −ripple in DC, centre or infinity', () => {
    const base = { family: 'chebyshev1', rippleDb: 2, order: 4 } as const
    expect(decibels(analogAt(designAnalog({ ...base, response: 'lowpass', edgesHz: [10] }), 0))).toBeCloseTo(-2, 10)
    expect(decibels(analogAt(designAnalog({ ...base, response: 'bandpass', edgesHz: [10, 40] }), 20))).toBeCloseTo(
      -2,
      10,
    )
    expect(decibels(analogAt(designAnalog({ ...base, response: 'bandstop', edgesHz: [10, 40] }), 0))).toBeCloseTo(
      -2,
      10,
    )
    expect(decibels(designAnalog({ ...base, response: 'highpass', edgesHz: [10] }).gain)).toBeCloseTo(-2, 10)
  })

  it('holds from a millionth of a hertz to a gigahertz at order 24', () => {
    for (const levels of FAMILIES) {
      for (const edge of [1e-6, 1e9]) {
        const lowpass = designAnalog({ ...levels, response: 'lowpass', order: 24, edgesHz: [edge] })
        expect(Number.isFinite(lowpass.gain) && lowpass.gain > 0).toBe(true)
        expect(size(analogAt(lowpass, edge / 1000))).toBeGreaterThan(0.85)
        const band = designAnalog({
          ...levels,
          response: 'bandpass',
          order: 24,
          edgesHz: [edge === 1e9 ? 9e8 : edge, edge * (edge === 1e9 ? 1 : 2)],
        })
        expect(Number.isFinite(band.gain) && band.gain > 0).toBe(true)
      }
    }
  })

  it('gives a delay-normalised Bessel filter the DC delay 1/(2π·edge)', () => {
    const filter = designAnalog({
      family: 'bessel',
      response: 'lowpass',
      order: 6,
      edgesHz: [40],
      normalization: 'delay',
    })
    const delay = filter.poles.reduce((sum, { re, im }) => sum - re / (re * re + im * im), 0)
    expect(delay).toBeCloseTo(1 / (2 * Math.PI * 40), 15)
  })
})
