import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ToleranceSettings } from '@/dsp'
import { sallenKeyHighPass, sallenKeyLowPass } from '@/dsp/chain/build-sheet-circuits'
import { channelSeed, drawChannel, highPassOfParts, lowPassOfParts } from '@/dsp/chain/tolerance-draw'

const settings = (spread: ToleranceSettings['spread'], seed = 1): ToleranceSettings => ({
  spread,
  channels: 20_000,
  seed,
})

const lowPass2 = { order: 2, response: 'low-pass' } as const
const highPass2 = { order: 2, response: 'high-pass' } as const
const first = { order: 1, response: 'low-pass' } as const

/** f0 and Q of one section over many channels, each over its nominal value. */
function drawn(how: ToleranceSettings, section: typeof lowPass2 | typeof highPass2 | typeof first, channels: number) {
  const [f0, q] = [new Float64Array(channels), new Float64Array(channels)]
  const into = new Float64Array(2)
  for (let channel = 0; channel < channels; channel += 1) {
    drawChannel(how, [section], channel, into)
    ;[f0[channel], q[channel]] = [into[0]!, into[1]!]
  }
  return { f0, q }
}

const mean = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0) / values.length
const deviation = (values: Float64Array) => {
  const middle = mean(values)
  return Math.sqrt(mean(values.map((value) => (value - middle) ** 2)))
}

describe('the stream of a channel', () => {
  it('differs from every other of its run, and from those of other seeds', () => {
    const seeds = new Set<number>()
    for (const seed of [0, 1, 2, 0xffffffff]) for (let k = 0; k < 20_000; k += 1) seeds.add(channelSeed(seed, k))
    // Within a run they can't meet; between four runs of 20,000 among 2³² about 0.6 pairs are expected to.
    expect(seeds.size).toBeGreaterThanOrEqual(80_000 - 6)
    for (const seed of [0, 1, 0xffffffff]) {
      expect(new Set(Array.from({ length: 20_000 }, (_, k) => channelSeed(seed, k))).size).toBe(20_000)
    }
  })

  it('is not the stream of another seed shifted along', () => {
    const [one, two] = [1, 2].map((seed) => Array.from({ length: 2000 }, (_, k) => channelSeed(seed, k)))
    const shared = one!.filter((value) => two!.includes(value))
    expect(shared).toEqual([])
  })
})

describe('what is drawn', () => {
  const channels = 20_000

  it('of a section itself: even between the ends, with the mean and the deviation of such a distribution', () => {
    const { f0, q } = drawn(settings({ of: 'sections', f0Percent: 3, qPercent: 8 }), lowPass2, channels)
    for (const [values, percent] of [
      [f0, 3],
      [q, 8],
    ] as const) {
      const half = percent / 100
      expect(Math.min(...values)).toBeGreaterThanOrEqual(1 - half)
      expect(Math.max(...values)).toBeLessThan(1 + half)
      // Deviation half/√3; the mean of n draws is within 4 of its own deviations, the deviation within 2 %.
      expect(Math.abs(mean(values) - 1)).toBeLessThan((4 * half) / Math.sqrt(3 * channels))
      expect(deviation(values) / (half / Math.sqrt(3))).toBeCloseTo(1, 1.4)
      // Ten equal parts of the range get a tenth each (χ² with 9 degrees of freedom, 99.99 %: 33.7).
      const counts = new Float64Array(10)
      for (const value of values) counts[Math.min(9, Math.floor((5 * (value - 1 + half)) / half))]! += 1
      const square = counts.reduce((sum, count) => sum + (count - channels / 10) ** 2 / (channels / 10), 0)
      expect(square).toBeLessThan(33.7)
    }
    // Independent: the correlation of n pairs is within 4/√n of none.
    const [f0Mean, qMean] = [mean(f0), mean(q)]
    const covariance = mean(f0.map((value, k) => (value - f0Mean) * (q[k]! - qMean)))
    expect(Math.abs(covariance / (deviation(f0) * deviation(q)))).toBeLessThan(4 / Math.sqrt(channels))
  })

  it('of parts: f0 and Q deviate as first-order sensitivities say', () => {
    // S of f0 is −1/2 for each of four parts, or −1 for each of two; S of Q is ±1/2 for two parts and 0 for the equal two
    // (tests/reference/adc_antialias_decimation.json, Sallen–Key): √(Σ S²) times the deviation of one part.
    const part = 0.01 / Math.sqrt(3)
    for (const section of [lowPass2, highPass2]) {
      const { f0, q } = drawn(settings({ of: 'parts', percent: 1 }), section, channels)
      expect(deviation(f0) / (1 * part)).toBeCloseTo(1, 1.4)
      expect(deviation(q) / (Math.SQRT1_2 * part)).toBeCloseTo(1, 1.4)
    }
    const single = drawn(settings({ of: 'parts', percent: 1 }), first, channels)
    expect(deviation(single.f0) / (Math.SQRT2 * part)).toBeCloseTo(1, 1.4)
    expect(new Set(single.q)).toEqual(new Set([1]))
  })

  it('of parts: stays within its extremes, all four parts at one end', () => {
    // √(R1·R2·C1·C2) by (1 ± p)².
    const { f0 } = drawn(settings({ of: 'parts', percent: 5 }), lowPass2, channels)
    expect(Math.max(...f0)).toBeLessThanOrEqual(1 / 0.95 ** 2)
    expect(Math.min(...f0)).toBeGreaterThanOrEqual(1 / 1.05 ** 2)
  })

  it('comes to nominal as the spread goes to nothing', () => {
    for (const spread of [
      { of: 'parts', percent: 1e-9 },
      { of: 'sections', f0Percent: 1e-9, qPercent: 1e-9 },
    ] as const) {
      const { f0, q } = drawn(settings(spread), lowPass2, 50)
      for (const value of [...f0, ...q]) expect(Math.abs(value - 1)).toBeLessThan(1e-10)
    }
  })

  it('relative formulas are those of the circuits over their nominal values', () => {
    const near = fc.double({ min: 0.5, max: 1.5, noNaN: true })
    fc.assert(
      fc.property(near, near, near, near, (r1, r2, c1, c2) => {
        const [low, lowNominal] = [
          sallenKeyLowPass(1e4 * r1, 1e4 * r2, 22e-9 * c1, 4.7e-9 * c2),
          sallenKeyLowPass(1e4, 1e4, 22e-9, 4.7e-9),
        ]
        const ofLow = lowPassOfParts(r1, r2, c1, c2)
        expect(low.f0Hz / lowNominal.f0Hz / ofLow.f0).toBeCloseTo(1, 12)
        expect(low.q / lowNominal.q / ofLow.q).toBeCloseTo(1, 12)
        const [high, highNominal] = [
          sallenKeyHighPass(1e4 * r1, 3e4 * r2, 22e-9 * c1, 22e-9 * c2),
          sallenKeyHighPass(1e4, 3e4, 22e-9, 22e-9),
        ]
        const ofHigh = highPassOfParts(r1, r2, c1, c2)
        expect(high.f0Hz / highNominal.f0Hz / ofHigh.f0).toBeCloseTo(1, 12)
        expect(high.q / highNominal.q / ofHigh.q).toBeCloseTo(1, 12)
      }),
      { numRuns: 50 },
    )
  })
})
