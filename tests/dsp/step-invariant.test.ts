import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, toTransferFunction, type AnalogSpec, type Section } from '@/dsp'
import { parallelAt } from '@/dsp/forms/parallel'
import { fromHalf } from '@/dsp/forms/zeros-poles-gain'
import { stepInvariant } from '@/dsp/discretise/step-invariant'
import { analogAt, cascadeAt, digitalAt, relative, rootsAt, size } from '../helpers/dsp'

function cascadeStep(sections: readonly Section[], count: number): number[] {
  let samples = Array.from({ length: count }, () => 1)
  for (const { b0, b1, b2, a1, a2 } of sections) {
    let [x1, x2, y1, y2] = [0, 0, 0, 0]
    samples = samples.map((x) => {
      const y = b0 * x + b1 * x1 + b2 * x2 - a1 * y1 - a2 * y2
      ;[x1, x2, y1, y2] = [x, x1, y, y1]
      return y
    })
  }
  return samples
}

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [0.1] },
  { family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [0.05] },
  { family: 'butterworth', response: 'highpass', order: 3, edgesHz: [0.05] },
  { family: 'chebyshev1', response: 'bandpass', order: 4, edgesHz: [0.05, 0.12], rippleDb: 1 },
  { family: 'chebyshev2', response: 'lowpass', order: 4, edgesHz: [0.1], attenuationDb: 40 },
  { family: 'elliptic', response: 'bandstop', order: 3, edgesHz: [0.05, 0.1], rippleDb: 0.5, attenuationDb: 40 },
  { family: 'critically-damped', response: 'lowpass', order: 4, edgesHz: [0.05] },
  { family: 'critically-damped', response: 'bandpass', order: 3, edgesHz: [0.05, 0.1] },
]

describe('closed forms', () => {
  it('first order: y(k) = 1 − e^(−kT/τ) (Åström & Wittenmark, table 2.1)', () => {
    const filter = discretize({ family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [10] }, 200, {
      method: 'step-invariant',
    })
    const decay = Math.exp((-2 * Math.PI * 10) / 200)
    cascadeStep(filter.sections, 50).forEach((value, k) => expect(value).toBeCloseTo(1 - decay ** k, 12))
    const [section] = filter.sections
    expect(section).toMatchObject({ b0: 0, a2: 0 })
    expect(section?.b1).toBeCloseTo(1 - decay, 14)
    expect(section?.a1).toBeCloseTo(-decay, 14)
  })

  it('second order: the table of Åström & Wittenmark for ω₀²/(s² + 2ζω₀s + ω₀²)', () => {
    const [zeta, omega0, h] = [0.5, 0.8, 1]
    const omega = omega0 * Math.sqrt(1 - zeta * zeta)
    const alpha = Math.exp(-zeta * omega0 * h)
    const [beta, gamma] = [Math.cos(omega * h), Math.sin(omega * h)]
    const b1 = 1 - alpha * (beta + (zeta * omega0 * gamma) / omega)
    const b2 = alpha * alpha + alpha * ((zeta * omega0 * gamma) / omega - beta)
    const form = { zeros: [], poles: [{ re: -zeta * omega0, im: omega }], gain: omega0 * omega0 }
    const { b, a } = toTransferFunction(fromHalf('z', stepInvariant(form).form))
    for (const [k, value] of [0, b1, b2].entries()) expect(b[k]).toBeCloseTo(value, 13)
    for (const [k, value] of [1, -2 * alpha * beta, alpha * alpha].entries()) expect(a[k]).toBeCloseTo(value, 13)
  })

  it.each([1, 2, 3, 8, 24])('critically damped of order %i: 1 − e^(−at)·Σ (at)^k/k!', (order) => {
    const edge = 0.03
    const a = (2 * Math.PI * edge) / Math.sqrt(2 ** (1 / order) - 1)
    const filter = discretize({ family: 'critically-damped', response: 'lowpass', order, edgesHz: [edge] }, 1, {
      method: 'step-invariant',
    })
    cascadeStep(filter.sections, 120).forEach((value, n) => {
      let [term, sum] = [1, 0]
      for (let k = 0; k < order; k += 1) {
        sum += term
        term *= (a * n) / (k + 1)
      }
      expect(Math.abs(value - (1 - Math.exp(-a * n) * sum))).toBeLessThan(1e-9)
    })
  })
})

describe('any filter', () => {
  it.each(SPECS)('$family $response of order $order: the held input seen through the analog filter', (spec) => {
    // H(e^{jω}) = Σ H(j(ω + 2πk))·(1 − e^{−jω})/(j(ω + 2πk)): the hold's images; the tail of the sum is added in closed form.
    const analog = designAnalog(spec)
    const filter = discretize(spec, 1, { method: 'step-invariant' })
    const far = analog.poles.length === analog.zeros.length ? analog.gain : 0
    for (const omega of [0.2, 0.7, 2]) {
      let [re, im] = [0, 0]
      for (let k = -20000; k <= 20000; k += 1) {
        const at = omega + 2 * Math.PI * k
        const value = rootsAt(analog, { re: 0, im: at })
        // (H − H(∞))/(jω) falls as 1/ω² and is summed; H(∞) itself holds to H(∞) exactly.
        const rest = { re: value.re - far, im: value.im }
        ;[re, im] = [re + rest.im / at, im - rest.re / at]
      }
      const hold = { re: 1 - Math.cos(omega), im: Math.sin(omega) }
      const wanted = { re: re * hold.re - im * hold.im + far, im: re * hold.im + im * hold.re }
      const got = digitalAt(filter, omega)
      expect(size({ re: got.re - wanted.re, im: got.im - wanted.im })).toBeLessThan(2e-5)
    }
  })

  it.each(SPECS)('$family $response of order $order: DC is exact, and all forms are one filter', (spec) => {
    const filter = discretize(spec, 1, { method: 'step-invariant' })
    const dc = size(analogAt(designAnalog(spec), 0))
    if (dc === 0) expect(filter.zeros.filter((zero) => zero.re === 1 && zero.im === 0).length).toBe(1)
    else expect(size(digitalAt(filter, 0)) / dc).toBeCloseTo(1, 11)
    for (const omega of [0.05, 0.4, 1.5, 3]) {
      const roots = digitalAt(filter, omega)
      expect(relative(cascadeAt(filter.sections, omega), roots)).toBeLessThan(1e-9)
      if (filter.parallel !== undefined) {
        const sum = parallelAt(filter.parallel, omega)
        expect(size({ re: sum.re - roots.re, im: sum.im - roots.im })).toBeLessThan(1e-11)
      }
    }
    expect(filter.diagnostics.find((entry) => entry.code === 'hold-delay')?.value).toBe(0.5)
  })

  it('delays by half a sample against the analog filter at low frequencies', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 3, edgesHz: [0.05] }
    const analog = designAnalog(spec)
    const filter = discretize(spec, 1, { method: 'step-invariant' })
    const omega = 1e-3
    const [a, d] = [rootsAt(analog, { re: 0, im: omega }), digitalAt(filter, omega)]
    const lag = (Math.atan2(a.im, a.re) - Math.atan2(d.im, d.re)) / omega
    expect(lag).toBeCloseTo(0.5, 3)
  })
})
