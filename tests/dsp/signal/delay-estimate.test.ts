import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  designFromSpec,
  discretize,
  footbridgeDemo,
  groupDelay,
  measureDelay,
  phaseDelay,
  predictDelay,
  runFilter,
  seededNoise,
  welch,
} from '@/dsp'
import { bilinearLowpass } from '@/tests/helpers/root-filters'

const noise = (count: number, seed: number) => {
  const next = seededNoise(seed)
  return Float64Array.from({ length: count }, next)
}

/** A sum of sines below the tenth of the rate, so that a delay by any fraction of a sample can be written down. */
const smooth = (count: number, delay: number) =>
  Float64Array.from({ length: count }, (_, n) => {
    let sum = 0
    for (let k = 1; k <= 40; k++) sum += Math.sin(2 * Math.PI * 0.00237 * k * (n - delay) + k * k)
    return sum
  })

describe('measureDelay', () => {
  it('finds a delay to thousandths of a sample', () => {
    fc.assert(
      fc.property(fc.double({ min: -40, max: 40, noNaN: true }), (delay) => {
        const { delaySamples, correlation } = measureDelay(smooth(20_000, 0), smooth(20_000, delay), {
          sampleRateHz: 500,
          maxDelaySeconds: 0.4,
        })
        // The two ends, of which each recording has its own, leave a few thousandths.
        expect(Math.abs(delaySamples - delay)).toBeLessThan(0.005)
        expect(correlation).toBeGreaterThan(0.98)
      }),
      { numRuns: 20 },
    )
  })

  it('is exact for whole samples of noise, either way, and in units of time', () => {
    const source = noise(50_100, 5)
    const [early, late] = [source.subarray(37, 50_037), source.subarray(0, 50_000)]
    const found = measureDelay(early, late, { sampleRateHz: 2000 })
    expect(found.delaySamples).toBeCloseTo(37, 3)
    expect(found.delaySeconds).toBeCloseTo(0.0185, 6)
    expect(measureDelay(late, early, { sampleRateHz: 2000 }).delaySamples).toBeCloseTo(-37, 3)
  })

  it('of a narrow band of noise through a filter is the phase delay there; of its envelope’s neighbourhood the group delay agrees', () => {
    const filter = bilinearLowpass(4, 100, 1000)
    const band = discretize({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [29, 31] }, 1000, {
      method: 'bilinear',
      hold: 'edges',
    })
    const before = runFilter(band.sections, noise(200_000, 3), { mode: 'causal' })
    const after = runFilter(filter.sections, before, { mode: 'causal' })
    const { delaySeconds } = measureDelay(before, after, { sampleRateHz: 1000, maxDelaySeconds: 0.012 })
    expect(delaySeconds).toBeCloseTo(phaseDelay(filter, [30])[0]!, 5)
    // Well inside the pass band of this filter the two delays differ by little.
    expect(Math.abs(delaySeconds - groupDelay(filter, [30])[0]!)).toBeLessThan(3e-4)
  })

  it('agrees with the prediction from the spectrum and the filter', () => {
    const { samples } = footbridgeDemo({ sampleRateHz: 500, durationSeconds: 120 })
    for (const order of [2, 4, 8]) {
      const filter = bilinearLowpass(order, 25, 500)
      const after = runFilter(filter.sections, samples, { mode: 'causal', start: 'steady' })
      const measured = measureDelay(samples, after, { sampleRateHz: 500, maxDelaySeconds: 0.2 })
      const spectrum = welch(samples, {
        sampleRateHz: 500,
        segmentLength: 8192,
        overlap: 0.5,
        window: 'hann',
        detrend: 'constant',
      })
      const predicted = predictDelay(filter, spectrum)
      expect(Math.abs(measured.delaySeconds / predicted - 1)).toBeLessThan(0.02)
    }
  })

  describe('predicts for symmetric taps half of their number less one', () => {
    const rate = 2000
    const lowpass = (taps: number) => {
      const bands = [
        { fromHz: 0, toHz: 200, gain: 1, weight: 1 },
        { fromHz: 400, toHz: 1000, gain: 0, weight: 36.2 },
      ]
      const budget = { magnitudeDb: 0.1, phaseDegrees: 5, removeDelay: true }
      const fir = { kind: 'equiripple', response: 'lowpass', taps, bands } as const
      return designFromSpec({ format: 1, sampleRateHz: rate, budget, fir }).digital
    }

    it('on the slow demonstration recording, whose correlation is broad but for a sharp tip', () => {
      const { samples } = footbridgeDemo({ sampleRateHz: rate, durationSeconds: 60 })
      const spectrum = welch(samples, {
        sampleRateHz: rate,
        segmentLength: 4096,
        overlap: 0.5,
        window: 'hann',
        detrend: 'constant',
      })
      for (const taps of [30, 31, 32, 33, 35, 41]) {
        const predicted = predictDelay(lowpass(taps), spectrum)
        expect(Math.abs(predicted - (taps - 1) / 2 / rate), `${taps} taps`).toBeLessThan(1e-6)
      }
    })

    it('whatever the shape of the spectrum over the pass band', () => {
      const filters = [30, 31].map(lowpass)
      const frequenciesHz = Float64Array.from({ length: 801 }, (_, k) => (k * rate) / 1600)
      fc.assert(
        fc.property(
          fc.double({ min: 0, max: 4, noNaN: true }),
          fc.double({ min: 0.5, max: 100, noNaN: true }),
          fc.integer({ min: 1, max: 1e6 }),
          (slope, kneeHz, seed) => {
            const next = seededNoise(seed)
            const density = frequenciesHz.map((hz) => (1 + (hz / kneeHz) ** 2) ** (-slope / 2) * (0.2 + next() ** 2))
            for (const filter of filters) {
              const samples = ('taps' in filter ? filter.taps.length - 1 : NaN) / 2
              expect(Math.abs(predictDelay(filter, { frequenciesHz, density }) - samples / rate)).toBeLessThan(1e-6)
            }
          },
        ),
        { numRuns: 6 },
      )
    })
  })

  it('predicts for a tone the delay within its first period, as measured', () => {
    const rate = 1200
    const tone = Float64Array.from({ length: 5000 }, (_, n) => Math.sin(n / 5))
    const filter = bilinearLowpass(4, 120, rate)
    const after = runFilter(filter.sections, tone, { mode: 'causal', start: 'zero' })
    const measured = measureDelay(tone, after, { sampleRateHz: rate })
    const spectrum = welch(tone, { sampleRateHz: rate, segmentLength: 4096, overlap: 0.5, window: 'hann' })
    expect(Math.abs(predictDelay(filter, spectrum) - measured.delaySeconds)).toBeLessThan(0.2e-3)
  })

  it('finds none after a zero-phase run', () => {
    const { samples } = footbridgeDemo({ sampleRateHz: 500, durationSeconds: 60 })
    const after = runFilter(bilinearLowpass(4, 25, 500).sections, samples, { mode: 'zero-phase' })
    expect(Math.abs(measureDelay(samples, after, { sampleRateHz: 500 }).delaySamples)).toBeLessThan(0.01)
  })

  it('refuses recordings that can’t be compared', () => {
    const options = { sampleRateHz: 100 }
    expect(() => measureDelay(noise(100, 1), noise(99, 1), options)).toThrow(/equally long/)
    expect(() => measureDelay(noise(10, 1), noise(10, 1), options)).toThrow(/at least 16/)
    expect(() => measureDelay(new Float64Array(100).fill(2), noise(100, 1), options)).toThrow(
      expect.objectContaining({ code: 'silent', field: 'before' }),
    )
    const bad = noise(100, 1)
    bad[42] = Infinity
    expect(() => measureDelay(noise(100, 1), bad, options)).toThrow(/index 42 /)
  })
})
