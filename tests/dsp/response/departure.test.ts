import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  departure,
  designAnalog,
  discretize,
  frequencyResponse,
  groupDelay,
  lowestRate,
  rateSweep,
  trustedBand,
  worstDeparture,
  DesignError,
  type AnalogSpec,
  type DepartureBudget,
  type DigitalFilter,
  type Filter,
  type Method,
} from '@/dsp'
import { bilinearLowpass, butterworthLowpass, digital, many } from '@/tests/helpers/root-filters'

const lowpass = (order: number): AnalogSpec => ({ family: 'butterworth', response: 'lowpass', order, edgesHz: [100] })
const bilinear: Method = { method: 'bilinear', hold: 'edges' }

/** Departure by brute force: the ratio of the two complex responses on a fine grid, its angle wrapped. */
function bruteForce(analog: Filter<'s'>, filter: DigitalFilter, fromHz: number, toHz: number, count: number) {
  const hertz = Float64Array.from({ length: count }, (_, n) => fromHz + ((toHz - fromHz) * n) / (count - 1))
  const a = frequencyResponse(analog, hertz)
  const d = frequencyResponse(filter, hertz)
  return Array.from(hertz, (f, n) => {
    const norm = a.re[n]! ** 2 + a.im[n]! ** 2
    const re = (d.re[n]! * a.re[n]! + d.im[n]! * a.im[n]!) / norm
    const im = (d.im[n]! * a.re[n]! - d.re[n]! * a.im[n]!) / norm
    return { f, db: 20 * Math.log10(Math.hypot(re, im)), degrees: (Math.atan2(im, re) * 180) / Math.PI }
  })
}

/** The same filter, later by whole samples. */
const delayed = (filter: DigitalFilter, samples: number): DigitalFilter => ({
  ...digital(filter.zeros, [...filter.poles, ...many(0, samples)], filter.gain, filter.sampleRateHz),
})

describe('departure', () => {
  it('is digital minus analog, in dB and degrees, and minus the phase over the frequency in microseconds', () => {
    const analog = butterworthLowpass(4, 100)
    const filter = bilinearLowpass(4, 100, 1000)
    const expected = bruteForce(analog, filter, 10, 300, 30)
    const got = departure(
      analog,
      filter,
      expected.map(({ f }) => f),
    )
    expected.forEach(({ f, db, degrees }, n) => {
      expect(got.db[n]).toBeCloseTo(db, 10)
      expect(got.degrees[n]).toBeCloseTo(degrees, 9)
      expect(got.microseconds[n]).toBeCloseTo((-degrees / 360 / f) * 1e6, 6)
    })
    expect(got.delaySeconds).toBe(0)
  })

  it('at 0 Hz gives the limit of the phase delay, and 0 dB where both are exactly zero', () => {
    const analog = butterworthLowpass(4, 100)
    const filter = bilinearLowpass(4, 100, 1000)
    const difference = groupDelay(filter, [0])[0]! - groupDelay(analog, [0])[0]!
    expect(departure(analog, filter, [0]).microseconds[0]).toBeCloseTo(difference * 1e6, 9)
    const high: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 3, edgesHz: [100] }
    const blocked = departure(designAnalog(high), discretize(high, 1000, bilinear), [0, 500])
    expect(blocked.db[0]).toBe(0)
    expect(blocked.degrees[0]).toBeCloseTo(0, 12)
    expect([...blocked.db, ...blocked.degrees, ...blocked.microseconds].some(Number.isNaN)).toBe(false)
  })

  it('counts whole turns: three samples of delay are three samples, at every frequency', () => {
    const analog = butterworthLowpass(2, 100)
    const filter = bilinearLowpass(2, 100, 10_000)
    const plain = departure(analog, filter, [100, 2000])
    const later = departure(analog, delayed(filter, 30), [100, 2000])
    for (const n of [0, 1]) expect(later.microseconds[n]! - plain.microseconds[n]!).toBeCloseTo(3000, 6)
  })

  it('finds the constant delay: half a sample of the hold in a step-invariant version', () => {
    const spec = lowpass(4)
    const filter = discretize(spec, 20_000, { method: 'step-invariant' })
    const { delaySeconds, degrees } = departure(designAnalog(spec), filter, [10, 50, 100], {
      removeDelayOver: [0, 100],
    })
    // Zero-order hold: sin(ωT/2)/(ωT/2)·e^{−jωT/2} (Åström & Wittenmark, Computer-Controlled Systems, ch. 2).
    expect(delaySeconds).toBeCloseTo(0.5 / 20_000, 9)
    expect(degrees.every((value) => Math.abs(value) < 1e-3)).toBe(true)
  })

  it('takes off the delay that leaves the least square of phase, and no other', () => {
    const spec = lowpass(6)
    const [analog, filter] = [designAnalog(spec), discretize(spec, 1000, { method: 'matched-z' })]
    const frequencies = Float64Array.from({ length: 401 }, (_, n) => (n * 150) / 400)
    const { delaySeconds } = departure(analog, filter, [1], { removeDelayOver: [0, 150] })
    const plain = departure(analog, filter, frequencies).degrees
    const square = (delay: number) =>
      plain.reduce((sum, value, n) => sum + (value + 360 * frequencies[n]! * delay) ** 2, 0)
    const least = square(delaySeconds)
    // The fit and this sum use different grids: the minimum is flat to second order.
    expect(square(delaySeconds * 1.02)).toBeGreaterThan(least)
    expect(square(delaySeconds * 0.98)).toBeGreaterThan(least)
  })

  it('refuses a band for the delay that leaves 0 to half the rate', () => {
    const analog = butterworthLowpass(2, 100)
    const filter = bilinearLowpass(2, 100, 1000)
    expect(() => departure(analog, filter, [1], { removeDelayOver: [10, 600] })).toThrow(/500 Hz \(half the rate\)/)
    expect(() => departure(analog, filter, [1], { removeDelayOver: [20, 10] })).toThrow(DesignError)
  })
})

