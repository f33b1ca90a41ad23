import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { toleranceFrequencies, toleranceResult, toleranceShard, type AnalogSpec, type ToleranceShard } from '@/dsp'
import { quantilesOf } from '@/dsp/chain/tolerance-quantiles'
import { analogChain } from '../../helpers/analog-chain'

const analog: readonly AnalogSpec[] = [{ family: 'bessel', response: 'lowpass', order: 4, edgesHz: [1500] }]

/** Quantile by the definition: sort, then straight between the two values around (n − 1)·p. */
function naive(values: readonly number[], p: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  const at = (sorted.length - 1) * p
  const [low, high] = [sorted[Math.floor(at)]!, sorted[Math.ceil(at)]!]
  return low * (1 - (at % 1)) + high * (at % 1)
}

describe('quantiles', () => {
  it('are order statistics where they fall on one, and straight between', () => {
    expect(quantilesOf(Float64Array.of(4, 16, 1, 8, 2), [0, 0.25, 0.5, 0.75, 1])).toEqual([1, 2, 4, 8, 16])
    expect(quantilesOf(Float64Array.of(4, 16, 1, 8, 2), [0.95])).toEqual([expect.closeTo(14.4, 12)])
    expect(quantilesOf(Float64Array.of(3), [0.05, 0.5, 0.95])).toEqual([3, 3, 3])
  })

  it('are those of a plain sort for any values, equal ones among them', () => {
    const values = fc.array(fc.oneof(fc.double({ min: -10, max: 10, noNaN: true }), fc.integer({ min: -2, max: 2 })), {
      minLength: 1,
      maxLength: 200,
    })
    fc.assert(
      fc.property(values, (list) => {
        const quantiles = quantilesOf(Float64Array.from(list), [0.05, 0.5, 0.95])
        ;[0.05, 0.5, 0.95].forEach((p, k) => expect(quantiles[k]).toBeCloseTo(naive(list, p), 10))
      }),
    )
  })
})

describe('the result of a run', () => {
  const chain = analogChain({ analog, tolerance: { channels: 317, spread: { of: 'parts', percent: 2 } } })
  const frequenciesHz = toleranceFrequencies(chain, 37)
  const shards = [toleranceShard(chain, frequenciesHz, 0, 100), toleranceShard(chain, frequenciesHz, 100, 317)]
  const result = toleranceResult(chain, frequenciesHz, shards)
  const column = (read: (shard: ToleranceShard) => Float64Array, n: number) =>
    shards.flatMap((shard) => [...read(shard)].filter((_, at) => at % frequenciesHz.length === n))

  it('has the percentiles of a plain sort, and pairs of each channel with the next, the last with the first', () => {
    for (const [read, spread, match] of [
      [(shard: ToleranceShard) => shard.magnitudeDb, result.magnitudeDb, result.gainMatchDb],
      [(shard: ToleranceShard) => shard.phaseDegrees, result.phaseDegrees, result.phaseMatchDegrees],
    ] as const) {
      frequenciesHz.forEach((_, n) => {
        const values = column(read, n)
        expect(values).toHaveLength(317)
        const apart = values.map((value, k) => Math.abs(value - values[(k + 1) % values.length]!))
        expect(spread.p5[n]).toBeCloseTo(naive(values, 0.05), 12)
        expect(spread.p50[n]).toBeCloseTo(naive(values, 0.5), 12)
        expect(spread.p95[n]).toBeCloseTo(naive(values, 0.95), 12)
        expect(match.p50[n]).toBeCloseTo(naive(apart, 0.5), 12)
        expect(match.p95[n]).toBeCloseTo(naive(apart, 0.95), 12)
        expect(match.most[n]).toBe(Math.max(...apart))
      })
    }
  })

  it('names its settings and frequencies', () => {
    expect(result.settings).toEqual(chain.spec.tolerance)
    expect(result.frequenciesHz).toEqual(frequenciesHz)
  })

  it('is as wide as sensitivities say where f0 of one section does everything', () => {
    // Far below a first-order corner the phase is −f/f0 and departs by f/f0·δ; δ, from R and C drawn evenly within ± p, is distributed as
    // a triangle of ± 2p: its 95 % point lies at 2p·(1 − √0.1).
    const single = analogChain({
      analog: [{ family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [1e5] }],
      tolerance: { channels: 20_000, spread: { of: 'parts', percent: 0.1 } },
    })
    const at = Float64Array.of(100)
    const run = toleranceResult(single, at, [toleranceShard(single, at, 0, 20_000)])
    const degreesPerDelta = (180 / Math.PI) * (100 / 1e5)
    const wanted = degreesPerDelta * 2 * 0.001 * (1 - Math.sqrt(0.1))
    expect(run.phaseDegrees.p95[0]! / wanted).toBeCloseTo(1, 1.4)
    expect(run.phaseDegrees.p5[0]! / -wanted).toBeCloseTo(1, 1.4)
    // A pair differs by four even variables of ± p: P(sum > x) = (4 − x/p)⁴/384 above 2p (Irwin–Hall distribution), 2.5 % at 2.2398·p.
    const apart = degreesPerDelta * 0.001 * (4 - (0.025 * 384) ** 0.25)
    expect(run.phaseMatchDegrees.p95[0]! / apart).toBeCloseTo(1, 1.4)
    expect(run.phaseMatchDegrees.most[0]! / (degreesPerDelta * 0.001)).toBeLessThan(4.01)
  })
})
