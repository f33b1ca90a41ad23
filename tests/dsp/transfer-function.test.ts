import { freqz, zpk2tf, complex, type Complex as MathComplex } from 'mathjs'
import { describe, expect, it } from 'vitest'
import { DesignError, designAnalog, discretize, toTransferFunction, type AnalogSpec, type Complex } from '@/dsp'
import { rootsInLeftHalf, rootsInsideCircle } from '@/dsp/forms/stability'
import { digitalAt, relative, spaced } from '../helpers/dsp'

const bilinear = (spec: AnalogSpec, rate = 1000) => discretize(spec, rate, { method: 'bilinear', hold: 'edges' })

const LOW_ORDER: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 3, edgesHz: [100] },
  { family: 'chebyshev1', response: 'highpass', order: 4, edgesHz: [200], rippleDb: 1 },
  { family: 'elliptic', response: 'bandpass', order: 2, edgesHz: [100, 200], rippleDb: 0.5, attenuationDb: 40 },
  { family: 'chebyshev2', response: 'bandstop', order: 2, edgesHz: [100, 200], attenuationDb: 40 },
]

const asMath = (roots: readonly Complex[]) => roots.map(({ re, im }) => complex(re, im))
const parts = (value: number | MathComplex): Complex => (typeof value === 'number' ? { re: value, im: 0 } : value)

describe('against the general-purpose mathjs at low order', () => {
  it.each(LOW_ORDER)('$family $response: the polynomials of zpk2tf', (spec) => {
    for (const filter of [
      bilinear(spec),
      designAnalog({ ...spec, edgesHz: spec.edgesHz.map((edge) => edge / 1000) }),
    ]) {
      const { b, a } = toTransferFunction(filter)
      // mathjs gives plain polynomials in falling powers, without our leading zeros.
      const [num, den] = zpk2tf(asMath(filter.zeros), asMath(filter.poles), filter.gain) as unknown as [
        (number | MathComplex)[],
        (number | MathComplex)[],
      ]
      const padding = a.length - num.length
      num.map(parts).forEach((value, k) => expect(b[k + padding]).toBeCloseTo(value.re, 12))
      den.map(parts).forEach((value, k) => expect(a[k]).toBeCloseTo(value.re, 12))
      for (let k = 0; k < padding; k += 1) expect(b[k]).toBe(0)
    }
  })

  it.each(LOW_ORDER)('$family $response: the response of freqz', (spec) => {
    const filter = bilinear(spec)
    const { b, a } = toTransferFunction(filter)
    const angles = spaced(0.1, 3, 40)
    const { h } = freqz(Array.from(b), Array.from(a), angles) as unknown as { h: (number | MathComplex)[] }
    h.map(parts).forEach((value, k) => {
      const wanted = digitalAt(filter, angles[k] ?? 0)
      expect(Math.hypot(value.re - wanted.re, value.im - wanted.im)).toBeLessThan(1e-11)
    })
  })
})

