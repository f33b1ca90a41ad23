import { describe, expect, it } from 'vitest'
import {
  bitLength,
  decompose,
  FixedPoint,
  ratio,
  shortPoint,
  timesShort,
  timesPowerOfTwo,
} from '@/dsp/numeric/fixed-point'
import { polynomialRoots } from '@/dsp/numeric/polynomial-roots'
import type { Complex } from '@/dsp'

describe('fixed-point numbers', () => {
  const fx = new FixedPoint(400)

  it('take doubles apart and put them together again', () => {
    for (const x of [0, 1, -1, 0.1, -Math.PI, 1e-300, 5e-324, 1.7976931348623157e308, 2 ** -1074 * 3]) {
      const { mantissa, exponent } = decompose(x)
      expect(timesPowerOfTwo(Number(mantissa), exponent)).toBe(x)
    }
    for (const x of [1, -0.1, Math.E, 1e-30, -1e40]) expect(fx.toNumber(fx.fromNumber(x))).toBe(x)
    expect(() => decompose(Number.NaN)).toThrow(RangeError)
  })

  it('count bits to within a nibble', () => {
    for (const k of [0n, 1n, 63n, 64n, 1000n]) {
      expect(Math.abs(bitLength(2n ** k) - Number(k) - 1)).toBeLessThan(4)
    }
  })

  it('have e^x to all their digits', () => {
    // e to 60 decimals (Abramowitz & Stegun, table 1.1, continued): the first 60 digits as an integer.
    const e = 2718281828459045235360287471352662497757247093699959574966967n
    const got = (fx.exponential({ re: 1, im: 0 }).re * 10n ** 60n) >> 400n
    expect(got - e < 2n && e - got < 2n).toBe(true)
    const turn = fx.exponential({ re: -3.5, im: 20 })
    expect(fx.toNumber(turn.re)).toBeCloseTo(Math.exp(-3.5) * Math.cos(20), 15)
    expect(fx.toNumber(turn.im)).toBeCloseTo(Math.exp(-3.5) * Math.sin(20), 15)
    // e^a·e^−a = 1
    const [a, b] = [fx.exponential({ re: 0.3, im: 2 }), fx.exponential({ re: -0.3, im: -2 })]
    const one = fx.times(a, b)
    expect(Math.abs(fx.toNumber(one.re - fx.one))).toBeLessThan(1e-115)
    expect(Math.abs(fx.toNumber(one.im))).toBeLessThan(1e-115)
  })

  it('divide and invert', () => {
    expect(fx.toNumber(fx.divide(fx.one, fx.fromNumber(3)))).toBe(1 / 3)
    const z = fx.complex({ re: 0.3, im: -1.7 })
    const one = fx.times(z, fx.reciprocal(z))
    expect(fx.toComplex(one).re).toBeCloseTo(1, 15)
    expect(Math.abs(fx.toComplex(one).im)).toBeLessThan(1e-100)
  })

  it('multiply by doubles exactly, and divide to doubles', () => {
    for (const point of [
      { re: 0.1, im: -3e7 },
      { re: 1e-9, im: 1 },
      { re: 2 ** 60, im: 0 },
      { re: 0, im: -0.7 },
    ]) {
      const long = fx.complex({ re: 1.25, im: -0.5 })
      const product = fx.toComplex(timesShort(long, shortPoint(point)))
      expect(product.re / (1.25 * point.re + 0.5 * point.im)).toBeCloseTo(1, 14)
      const back = ratio(timesShort(long, shortPoint(point)), long)
      expect(Math.hypot(back.re - point.re, back.im - point.im) / Math.hypot(point.re, point.im)).toBeLessThan(1e-15)
    }
  })
})

