import { all, create } from 'mathjs'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { fromHalf } from '@/dsp/forms/zeros-poles-gain'
import {
  completeIntegral,
  incompleteIntegral,
  jacobi,
  jacobiOfQuarter,
  modulusOfRatio,
} from '@/dsp/numeric/elliptic-functions'
import { elliptic, selectivity } from '@/dsp/prototypes/elliptic'
import { toLowpass } from '@/dsp/transforms/bands'
import ellipticTable from '../reference/proto_elliptic.json'
import { decibels, expectRoots, rootsAt, spaced } from '../helpers/dsp'

const filterOf = (n: number, ripple: number, attenuation: number) =>
  fromHalf('s', toLowpass(elliptic(n, ripple, attenuation), 1))

const asPairs = z.array(z.array(z.number()))

const CASES = [
  [1, 1, 20],
  [2, 0.5, 40],
  [3, 0.1, 60],
  [4, 3, 80],
  [5, 0.01, 30],
  [8, 1, 100],
  [12, 0.2, 50],
  [17, 0.001, 120],
  [24, 0.5, 60],
  [24, 0.0001, 250],
] as const

describe('elliptic functions', () => {
  it('has the complete integrals of Abramowitz & Stegun, table 17.1', () => {
    // K(m) for m = 0, 0.5, 0.9, 0.99 as printed there.
    for (const [m, expected] of [
      [0, 1.570796326794897],
      [0.5, 1.854074677301372],
      [0.9, 2.578092113348173],
      [0.99, 3.695637362989875],
    ] as const) {
      expect(completeIntegral({ k: Math.sqrt(m), complement: Math.sqrt(1 - m) })).toBeCloseTo(expected, 13)
    }
  })

  it('has the incomplete integral of Abramowitz & Stegun, table 17.5', () => {
    // F(30°\30°) and F(60°\60°) as printed there.
    const at = (phi: number, alpha: number) =>
      incompleteIntegral(Math.tan((phi * Math.PI) / 180), {
        k: Math.sin((alpha * Math.PI) / 180),
        complement: Math.cos((alpha * Math.PI) / 180),
      })
    expect(at(30, 30)).toBeCloseTo(0.52942863, 8)
    expect(at(60, 60)).toBeCloseTo(1.2125966, 7)
  })

  it.each([0.01, 0.3, 0.9, 0.999, 0.9999999])('keeps the identities of sn, cn, dn at k = %f', (k) => {
    const modulus = { k, complement: Math.sqrt((1 - k) * (1 + k)) }
    const quarter = completeIntegral(modulus)
    for (const fraction of spaced(0.01, 0.99, 40)) {
      const { sn, cn, dn } = jacobi(fraction * quarter, modulus)
      expect(sn * sn + cn * cn).toBeCloseTo(1, 14)
      expect(dn * dn + k * k * sn * sn).toBeCloseTo(1, 14)
      const other = jacobiOfQuarter(fraction, modulus)
      expect(other.sn).toBeCloseTo(sn, 12)
      expect(other.cn).toBeCloseTo(cn, 12)
      // Landen's integral back: u = F(am u).
      if (cn > 1e-6) expect(incompleteIntegral(sn / cn, modulus) / (fraction * quarter)).toBeCloseTo(1, 9)
    }
  })

  it('inverts the ratio of the quarter periods', () => {
    for (const ratio of [0.2, 0.7, 1, 1.3, 4, 12]) {
      const { k, complement } = modulusOfRatio(ratio)
      expect(k * k + complement * complement).toBeCloseTo(1, 14)
      const found = completeIntegral({ k: complement, complement: k }) / completeIntegral({ k, complement })
      expect(found / ratio).toBeCloseTo(1, 12)
    }
  })
})

