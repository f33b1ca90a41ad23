import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, type AnalogSpec } from '@/dsp'
import { analogAt, digitalAt, size } from '../helpers/dsp'

const RATE = 1000
const matched = (spec: AnalogSpec, rate = RATE) => discretize(spec, rate, { method: 'matched-z' })
const value = (spec: AnalogSpec, code: string, rate = RATE) =>
  matched(spec, rate).diagnostics.find((entry) => entry.code === code)?.value

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] },
  { family: 'chebyshev1', response: 'highpass', order: 5, edgesHz: [100], rippleDb: 1 },
  { family: 'butterworth', response: 'bandpass', order: 3, edgesHz: [100, 200] },
  { family: 'elliptic', response: 'bandstop', order: 4, edgesHz: [100, 200], rippleDb: 0.5, attenuationDb: 40 },
  { family: 'critically-damped', response: 'lowpass', order: 6, edgesHz: [20] },
]

describe('matched-z', () => {
  it.each(SPECS)('$family $response: poles and finite zeros lie at e^{sT}, the others at z = −1', (spec) => {
    const analog = designAnalog(spec)
    const digital = matched(spec)
    const image = ({ re, im }: { re: number; im: number }) => {
      const radius = Math.exp(re / RATE)
      return [radius * Math.cos(im / RATE), radius * Math.sin(im / RATE)] as const
    }
    for (const [roots, images] of [
      [analog.poles, digital.poles],
      [analog.zeros, digital.zeros],
    ] as const) {
      for (const root of roots) {
        const [re, im] = image(root)
        expect(Math.min(...images.map((z) => Math.hypot(z.re - re, z.im - im)))).toBeLessThan(1e-13)
      }
    }
    const excess = analog.poles.length - analog.zeros.length
    expect(digital.zeros.filter((zero) => zero.re === -1 && zero.im === 0).length).toBe(excess)
    expect(digital.zeros.length).toBe(digital.poles.length)
    expect(value(spec, 'zeros-at-half-rate')).toBe(excess === 0 ? undefined : excess)
  })

  it.each(SPECS)('$family $response: the gain agrees where it should', (spec) => {
    const analog = designAnalog(spec)
    const digital = matched(spec)
    const [low = 0, high = 0] = spec.edgesHz
    const hz = { lowpass: 0, bandstop: 0, bandpass: Math.sqrt(low * high), highpass: RATE / 2 }[spec.response]
    expect(size(digitalAt(digital, (2 * Math.PI * hz) / RATE)) / size(analogAt(analog, hz))).toBeCloseTo(1, 10)
  })

  it('closes in on the analog filter as the rate rises', () => {
    for (const spec of SPECS) {
      const analog = designAnalog(spec)
      const error = (rate: number) => {
        const digital = matched(spec, rate)
        const hz = (spec.edgesHz[0] ?? 0) * 1.1
        const [a, d] = [analogAt(analog, hz), digitalAt(digital, (2 * Math.PI * hz) / rate)]
        return Math.hypot(a.re - d.re, a.im - d.im)
      }
      // Second order in the sampling interval, but for high-pass, whose gain is matched at a frequency that moves with the rate.
      expect(error(64000)).toBeLessThan(error(8000) / 7)
    }
  })
})

describe('what folds', () => {
  const spec: AnalogSpec = { family: 'chebyshev2', response: 'lowpass', order: 8, edgesHz: [100], attenuationDb: 60 }

  it('puts zeros above half the rate at z = −1 and says so', () => {
    // Zeros at 100/cos((2k − 1)·π/16): 102, 120, 180 and 513 Hz.
    expect(value(spec, 'zeros-above-half-rate', 2000)).toBeUndefined()
    expect(value(spec, 'zeros-above-half-rate', 500)).toBe(2)
    const digital = matched(spec, 500)
    expect(digital.zeros.filter((zero) => zero.re === -1 && zero.im === 0).length).toBe(2)
    expect(size(digitalAt(digital, 0))).toBeCloseTo(1, 10)
  })

  it('moves smoothly as a zero passes half the rate', () => {
    const highest = 100 / Math.cos((7 * Math.PI) / 16)
    const [below, above] = [matched(spec, 2 * highest * 1.0001), matched(spec, 2 * highest * 0.9999)]
    for (const omega of [0.1, 0.5, 1]) {
      expect(size(digitalAt(below, omega)) / size(digitalAt(above, omega))).toBeCloseTo(1, 2)
    }
  })

  it('cautions about poles that fold', () => {
    const bessel: AnalogSpec = {
      family: 'bessel',
      response: 'lowpass',
      order: 10,
      edgesHz: [200],
      normalization: 'delay',
    }
    expect(value(bessel, 'poles-above-half-rate')).toBeGreaterThan(0)
    expect(value(bessel, 'poles-above-half-rate', 20000)).toBeUndefined()
  })
})
