import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as mathjs from 'mathjs'
import {
  bandsWeightedFor,
  DesignError,
  designFir,
  firBandMagnitudes,
  firMeets,
  firWindow,
  firZeros,
  frequencyResponse,
  groupDelay,
  leastTaps,
  MOST_TAPS_FOR_ZEROS,
  type FirFilter,
  type FirSpec,
} from '@/dsp'
import { fftOf } from '@/dsp/numeric/fft'
import adc from '../../reference/adc_antialias_decimation.json' with { type: 'json' }
import examples from '../../reference/textbook_examples.json' with { type: 'json' }
import figures from '../../reference/fir_windows.json' with { type: 'json' }
import { everyKind, lowPass, RATE } from './specs'

/** A(ω) by a plain sum; half the rate is 1 Hz. */
const amplitude = (taps: Float64Array, hz: number): number =>
  taps.reduce((sum, tap, n) => sum + tap * Math.cos(Math.PI * hz * (n - (taps.length - 1) / 2)), 0)

const worst = (taps: Float64Array, from: number, to: number, gain: number, points = 4000): number =>
  Math.max(
    ...Array.from({ length: points + 1 }, (_, k) =>
      Math.abs(amplitude(taps, from + ((to - from) * k) / points) - gain),
    ),
  )

describe('the window method', () => {
  it('has the errors of the worked example (Oppenheim & Schafer; numbering from memory, results recomputed)', () => {
    const { results } = examples.examples.find(({ id }) => id === 'os_kaiser_lowpass') as unknown as {
      results: Record<string, number>
    }
    const { taps } = designFir(
      lowPass('windowed', results.length!, 0.4, 0.6, { window: 'kaiser', attenuationDb: results.A_db! }),
      RATE,
    )
    expect(amplitude(taps, 0)).toBeCloseTo(1, 12)
    // The example's filter is not made exact at 0 Hz: the ideal response times the window, no more.
    const window = firWindow('kaiser', results.length!, results.A_db!)
    const bare = window.map((value, n) => (value * Math.sin(0.5 * Math.PI * (n - 18.5))) / (Math.PI * (n - 18.5)))
    expect(Math.abs(worst(bare, 0, 0.4, 1) - results.max_passband_error_recomputed!)).toBeLessThan(1e-6)
    expect(Math.abs(worst(bare, 0.6, 1, 0) - results.max_stopband_error_recomputed!)).toBeLessThan(1e-6)
    const scale = bare.reduce((sum, tap) => sum + tap, 0)
    bare.forEach((tap, n) => expect(Math.abs(tap / scale - taps[n]!)).toBeLessThan(1e-15))
  })

  it('leaves the largest lobe behind the cut that its table says', () => {
    for (const { window, value, computed_peak_error_db: computed } of figures.window_method_table) {
      if (computed === null || (window !== 'hann' && window !== 'hamming' && window !== 'blackman')) continue
      // The lobe next to the cut hardly depends on the length; the table's is for M = 2000.
      const { taps } = designFir(lowPass('windowed', 1001, 0.45, 0.55, { window }), RATE)
      const behind = Array.from({ length: 4001 }, (_, k) => amplitude(taps, 0.5 + (0.02 * k) / 4000))
      const from = behind.findIndex((at) => at < 0)
      expect(from).toBeGreaterThan(0)
      const level = 20 * Math.log10(Math.max(...behind.slice(from).map(Math.abs)))
      expect(Math.abs(level - computed), window).toBeLessThan(0.05)
      expect(Math.abs(level - value.peak_approximation_error_db), window).toBeLessThan(1.5)
    }
  })

  it('is exactly 1 where a plain response is anchored', () => {
    const anchors = { lowpass: 0, bandstop: 0, highpass: 1, bandpass: 0.4 } as const
    for (const spec of everyKind) {
      if (spec.kind !== 'windowed' || !(spec.response in anchors)) continue
      const { taps } = designFir(spec, RATE)
      expect(amplitude(taps, anchors[spec.response as keyof typeof anchors])).toBeCloseTo(1, 12)
    }
  })
})