const specs: fc.Arbitrary<AnalogSpec> = fc.oneof(
  fc.record({
    family: fc.constantFrom('butterworth' as const, 'bessel' as const),
    response: fc.constantFrom('lowpass' as const, 'highpass' as const),
    order: fc.integer({ min: 1, max: 8 }),
    edgesHz: fc.double({ min: 5, max: 150, noNaN: true }).map((edge) => [edge]),
  }),
  fc.record({
    family: fc.constant('elliptic' as const),
    response: fc.constant('lowpass' as const),
    order: fc.integer({ min: 2, max: 6 }),
    edgesHz: fc.constant([80]),
    rippleDb: fc.constant(0.5),
    attenuationDb: fc.constant(50),
  }),
  fc.record({
    family: fc.constant('butterworth' as const),
    response: fc.constant('bandpass' as const),
    order: fc.integer({ min: 1, max: 4 }),
    edgesHz: fc.double({ min: 1.005, max: 2, noNaN: true }).map((ratio) => [60, 60 * ratio]),
  }),
)
const methods: fc.Arbitrary<Method> = fc.constantFrom<Method>(
  bilinear,
  { method: 'bilinear', hold: 'none' },
  { method: 'matched-z' },
)

describe('worstDeparture', () => {
  it('is not passed by any point of a fine grid, and is reached at the frequency it names', () => {
    fc.assert(
      fc.property(specs, methods, (spec, how) => {
        const [analog, filter] = [designAnalog(spec), discretize(spec, 1000, how)]
        const edge = Math.max(...spec.edgesHz)
        const fromHz = spec.response === 'lowpass' ? 0 : spec.edgesHz[0]!
        const worst = worstDeparture(analog, filter, edge * 1.02, { fromHz })
        const fine = bruteForce(analog, filter, fromHz, edge * 1.02, 4001)
        const most = Math.max(...fine.map(({ db }) => Math.abs(db)))
        expect(worst.db).toBeGreaterThan(most * (1 - 1e-3) - 1e-12)
        const at = departure(analog, filter, [worst.atHz.db, worst.atHz.degrees])
        expect(Math.abs(at.db[0]!)).toBeCloseTo(worst.db, 9)
        expect(Math.abs(at.degrees[1]!)).toBeCloseTo(worst.degrees, 7)
        if (worst.degrees < 170) {
          const angle = Math.max(...fine.map(({ degrees }) => Math.abs(degrees)))
          expect(worst.degrees).toBeGreaterThan(angle * (1 - 1e-3) - 1e-9)
        }
      }),
      { numRuns: 60 },
    )
  })

  it('does not step over a dip a ten-thousandth wide', () => {
    // The digital version has a narrow resonator more: a pole pair and a zero pair that nearly cancel.
    const analog = butterworthLowpass(2, 200)
    const plain = bilinearLowpass(2, 200, 1000)
    const angle = 2 * Math.PI * 0.0777
    const at = (radius: number) => [
      { re: radius * Math.cos(angle), im: radius * Math.sin(angle) },
      { re: radius * Math.cos(angle), im: -radius * Math.sin(angle) },
    ]
    const filter = digital([...plain.zeros, ...at(0.9998)], [...plain.poles, ...at(0.9999)], plain.gain, 1000)
    const worst = worstDeparture(analog, filter, 100)
    expect(worst.db).toBeGreaterThan(5.9)
    expect(worst.atHz.db).toBeCloseTo(77.7, 2)
  })

  it('refuses an end above half the rate or below the start of use, with the nearest that works', () => {
    const analog = butterworthLowpass(2, 100)
    const filter = bilinearLowpass(2, 100, 1000)
    expect(() => worstDeparture(analog, filter, 501)).toThrow(
      expect.objectContaining({ field: 'upToHz', nearest: 500 }),
    )
    expect(() => worstDeparture(analog, filter, 0)).toThrow(DesignError)
  })
})

