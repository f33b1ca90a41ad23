import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { seedProjects } from '@/db/seed/projects'
import {
  designAnalog,
  discretize,
  fittedAdvantage,
  lowestRate,
  rateSweep,
  trustedBand,
  type AnalogSpec,
  type DigitalFilter,
  type FamilyDesign,
  type Method,
} from '@/dsp'
import { magnitudeMatched } from '@/dsp/discretise/magnitude-matched'
import { expand } from '@/dsp/forms/zeros-poles-gain'
import { usualFitHz } from '@/lib/designs/edits'
import { analogAt, cascadeAt, decibels, digitalAt, rootsAt, size, spaced } from '../../helpers/dsp'

const RATE = 1000
type Fitted = Extract<Method, { method: 'fitted' }>
const BUDGET = { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false }
const LOWPASS: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [100] }

const family = (analog: AnalogSpec, how: Method, sampleRateHz = RATE): FamilyDesign => ({
  format: 1,
  analog,
  sampleRateHz,
  how,
  budget: BUDGET,
})

/** Root mean square of |H/D − 1| over an even net, from the roots in the plainest way, where the original is within 40 dB of its peak. */
function plainError(analog: AnalogSpec, rate: number, digital: DigitalFilter, upToHz: number): number {
  const original = designAnalog(analog)
  const net = spaced(upToHz / 200, upToHz, 200)
  const wanted = net.map((hz) => analogAt(original, hz))
  const peak = Math.max(...wanted.map(size))
  let sum = 0
  let count = 0
  wanted.forEach((value, k) => {
    if (size(value) < peak / 100) return
    const got = digitalAt(digital, (2 * Math.PI * net[k]!) / rate)
    sum += (size({ re: got.re - value.re, im: got.im - value.im }) / size(value)) ** 2
    count += 1
  })
  return Math.sqrt(sum / count)
}

const demo = seedProjects
  .flatMap(({ designs }) => designs.flatMap(({ versions }) => versions.map(({ spec }) => spec)))
  .filter((spec): spec is FamilyDesign => 'analog' in spec)

describe('in every demo design', () => {
  it.each(demo.map((spec) => ({ spec, title: `${spec.analog.family} ${spec.analog.response} ${spec.analog.order}` })))(
    '$title: beats bilinear and matched-z up to where it is fitted',
    ({ spec }) => {
      const upToHz = usualFitHz(spec)
      const plain = fittedAdvantage(spec, { method: 'fitted', upToHz })
      const [fitted, bilinear, matched] = plain.versions
      expect(plain.best.error).toBe('fitted')
      expect(fitted!.error).toBeLessThan(bilinear!.error)
      expect(fitted!.error).toBeLessThan(matched!.error)
      // The same said by numbers that share nothing with the fit.
      const made = (how: Method) => discretize(spec.analog, spec.sampleRateHz, how)
      const error = (how: Method) => plainError(spec.analog, spec.sampleRateHz, made(how), upToHz)
      const own = error({ method: 'fitted', upToHz })
      expect(own).toBeLessThan(error({ method: 'bilinear', hold: 'edges' }))
      expect(own).toBeLessThan(1.05 * error({ method: 'matched-z' }))

      const free = fittedAdvantage(spec, { method: 'fitted', upToHz, freeDelay: true })
      expect(free.isAdvantage).toBe(true)
      expect(free.removeDelay).toBe(true)
    },
  )

  it('says that there is no advantage where there is none to speak of', () => {
    const notch = demo.find(({ analog }) => analog.response === 'bandstop')!
    const { isAdvantage, versions } = fittedAdvantage(notch, { method: 'fitted', upToHz: 0.4 * notch.sampleRateHz })
    expect(isAdvantage).toBe(false)
    expect(versions[0]!.error / versions[2]!.error).toBeGreaterThan(0.99)
  })
})

const corner = fc.double({ min: Math.log(2), max: Math.log(400), noNaN: true }).map(Math.exp)
const anySpec = fc
  .tuple(
    fc.constantFrom('butterworth', 'chebyshev1', 'chebyshev2', 'elliptic', 'bessel', 'critically-damped' as const),
    fc.constantFrom('lowpass', 'highpass', 'bandpass', 'bandstop' as const),
    fc.integer({ min: 1, max: 6 }),
    corner,
    fc.double({ min: 1.1, max: 8, noNaN: true }),
  )
  .map(([name, response, order, edge, ratio]): AnalogSpec => ({
    family: name,
    response,
    order,
    edgesHz: response === 'lowpass' || response === 'highpass' ? [edge] : [edge, Math.min(edge * ratio, 450)],
    rippleDb: 0.5,
    attenuationDb: 50,
  }))
