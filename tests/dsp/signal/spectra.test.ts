import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { convolve, seededNoise, spectralWindow, welch, windowNames, type WindowName } from '@/dsp'
import reference from '@/tests/reference/vibration_signals_spectra.json'

const noise = (count: number, seed: number, deviation = 1) => {
  const next = seededNoise(seed)
  return Float64Array.from({ length: count }, () => deviation * next())
}
const sine = (count: number, amplitude: number, hertz: number, rate: number, phase = 0) =>
  Float64Array.from({ length: count }, (_, n) => amplitude * Math.sin((2 * Math.PI * hertz * n) / rate + phase))
const integral = ({ frequenciesHz, density }: { frequenciesHz: Float64Array; density: Float64Array }) =>
  density.reduce((sum, value) => sum + value, 0) * frequenciesHz[1]!

const ours: Readonly<Record<string, WindowName>> = {
  boxcar: 'rectangular',
  hann: 'hann',
  hamming: 'hamming',
  blackman: 'blackman',
  flattop: 'flat-top',
}

describe('windows', () => {
  // Source: vibration_signals_spectra.json, window_scaling (recomputed from the formulas of Harris 1978 and ISO 18431-2).
  it.each(reference.window_scaling.filter(({ window }) => window in ours))('$window, N = $N', (row) => {
    const { coherentGain, noiseGain, noiseBandwidthBins } = spectralWindow(ours[row.window]!, row.N)
    expect(coherentGain).toBeCloseTo(row.value.coherent_gain, 9)
    expect(noiseGain).toBeCloseTo(row.value.noise_gain_mean_square, 9)
    expect(Math.abs(noiseBandwidthBins / row.value.enbw_bins - 1)).toBeLessThan(1e-9)
  })

  it('are symmetric about the half of their period', () => {
    for (const name of windowNames) {
      const { values } = spectralWindow(name, 64)
      for (let n = 1; n < 64; n++) expect(values[n]).toBeCloseTo(values[64 - n]!, 15)
    }
  })
})

