import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, toTransferFunction, type AnalogSpec, type Complex, type Section } from '@/dsp'
import { parallelAt } from '@/dsp/forms/parallel'
import { fromHalf, halve } from '@/dsp/forms/zeros-poles-gain'
import { impulseInvariant } from '@/dsp/discretise/impulse-invariant'
import textbook from '../reference/textbook_examples.json'
import { analogAt, cascadeAt, digitalAt, relative, rootsAt, size } from '../helpers/dsp'

const example = (id: string) => {
  const found = textbook.examples.find((entry) => entry.id === id)
  if (found === undefined) throw new Error(`no example ${id}`)
  return found
}

/** Impulse response of a cascade, by its difference equations. */
function cascadeImpulse(sections: readonly Section[], count: number): Float64Array {
  const samples = new Float64Array(count)
  samples[0] = 1
  for (const { b0, b1, b2, a1, a2 } of sections) {
    let [x1, x2, y1, y2] = [0, 0, 0, 0]
    for (let n = 0; n < count; n += 1) {
      const x = samples[n] ?? 0
      const y = b0 * x + b1 * x1 + b2 * x2 - a1 * y1 - a2 * y2
      ;[x1, x2, y1, y2] = [x, x1, y, y1]
      samples[n] = y
    }
  }
  return samples
}

/**
 * h(t) of an analog filter from its state equations, integrated by a Taylor series over small steps: no residues, no partial fractions.
 * The poles form a chain x_k′ = p_k·x_k + x_{k−1}, and each zero acts on it as x′ − z·x. Roots in rad per sample, t = 0, 1, 2 …
 */
function analogImpulse(zeros: readonly Complex[], poles: readonly Complex[], gain: number, count: number): number[] {
  const order = poles.length
  type C = { re: number; im: number }
  const times = (a: C, b: C): C => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re })
  const plus = (a: C, b: C): C => ({ re: a.re + b.re, im: a.im + b.im })
  const flow = (x: readonly C[]): C[] =>
    x.map((value, k) => plus(times(poles[k] ?? { re: 0, im: 0 }, value), x[k - 1] ?? { re: 0, im: 0 }))
  let state: C[] = Array.from({ length: order }, (_, k) => ({ re: k === 0 ? gain : 0, im: 0 }))
  const output = (x: readonly C[]): number => {
    let vector: C[] = [...x]
    for (const zero of zeros) {
      const slope = flow(vector)
      vector = slope.map((value, k) =>
        plus(value, times({ re: -zero.re, im: -zero.im }, vector[k] ?? { re: 0, im: 0 })),
      )
    }
    return vector[order - 1]?.re ?? 0
  }
  const samples = [output(state)]
  const steps = 16
  for (let n = 1; n < count; n += 1) {
    for (let s = 0; s < steps; s += 1) {
      let term = state
      let sum = state
      for (let k = 1; k <= 30; k += 1) {
        term = flow(term).map((value) => ({ re: value.re / (k * steps), im: value.im / (k * steps) }))
        sum = sum.map((value, index) => plus(value, term[index] ?? { re: 0, im: 0 }))
      }
      state = sum
    }
    samples.push(output(state))
  }
  return samples
}

