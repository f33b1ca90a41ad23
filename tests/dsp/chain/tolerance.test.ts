import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  analogSections,
  DesignError,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  type AnalogSection,
  type AnalogSpec,
  type Complex,
  type ComputedChain,
  type ToleranceShard,
} from '@/dsp'
import { drawChannel } from '@/dsp/chain/tolerance-draw'
import { analogChain } from '../../helpers/analog-chain'
import published from '../../reference/adc_antialias_decimation.json'

const butterworth = (order: number, more: Partial<AnalogSpec> = {}): AnalogSpec => ({
  family: 'butterworth',
  response: 'lowpass',
  order,
  edgesHz: [1000],
  ...more,
})

/** Phase in degrees of 1/(1 − x² + jx/Q), within (−180°, 0). */
const lowPassDegrees = (x: number, q: number) => (-180 / Math.PI) * Math.atan2(x / q, 1 - x * x)

/**
 * H of a section whose f0 and Q are moved, from its definition: numerators s², s·ω₀/Q, ω₀² for the plain ones; any other has its zeros moved
 * with f0 and keeps its level far above and below.
 */
function movedAt(section: AnalogSection, hz: number, f0Ratio: number, qRatio: number): Complex {
  const x = hz / (section.f0Hz * f0Ratio)
  const q = section.q === null ? null : section.q * qRatio
  const [a, b] = q === null ? [1, x] : [1 - x * x, x / q]
  let [re, im] = [1, 0]
  if (section.response === 'high-pass') [re, im] = q === null ? [0, x] : [-x * x, 0]
  else if (section.response === 'band-pass') [re, im] = [0, x / q!]
  else {
    for (const zero of section.zeros) {
      const omega0 = 2 * Math.PI * section.f0Hz
      const [c, d] = [-zero.re / omega0, x - zero.im / omega0]
      ;[re, im] = [re * c - im * d, re * d + im * c]
    }
  }
  const power = a * a + b * b
  return { re: (re * a + im * b) / power, im: (im * a - re * b) / power }
}

/** Departure of one channel by that definition: decibels, and degrees but for whole turns. */
function departureOf(chain: ComputedChain, channel: number, hz: number): { db: number; degrees: number } {
  const sections = analogSections(chain)
  const drawn = new Float64Array(2 * sections.length)
  drawChannel(chain.spec.tolerance, sections, channel, drawn)
  let [db, degrees] = [0, 0]
  sections.forEach((section, k) => {
    const moved = movedAt(section, hz, drawn[2 * k]!, drawn[2 * k + 1]!)
    const nominal = movedAt(section, hz, 1, 1)
    db += 20 * Math.log10(Math.hypot(moved.re, moved.im) / Math.hypot(nominal.re, nominal.im))
    degrees += (180 / Math.PI) * (Math.atan2(moved.im, moved.re) - Math.atan2(nominal.im, nominal.re))
  })
  return { db, degrees }
}

const turnsApart = (a: number, b: number) => Math.abs(a - b - 360 * Math.round((a - b) / 360))

function expectDepartures(chain: ComputedChain, frequenciesHz: Float64Array, channels: number): void {
  const shard = toleranceShard(chain, frequenciesHz, 0, channels)
  for (let channel = 0; channel < channels; channel += 1) {
    frequenciesHz.forEach((hz, n) => {
      const { db, degrees } = departureOf(chain, channel, hz)
      const at = channel * frequenciesHz.length + n
      expect(Math.abs(shard.magnitudeDb[at]! - db)).toBeLessThan(1e-9 * (1 + Math.abs(db)))
      expect(turnsApart(shard.phaseDegrees[at]!, degrees)).toBeLessThan(1e-8)
    })
  }
}

describe('frequencies of a run', () => {
  it('are spaced evenly in their logarithm, both ends exact', () => {
    const chain = analogChain({ kept: { fromHz: 2, toHz: 2000 } })
    const grid = toleranceFrequencies(chain)
    expect(grid).toHaveLength(512)
    expect([grid[0], grid[511]]).toEqual([2, 2000])
    for (let n = 1; n < 512; n += 1) expect(grid[n]! / grid[n - 1]!).toBeCloseTo(1000 ** (1 / 511), 12)
  })

  it('begin at a thousandth of the end when the band begins at 0 Hz', () => {
    expect(toleranceFrequencies(analogChain({}), 2)).toEqual(Float64Array.of(2, 2000))
    expect(() => toleranceFrequencies(analogChain({}), 1)).toThrow(DesignError)
  })
})