describe('trustedBand', () => {
  const tight: DepartureBudget = { magnitudeDb: 0.1, phaseDegrees: 2, removeDelay: false }

  it('ends where a fine scan first leaves the budget', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 8 }), methods, (order, how) => {
        const [analog, filter] = [designAnalog(lowpass(order)), discretize(lowpass(order), 1000, how)]
        const band = trustedBand(analog, filter, tight)
        const fine = bruteForce(analog, filter, 0, 499, 49_901)
        const broken = fine.find(({ db, degrees }) => !(Math.abs(db) <= 0.1 && Math.abs(degrees) <= 2))
        expect(band.fromHz).toBe(0)
        expect(Math.abs(band.upToHz - (broken?.f ?? 500))).toBeLessThan(0.011)
      }),
      { numRuns: 24 },
    )
  })

  it('reaches at least as far when a constant delay may be taken off, and keeps the budget with it', () => {
    fc.assert(
      fc.property(specs, methods, (spec, how) => {
        const [analog, filter] = [designAnalog(spec), discretize(spec, 1000, how)]
        const without = trustedBand(analog, filter, tight)
        const band = trustedBand(analog, filter, { ...tight, removeDelay: true })
        expect(band.upToHz).toBeGreaterThanOrEqual(without.upToHz)
        if (band.upToHz <= band.fromHz || band.upToHz >= 499) return
        const frequencies = Array.from(
          { length: 500 },
          (_, n) => band.fromHz + ((band.upToHz - band.fromHz) * (n + 1)) / 501,
        )
        const { db, degrees } = departure(analog, filter, frequencies)
        frequencies.forEach((hertz, n) => {
          if (spec.family === 'elliptic') return // its notches aren't judged
          expect(Math.abs(db[n]!)).toBeLessThan(0.1 * 1.001)
          expect(Math.abs(degrees[n]! + 360 * hertz * band.delaySeconds)).toBeLessThan(2 * 1.01)
        })
      }),
      { numRuns: 40 },
    )
  })

  it('of a step-invariant version is long only with its half sample taken off', () => {
    const spec = lowpass(4)
    const [analog, filter] = [designAnalog(spec), discretize(spec, 2000, { method: 'step-invariant' })]
    const without = trustedBand(analog, filter, tight)
    const free = trustedBand(analog, filter, { ...tight, removeDelay: true })
    expect(without.limitedBy).toBe('phase')
    expect(free.upToHz).toBeGreaterThan(5 * without.upToHz)
    expect(free.delaySeconds).toBeCloseTo(0.5 / 2000, 6)
  })

  it('of a high-pass and a band-pass filter reaches down from the pass band too, and over a notch of a band-stop', () => {
    const high: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [50] }
    const above = trustedBand(designAnalog(high), discretize(high, 5000, bilinear), tight)
    expect(above.fromHz).toBeLessThan(50)
    expect(above.upToHz).toBeGreaterThan(100)
    const stop: AnalogSpec = { family: 'butterworth', response: 'bandstop', order: 2, edgesHz: [48, 52] }
    const across = trustedBand(designAnalog(stop), discretize(stop, 5000, bilinear), {
      ...tight,
      magnitudeDb: 0.5,
      phaseDegrees: 5,
    })
    expect(across.fromHz).toBe(0)
    expect(across.upToHz).toBeGreaterThan(1000)
  })

  it('is empty, and says why, when the budget is broken from the start', () => {
    const spec = lowpass(2)
    const analog = designAnalog(spec)
    const filter = discretize(spec, 1000, bilinear)
    const loud = { ...filter, gain: filter.gain * 2 }
    expect(trustedBand(analog, loud, tight)).toEqual({ fromHz: 0, upToHz: 0, limitedBy: 'magnitude', delaySeconds: 0 })
  })
})

