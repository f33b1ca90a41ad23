import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { buildEnvelope, footbridgeDemo, readEnvelope, seededNoise, welch } from '@/dsp'

const noise = (count: number, seed: number) => {
  const next = seededNoise(seed)
  return Float64Array.from({ length: count }, next)
}

describe('seededNoise', () => {
  it('is the same for the same seed and another for another', () => {
    expect(noise(100, 7)).toEqual(noise(100, 7))
    expect(noise(100, 7)).not.toEqual(noise(100, 8))
    expect(noise(100, 2 ** 40)).not.toEqual(noise(100, 0))
  })

  it('is Gaussian: moments within five standard errors, and as many values beyond 2σ and 3σ as there should be', () => {
    const n = 400_000
    const values = noise(n, 2026)
    const moment = (power: number) => values.reduce((sum, value) => sum + value ** power, 0) / n
    // Variance of the k-th sample moment of a unit Gaussian: 1, 2, 15, 96 over n (Kendall & Stuart, vol. 1, ch. 10).
    expect(Math.abs(moment(1))).toBeLessThan(5 * Math.sqrt(1 / n))
    expect(Math.abs(moment(2) - 1)).toBeLessThan(5 * Math.sqrt(2 / n))
    expect(Math.abs(moment(3))).toBeLessThan(5 * Math.sqrt(15 / n))
    expect(Math.abs(moment(4) - 3)).toBeLessThan(5 * Math.sqrt(96 / n))
    const beyond = (limit: number) => values.filter((value) => Math.abs(value) > limit).length / n
    for (const [limit, part] of [
      [2, 0.0455003],
      [3, 0.0026998],
    ] as const) {
      expect(Math.abs(beyond(limit) - part)).toBeLessThan(5 * Math.sqrt(part / n))
    }
  })

  it('has no memory from one value to the next', () => {
    const values = noise(200_000, 5)
    for (const lag of [1, 2, 3, 7]) {
      let sum = 0
      for (let i = lag; i < values.length; i++) sum += values[i]! * values[i - lag]!
      expect(Math.abs(sum / values.length)).toBeLessThan(5 / Math.sqrt(values.length))
    }
  })
})

describe('envelope', () => {
  it('shows each column’s exact least and greatest sample, at any zoom', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 20_000 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.integer({ min: 1, max: 60 }),
        (count, a, b, columns) => {
          const samples = noise(count, count)
          const from = Math.min(a, b) * count
          const to = Math.max(Math.max(a, b) * count, from + 1e-6)
          if (to > count) return
          const { least, greatest } = readEnvelope(buildEnvelope(samples), samples, from, to, columns)
          for (let column = 0; column < columns; column++) {
            const width = (to - from) / columns
            const start = Math.min(Math.floor(from + column * width), count - 1)
            const end = Math.min(Math.max(Math.floor(from + (column + 1) * width), start + 1), count)
            const part = samples.slice(start, end)
            if (least[column] !== Math.min(...part) || greatest[column] !== Math.max(...part)) {
              throw new Error(`column ${column} of ${columns}, ${from} to ${to} of ${count}`)
            }
          }
        },
      ),
    )
  })

  it('keeps a spike of one sample among millions', () => {
    const samples = new Float64Array(3_000_000)
    samples[1_234_567] = 5
    const { greatest } = readEnvelope(buildEnvelope(samples), samples, 0, samples.length, 800)
    expect(greatest.filter((value) => value === 5)).toHaveLength(1)
    expect(greatest.indexOf(5)).toBe(Math.floor((1_234_567 / 3_000_000) * 800))
  })

  it('refuses a view outside the recording or of another one', () => {
    const samples = noise(1000, 1)
    const envelope = buildEnvelope(samples)
    expect(() => readEnvelope(envelope, samples, -1, 10, 5)).toThrow(/within the 1000 samples/)
    expect(() => readEnvelope(envelope, samples, 10, 10, 5)).toThrow(/within/)
    expect(() => readEnvelope(envelope, noise(999, 1), 0, 10, 5)).toThrow(/another recording/)
    expect(() => readEnvelope(envelope, samples, 0, 10, 0)).toThrow(/column/)
  })
})

describe('footbridgeDemo', () => {
  const { samples } = footbridgeDemo({ sampleRateHz: 256, durationSeconds: 512 })
  const spectrum = welch(samples, { sampleRateHz: 256, segmentLength: 8192, overlap: 0.5, window: 'hann' })
  const around = (hertz: number, half: number) => {
    const line = (f: number) => Math.round(f / spectrum.frequenciesHz[1]!)
    return Math.max(...spectrum.density.slice(line(hertz - half), line(hertz + half) + 1))
  }

  it('has the sway, the modes and the pickup that it says, and a floor of sensor noise between them', () => {
    // White noise of 4 mm/s² rms over 128 Hz; the onsets of footfalls add a little to it everywhere.
    const floor = 0.004 ** 2 / 128
    for (const hertz of [0.4, 1.9, 5.2, 13.7, 41, 50]) {
      expect(around(hertz, 0.1), `${hertz} Hz`).toBeGreaterThan(20 * floor)
    }
    const high = spectrum.density.slice(-2000, -10)
    const level = high.reduce((sum, value) => sum + value, 0) / high.length
    expect(level / floor).toBeGreaterThan(0.9)
    expect(level / floor).toBeLessThan(4)
  })

  it('is as long as asked, the same for the same seed, and finite', () => {
    expect(samples).toHaveLength(256 * 512)
    expect(samples.every(Number.isFinite)).toBe(true)
    const again = footbridgeDemo({ sampleRateHz: 100, durationSeconds: 3, seed: 4 }).samples
    expect(again).toEqual(footbridgeDemo({ sampleRateHz: 100, durationSeconds: 3, seed: 4 }).samples)
    expect(again).not.toEqual(footbridgeDemo({ sampleRateHz: 100, durationSeconds: 3, seed: 5 }).samples)
  })

  it('leaves out what the rate can’t carry', () => {
    const slow = footbridgeDemo({ sampleRateHz: 20, durationSeconds: 400 }).samples
    const low = welch(slow, { sampleRateHz: 20, segmentLength: 1024, overlap: 0.5, window: 'hann' })
    // 50 Hz would fold to 10 Hz, 41 Hz to 1 Hz, 13.7 Hz to 6.3 Hz.
    const line = Math.round(6.3 / low.frequenciesHz[1]!)
    expect(low.density[line]!).toBeLessThan((20 * 0.004 ** 2) / 10)
  })

  it('refuses what has no length', () => {
    expect(() => footbridgeDemo({ sampleRateHz: 0, durationSeconds: 1 })).toThrow(/above 0 Hz/)
    expect(() => footbridgeDemo({ sampleRateHz: 100, durationSeconds: -1 })).toThrow(/longer than 0 s/)
    expect(() => footbridgeDemo({ sampleRateHz: 1e6, durationSeconds: 100 })).toThrow(/50 million/)
  })
})