describe('departures of a channel', () => {
  // Second-order Butterworth low-pass, phase against that of f0/(1 − mismatch)
  // (tests/reference/adc_antialias_decimation.json, phase_mismatch): the formula that the shards are held against below.
  it.each(published.phase_mismatch)('published phase mismatch at $f_over_f0 f0, $f0_mismatch', (row) => {
    const moved = lowPassDegrees(row.f_over_f0, Math.SQRT1_2)
    const other = lowPassDegrees(row.f_over_f0 * (1 - row.f0_mismatch), Math.SQRT1_2)
    expect(moved - other).toBeCloseTo(row.value, 6)
  })

  it('of one second-order section are the difference of two closed forms', () => {
    const chain = analogChain({
      analog: [butterworth(2)],
      tolerance: { spread: { of: 'sections', f0Percent: 5, qPercent: 1e-9 } },
    })
    const frequenciesHz = Float64Array.of(100, 500, 1000)
    const shard = toleranceShard(chain, frequenciesHz, 0, 100)
    const drawn = new Float64Array(2)
    for (let channel = 0; channel < 100; channel += 1) {
      drawChannel(chain.spec.tolerance, analogSections(chain), channel, drawn)
      frequenciesHz.forEach((hz, n) => {
        const moved = lowPassDegrees(hz / 1000 / drawn[0]!, Math.SQRT1_2)
        const wanted = moved - lowPassDegrees(hz / 1000, Math.SQRT1_2)
        expect(shard.phaseDegrees[3 * channel + n]).toBeCloseTo(wanted, 8)
        // The published rows for 5 % bound what ± 5 % can do.
        const bound = published.phase_mismatch.find((row) => row.f_over_f0 === hz / 1000 && row.f0_mismatch === 0.05)
        expect(Math.abs(wanted)).toBeLessThan(1.11 * Math.abs(bound!.value))
      })
    }
  })

  it('are those of the definition for every kind of section', () => {
    const frequenciesHz = Float64Array.of(0.7, 31, 470, 999, 1300, 2600, 20_000)
    const zeros = { rippleDb: 0.5, attenuationDb: 50 }
    const bands = { edgesHz: [700, 1400] }
    for (const analog of [
      butterworth(5),
      butterworth(3, { response: 'highpass' }),
      butterworth(2, { response: 'bandpass', edgesHz: [900, 1100] }),
      butterworth(1, { response: 'bandstop', ...bands }),
      butterworth(3, { response: 'bandstop', ...bands }),
      butterworth(5, { family: 'elliptic', ...zeros }),
      butterworth(4, { family: 'chebyshev2', attenuationDb: 60, response: 'highpass' }),
    ]) {
      for (const spread of [
        { of: 'parts', percent: 5 },
        { of: 'sections', f0Percent: 2, qPercent: 10 },
      ] as const) {
        expectDepartures(
          analogChain({ analog: [analog], highPass: { cornerHz: 0.5, order: 3 }, tolerance: { spread } }),
          frequenciesHz,
          12,
        )
      }
    }
  })

  it('have no jump of 360°, however many sections turn', () => {
    // Order 24 with f0 all over the place: the sum of sections leaves ±180°, and each section by itself is within.
    const chain = analogChain({
      analog: [butterworth(24), butterworth(24)],
      kept: { fromHz: 100, toHz: 8000 },
      tolerance: { spread: { of: 'sections', f0Percent: 50, qPercent: 50 } },
    })
    const frequenciesHz = toleranceFrequencies(chain, 400)
    const { phaseDegrees } = toleranceShard(chain, frequenciesHz, 0, 100)
    const sections = analogSections(chain)
    const drawn = new Float64Array(2 * sections.length)
    let [widest, farthestOff] = [0, 0]
    for (let channel = 0; channel < 100; channel += 1) {
      drawChannel(chain.spec.tolerance, sections, channel, drawn)
      frequenciesHz.forEach((hz, n) => {
        const wanted = sections.reduce((sum, { f0Hz, q }, k) => {
          const moved = lowPassDegrees(hz / (f0Hz * drawn[2 * k]!), q! * drawn[2 * k + 1]!)
          return sum + moved - lowPassDegrees(hz / f0Hz, q!)
        }, 0)
        widest = Math.max(widest, Math.abs(wanted))
        farthestOff = Math.max(farthestOff, Math.abs(phaseDegrees[400 * channel + n]! - wanted))
      })
    }
    expect(widest).toBeGreaterThan(360)
    expect(farthestOff).toBeLessThan(1e-7)
  })

  it('stay finite where a zero of the nominal or the drawn response lies on the very frequency', () => {
    const chain = analogChain({
      analog: [butterworth(1, { response: 'bandstop', edgesHz: [500, 2000] })],
      tolerance: { spread: { of: 'parts', percent: 5 } },
    })
    const frequenciesHz = Float64Array.of(0, 999, 1000, 1001)
    const shards = [toleranceShard(chain, frequenciesHz, 0, 100)]
    const { magnitudeDb, phaseDegrees } = shards[0]!
    for (const value of [...magnitudeDb, ...phaseDegrees]) expect(Number.isFinite(value)).toBe(true)
    const result = toleranceResult(chain, frequenciesHz, shards)
    expect(result.gainMatchDb.most.every(Number.isFinite)).toBe(true)
    expect(result.magnitudeDb.p95[0]).toBeCloseTo(0, 12)
  })

  it('come to nothing as the spread does, and are nothing without analog sections', () => {
    const small = { spread: { of: 'parts', percent: 1e-9 } } as const
    const chain = analogChain({ analog: [butterworth(8)], highPass: { cornerHz: 1, order: 2 }, tolerance: small })
    const shard = toleranceShard(chain, toleranceFrequencies(chain, 64), 0, 100)
    for (const value of shard.magnitudeDb) expect(Math.abs(value)).toBeLessThan(1e-8)
    for (const value of shard.phaseDegrees) expect(Math.abs(value)).toBeLessThan(1e-7)
    const none = toleranceShard(analogChain({}), Float64Array.of(1, 10), 0, 100)
    expect(none.magnitudeDb).toEqual(new Float64Array(200))
    expect(none.phaseDegrees).toEqual(new Float64Array(200))
  })
})