describe('textbook examples', () => {
  it('Oppenheim & Schafer: Butterworth of order 6, Td = 1', () => {
    // os_impulse_invariance_butterworth: parallel sections as printed (±1.5e-4) and recomputed with Ωc = 0.7032 (1e-6).
    const { results } = example('os_impulse_invariance_butterworth')
    const filter = discretize(
      { family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [0.7032 / (2 * Math.PI)] },
      1,
      { method: 'impulse-invariant' },
    )
    const terms = filter.parallel?.terms ?? []
    expect(terms.length).toBe(3)
    for (const [table, tolerance] of [
      [results.sections_printed, 1.5e-4],
      [results.sections_recomputed, 1e-6],
    ] as const) {
      for (const row of table ?? []) {
        const match = terms.find((term) => Math.abs(term.a1 - row.a1) < 1e-3)
        for (const [name, value] of Object.entries(row)) {
          const got = { b0: match?.b0, b1: match?.b1, a1: match?.a1, a2: match?.a2 }[name]
          expect(Math.abs((got ?? Number.NaN) - Number(value)), name).toBeLessThan(tolerance)
        }
      }
    }
  })

  it('Proakis & Manolakis: resonator, T = 0.1 s, without the factor T', () => {
    const im = Math.sqrt(16.01 - 0.01)
    const form = { zeros: [{ re: -0.1 * 0.1, im: 0 }], poles: [{ re: -0.01, im: 0.1 * im }], gain: 0.1 }
    const { form: roots } = impulseInvariant(form)
    const { b, a } = toTransferFunction(fromHalf('z', roots))
    for (const [k, value] of [1, -0.91189628].entries()) expect((b[k] ?? 0) / 0.1).toBeCloseTo(value, 7)
    for (const [k, value] of [1, -1.8237926, 0.98019867].entries()) expect(a[k]).toBeCloseTo(value, 7)
  })

  it('Lyons: two-pole Chebyshev at 100 Hz, gain scaled by T', () => {
    const { results } = example('lyons_impulse_invariance')
    const re = -137.94536 / 2
    const form = {
      zeros: [],
      poles: [{ re: re / 100, im: Math.sqrt(17410.145 - re * re) / 100 }],
      gain: 17410.145 / 1e4,
    }
    const { b, a } = toTransferFunction(fromHalf('z', impulseInvariant(form).form))
    expect(b[0]).toBe(0)
    expect(b[1]).toBeCloseTo(Number(results.b1), 8)
    expect(b[2]).toBe(0)
    expect(a[1]).toBeCloseTo(Number(results.a1), 8)
    expect(a[2]).toBeCloseTo(Number(results.a2), 8)
  })
})

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [0.1] },
  { family: 'butterworth', response: 'lowpass', order: 7, edgesHz: [0.05] },
  { family: 'chebyshev1', response: 'bandpass', order: 3, edgesHz: [0.05, 0.12], rippleDb: 1 },
  { family: 'chebyshev2', response: 'lowpass', order: 5, edgesHz: [0.1], attenuationDb: 40 },
  { family: 'elliptic', response: 'bandpass', order: 3, edgesHz: [0.05, 0.1], rippleDb: 0.5, attenuationDb: 40 },
  { family: 'bessel', response: 'lowpass', order: 6, edgesHz: [0.08] },
  { family: 'critically-damped', response: 'lowpass', order: 2, edgesHz: [0.05] },
  { family: 'critically-damped', response: 'lowpass', order: 5, edgesHz: [0.05] },
  { family: 'critically-damped', response: 'bandpass', order: 4, edgesHz: [0.05, 0.1] },
]