describe('what each kind promises', () => {
  it('linear phase: symmetric to the last bit', () => {
    for (const spec of everyKind) {
      const { taps, symmetry } = designFir(spec, RATE)
      const last = taps.length - 1
      const sign = symmetry === 'odd' ? -1 : 1
      if (symmetry !== 'none') taps.forEach((tap, n) => expect(tap === sign * taps[last - n]!).toBe(true))
      expect(symmetry === 'none').toBe(spec.kind === 'minimum-phase')
    }
  })

  it('half-band: exact zeros, exactly ½ in the middle, and A(ω) + A(π − ω) = 1', () => {
    const property = (name: string) => adc.halfband_properties.find((each) => each.property === name)!.value
    for (const spec of everyKind.filter(({ kind }) => kind === 'half-band')) {
      const { taps } = designFir(spec, RATE)
      const middle = (taps.length - 1) / 2
      taps.forEach((tap, n) => {
        if (n === middle) expect(tap).toBe(property('h[0]'))
        else if ((n - middle) % 2 === 0) expect(tap).toBe(property('h[2k], k not 0'))
        else expect(tap).not.toBe(0)
      })
      for (let k = 0; k <= 50; k++) {
        const sum = amplitude(taps, k / 50) + amplitude(taps, 1 - k / 50)
        expect(Math.abs(sum - property('A(w) + A(pi - w)'))).toBeLessThan(1e-14)
      }
    }
  })

  it('least squares: the dense normal equations, integrated by Simpson’s rule and solved by mathjs', () => {
    for (const [taps, terms, offset] of [
      [15, 8, 0],
      [14, 7, 0.5],
    ] as const) {
      const spec = lowPass('least-squares', taps, 0.3, 0.5)
      const bands = spec.bands.map((band, k) => ({ ...band, weight: k === 0 ? 1 : 7 }))
      const basis = (k: number, hz: number) => Math.cos(Math.PI * hz * (k + offset))
      const integral = (at: (hz: number, gain: number) => number) =>
        bands.reduce((sum, { fromHz, toHz, gain, weight }) => {
          const [points, width] = [2000, (toHz - fromHz) / 2000]
          let total = 0
          for (let k = 0; k <= points; k++) {
            total += (k === 0 || k === points ? 1 : k % 2 === 1 ? 4 : 2) * at(fromHz + width * k, gain)
          }
          return sum + (weight * total * width) / 3
        }, 0)
      const rows = Array.from({ length: terms }, (_, j) => j)
      const normal = rows.map((j) => rows.map((k) => integral((hz) => basis(j, hz) * basis(k, hz))))
      const right = rows.map((j) => integral((hz, gain) => gain * basis(j, hz)))
      const solved = (mathjs.lusolve(normal, right) as number[][]).map(([value]) => value!)
      const found = designFir({ ...spec, bands }, RATE).taps
      rows.forEach((k) => {
        const tap = found[(taps - 1) / 2 - k - offset]!
        expect(Math.abs(tap - (k + offset === 0 ? solved[k]! : solved[k]! / 2))).toBeLessThan(1e-9)
      })
    }
  })

  it('minimum phase: exactly N taps, zeros inside the circle, the magnitude even about 1, less delay than any other', () => {
    for (const taps of [20, 31]) {
      const spec = lowPass('minimum-phase', taps, 0.3, 0.45)
      const filter = designFir(spec, RATE)
      expect(filter.taps).toHaveLength(taps)
      const zeros = firZeros(filter)!
      expect(zeros).toHaveLength(taps - 1)
      for (const { re, im } of zeros) expect(Math.hypot(re, im)).toBeLessThan(1 + 1e-9)
      const [pass, stop] = firBandMagnitudes(filter, spec.bands)
      expect(pass!.most - 1).toBeCloseTo(1 - pass!.least, 5)
      // Equal weights: errors of |H| alike in both bands, to the few per cent at which the weights are left.
      expect(Math.abs(stop!.most / (pass!.most - 1) - 1)).toBeLessThan(0.1)
      expect(groupDelay(filter, [0])[0]!).toBeLessThan((0.6 * (taps - 1)) / 2 / RATE)
    }
  })

  it('finds the top of a ripple that leans against the slope of the room', () => {
    // Cut so that the first side lobe begins at the band's very edge: one parabola through the points beside it was 0.47 dB short.
    const bands = [
      { fromHz: 0, toHz: 0.2, gain: 1 },
      { fromHz: 0.378663, toHz: 1, gain: 0 },
    ]
    const kaiser = { kind: 'windowed', window: 'kaiser', response: 'lowpass', taps: 41, attenuationDb: 71.75 } as const
    const filter = designFir({ ...kaiser, bands }, RATE)
    const [stop] = firBandMagnitudes(filter, [{ fromHz: 0.4, toHz: 1 }])
    const dense = worst(filter.taps, 0.4, 1, 0, 20_000)
    expect(Math.abs(20 * Math.log10(stop!.most / dense))).toBeLessThan(0.005)
  })

  it('says what the bands come to, as data', () => {
    const { diagnostics } = designFir(lowPass('equiripple', 41, 0.3, 0.4), RATE)
    const value = (field: string) => diagnostics.find((each) => each.field === field)!.value!
    const { taps } = designFir(lowPass('equiripple', 41, 0.3, 0.4), RATE)
    expect(value('fir.bands.1')).toBeCloseTo(-20 * Math.log10(worst(taps, 0.4, 1, 0)), 3)
    expect(value('fir.bands.0')).toBeCloseTo(-20 * Math.log10(1 - worst(taps, 0, 0.3, 1)), 3)
  })

  it('never gives NaN, whatever is asked', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('windowed', 'equiripple', 'least-squares', 'minimum-phase'),
        fc.integer({ min: 3, max: 60 }),
        fc.double({ min: 0.02, max: 0.9, noNaN: true }),
        fc.double({ min: 0.001, max: 0.5, noNaN: true }),
        (kind, taps, pass, room) => {
          const more: Partial<FirSpec> = kind === 'windowed' ? { window: 'kaiser', attenuationDb: 60 } : {}
          try {
            const { taps: found } = designFir(lowPass(kind, taps, pass, pass + room, more), RATE)
            return found.every(Number.isFinite) && found.length === taps
          } catch (error) {
            return error instanceof DesignError && error.field.startsWith('fir.')
          }
        },
      ),
      { numRuns: 50 },
    )
  })
})