const anyFit = fc.record({ part: fc.double({ min: 0.02, max: 0.98, noNaN: true }), freeDelay: fc.boolean() })

const fitOf = (spec: AnalogSpec, part: number, freeDelay: boolean): Fitted => {
  const from = spec.response === 'highpass' || spec.response === 'bandpass' ? spec.edgesHz[0]! : 0
  return { method: 'fitted', upToHz: from + part * (RATE / 2 - from), freeDelay }
}

describe('whatever is fitted', () => {
  it('is stable and real, as its sections are, with as many poles as the original', () => {
    fc.assert(
      fc.property(anySpec, anyFit, (spec, { part, freeDelay }) => {
        const how = fitOf(spec, part, freeDelay)
        const digital = discretize(spec, RATE, how)
        expect(digital.poles.length).toBe(designAnalog(spec).poles.length)
        expect(digital.zeros.length).toBeLessThanOrEqual(digital.poles.length)
        for (const roots of [digital.poles, digital.zeros]) {
          const upper = roots.filter(({ im }) => im > 0)
          for (const { re, im } of upper) expect(roots).toContainEqual({ re, im: -im })
          expect(roots.filter(({ im }) => im < 0).length).toBe(upper.length)
        }
        for (const pole of digital.poles) expect(Math.hypot(pole.re, pole.im)).toBeLessThan(1)
        for (const { a1, a2 } of digital.sections) {
          expect(Math.abs(a2)).toBeLessThan(1)
          expect(Math.abs(a1)).toBeLessThan(1 + a2)
        }
        const omega = (2 * Math.PI * Math.min(...spec.edgesHz)) / RATE
        const [byRoots, bySections] = [digitalAt(digital, omega), cascadeAt(digital.sections, omega)]
        expect(Number.isFinite(byRoots.re + byRoots.im)).toBe(true)
        expect(Math.hypot(byRoots.re - bySections.re, byRoots.im - bySections.im)).toBeLessThan(
          1e-6 * (1 + size(byRoots)),
        )
      }),
      { numRuns: 60 },
    )
  })

  it('is never worse inside its band than the bilinear and the matched-z version', () => {
    fc.assert(
      fc.property(anySpec, anyFit, (spec, { part }) => {
        const { versions } = fittedAdvantage(family(spec, fitOf(spec, part, false)))
        const [fitted, ...rivals] = versions
        for (const rival of rivals) expect(fitted!.error).toBeLessThanOrEqual(rival.error * (1 + 1e-6) + 1e-12)
      }),
      { numRuns: 60 },
    )
  })

  it('keeps off the circle even where a notch just above the band draws a pole towards it', () => {
    const notch: AnalogSpec = {
      family: 'butterworth',
      response: 'bandstop',
      order: 2,
      edgesHz: [232.94824536790804, 256.24306990469887],
    } // found by chance
    const how: Fitted = { method: 'fitted', upToHz: 229.73749607172967 }
    const slowest = Math.max(...designAnalog(notch).poles.map(({ re }) => Math.exp((2 * re) / RATE)))
    for (const pole of discretize(notch, RATE, how).poles) {
      expect(1 - (pole.re ** 2 + pole.im ** 2)).toBeGreaterThan((1 - slowest) / 21)
    }
  })

  it('is the same each time', () => {
    const how: Fitted = { method: 'fitted', upToHz: 350, freeDelay: true }
    expect(discretize(LOWPASS, RATE, how)).toEqual(discretize(LOWPASS, RATE, how))
  })
})