describe('rates', () => {
  const all: Method[] = [
    bilinear,
    { method: 'impulse-invariant' },
    { method: 'matched-z' },
    { method: 'step-invariant' },
  ]

  it.each([
    lowpass(5),
    { family: 'bessel', response: 'lowpass', order: 4, edgesHz: [100], normalization: 'magnitude' } as const,
    { family: 'critically-damped', response: 'lowpass', order: 3, edgesHz: [100] } as const,
    { family: 'chebyshev1', response: 'bandpass', order: 3, edgesHz: [80, 120], rippleDb: 0.5 } as const,
  ])('sweep to the same worst departures as the designed versions have ($family $response)', (spec) => {
    const ratesHz = [400, 1000, 5000, 100_000]
    for (const removeDelay of [false, true]) {
      const sweep = rateSweep({ analog: spec, methods: all, ratesHz, upToHz: 130, removeDelay })
      const analog = designAnalog(spec)
      sweep.methods.forEach(({ how, db, degrees, microseconds }) => {
        ratesHz.forEach((rate, n) => {
          const worst = worstDeparture(analog, discretize(spec, rate, how), 130, { removeDelay })
          // The sweep's grid is coarser, and its sampled state space good to 1e-10.
          expect(db[n]).toBeCloseTo(worst.db, 3)
          expect(Math.abs(degrees[n]! - worst.degrees)).toBeLessThan(0.01 + 0.005 * worst.degrees)
          expect(microseconds[n]!).toBeLessThan(worst.microseconds * 1.05 + 0.1)
        })
      })
    }
  })

  it('give null and the reason where a method refuses or the band passes half the rate', () => {
    const high: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [100] }
    const sweep = rateSweep({ analog: high, methods: all, ratesHz: [190, 300, 1000], upToHz: 140, removeDelay: false })
    expect(sweep.methods[0]!.db.slice(0, 1)).toEqual([null])
    expect(sweep.methods[0]!.db[2]).toBeGreaterThan(0)
    expect(sweep.methods[1]!.db).toEqual([null, null, null])
    expect(sweep.methods[1]!.refused[2]).toMatch(/impulse/i)
    expect(sweep.methods[0]!.refused[0]).toMatch(/half/)
  })

  it('the lowest rate keeps the budget, and a little less does not', () => {
    const budget: DepartureBudget = { magnitudeDb: 0.1, phaseDegrees: 3, removeDelay: false }
    const spec = lowpass(4)
    const found = lowestRate({ analog: spec, how: bilinear, upToHz: 80, budget, searchHz: [250, 100_000] })
    if ('refused' in found) throw new Error(found.refused)
    const worstAt = (rate: number) => worstDeparture(designAnalog(spec), discretize(spec, rate, bilinear), 80)
    const kept = worstAt(found.sampleRateHz * 1.000001)
    expect(kept.db <= 0.1 && kept.degrees <= 3).toBe(true)
    const less = worstAt(found.sampleRateHz * 0.999)
    expect(less.db <= 0.1 && less.degrees <= 3).toBe(false)
  })

  it('a delay that may be taken off never asks for a higher rate', () => {
    for (const how of all) {
      const rates = [false, true].map((removeDelay) => {
        const budget: DepartureBudget = { magnitudeDb: 0.2, phaseDegrees: 2, removeDelay }
        return lowestRate({ analog: lowpass(3), how, upToHz: 60, budget, searchHz: [210, 1e6] })
      })
      const [without, free] = rates.map((found) => ('refused' in found ? Infinity : found.sampleRateHz))
      expect(free!).toBeLessThanOrEqual(without! * 1.0001)
    }
  })

  it('says why no rate in the range will do', () => {
    const budget: DepartureBudget = { magnitudeDb: 1e-9, phaseDegrees: 1e-9, removeDelay: false }
    const found = lowestRate({ analog: lowpass(4), how: bilinear, upToHz: 80, budget, searchHz: [250, 1000] })
    expect('refused' in found && found.refused).toMatch(/Even at 1000 Hz the magnitude is off by/)
    const high: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [100] }
    const how: Method = { method: 'impulse-invariant' }
    const never = lowestRate({ analog: high, how, upToHz: 140, budget, searchHz: [300, 1000] })
    expect('refused' in never && never.refused).toMatch(/^Even at 1000 Hz the rate is refused\. .*[^.]\.$/)
  })

  it('refuses a band that ends before the filter comes into use', () => {
    const high: AnalogSpec = { family: 'butterworth', response: 'highpass', order: 2, edgesHz: [100] }
    expect(() => rateSweep({ analog: high, methods: all, ratesHz: [1000], upToHz: 50, removeDelay: false })).toThrow(
      expect.objectContaining({ field: 'upToHz', nearest: 100 }),
    )
  })
})