describe('samples', () => {
  it.each(SPECS)('$family $response of order $order: h[n] = T·h(nT)', (spec) => {
    const analog = designAnalog(spec)
    const wanted = analogImpulse(analog.zeros, analog.poles, analog.gain, 60)
    const filter = discretize(spec, 1, { method: 'impulse-invariant' })
    const got = cascadeImpulse(filter.sections, 60)
    const peak = Math.max(...wanted.map(Math.abs))
    wanted.forEach((value, n) => expect(Math.abs((got[n] ?? 0) - value) / peak, `sample ${n}`).toBeLessThan(1e-9))
  })

  it.each([1, 2, 3, 6, 12, 24])('critically damped of order %i samples t^(n−1)·e^(−at)·aⁿ/(n−1)!', (order) => {
    for (const edge of [0.002, 0.02, 0.2]) {
      const spec: AnalogSpec = { family: 'critically-damped', response: 'lowpass', order, edgesHz: [edge] }
      const a = (2 * Math.PI * edge) / Math.sqrt(2 ** (1 / order) - 1)
      const h = (t: number) => {
        if (t === 0) return order === 1 ? a : 0
        let logarithm = order * Math.log(a) + (order - 1) * Math.log(t) - a * t
        for (let k = 2; k < order; k += 1) logarithm -= Math.log(k)
        return Math.exp(logarithm)
      }
      const count = Math.min(600, Math.ceil((4 * order) / a))
      const filter = discretize(spec, 1, { method: 'impulse-invariant' })
      const got = cascadeImpulse(filter.sections, count)
      const peak = h(Math.max(0, (order - 1) / a))
      for (let n = 0; n < count; n += 1) expect(Math.abs((got[n] ?? 0) - h(n)) / peak).toBeLessThan(1e-8)
      // A double real pole fits one section of a sum; a higher multiplicity doesn't, and the design says so.
      expect(filter.parallel === undefined).toBe(order > 2)
      expect(filter.diagnostics.some((entry) => entry.code === 'repeated-poles-in-cascade')).toBe(order > 2)
    }
  })

  it('takes half of the first sample when asked, where there is a jump', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [0.1] }
    const whole = discretize(spec, 1, { method: 'impulse-invariant' })
    const half = discretize(spec, 1, { method: 'impulse-invariant', halfFirstSample: true })
    const [a, b] = [cascadeImpulse(whole.sections, 20), cascadeImpulse(half.sections, 20)]
    expect(a[0]).toBeCloseTo(0.2 * Math.PI, 14)
    expect(b[0]).toBeCloseTo(0.1 * Math.PI, 14)
    for (let n = 1; n < 20; n += 1) expect(b[n]).toBeCloseTo(a[n] ?? 0, 13)
    const residue = (filter: typeof whole) =>
      filter.diagnostics.find((entry) => entry.code === 'aliased-residue')?.value ?? 0
    expect(residue(half)).toBeLessThan(residue(whole) - 10)
    expect(whole.diagnostics.some((entry) => entry.code === 'first-sample-whole')).toBe(true)
    expect(half.diagnostics.some((entry) => entry.code === 'first-sample-whole')).toBe(false)
    // Without a jump the option changes nothing.
    const smooth: AnalogSpec = { ...spec, order: 4 }
    const plain = discretize(smooth, 1, { method: 'impulse-invariant' })
    expect(discretize(smooth, 1, { method: 'impulse-invariant', halfFirstSample: true }).zeros).toEqual(plain.zeros)
  })
})

describe('forms', () => {
  it.each(SPECS)('$family $response of order $order: roots, cascade and sum of sections are one filter', (spec) => {
    for (const halfFirstSample of [false, true]) {
      const filter = discretize(spec, 1, { method: 'impulse-invariant', halfFirstSample })
      for (const omega of [0.01, 0.3, 0.6, 1.5, 3]) {
        const roots = digitalAt(filter, omega)
        expect(relative(cascadeAt(filter.sections, omega), roots)).toBeLessThan(1e-9)
        if (filter.parallel !== undefined) {
          expect(
            size({
              re: parallelAt(filter.parallel, omega).re - roots.re,
              im: parallelAt(filter.parallel, omega).im - roots.im,
            }),
          ).toBeLessThan(1e-11)
        }
      }
    }
  })

  it('is H(jω) plus its images: the sum over H(j(ω + 2πk))', () => {
    // Order 3 and up, so that the images die out fast enough to be summed; 2000 of them leave less than 1e-9.
    for (const spec of SPECS.filter((entry) => entry.family === 'butterworth' && entry.order > 2)) {
      const analog = designAnalog(spec)
      const filter = discretize(spec, 1, { method: 'impulse-invariant' })
      for (const omega of [0, 0.2, 1, 2.5]) {
        let [re, im] = [0, 0]
        for (let k = -2000; k <= 2000; k += 1) {
          const image = rootsAt(analog, { re: 0, im: omega + 2 * Math.PI * k })
          ;[re, im] = [re + image.re, im + image.im]
        }
        expect(relative(digitalAt(filter, omega), { re, im })).toBeLessThan(1e-9)
      }
    }
  })

  it('restores the analog gain at DC, or at the centre of a band', () => {
    for (const spec of SPECS) {
      const analog = designAnalog(spec)
      const [low = 0, high = 0] = spec.edgesHz
      const hz = spec.response === 'bandpass' ? Math.sqrt(low * high) : 0
      const plain = discretize(spec, 1, { method: 'impulse-invariant' })
      const restored = discretize(spec, 1, { method: 'impulse-invariant', restoreGain: true })
      expect(size(digitalAt(restored, 2 * Math.PI * hz)) / size(analogAt(analog, hz))).toBeCloseTo(1, 10)
      expect(restored.poles).toEqual(plain.poles)
      if (restored.parallel !== undefined) {
        expect(relative(parallelAt(restored.parallel, 0.4), digitalAt(restored, 0.4))).toBeLessThan(1e-9)
      }
    }
  })

  it('keeps its digits at order 24 and a corner of 1e-5 of the rate', () => {
    for (const family of ['butterworth', 'bessel', 'critically-damped', 'chebyshev1'] as const) {
      for (const response of ['lowpass', 'bandpass'] as const) {
        const spec: AnalogSpec = {
          family,
          response,
          order: 24,
          edgesHz: response === 'lowpass' ? [0.01] : [0.01, 0.02],
          rippleDb: 1,
        }
        const analog = designAnalog(spec)
        const filter = discretize(spec, 1000, { method: 'impulse-invariant' })
        expect(filter.zeros.length).toBe(filter.poles.length - 1)
        for (const hz of [0.004, 0.009, 0.0105, 0.0141, 0.019, 0.025, 0.04]) {
          const wanted = analogAt(analog, hz)
          // At this rate the images are below 1e-90, so analog and digital must agree to rounding.
          expect(
            relative(digitalAt(filter, (2 * Math.PI * hz) / 1000), wanted),
            `${family} ${response} ${hz}`,
          ).toBeLessThan(1e-7)
        }
        expect(filter.parallel).toBeUndefined()
        const codes = filter.diagnostics.map((entry) => entry.code)
        expect(codes).toContain(
          family === 'critically-damped' ? 'repeated-poles-in-cascade' : 'parallel-ill-conditioned',
        )
      }
    }
  })
})