describe('the zeros', () => {
  it('multiply out to the taps', () => {
    const filter = designFir(lowPass('equiripple', 28, 0.3, 0.45), RATE)
    let product = [{ re: filter.taps[0]!, im: 0 }]
    for (const { re, im } of firZeros(filter)!) {
      product = Array.from({ length: product.length + 1 }, (_, k) => {
        const [here, before] = [product[k] ?? { re: 0, im: 0 }, product[k - 1] ?? { re: 0, im: 0 }]
        return { re: here.re - before.re * re + before.im * im, im: here.im - before.re * im - before.im * re }
      })
    }
    product.forEach(({ re }, k) => expect(Math.abs(re - filter.taps[k]!)).toBeLessThan(1e-10))
  })

  it('come in exact pairs, and not at all above the limit', () => {
    const of = (taps: ArrayLike<number>) => firZeros({ taps: Float64Array.from(taps) })
    for (const { re, im } of of([1, 0.3, 0.8, -0.2, 0.5])!) {
      if (im !== 0)
        expect(of([1, 0.3, 0.8, -0.2, 0.5])!.some((other) => other.re === re && other.im === -im)).toBe(true)
    }
    expect(
      of([0, 1, -3, 2, 0])!
        .map(({ re }) => re)
        .sort((a, b) => a - b),
    ).toEqual([0, expect.closeTo(1, 12), expect.closeTo(2, 12)])
    expect(of(new Float64Array(MOST_TAPS_FOR_ZEROS + 1).fill(1))).toBeNull()
    expect(of(new Float64Array(MOST_TAPS_FOR_ZEROS).fill(1))).toHaveLength(MOST_TAPS_FOR_ZEROS - 1)
  })
})

describe('the least number of taps', () => {
  const draft = (kind: FirSpec['kind'], more: Partial<FirSpec> = {}): Omit<FirSpec, 'taps'> => {
    const { taps, ...rest } = lowPass(kind, 3, 0.4, 0.6, more)
    expect(taps).toBe(3)
    return rest
  }

  it('of the worked example is order 27; 26 does not meet it', () => {
    const wish = { passWithinDb: -20 * Math.log10(1 - 0.01), stopAttenuationDb: 60 }
    const fir = draft('equiripple')
    expect(leastTaps({ ...fir, bands: bandsWeightedFor(fir.bands, wish) }, RATE, wish)).toBe(28)
  })

  it.each([
    ['equiripple', 1, {}],
    ['least-squares', 1, {}],
    ['half-band', 4, {}],
    ['minimum-phase', 1, {}],
    ['windowed', 1, { window: 'kaiser', attenuationDb: 42 }],
    ['windowed', 1, { window: 'hamming' }],
  ] as const)('of %s: meets, and fewer do not', (kind, step, more) => {
    const wish = { passWithinDb: 0.2, stopAttenuationDb: 40 }
    const fir = draft(kind, more)
    const taps = leastTaps(fir, RATE, wish)
    const meets = (count: number) => firMeets(fir, designFir({ ...fir, taps: count }, RATE), wish)
    expect(meets(taps)).toBe(true)
    expect(meets(taps - step)).toBe(false)
    expect(kind === 'half-band' || meets(taps - 2 * step)).toBe(kind === 'half-band')
  })

  it('is refused with a reason when nothing will do', () => {
    const { taps, ...rest } = lowPass('windowed', 3, 0.4, 0.402, { window: 'hann' })
    expect(taps).toBe(3)
    expect(() => leastTaps(rest, RATE, { passWithinDb: 0.01, stopAttenuationDb: 120 })).toThrow(/1024 taps/)
    expect(() => leastTaps(rest, RATE, { passWithinDb: 0, stopAttenuationDb: 60 })).toThrow(DesignError)
  })
})

describe('the response', () => {
  it('agrees with the transform of the taps (fft.js)', () => {
    for (const spec of everyKind) {
      const filter: FirFilter = designFir(spec, RATE)
      const padded = new Float64Array(256)
      padded.set(filter.taps)
      const spectrum = new Float64Array(512)
      fftOf(256).realForward(padded, spectrum, true)
      const { re, im } = frequencyResponse(
        filter,
        Float64Array.from({ length: 129 }, (_, k) => (k * RATE) / 256),
      )
      const size = filter.taps.reduce((sum, tap) => sum + Math.abs(tap), 0)
      for (let k = 0; k <= 128; k++) {
        expect(Math.hypot(re[k]! - spectrum[2 * k]!, im[k]! - spectrum[2 * k + 1]!)).toBeLessThan(1e-14 * size)
      }
    }
  })
})
