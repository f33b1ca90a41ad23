import { describe, expect, it } from 'vitest'
import {
  DesignError,
  designAnalog,
  impulseResponse,
  settlingTime,
  stepFigures,
  stepResponse,
  type Complex,
} from '@/dsp'
import fixture from '@/tests/fixtures/impulse-high-precision.json'
import { analog, bilinearLowpass, butterworthHighpass, butterworthLowpass, pair } from '@/tests/helpers/root-filters'

const relative = (got: Float64Array, expected: readonly number[]) => {
  const peak = Math.max(...expected.map(Math.abs))
  return Math.max(...expected.map((value, n) => Math.abs(got[n]! - value))) / peak
}

describe('analog impulse response', () => {
  it.each([1, 2, 3, 8, 16, 24])('of %i equal poles is aⁿtⁿ⁻¹e^(−at)/(n−1)!', (order) => {
    const a = 60
    const filter = analog(
      [],
      Array.from({ length: order }, () => ({ re: -a, im: 0 })),
      a ** order,
    )
    const { values, timesSeconds, impulseArea, unit } = impulseResponse(filter, {
      count: 300,
      stepSeconds: order / a / 60,
    })
    let factorial = 1
    for (let k = 2; k < order; k++) factorial *= k
    const expected = Array.from(timesSeconds, (t) => (a * (a * t) ** (order - 1) * Math.exp(-a * t)) / factorial)
    // Repeated poles, which residues can't bear, cost nothing here: 450 ε over 300 steps.
    expect(relative(values, expected)).toBeLessThan(1e-13)
    expect(impulseArea).toBe(0)
    expect(unit).toBe('1/s')
  })

  it.each([2, 5, 8])('of Butterworth order %i is the sum of its residues', (order) => {
    const filter = butterworthLowpass(order, 10)
    const { values, timesSeconds } = impulseResponse(filter, { count: 400, stepSeconds: 1e-3 })
    // h(t) = Σ r·e^{pt}, r = gain/∏(p − q): simple poles, low order (Zverev, ch. 8).
    const expected = Array.from(timesSeconds, (t) => {
      let sum = 0
      for (const p of filter.poles) {
        let product: Complex = { re: 1, im: 0 }
        for (const q of filter.poles) {
          if (q === p) continue
          const d = { re: p.re - q.re, im: p.im - q.im }
          product = { re: product.re * d.re - product.im * d.im, im: product.re * d.im + product.im * d.re }
        }
        const norm = product.re ** 2 + product.im ** 2
        const r = { re: (filter.gain * product.re) / norm, im: (-filter.gain * product.im) / norm }
        sum += Math.exp(p.re * t) * (r.re * Math.cos(p.im * t) - r.im * Math.sin(p.im * t))
      }
      return sum
    })
    expect(relative(values, expected)).toBeLessThan(1e-11)
  })

  // Expected values: tests/fixtures/impulse-high-precision.json, residues with 80 digits; generator beside it.
  it.each(fixture.cases)(
    'of a $name is that of 80-digit residues',
    ({ zeros, poles, gain, stepSeconds, values: expected }) => {
      const { values } = impulseResponse(analog(zeros, poles, gain), { count: expected.length, stepSeconds })
      expect(relative(values, expected)).toBeLessThan(1e-11)
    },
  )

  it('keeps apart the impulse that a filter with as many zeros as poles passes through', () => {
    // s/(s + a) = 1 − a/(s + a)
    const a = 2 * Math.PI * 5
    const { values, impulseArea, timesSeconds } = impulseResponse(butterworthHighpass(1, 5), {
      count: 50,
      stepSeconds: 2e-3,
    })
    expect(impulseArea).toBeCloseTo(1, 14)
    timesSeconds.forEach((t, n) => expect(values[n]).toBeCloseTo(-a * Math.exp(-a * t), 10))
  })

  it('is 0 before the impulse and starts anywhere on the time axis', () => {
    const filter = butterworthLowpass(3, 10)
    const whole = impulseResponse(filter, { count: 200, stepSeconds: 1e-3 })
    const part = impulseResponse(filter, { count: 60, stepSeconds: 1e-3, startSeconds: 0.1 })
    part.values.forEach((value, n) => expect(value).toBeCloseTo(whole.values[100 + n]!, 9))
    const early = impulseResponse(filter, { count: 20, sampleRateHz: 1000, startSeconds: -0.01 })
    expect(early.values.slice(0, 10).every((value) => value === 0)).toBe(true)
    expect(early.values[11]).toBeCloseTo(whole.values[1]!, 9)
  })

  it('has the area of the response at 0 Hz and, by Parseval, its energy in the pass band (order 24 band-pass)', () => {
    const filter = designAnalog({ family: 'butterworth', response: 'bandpass', order: 24, edgesHz: [80, 120] })
    const stepSeconds = 1 / 4000
    const { values } = impulseResponse(filter, { count: 40_000, stepSeconds })
    const sum = values.reduce((total, value) => total + value, 0) * stepSeconds
    const energy = values.reduce((total, value) => total + value * value, 0) * stepSeconds
    expect(Math.abs(sum)).toBeLessThan(1e-9)
    // ∫|H|² over all f of a Butterworth band of order n and width B is 2B·(π/2n)/sin(π/2n).
    const x = Math.PI / 48
    expect(energy).toBeCloseTo((80 * x) / Math.sin(x), 8)
  })
})

