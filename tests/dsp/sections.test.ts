import { describe, expect, it } from 'vitest'
import { DesignError, discretize, toSections, type AnalogSpec, type Complex, type Filter, type Section } from '@/dsp'
import { fromHalf } from '@/dsp/forms/zeros-poles-gain'
import { cascadeAt, digitalAt, relative, size, spaced } from '../helpers/dsp'

const SPECS: readonly AnalogSpec[] = [
  { family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [100] },
  { family: 'butterworth', response: 'lowpass', order: 5, edgesHz: [100] },
  { family: 'butterworth', response: 'highpass', order: 24, edgesHz: [100] },
  { family: 'chebyshev1', response: 'bandpass', order: 7, edgesHz: [100, 200], rippleDb: 0.5 },
  { family: 'chebyshev2', response: 'bandstop', order: 5, edgesHz: [100, 200], attenuationDb: 60 },
  { family: 'elliptic', response: 'bandpass', order: 24, edgesHz: [100, 200], rippleDb: 0.1, attenuationDb: 80 },
  { family: 'bessel', response: 'bandpass', order: 3, edgesHz: [1, 450] },
  { family: 'critically-damped', response: 'lowpass', order: 9, edgesHz: [3] },
]

const bilinear = (spec: AnalogSpec) => discretize(spec, 1000, { method: 'bilinear', hold: 'edges' })

/** Roots of a section's denominator (or numerator), from its coefficients. */
function rootsOf(c0: number, c1: number, c2: number): Complex[] {
  if (c0 === 0) return c1 === 0 ? [] : [{ re: -c2 / c1, im: 0 }]
  const half = -c1 / (2 * c0)
  const square = half * half - c2 / c0
  if (square < 0)
    return [
      { re: half, im: Math.sqrt(-square) },
      { re: half, im: -Math.sqrt(-square) },
    ]
  const larger = half + (half < 0 ? -1 : 1) * Math.sqrt(square)
  return [
    { re: larger, im: 0 },
    { re: larger === 0 ? 0 : c2 / c0 / larger, im: 0 },
  ]
}

describe.each(SPECS)('$family $response of order $order', (spec) => {
  const filter = bilinear(spec)

  it('each denominator holds poles of the filter to 1e-12, and all of them are used once', () => {
    const left = [...filter.poles]
    for (const { a1, a2 } of filter.sections) {
      // |z² + a1·z + a2| at a true pole pair must vanish to rounding of the coefficients.
      const fits = left
        .map((pole, index) => ({
          index,
          miss: Math.hypot(
            pole.re * pole.re - pole.im * pole.im + a1 * pole.re + a2,
            2 * pole.re * pole.im + a1 * pole.im,
          ),
        }))
        .sort((a, b) => a.miss - b.miss)
        .slice(0, a2 === 0 ? 1 : 2)
      for (const { miss } of fits) expect(miss).toBeLessThan(1e-12)
      for (const { index } of [...fits].sort((a, b) => b.index - a.index)) left.splice(index, 1)
    }
    expect(left).toEqual([])
  })

  it('their numerators multiply back to the gain and the zeros', () => {
    // Compared as values of the numerator polynomial at points away from its zeros, where neither form loses digits.
    for (const point of [1.7, -1.9, 2.5]) {
      const fromSections = filter.sections.reduce(
        (value, { b0, b1, b2 }) => value * (b0 + b1 / point + b2 / point ** 2),
        1,
      )
      let [re, im] = [filter.gain, 0]
      for (const zero of filter.zeros) {
        const [zr, zi] = [1 - zero.re / point, -zero.im / point]
        ;[re, im] = [re * zr - im * zi, re * zi + im * zr]
      }
      expect(Math.abs(fromSections / re - 1)).toBeLessThan(1e-12)
    }
  })

  it('every scaling and order is the same filter', () => {
    for (const scale of ['none', 'l1', 'l2', 'linf'] as const) {
      for (const order of ['peak-last', 'peak-first'] as const) {
        const sections = toSections(filter, { scale, order })
        for (const omega of [0.2, 0.8, 1.1, 2.2]) {
          const wanted = digitalAt(filter, omega)
          if (size(wanted) > 1e-12) expect(relative(cascadeAt(sections, omega), wanted)).toBeLessThan(1e-8)
        }
      }
    }
  })

  it('has its most peaked section last, or first when asked', () => {
    const radius = ({ a1, a2 }: Section) => Math.max(...rootsOf(1, a1, a2).map((root) => 1 - Math.abs(1 - size(root))))
    const last = toSections(filter).map(radius)
    const first = toSections(filter, { order: 'peak-first' }).map(radius)
    expect(last.at(-1)).toBeCloseTo(Math.max(...last), 7)
    expect(first[0]).toBeCloseTo(Math.max(...first), 7)
  })

  it('no node is far louder than the output', () => {
    for (let count = 1; count <= filter.sections.length; count += 1) {
      const part = filter.sections.slice(0, count)
      const peak = Math.max(...spaced(0, Math.PI, 400).map((omega) => size(cascadeAt(part, omega))))
      expect(peak).toBeLessThan(60)
      expect(peak).toBeGreaterThan(0.1)
    }
  })
})