describe('what a fit keeps exactly', () => {
  it('zeros at 0 Hz and notches inside the band', () => {
    const highpass = discretize({ ...LOWPASS, response: 'highpass' }, RATE, { method: 'fitted', upToHz: 400 })
    expect(highpass.zeros.filter(({ re, im }) => re === 1 && im === 0).length).toBe(4)
    const notch: AnalogSpec = { family: 'butterworth', response: 'bandstop', order: 2, edgesHz: [45, 55] }
    const stop = discretize(notch, RATE, { method: 'fitted', upToHz: 300 })
    const angle = (2 * Math.PI * Math.sqrt(45 * 55)) / RATE
    expect(stop.zeros.filter(({ im }) => im > 0).map(({ re, im }) => Math.atan2(im, re) - angle)).toEqual([
      expect.closeTo(0, 12),
      expect.closeTo(0, 12),
    ])
    expect(size(digitalAt(stop, angle))).toBeLessThan(1e-12)
  })

  it('says the delay that it was left to choose, and follows the original better for it', () => {
    const upToHz = 400
    const plain = discretize(LOWPASS, RATE, { method: 'fitted', upToHz })
    const free = discretize(LOWPASS, RATE, { method: 'fitted', upToHz, freeDelay: true })
    const said = free.diagnostics.find(({ code }) => code === 'fitted-delay')
    expect(plain.diagnostics.some(({ code }) => code === 'fitted-delay')).toBe(false)
    const delay = said!.value!
    expect(Math.abs(delay)).toBeLessThan(2 / RATE)
    const original = designAnalog(LOWPASS)
    for (const hz of spaced(10, 200, 20)) {
      const got = digitalAt(free, (2 * Math.PI * hz) / RATE)
      const wanted = analogAt(original, hz)
      const apart = Math.atan2(got.im, got.re) - Math.atan2(wanted.im, wanted.re) + 2 * Math.PI * hz * delay
      expect(Math.abs(Math.sin(apart))).toBeLessThan(0.03)
    }
  })

  it.each([1, 2, 3, 6, 8])('order %i, stated', (order) => {
    const digital = discretize(LOWPASS, RATE, { method: 'fitted', upToHz: 400, order })
    expect(digital.poles.length).toBe(order)
    const error = plainError(LOWPASS, RATE, digital, 400)
    if (order >= 4) expect(error).toBeLessThan(0.1)
  })

  it('more poles never fit worse', () => {
    const errors = [2, 4, 6, 8].map((order) =>
      plainError(LOWPASS, RATE, discretize(LOWPASS, RATE, { method: 'fitted', upToHz: 300, order }), 300),
    )
    errors.slice(1).forEach((error, k) => expect(error).toBeLessThan(errors[k]!))
  })
})

describe('the fitted version in rates and trust', () => {
  const how: Fitted = { method: 'fitted', upToHz: 200 }

  it('is refused in a sweep where its end isn’t below half the rate', () => {
    const sweep = rateSweep({
      analog: LOWPASS,
      methods: [how],
      ratesHz: [300, 400, 1000],
      upToHz: 120,
      removeDelay: false,
    })
    expect(sweep.methods[0]!.db.map((value) => value === null)).toEqual([true, true, false])
    expect(sweep.methods[0]!.refused[1]).toMatch(/half the rate/)
  })

  it('keeps a budget at a lower rate than the bilinear version, and over a wider band', () => {
    const rate = (method: Method) => {
      const found = lowestRate({ analog: LOWPASS, how: method, upToHz: 100, budget: BUDGET, searchHz: [420, 100_000] })
      return 'sampleRateHz' in found ? found.sampleRateHz : Infinity
    }
    const bilinear: Method = { method: 'bilinear', hold: 'edges' }
    expect(rate(how)).toBeLessThan(rate(bilinear) / 2)
    const band = (method: Method) =>
      trustedBand(designAnalog(LOWPASS), discretize(LOWPASS, RATE, method), BUDGET).upToHz
    expect(band(how)).toBeGreaterThan(2 * band(bilinear))
  })
})

describe('magnitude-matched two-pole sections', () => {
  /*
   * Poles: a1 = −2·e^{−qω₀}·cos(√(1−q²)·ω₀), a2 = e^{−2qω₀}, q = 1/(2Q); magnitudes matched at 0, ω₀ and half the rate.
   * M. Vicanek, Matched Second Order Digital Filters (2016); formulas from memory.
   */
  it.each([
    [0.3, 0.7071],
    [0.8, 2],
    [1.5, 5],
  ])('ω₀ = %f, Q = %f', (centre, quality) => {
    const q = 1 / (2 * quality)
    const pole = { re: -q * centre, im: centre * Math.sqrt(1 - q * q) }
    const form = magnitudeMatched({ zeros: [], poles: [pole], gain: centre ** 2 })
    const [root] = form.poles
    expect(-2 * root!.re).toBeCloseTo(-2 * Math.exp(-q * centre) * Math.cos(Math.sqrt(1 - q * q) * centre), 12)
    expect(root!.re ** 2 + root!.im ** 2).toBeCloseTo(Math.exp(-2 * q * centre), 12)
    const digital = { domain: 'z' as const, zeros: expand(form.zeros), poles: expand(form.poles), gain: 1 }
    const analog = { domain: 's' as const, zeros: [], poles: expand([pole]), gain: centre ** 2 }
    const ratio = (omega: number) => size(digitalAt(digital, omega)) / size(rootsAt(analog, { re: 0, im: omega }))
    expect(decibels(ratio(centre) / ratio(0))).toBeCloseTo(0, 9)
    expect(decibels(ratio(Math.PI) / ratio(0))).toBeCloseTo(0, 9)
  })
})