describe('step response', () => {
  it('of order 1 is 1 − e^(−at), and of two conjugate poles the textbook undulation', () => {
    const a = 2 * Math.PI * 5
    const first = stepResponse(butterworthLowpass(1, 5), { count: 100, stepSeconds: 1e-3 })
    first.timesSeconds.forEach((t, n) => expect(first.values[n]).toBeCloseTo(1 - Math.exp(-a * t), 13))
    // Van Valkenburg, Network Analysis, 3rd ed., ch. 6: 1 − e^{−ζωt}(cos ω_d t + ζ/√(1−ζ²)·sin ω_d t)
    const [zeta, w] = [0.2, 40]
    const wd = w * Math.sqrt(1 - zeta * zeta)
    const second = stepResponse(analog([], pair(-zeta * w, wd), w * w), { count: 300, stepSeconds: 2e-3 })
    second.timesSeconds.forEach((t, n) => {
      const swing = Math.cos(wd * t) + (zeta / Math.sqrt(1 - zeta * zeta)) * Math.sin(wd * t)
      expect(second.values[n]).toBeCloseTo(1 - Math.exp(-zeta * w * t) * swing, 12)
    })
  })

  it('starts at the direct term of a high-pass', () => {
    const { values } = stepResponse(butterworthHighpass(4, 5), { count: 3, stepSeconds: 1e-3 })
    expect(values[0]).toBeCloseTo(1, 13)
  })

  it('digital: the running sum of the impulse response', () => {
    const filter = bilinearLowpass(5, 60, 1000)
    const impulse = impulseResponse(filter, { count: 200 })
    const step = stepResponse(filter, { count: 200 })
    let sum = 0
    impulse.values.forEach((value, n) => {
      sum += value
      expect(step.values[n]).toBeCloseTo(sum, 12)
    })
    expect(impulse.timesSeconds[3]).toBeCloseTo(0.003, 15)
  })
})

describe('step figures', () => {
  it('settle an order 1 filter after ln(1/part) time constants', () => {
    const a = 2 * Math.PI * 5
    const filter = butterworthLowpass(1, 5)
    const { settlingSeconds, overshoot, finalValue } = stepFigures(filter)
    expect(settlingSeconds.within1 * a).toBeCloseTo(Math.log(100), 4)
    expect(settlingSeconds.within2 * a).toBeCloseTo(Math.log(50), 4)
    expect(settlingTime(filter, 0.05) * a).toBeCloseTo(Math.log(20), 4)
    expect(overshoot).toBe(0)
    expect(finalValue).toBeCloseTo(1, 14)
  })

  it('find the overshoot e^(−π) of Butterworth order 2', () => {
    // e^{−πζ/√(1−ζ²)} at ζ = 1/√2 (Van Valkenburg, ch. 6)
    expect(stepFigures(butterworthLowpass(2, 5)).overshoot).toBeCloseTo(Math.exp(-Math.PI), 6)
    expect(stepFigures(bilinearLowpass(2, 5, 5000)).overshoot).toBeCloseTo(Math.exp(-Math.PI), 4)
  })

  it('agree between a filter and its version at a high rate, also for filters that end at 0', () => {
    const high = stepFigures(butterworthHighpass(3, 20))
    expect(high.finalValue).toBe(0)
    expect(high.reference).toBeCloseTo(1, 9)
    const analogLow = settlingTime(butterworthLowpass(6, 20))
    expect(settlingTime(bilinearLowpass(6, 20, 20_000))).toBeCloseTo(analogLow, 3)
  })

  it('refuse what doesn’t settle', () => {
    expect(() => stepFigures(analog([], pair(0.1, 3), 9))).toThrow(DesignError)
  })
})

describe('refusals', () => {
  it('of a filter with more zeros than poles, no points, no step', () => {
    const improper = analog([{ re: -1, im: 0 }], [], 1)
    expect(() => impulseResponse(improper, { count: 3, stepSeconds: 1 })).toThrow(/more zeros than poles/)
    expect(() => impulseResponse(butterworthLowpass(1, 1), { count: 0, stepSeconds: 1 })).toThrow(DesignError)
    expect(() => impulseResponse(butterworthLowpass(1, 1), { count: 3 })).toThrow(/above 0 s/)
  })
})