describe('welch', () => {
  const check = (name: string) => {
    const row = reference.welch_checks.find((entry) => entry.check.startsWith(name))
    if (row === undefined) throw new Error(`no reference row ${name}`)
    return row.value
  }
  const options = { sampleRateHz: 1024, segmentLength: 1024, overlap: 0, window: 'hann' as const }

  // Source: vibration_signals_spectra.json, welch_checks: amplitude 3 at 100 Hz, fs 1024 Hz, N 1024.
  it('of a sine on a bin: peak density, power and mean square', () => {
    const spectrum = welch(sine(1024, 3, 100, 1024), options)
    expect(spectrum.density[100]).toBeCloseTo(check('same, PSD peak'), 9)
    expect(spectrum.density[100]! * spectrum.noiseBandwidthHz).toBeCloseTo(check('sine on a bin centre'), 9)
    expect(integral(spectrum)).toBeCloseTo(check('same, sum of PSD'), 9)
    expect(spectrum.frequenciesHz).toHaveLength(513)
    expect(spectrum.frequenciesHz[512]).toBe(512)
  })

  it('of a sine between two bins: the scallop loss', () => {
    const { density, noiseBandwidthHz } = welch(sine(1024, 3, 100.5, 1024), options)
    const larger = Math.max(density[100]!, density[101]!) * noiseBandwidthHz
    // The two images of the sine leak into the line by a few 1e-4 dB.
    expect(Math.abs(10 * Math.log10(larger / 4.5) - check('sine half-way'))).toBeLessThan(1e-3)
  })

  it('of white noise: level 2σ²/fs, within five standard errors', () => {
    const samples = noise(1_000_000, 11, 2)
    const spectrum = welch(samples, { sampleRateHz: 1000, segmentLength: 256, overlap: 0.5, window: 'hann' })
    const level = check('white noise, one-sided')
    const inner = spectrum.density.slice(2, -2)
    const mean = inner.reduce((sum, value) => sum + value, 0) / inner.length
    // Hann at half overlap keeps 18/19 of the averages' worth (Welch 1967); neighbouring lines share a bandwidth of 1.5.
    const effective = (spectrum.segments * inner.length) / 1.5 / (1 + 2 * 0.16667 ** 2)
    expect(Math.abs(mean / level - 1)).toBeLessThan(5 / Math.sqrt(effective))
    // One line: normalised random error 1/√K (Bendat & Piersol, Random Data, eq. 8.158).
    const spread = Math.sqrt(inner.reduce((sum, value) => sum + (value / level - 1) ** 2, 0) / inner.length)
    const expected = Math.sqrt((1 + 2 * 0.16667 ** 2) / spectrum.segments)
    expect(spread / expected).toBeGreaterThan(0.7)
    expect(spread / expected).toBeLessThan(1.3)
  })

  it('integrates to the mean square: exactly for one rectangular segment of anything', () => {
    fc.assert(
      fc.property(fc.integer({ min: 3, max: 11 }), fc.integer(), (power, seed) => {
        const samples = noise(2 ** power, seed).map((value) => value + 0.7)
        const spectrum = welch(samples, {
          sampleRateHz: 77,
          segmentLength: 2 ** power,
          overlap: 0,
          window: 'rectangular',
        })
        const meanSquare = samples.reduce((sum, value) => sum + value * value, 0) / samples.length
        expect(integral(spectrum) / meanSquare).toBeCloseTo(1, 12)
      }),
    )
  })

  it('integrates to the mean square of sines on bins under every window', () => {
    const samples = sine(8192, 2, 80, 1024).map((value, n) => value + Math.cos((2 * Math.PI * 300 * n) / 1024))
    for (const window of windowNames) {
      const spectrum = welch(samples, { sampleRateHz: 1024, segmentLength: 1024, overlap: 0.5, window })
      expect(integral(spectrum)).toBeCloseTo(2.5, 9)
      expect(spectrum.segments).toBe(15)
    }
  })

  it('takes an offset off when asked', () => {
    const samples = sine(4096, 1, 64, 1024).map((value) => value + 100)
    const plain = welch(samples, options)
    const level = welch(samples, { ...options, detrend: 'constant' })
    expect(integral(plain)).toBeGreaterThan(1e4)
    expect(integral(level)).toBeCloseTo(0.5, 6)
  })

  it.each([
    [{ segmentLength: 1000 }, 'segmentLength', 1024],
    [{ segmentLength: 4 }, 'segmentLength', 8],
    [{ segmentLength: 8192 }, 'segmentLength', 4096],
    [{ overlap: 1 }, 'overlap', 0.5],
    [{ overlap: Number.NaN }, 'overlap', 0.5],
  ])('refuses %o with the nearest that works', (change, field, nearest) => {
    expect(() => welch(new Float64Array(5000), { ...options, ...change })).toThrow(
      expect.objectContaining({ field, nearest }),
    )
  })

  it('names the sample that is no number', () => {
    const samples = noise(2000, 1)
    samples[1234] = Number.NaN
    expect(() => welch(samples, options)).toThrow(/index 1234 /)
    expect(() => welch(samples, { ...options, sampleRateHz: 0 })).toThrow(/above 0 Hz/)
  })
})

describe('convolve', () => {
  const byDefinition = (a: Float64Array, b: Float64Array) => {
    const out = new Float64Array(a.length + b.length - 1)
    a.forEach((x, i) => b.forEach((h, k) => (out[i + k]! += x * h)))
    return out
  }

  it('by overlap-save is the sum, for any two lengths', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 3000 }), fc.integer({ min: 1, max: 600 }), (n, m) => {
        const [a, b] = [noise(n, n), noise(m, m + 7)]
        const expected = byDefinition(a, b)
        const got = convolve(a, b)
        expect(got).toHaveLength(n + m - 1)
        const worst = expected.reduce((most, value, i) => Math.max(most, Math.abs(value - got[i]!)), 0)
        expect(worst).toBeLessThan(1e-11)
      }),
      { numRuns: 60 },
    )
  })

  it('refuses nothing and no numbers', () => {
    expect(() => convolve(new Float64Array(0), noise(3, 1))).toThrow(/no samples/)
    expect(() => convolve(noise(3, 1), new Float64Array(0))).toThrow(/no taps/)
    expect(() => convolve(noise(3, 1), Float64Array.of(1, Number.NaN))).toThrow(/index 1/)
  })
})