describe('shards', () => {
  const chain = analogChain({
    analog: [butterworth(4), butterworth(3, { family: 'elliptic', rippleDb: 0.1, attenuationDb: 60 })],
    highPass: { cornerHz: 1, order: 1 },
  })
  const frequenciesHz = toleranceFrequencies(chain, 24)
  const whole = toleranceShard(chain, frequenciesHz, 0, 100)

  const splitAt = (cuts: readonly number[]): ToleranceShard[] => {
    const ends = [0, ...[...cuts].sort((a, b) => a - b), 100]
    return ends.slice(1).map((to, k) => toleranceShard(chain, frequenciesHz, ends[k]!, to))
  }

  it('have the same bits however a run is split, in whatever order they come back', () => {
    const result = toleranceResult(chain, frequenciesHz, [whole])
    fc.assert(
      fc.property(
        fc.uniqueArray(fc.integer({ min: 1, max: 99 }), { maxLength: 6 }),
        fc.boolean(),
        (cuts, isReversed) => {
          const shards = splitAt(cuts)
          const joined = (read: (shard: ToleranceShard) => Float64Array) =>
            Float64Array.from(shards.flatMap((shard) => [...read(shard)]))
          expect(joined((shard) => shard.magnitudeDb)).toEqual(whole.magnitudeDb)
          expect(joined((shard) => shard.phaseDegrees)).toEqual(whole.phaseDegrees)
          if (isReversed) shards.reverse()
          expect(toleranceResult(chain, frequenciesHz, shards)).toEqual(result)
        },
      ),
      { numRuns: 20 },
    )
  })

  it('are the same again for the same seed, and others for another', () => {
    expect(toleranceShard(chain, frequenciesHz, 0, 100)).toEqual(whole)
    const other = { ...chain, spec: { ...chain.spec, tolerance: { ...chain.spec.tolerance, seed: 2 } } }
    const { magnitudeDb } = toleranceShard(other, frequenciesHz, 0, 100)
    expect(magnitudeDb.filter((value, n) => value === whole.magnitudeDb[n]).length).toBeLessThan(5)
  })

  it('must be part of the run, and make it up together', () => {
    for (const [from, to] of [
      [-1, 5],
      [5, 4],
      [0, 101],
      [0, 1.5],
    ] as const) {
      expect(() => toleranceShard(chain, frequenciesHz, from, to)).toThrow(/are not a part of the run’s 100/u)
    }
    const [first, second, third] = splitAt([30, 60])
    for (const shards of [
      [first!, third!],
      [second!, third!],
      [first!, second!],
      [first!, second!, second!, third!],
      [],
    ]) {
      expect(() => toleranceResult(chain, frequenciesHz, shards)).toThrow(/all 100 are needed/u)
    }
    expect(() => toleranceResult(chain, frequenciesHz.subarray(1), [whole])).toThrow(DesignError)
  })
})