describe('norms', () => {
  const filter = bilinear({ family: 'chebyshev1', response: 'bandpass', order: 4, edgesHz: [150, 190], rippleDb: 1 })

  function impulse(sections: readonly Section[], count: number): Float64Array {
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

  it('every partial cascade but the last has norm one', () => {
    for (const scale of ['l1', 'l2', 'linf'] as const) {
      const sections = toSections(filter, { scale })
      for (let count = 1; count < sections.length; count += 1) {
        const part = sections.slice(0, count)
        const h = impulse(part, 6000)
        // Parseval for l2 and the plain sum for l1: neither is how the engine finds the norm of l2.
        const norm = {
          l1: h.reduce((sum, value) => sum + Math.abs(value), 0),
          l2: Math.sqrt(h.reduce((sum, value) => sum + value * value, 0)),
          linf: Math.max(...spaced(0.8, 1.3, 40001).map((omega) => size(cascadeAt(part, omega)))),
        }[scale]
        expect(norm, scale).toBeCloseTo(1, scale === 'linf' ? 5 : 7)
      }
    }
  })

  it('refuses the sum of |h| of a filter that hardly decays', () => {
    const slow = discretize({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [0.01, 0.0101] }, 1000, {
      method: 'bilinear',
      hold: 'edges',
    })
    expect(() => toSections(slow, { scale: 'l1' })).toThrow(DesignError)
    expect(toSections(slow, { scale: 'linf' }).length).toBe(2)
  })
})

describe('pairing', () => {
  const make = (zeros: Complex[], poles: Complex[]): Filter<'z'> => fromHalf('z', { zeros, poles, gain: 0.5 })

  it('gives the sharpest poles their nearest zeros', () => {
    const filter = make(
      [
        { re: 0.1, im: 0.95 },
        { re: 0.8, im: 0.6 },
      ],
      [
        { re: 0.3, im: 0.3 },
        { re: 0.1, im: 0.97 },
      ],
    )
    const sections = toSections(filter)
    expect(sections[1]?.a2).toBeCloseTo(0.1 ** 2 + 0.97 ** 2, 12)
    expect((sections[1]?.b1 ?? 0) / (sections[1]?.b0 ?? 1)).toBeCloseTo(-0.2, 12)
  })

  it('keeps first-order sections first-order, with odd and even numbers of real zeros', () => {
    const odd = make(
      [
        { re: -1, im: 0 },
        { re: -1, im: 0 },
        { re: -1, im: 0 },
      ],
      [
        { re: 0.5, im: 0.5 },
        { re: 0.4, im: 0 },
      ],
    )
    const first = toSections(odd).find((section) => section.a2 === 0)
    expect(first).toMatchObject({ b2: 0, a1: -0.4 })
    expect(first?.b1).toBe(first?.b0)
    const even = make(
      [{ re: 0.2, im: 0.7 }],
      [
        { re: 0.5, im: 0.5 },
        { re: 0.4, im: 0 },
      ],
    )
    const alone = toSections(even).find((section) => section.a2 === 0)
    // One zero less than poles: the first-order section is delayed.
    expect(alone).toMatchObject({ b0: 0, b2: 0 })
  })

  it('leaves no −0 in print', () => {
    for (const section of bilinear({ family: 'butterworth', response: 'bandpass', order: 3, edgesHz: [100, 250] })
      .sections) {
      for (const value of Object.values(section)) expect(Object.is(value, -0)).toBe(false)
    }
  })

  it('is a plain gain without roots', () => {
    expect(toSections({ domain: 'z', zeros: [], poles: [], gain: 3 })).toEqual([{ b0: 3, b1: 0, b2: 0, a1: 0, a2: 0 }])
  })
})