describe('elliptic prototype', () => {
  // tests/reference/proto_elliptic.json: tables as in Zverev (1967); recomputed with 40 digits.
  it.each(ellipticTable.rows.map((row) => [row.n, row.pass_ripple_db, row.stop_attenuation_db, row] as const))(
    'order %i, %f dB, %f dB has the tabulated zeros, poles and stop edge',
    (n, ripple, attenuation, row) => {
      const { zeros, poles, dcGain } = elliptic(n, ripple, attenuation)
      expectRoots(
        zeros,
        row.value.zeros_imag.map((value) => [0, value]),
        1e-11,
      )
      const pairs = asPairs.parse(row.value.poles_upper_half)
      const real = z.array(z.number()).parse(row.value.real_pole)
      expectRoots(poles, [...pairs, ...real.map((value) => [value, 0])], 1e-11)
      expect(dcGain).toBeCloseTo(row.value.dc_gain, 11)
      expect(1 / selectivity(n, ripple, attenuation).k).toBeCloseTo(row.value.stop_edge_omega_s, 10)
    },
  )

  it.each(CASES)('order %i, %f dB, %f dB is exact at both edges', (n, ripple, attenuation) => {
    const filter = filterOf(n, ripple, attenuation)
    const stop = 1 / selectivity(n, ripple, attenuation).k
    expect(decibels(rootsAt(filter, { re: 0, im: 1 })) / -ripple).toBeCloseTo(1, 6)
    expect(decibels(rootsAt(filter, { re: 0, im: stop }))).toBeCloseTo(-attenuation, 6)
  })

  it.each(CASES)('order %i, %f dB, %f dB stays inside its two strips and touches both', (n, ripple, attenuation) => {
    const filter = filterOf(n, ripple, attenuation)
    const at = (omega: number) => decibels(rootsAt(filter, { re: 0, im: omega }))
    const { k, complement } = selectivity(n, ripple, attenuation)
    const modulus = { k, complement }
    // Extremes of cd(n·u·K₁) lie at u = i/n: there the pass band is alternately at −ripple and at 0 dB.
    for (let i = 0; i <= n; i += 1) {
      const { cn, dn } = jacobiOfQuarter(i / n, modulus)
      const omega = i === n ? 0 : cn / dn
      expect(at(omega)).toBeCloseTo(i % 2 === 0 ? -ripple : 0, 7)
      if (omega > 0) {
        const outside = at(1 / (k * omega))
        if (i % 2 === 0) expect(outside).toBeCloseTo(-attenuation, 5)
        else expect(outside).toBeLessThan(-attenuation - 40)
      }
    }
    for (const omega of spaced(0, 1, 301)) {
      expect(at(omega)).toBeLessThan(1e-9)
      expect(at(omega)).toBeGreaterThan(-ripple - 1e-7)
    }
    for (const omega of spaced(1, 40, 301)) expect(at(omega / k)).toBeLessThan(-attenuation + 1e-6)
  })

  it('has its zeros exactly on the axis and order 1 without any', () => {
    for (const [n, ripple, attenuation] of CASES) {
      const { zeros } = elliptic(n, ripple, attenuation)
      expect(zeros.length).toBe(Math.floor(n / 2))
      for (const zero of zeros) expect(zero.re).toBe(0)
    }
  })
})

/*
 * The poles again, in 60 digits and by another way: they solve 1 + ε²·R²(ω) = 0 where R is the rational function with the zeros
 * cd((2i − 1)K/n) and the poles 1/(k·cd), both from theta series. One Newton step from each double-precision pole tells its error.
 */
