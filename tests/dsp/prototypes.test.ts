import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { bessel } from '@/dsp/prototypes/bessel'
import { butterworth } from '@/dsp/prototypes/butterworth'
import { chebyshev1, chebyshev2 } from '@/dsp/prototypes/chebyshev'
import { criticallyDamped } from '@/dsp/prototypes/critically-damped'
import { prototypeOf } from '@/dsp/prototypes/family'
import { expand, fromHalf, type HalfRoots } from '@/dsp/forms/zeros-poles-gain'
import { toLowpass } from '@/dsp/transforms/bands'
import type { Prototype } from '@/dsp/prototypes/prototype'
import besselTable from '../reference/proto_bessel.json'
import butterworthTable from '../reference/proto_butterworth.json'
import chebyshevTable from '../reference/proto_chebyshev.json'
import { decibels, expectRoots, rootsAt, spaced } from '../helpers/dsp'

const pairs = (half: HalfRoots) => half.filter((root) => root.im > 0)
const reals = (half: HalfRoots) => half.filter((root) => root.im === 0)
const asPair = z.array(z.array(z.number()))
const asReal = z.array(z.number())
const real = (values: readonly number[]) => values.map((value) => [value, 0])

/** Level in dB of a prototype at ω. */
const level = (prototype: Prototype, omega: number) =>
  decibels(rootsAt(fromHalf('s', toLowpass(prototype, 1)), { re: 0, im: omega }))

const HALF_POWER_DB = -10 * Math.log10(2)
const ORDERS = Array.from({ length: 24 }, (_, k) => k + 1)

describe('Butterworth prototype', () => {
  // tests/reference/proto_butterworth.json: tables as in Zverev (1967), Weinberg (1962), recomputed to 40 digits.
  it.each(butterworthTable.rows.map((row) => [row.n, row] as const))('order %i has the tabulated poles', (n, row) => {
    const { poles } = butterworth(n)
    expectRoots(pairs(poles), asPair.parse(row.value.poles_upper_half), 1e-12)
    expectRoots(reals(poles), real(asReal.parse(row.value.real_pole)), 1e-12)
  })

  it.each(ORDERS)('order %i has |H|² = 1/(1 + ω^2n) at any frequency', (n) => {
    for (const omega of [0.1, 0.7, 0.99, 1, 1.01, 2, 7]) {
      const expected = -10 * Math.log10(1 + omega ** (2 * n))
      expect(level(butterworth(n), omega)).toBeCloseTo(expected, 9)
    }
  })
})

describe('Chebyshev I prototype', () => {
  // tests/reference/proto_chebyshev.json: tables as in Zverev (1967), Weinberg (1962), recomputed to 40 digits.
  it.each(chebyshevTable.rows.map((row) => [row.n, row.ripple_db, row] as const))(
    'order %i with %f dB has the tabulated poles and DC gain',
    (n, ripple, row) => {
      const { poles, dcGain } = chebyshev1(n, ripple)
      expectRoots(pairs(poles), asPair.parse(row.value.poles_upper_half), 1e-12)
      expectRoots(reals(poles), real(asReal.parse(row.value.real_pole)), 1e-12)
      expect(dcGain).toBeCloseTo(row.value.dc_gain, 12)
      expect(level(chebyshev1(n, ripple), row.value.omega_3dB)).toBeCloseTo(HALF_POWER_DB, 9)
    },
  )

  it.each(ORDERS)('order %i: 1/|H|² = 1 + ε²·Tₙ², 0 dB at most, and −ripple at the edge', (n) => {
    for (const ripple of [0.01, 0.5, 3]) {
      const filter = chebyshev1(n, ripple)
      expect(level(filter, 1)).toBeCloseTo(-ripple, 8)
      const epsilonSquared = 10 ** (ripple / 10) - 1
      for (const omega of spaced(0.02, 0.98, 25)) {
        const expected = -10 * Math.log10(1 + epsilonSquared * Math.cos(n * Math.acos(omega)) ** 2)
        expect(level(filter, omega)).toBeCloseTo(expected, 8)
      }
      for (const omega of [1.2, 3]) {
        const expected = -10 * Math.log10(1 + epsilonSquared * Math.cosh(n * Math.acosh(omega)) ** 2)
        expect(level(filter, omega)).toBeCloseTo(expected, 8)
      }
    }
  })
})

describe('Chebyshev II prototype', () => {
  it.each(ORDERS)('order %i reaches its attenuation at the edge and never loses it again', (n) => {
    for (const attenuation of [20, 60, 120]) {
      const filter = chebyshev2(n, attenuation)
      expect(level(filter, 1)).toBeCloseTo(-attenuation, 8)
      expect(level(filter, 0)).toBeCloseTo(0, 10)
      for (const omega of spaced(1, 20, 400)) expect(level(filter, omega)).toBeLessThan(-attenuation + 1e-8)
    }
  })

  it.each(ORDERS)('order %i is the inverse of Chebyshev I: H2(ω) and H1(1/ω) are complementary', (n) => {
    const attenuation = 40
    const ripple = -10 * Math.log10(1 - 10 ** (-attenuation / 10))
    for (const omega of [0.3, 0.8, 1.5, 4]) {
      const stop = 10 ** (level(chebyshev2(n, attenuation), omega) / 10)
      const pass = 10 ** (level(chebyshev1(n, ripple), 1 / omega) / 10)
      expect(stop + pass).toBeCloseTo(1, 9)
    }
  })

  it('has its zeros exactly on the axis', () => {
    for (const n of ORDERS) for (const zero of chebyshev2(n, 50).zeros) expect(zero.re).toBe(0)
  })
})