describe('roots of a polynomial with long coefficients', () => {
  const fx = new FixedPoint(3000)

  /** Coefficients from a half list of roots, highest power first. */
  function expandHalf(half: readonly Complex[]): bigint[] {
    let c: bigint[] = [fx.one]
    for (const { re, im } of half) {
      const [x, y] = [fx.fromNumber(re), fx.fromNumber(im)]
      const factor = im > 0 ? [-2n * x, fx.multiply(x, x) + fx.multiply(y, y)] : [-x]
      const next = [...c, ...factor.map(() => 0n)]
      factor.forEach((value, shift) =>
        c.forEach((a, k) => (next[k + shift + 1] = (next[k + shift + 1] ?? 0n) + fx.multiply(a, value))),
      )
      c = next
    }
    return c
  }

  /** Integers as long fixed-point numbers: the iteration needs fractional bits. */
  const long = (integers: readonly bigint[]) => integers.map((value) => value << 300n)

  const sorted = (roots: readonly Complex[]) => [...roots].sort((a, b) => a.re - b.re || a.im - b.im)

  it.each<[string, Complex[]]>([
    [
      'well apart',
      [
        { re: 0.5, im: 0.3 },
        { re: -0.7, im: 0 },
        { re: 0.2, im: 0 },
      ],
    ],
    ['real, from 1e-7 to 1e7', Array.from({ length: 15 }, (_, k) => ({ re: -(10 ** (k - 7)), im: 0 }))],
    ['gathered near 1', Array.from({ length: 12 }, (_, k) => ({ re: 1 + 1e-6 * Math.cos(k), im: 1e-6 * (k + 1) }))],
    [
      'on the circle',
      Array.from({ length: 10 }, (_, k) => ({ re: Math.cos(0.2 + 0.25 * k), im: Math.sin(0.2 + 0.25 * k) })),
    ],
    [
      'in a narrow band',
      Array.from({ length: 12 }, (_, k) => ({ re: Math.cos(1 + 1e-4 * k), im: Math.sin(1 + 1e-4 * k) })),
    ],
    ['20 equally spaced, as Wilkinson chose them', Array.from({ length: 20 }, (_, k) => ({ re: k + 1.5, im: 0 }))],
    [
      'at zero too',
      [
        { re: 0, im: 0 },
        { re: 0.5, im: 0 },
        { re: -0.25, im: 0 },
      ],
    ],
  ])('%s', (_name, half) => {
    const found = sorted(polynomialRoots(expandHalf(half)))
    const wanted = sorted(half)
    expect(found.length).toBe(wanted.length)
    found.forEach((root, k) => {
      const { re, im } = wanted[k] ?? { re: Number.NaN, im: Number.NaN }
      // The promise: digits of z − 1.
      expect(Math.hypot(root.re - re, root.im - im)).toBeLessThan(4e-15 * Math.max(1, Math.hypot(re - 1, im)))
      expect(root.im === 0).toBe(im === 0)
    })
  })

  it('has the zeros of sampled integrators: Euler–Frobenius polynomials (Åström, Hagander & Sternby 1984)', () => {
    // B₃ = z² + 4z + 1 and B₄ = z³ + 11z² + 11z + 1.
    expect(sorted(polynomialRoots(long([1n, 4n, 1n]))).map((root) => root.re)).toEqual(
      [-2 - Math.sqrt(3), -2 + Math.sqrt(3)].map((x) => expect.closeTo(x, 14)),
    )
    const cubic = sorted(polynomialRoots(long([1n, 11n, 11n, 1n]))).map((root) => root.re)
    expect(cubic).toEqual([-5 - Math.sqrt(24), -1, -5 + Math.sqrt(24)].map((x) => expect.closeTo(x, 13)))
    // Eulerian numbers of degree 22: all roots real, negative, in reciprocal pairs.
    let row = [1n]
    for (let n = 2n; n <= 23n; n += 1n) {
      const next: bigint[] = []
      for (let k = 0n; k < n; k += 1n)
        next.push((k + 1n) * (row[Number(k)] ?? 0n) + (n - k) * (row[Number(k) - 1] ?? 0n))
      row = next
    }
    const roots = sorted(polynomialRoots(long(row))).map((root) => root.re)
    expect(roots.length).toBe(22)
    roots.forEach((root, k) => {
      expect(root).toBeLessThan(0)
      expect(Math.abs(root * (roots[21 - k] ?? 0) - 1)).toBeLessThan(1e-8)
    })
  })
})
