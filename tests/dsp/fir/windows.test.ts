import { describe, expect, it } from 'vitest'
import { DesignError, firWindow, kaiserBeta, kaiserOrder } from '@/dsp'
import { fftOf } from '@/dsp/numeric/fft'
import figures from '../../reference/fir_windows.json' with { type: 'json' }

/** Level in dB of the highest side lobe: the first local minimum ends the main lobe. */
function highestSideLobe(window: Float64Array): number {
  const size = 2 ** 18
  const padded = new Float64Array(size)
  padded.set(window)
  const spectrum = new Float64Array(2 * size)
  fftOf(size).realForward(padded, spectrum)
  const level = Float64Array.from({ length: size / 2 }, (_, k) => Math.hypot(spectrum[2 * k]!, spectrum[2 * k + 1]!))
  let k = 1
  while (level[k]! < level[k - 1]!) k += 1
  return 20 * Math.log10(level.subarray(k).reduce((most, value) => Math.max(most, value), 0) / level[0]!)
}

describe('Kaiser’s formulas (J. F. Kaiser 1974)', () => {
  it.each(figures.kaiser_beta)('β for $A_db dB', ({ A_db: attenuation, value }) => {
    expect(Math.abs(kaiserBeta(attenuation) - value.beta)).toBeLessThan(1e-9)
  })

  it.each(figures.kaiser_order)('order for $A_db dB over $delta_omega_over_pi π', (row) => {
    // At a rate of 2 Hz, Δω/π is the room in Hz.
    const order = kaiserOrder(row.A_db, row.delta_omega_over_pi, 2)
    expect(Math.abs(order / row.value.order_exact_kaiser_1974 - 1)).toBeLessThan(1e-7)
  })

  it('uses D = 0.9222 below 21 dB', () => {
    expect(kaiserOrder(15, 0.1, 1)).toBeCloseTo(9.222, 12)
  })
})

describe('window figures (Harris 1978, recomputed)', () => {
  const names = { hann: 'hann', hamming: 'hamming_0.54', blackman: 'blackman_0.42' } as const
  it.each(Object.keys(names) as (keyof typeof names)[])('%s', (name) => {
    const wanted = figures.window_figures.find(({ window }) => window === names[name])!.value
    // A symmetric window of N + 1 values without its last is the periodic one of N, whose figures these are.
    const periodic = firWindow(name, 4097).subarray(0, 4096)
    const sum = periodic.reduce((total, value) => total + value, 0)
    const power = periodic.reduce((total, value) => total + value * value, 0)
    expect(Math.abs(sum / 4096 - wanted.coherent_gain)).toBeLessThan(1e-6)
    expect(Math.abs((4096 * power) / sum ** 2 - wanted.enbw_bins)).toBeLessThan(1e-6)
    expect(Math.abs(highestSideLobe(periodic) - wanted.highest_sidelobe_db)).toBeLessThan(0.1)
  })

  it.each(figures.window_figures.filter(({ window }) => window.startsWith('kaiser')))(
    '$window',
    ({ window, value }) => {
      const beta = Math.PI * Number(window.replace('kaiser_alpha_', ''))
      // A window is asked for by its attenuation, so the formula above 50 dB is turned round.
      const values = firWindow('kaiser', 4097, beta / 0.1102 + 8.7).subarray(0, 4096)
      const sum = values.reduce((total, each) => total + each, 0)
      const power = values.reduce((total, each) => total + each * each, 0)
      expect(Math.abs((4096 * power) / sum ** 2 - value.enbw_bins)).toBeLessThan(5e-4)
      expect(Math.abs(highestSideLobe(values) - value.highest_sidelobe_db)).toBeLessThan(0.1)
    },
  )

  it.each([50, 60, 80, 100])('Dolph–Chebyshev: all side lobes %i dB down', (attenuationDb) => {
    for (const taps of [64, 65])
      expect(highestSideLobe(firWindow('dolph-chebyshev', taps, attenuationDb))).toBeCloseTo(-attenuationDb, 2)
  })

  it('are symmetric to the last bit, 1 at their largest, nowhere below 0', () => {
    for (const name of ['kaiser', 'hann', 'hamming', 'blackman', 'dolph-chebyshev'] as const) {
      for (const taps of [3, 4, 31, 64]) {
        const window = firWindow(name, taps, 70)
        expect(window).toEqual(window.toReversed())
        expect(Math.max(...window)).toBeLessThanOrEqual(1)
        expect(Math.min(...window)).toBeGreaterThanOrEqual(0)
        if (taps % 2 === 1) expect(window[(taps - 1) / 2]).toBeCloseTo(1, 12)
      }
    }
  })

  it('are refused without what they need', () => {
    expect(() => firWindow('kaiser', 31)).toThrow(DesignError)
    expect(() => firWindow('dolph-chebyshev', 31, 400)).toThrow(/250 dB/)
    expect(() => firWindow('hann', 2)).toThrow(/at least 3/)
    expect(() => kaiserOrder(60, 0, 1)).toThrow(/above 0 Hz/)
  })
})