describe('Bessel prototype', () => {
  // tests/reference/proto_bessel.json: reverse Bessel polynomials, roots and −3 dB points with 40 digits (Thomson 1949).
  it.each(besselTable.rows.map((row) => [row.n, row] as const))('order %i has the tabulated poles', (n, row) => {
    const delay = bessel(n, 'delay').poles
    expectRoots(pairs(delay), asPair.parse(row.value.poles_unit_delay_upper), 1e-12)
    expectRoots(reals(delay), real(asReal.parse(row.value.real_pole_unit_delay)), 1e-12)
    const magnitude = bessel(n, 'magnitude').poles
    expectRoots(pairs(magnitude), asPair.parse(row.value.poles_3dB_upper), 1e-12)
    expectRoots(reals(magnitude), real(asReal.parse(row.value.real_pole_3dB)), 1e-12)
  })

  /** θₙ(s) and θₙ′(s) with the exact integer coefficients, at 10⁶⁰ per unit: nothing shared with the engine's recurrence. */
  function exactNewton(n: number, re: number, im: number): { re: number; im: number } {
    const unit = 10n ** 60n
    const fixed = (x: number) => (BigInt(Math.round(x * 2 ** 46)) * unit) / 2n ** 46n
    const factorial = (k: number) => Array.from({ length: k }, (_, i) => BigInt(i + 1)).reduce((a, b) => a * b, 1n)
    const [x, y] = [fixed(re), fixed(im)]
    let [pr, pi, dr, di] = [0n, 0n, 0n, 0n]
    for (let k = n; k >= 0; k -= 1) {
      ;[dr, di] = [(dr * x - di * y) / unit + pr, (dr * y + di * x) / unit + pi]
      const coefficient = factorial(2 * n - k) / (2n ** BigInt(n - k) * factorial(k) * factorial(n - k))
      ;[pr, pi] = [(pr * x - pi * y) / unit + coefficient * unit, (pr * y + pi * x) / unit]
    }
    const power = dr * dr + di * di
    const [qr, qi] = [((pr * dr + pi * di) * unit) / power, ((pi * dr - pr * di) * unit) / power]
    return { re: Number(qr) / 1e60, im: Number(qi) / 1e60 }
  }

  it.each(ORDERS)('order %i: the poles are roots of the exact integer polynomial to 1e-12', (n) => {
    const { poles } = bessel(n, 'delay')
    expect(expand(poles).length).toBe(n)
    for (const pole of poles) {
      const step = exactNewton(n, pole.re, pole.im)
      // The point handed to the exact polynomial is itself rounded to 2⁻⁴⁶.
      expect(Math.hypot(step.re, step.im) / Math.hypot(pole.re, pole.im)).toBeLessThan(1e-13)
      expect(pole.re).toBeLessThan(0)
    }
  })

  it.each(ORDERS)('order %i means what its normalization says', (n) => {
    expect(level(bessel(n, 'magnitude'), 1)).toBeCloseTo(HALF_POWER_DB, 11)
    const delay = expand(bessel(n, 'delay').poles).reduce((sum, p) => sum - p.re / (p.re * p.re + p.im * p.im), 0)
    expect(delay).toBeCloseTo(1, 12)
    const omega = 1e4
    expect(level(bessel(n, 'phase'), omega)).toBeCloseTo(-20 * n * Math.log10(omega), 4)
  })

  it('has the delay of e^−s up to terms of ω^2n', () => {
    for (const n of [2, 5, 12, 24]) {
      const poles = expand(bessel(n, 'delay').poles)
      const delayAt = (w: number) => poles.reduce((sum, p) => sum - p.re / (p.re * p.re + (w - p.im) ** 2), 0)
      // Storch 1954: τ(ω) = 1 − ω^2n/(…)² …; at ω = n/4 the loss of delay is far below 1 %.
      expect(Math.abs(delayAt(n / 4) - 1)).toBeLessThan(0.01)
      expect(delayAt(4 * n)).toBeLessThan(0.5)
    }
  })
})

describe('critically damped prototype', () => {
  it.each(ORDERS)('order %i has n equal real poles and 3.0103 dB at the edge', (n) => {
    const { poles } = criticallyDamped(n)
    expect(poles.length).toBe(n)
    for (const pole of poles) expect(pole).toEqual({ re: poles[0]?.re, im: 0 })
    expect(level(criticallyDamped(n), 1)).toBeCloseTo(HALF_POWER_DB, 11)
  })

  it('order 2 has the pole of the tables', () => {
    // Tietze & Schenk, table of filter coefficients: a₁ = 1.2872, b₁ = 0.4142 for critical damping of order 2.
    const pole = criticallyDamped(2).poles[0]?.re ?? 0
    expect(2 / -pole).toBeCloseTo(1.2872, 4)
    expect(1 / (pole * pole)).toBeCloseTo(0.4142, 4)
  })
})

describe('first order', () => {
  it('is 1/(s + 1) for every family whose edge is its −3 dB point', () => {
    for (const family of ['butterworth', 'bessel', 'critically-damped'] as const) {
      const { poles, zeros } = prototypeOf({ family, response: 'lowpass', order: 1, edgesHz: [1] })
      expect(zeros).toEqual([])
      expect(poles.length).toBe(1)
      expect(poles[0]?.re).toBeCloseTo(-1, 14)
    }
  })

  it('has its pole at 1/ε for Chebyshev I, ε for Chebyshev II', () => {
    expect(chebyshev1(1, 1).poles[0]?.re).toBeCloseTo(-1 / Math.sqrt(10 ** 0.1 - 1), 12)
    expect(chebyshev2(1, 40).poles[0]?.re).toBeCloseTo(-1 / Math.sqrt(10 ** 4 - 1), 12)
  })
})