describe('conditioning', () => {
  it('measures nothing worth mention at low order', () => {
    for (const spec of LOW_ORDER) {
      const { worstDeviationDb, stable } = toTransferFunction(bilinear(spec))
      expect(worstDeviationDb).toBeLessThan(1e-6)
      expect(stable).toBe(true)
    }
  })

  it('grows with order and with falling corner, past the 0.01 dB at which b/a is refused', () => {
    const deviation = (order: number, edge: number) =>
      toTransferFunction(bilinear({ family: 'butterworth', response: 'lowpass', order, edgesHz: [edge] }))
        .worstDeviationDb
    expect(deviation(4, 10)).toBeGreaterThan(deviation(2, 10))
    expect(deviation(6, 1)).toBeGreaterThan(deviation(6, 10))
    expect(deviation(8, 1)).toBeGreaterThan(0.01)
    expect(deviation(8, 100)).toBeLessThan(0.01)
  })

  it('is what the rounded polynomials really do: the worst point found by a dense net is no worse', () => {
    const filter = bilinear({ family: 'chebyshev1', response: 'bandpass', order: 4, edgesHz: [20, 24], rippleDb: 1 })
    const { b, a, worstDeviationDb } = toTransferFunction(filter)
    const evaluate = (c: Float64Array, omega: number) =>
      c.reduce(
        (sum, value, k) => ({ re: sum.re + value * Math.cos(k * omega), im: sum.im - value * Math.sin(k * omega) }),
        { re: 0, im: 0 },
      )
    let worst = 0
    for (const omega of spaced(0.12, 0.16, 2001)) {
      const [n, d] = [evaluate(b, omega), evaluate(a, omega)]
      const power = d.re * d.re + d.im * d.im
      const got = { re: (n.re * d.re + n.im * d.im) / power, im: (n.im * d.re - n.re * d.im) / power }
      worst = Math.max(worst, 20 * Math.log10(1 + relative(got, digitalAt(filter, omega))))
    }
    expect(worst).toBeGreaterThan(0)
    expect(worst).toBeLessThan(3 * worstDeviationDb)
    expect(worstDeviationDb).toBeLessThan(1)
  })

  it('flags a rounded denominator that became unstable', () => {
    const filter = bilinear({ family: 'butterworth', response: 'lowpass', order: 12, edgesHz: [0.5] })
    const { stable, worstDeviationDb } = toTransferFunction(filter)
    expect(stable).toBe(false)
    expect(worstDeviationDb).toBeGreaterThan(0.01)
    expect(Number.isNaN(worstDeviationDb)).toBe(false)
  })

  it('works for analog filters, and refuses what doubles can’t hold', () => {
    const { b, a, stable, worstDeviationDb } = toTransferFunction(
      designAnalog({ family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [1000] }),
    )
    const omega = 2000 * Math.PI
    expect(a[0]).toBe(1)
    expect((a[4] ?? 0) / omega ** 4).toBeCloseTo(1, 12)
    expect(b[4]).toBeCloseTo(a[4] ?? 0, -3)
    expect(stable).toBe(true)
    expect(worstDeviationDb).toBeLessThan(1e-9)
    const huge = designAnalog({ family: 'butterworth', response: 'bandpass', order: 24, edgesHz: [1e8, 9e8] })
    expect(() => toTransferFunction(huge)).toThrow(DesignError)
  })

  it('keeps digital numerators delayed when there are fewer zeros than poles', () => {
    const filter = discretize({ family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] }, 1000, {
      method: 'step-invariant',
    })
    const { b, a } = toTransferFunction(filter)
    expect(b.length).toBe(a.length)
    expect(b[0]).toBe(0)
    expect(b[1]).toBeCloseTo(filter.gain, 15)
  })
})

describe('stability tests', () => {
  it('Schur–Cohn: known polynomials', () => {
    expect(rootsInsideCircle([1, -0.5])).toBe(true)
    expect(rootsInsideCircle([1, -1])).toBe(false)
    expect(rootsInsideCircle([1, -1.001])).toBe(false)
    expect(rootsInsideCircle([1, -2, 1])).toBe(false)
    expect(rootsInsideCircle([1, -2 + 2 ** -40, 1 - 2 ** -40 + 2 ** -52])).toBe(true)
    expect(rootsInsideCircle([2, 0, 0, 0, 1])).toBe(true)
    expect(rootsInsideCircle([1, 0, 0, 0, 1])).toBe(false)
  })

  it('Routh: known polynomials', () => {
    expect(rootsInLeftHalf([1, 1])).toBe(true)
    expect(rootsInLeftHalf([1, 0, 1])).toBe(false)
    // s³ + 2s² + 3s + K is stable for 0 < K < 6.
    expect(rootsInLeftHalf([1, 2, 3, 5.999])).toBe(true)
    expect(rootsInLeftHalf([1, 2, 3, 6])).toBe(false)
    expect(rootsInLeftHalf([1, 2, 3, 6.001])).toBe(false)
    expect(rootsInLeftHalf([1, 2, 3, -1])).toBe(false)
  })
})