describe('aliased residue', () => {
  it('is the largest image sum in the pass band', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [100] }
    const analog = designAnalog(spec)
    const filter = discretize(spec, 1000, { method: 'impulse-invariant' })
    const reported = filter.diagnostics.find((entry) => entry.code === 'aliased-residue')
    let worst = 0
    for (let k = 0; k <= 48; k += 1) {
      const hz = (100 * k) / 48
      const [got, wanted] = [digitalAt(filter, (2 * Math.PI * hz) / 1000), analogAt(analog, hz)]
      worst = Math.max(worst, size({ re: got.re - wanted.re, im: got.im - wanted.im }))
    }
    expect(reported?.value).toBeCloseTo(20 * Math.log10(worst), 6)
    expect(reported?.severity).toBe('caution')
  })

  it('falls as the rate rises, from a caution to a note', () => {
    const spec: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] }
    const values = [250, 500, 1000, 2000, 4000].map((rate) => {
      const found = discretize(spec, rate, { method: 'impulse-invariant' }).diagnostics.find(
        (entry) => entry.code === 'aliased-residue',
      )
      if (found?.value === undefined) throw new Error('no residue')
      return { db: found.value, severity: found.severity }
    })
    for (let k = 1; k < values.length; k += 1) expect(values[k]?.db).toBeLessThan((values[k - 1]?.db ?? 0) - 10)
    expect(values[0]?.severity).toBe('caution')
    expect(values.at(-1)?.severity).toBe('note')
  })
})

it('takes any strictly proper analog filter, of which the roots are exact pairs', () => {
  const zeros = [
    { re: -1, im: 0.5 },
    { re: -1, im: -0.5 },
  ]
  const poles = [
    { re: -0.2, im: 1 },
    { re: -0.2, im: -1 },
    { re: -0.3, im: 0 },
    { re: -0.3, im: 0 },
  ]
  const { form } = impulseInvariant({ zeros: halve(zeros), poles: halve(poles), gain: 2 })
  const filter = fromHalf('z', form)
  const impulse = analogImpulse(zeros, poles, 2, 30)
  // H(e^{jω}) against the sum of the samples themselves; the slowest pole has decayed to e^{−0.2·400}.
  const samples = analogImpulse(zeros, poles, 2, 400)
  expect(samples.slice(0, 30)).toEqual(impulse)
  let [re, im] = [0, 0]
  samples.forEach((value, n) => {
    ;[re, im] = [re + value * Math.cos(0.7 * n), im - value * Math.sin(0.7 * n)]
  })
  expect(relative(digitalAt(filter, 0.7), { re, im })).toBeLessThan(1e-10)
})