describe('elliptic poles in 60 digits', () => {
  const math = create(all ?? {}, { number: 'BigNumber', precision: 60 })
  const big = (x: number | string) => math.bignumber(x)
  type Big = ReturnType<typeof big>
  const pi = math.acos(big(-1)) as Big

  const agm = (a: Big, b: Big): Big => {
    let [x, y] = [a, b]
    for (let k = 0; k < 12; k += 1) [x, y] = [x.plus(y).div(2), x.times(y).sqrt()]
    return x
  }
  const epsilonSquared = (db: number) => big(10).pow(big(db).div(10)).minus(1)

  function rational(n: number, ripple: number, attenuation: number) {
    const k1 = epsilonSquared(ripple).div(epsilonSquared(attenuation)).sqrt()
    const complement = big(1).minus(k1.times(k1)).sqrt()
    // K′/K = agm(1, k′)/agm(1, k)
    const ratio = agm(big(1), complement)
      .div(agm(big(1), k1))
      .div(n)
    const q = pi.times(ratio).negated().exp()
    const theta = (zeta: Big, two: boolean): Big => {
      let sum = two ? big(0) : big(1)
      for (let m = two ? 0 : 1; m < 60; m += 1) {
        const power = two ? q.pow(m * (m + 1)) : q.pow(m * m).times(2)
        sum = sum.plus(power.times(math.cos(zeta.times(two ? 2 * m + 1 : 2 * m)) as Big))
      }
      return two ? sum.times(2).times(q.pow(big(0.25))) : sum
    }
    const k = theta(big(0), true)
      .div(theta(big(0), false))
      .pow(2)
    const scale = theta(big(0), false).div(theta(big(0), true))
    const reflection = Array.from({ length: Math.floor(n / 2) }, (_, i) => {
      const zeta = pi.times(2 * i + 1).div(2 * n)
      return scale.times(theta(zeta, true)).div(theta(zeta, false))
    })
    return { k, reflection }
  }

  it.each([
    [5, 0.5, 50],
    [12, 0.1, 40],
    [24, 0.5, 60],
    [24, 0.0001, 250],
  ] as const)('order %i, %f dB, %f dB: real and imaginary parts are each good to 1e-11', (n, ripple, attenuation) => {
    const { k, reflection } = rational(n, ripple, attenuation)
    const { poles } = elliptic(n, ripple, attenuation)
    // R(x) with x = ω²: ∏(x − w)/(1 − k²·w·x) (times √x), scaled to R(1) = 1.
    const norm = reflection.reduce(
      (product, w) =>
        product.times(
          big(1)
            .minus(k.times(k).times(w.pow(2)))
            .div(big(1).minus(w.pow(2))),
        ),
      big(1),
    )
    for (const pole of poles) {
      // ω = s/j, x = ω² = −s².
      const [sr, si] = [big(pole.re), big(pole.im)]
      const x = { re: si.pow(2).minus(sr.pow(2)), im: sr.times(si).times(-2) }
      // ln R² and its derivative by s; d/ds = −2s·d/dx.
      let [value, slope] = [
        { re: norm.pow(2), im: big(0) },
        { re: big(0), im: big(0) },
      ]
      const times = (a: typeof x, b: typeof x) => ({
        re: a.re.times(b.re).minus(a.im.times(b.im)),
        im: a.re.times(b.im).plus(a.im.times(b.re)),
      })
      const over = (a: typeof x, b: typeof x) => {
        const power = b.re.pow(2).plus(b.im.pow(2))
        return {
          re: a.re.times(b.re).plus(a.im.times(b.im)).div(power),
          im: a.im.times(b.re).minus(a.re.times(b.im)).div(power),
        }
      }
      const plus = (a: typeof x, b: typeof x) => ({ re: a.re.plus(b.re), im: a.im.plus(b.im) })
      const one = { re: big(1), im: big(0) }
      for (const w of reflection) {
        const square = w.pow(2)
        const c = k.times(k).times(square)
        const above = { re: x.re.minus(square), im: x.im }
        const below = { re: big(1).minus(c.times(x.re)), im: c.times(x.im).negated() }
        const factor = over(above, below)
        value = times(value, times(factor, factor))
        slope = plus(slope, over({ re: big(2), im: big(0) }, above))
        slope = plus(slope, over({ re: c.times(2), im: big(0) }, below))
      }
      if (n % 2 === 1) {
        value = times(value, x)
        slope = plus(slope, over(one, x))
      }
      // f = 1 + ε²R², step = f/f′ = (1 + ε²R²)/(ε²R²·slope·(−2s))
      const scaled = times(value, { re: epsilonSquared(ripple), im: big(0) })
      const derivative = times(times(scaled, slope), { re: sr.times(-2), im: si.times(-2) })
      const step = over(plus(one, scaled), derivative)
      expect(Math.abs(step.re.toNumber() / pole.re)).toBeLessThan(1e-11)
      if (pole.im > 0) expect(Math.abs(step.im.toNumber() / pole.im)).toBeLessThan(1e-12)
    }
  })
})
