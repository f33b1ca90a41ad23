import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { equiripple, type FirBand } from '@/dsp'
import examples from '../../reference/textbook_examples.json' with { type: 'json' }

const RATE = 2
const lowPass = (taps: number, pass: number, stop: number, weight = 1) => ({
  response: 'lowpass' as const,
  taps,
  bands: [
    { fromHz: 0, toHz: pass, gain: 1, weight: 1 },
    { fromHz: stop, toHz: 1, gain: 0, weight },
  ],
})

/** |A| of symmetric or antisymmetric taps, by a plain sum. */
function amplitude(taps: Float64Array, hz: number, isOdd: boolean): number {
  const middle = (taps.length - 1) / 2
  return taps.reduce((sum, tap, n) => {
    const angle = ((2 * Math.PI * hz) / RATE) * (middle - n)
    return sum + tap * (isOdd ? Math.sin(angle) : Math.cos(angle))
  }, 0)
}

/** Largest weighted error in each band on a grid of the test's own. */
const worst = (taps: Float64Array, bands: readonly FirBand[], points: number): number[] =>
  bands.map(({ fromHz, toHz, gain, weight = 1 }) => {
    let most = 0
    for (let k = 0; k <= points; k++) {
      const at = amplitude(taps, fromHz + ((toHz - fromHz) * k) / points, false)
      most = Math.max(most, weight * Math.abs(at - gain))
    }
    return most
  })

function expectAlternation(found: ReturnType<typeof equiripple>, freedom: number): void {
  expect(found.extremalsHz).toHaveLength(freedom + 1)
  found.errors.forEach((error, k) => {
    expect(Math.abs(Math.abs(error) / found.ripple - 1)).toBeLessThan(1e-5)
    if (k > 0) {
      expect(Math.sign(error)).toBe(-Math.sign(found.errors[k - 1]!))
      expect(found.extremalsHz[k]!).toBeGreaterThan(found.extremalsHz[k - 1]!)
    }
  })
}

describe('equiripple filters', () => {
  it('have the errors of the worked example (Oppenheim & Schafer; numbering from memory, results recomputed)', () => {
    const { results } = examples.examples.find(({ id }) => id === 'os_parks_mcclellan_lowpass') as unknown as {
      results: { errors: Record<string, { passband: number; stopband: number }> }
    }
    for (const [order, { passband, stopband }] of Object.entries(results.errors)) {
      const spec = lowPass(Number(order) + 1, 0.4, 0.6, 10)
      const [pass = 0, stop = 0] = worst(equiripple(spec, RATE).taps, spec.bands, 2000)
      expect(Math.abs(pass / passband - 1), order).toBeLessThan(0.01)
      expect(Math.abs(stop / 10 / stopband - 1), order).toBeLessThan(0.01)
    }
  })

  // The alternation theorem: r free coefficients, r + 1 extremes of equal size and alternating sign, and nothing does better.
  it.each([
    ['odd', lowPass(41, 0.3, 0.4), 21],
    ['even', lowPass(40, 0.3, 0.4, 10), 20],
    ['far down', lowPass(119, 0.4, 0.6, 100), 60],
    ['long', lowPass(301, 0.2, 0.215), 151],
    ['longest', lowPass(1000, 0.2, 0.2045, 3), 500],
  ])('alternate as often as they must: %s', (_, spec, freedom) => {
    const found = equiripple(spec, RATE)
    expectAlternation(found, freedom)
    expect(Math.max(...worst(found.taps, spec.bands, 2000))).toBeLessThan(1.001 * found.ripple + 1e-13)
  })

  it('alternate as antisymmetric differentiators too, relative to the slope', () => {
    for (const [taps, freedom] of [
      [30, 15],
      [31, 15],
    ] as const) {
      const bands = [{ fromHz: 0, toHz: 0.8, gain: 3 }]
      const found = equiripple({ response: 'differentiator', taps, bands }, RATE)
      expectAlternation(found, freedom)
      for (let k = 1; k <= 500; k++) {
        const hz = (0.8 * k) / 500
        const relative = amplitude(found.taps, hz, true) / (3 * 2 * Math.PI * hz) - 1
        expect(Math.abs(relative)).toBeLessThan(1.001 * found.ripple)
      }
    }
  })

  it('take several bands', () => {
    const bands = [
      { fromHz: 0, toHz: 0.2, gain: 1 },
      { fromHz: 0.28, toHz: 0.5, gain: 0, weight: 5 },
      { fromHz: 0.6, toHz: 1, gain: 0.5 },
    ]
    const found = equiripple({ response: 'multiband', taps: 61, bands }, RATE)
    expectAlternation(found, 31)
    expect(Math.max(...worst(found.taps, bands, 2000))).toBeLessThan(1.001 * found.ripple)
  })

  it('alternate for whatever bands', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 8, max: 70 }),
        fc.double({ min: 0.1, max: 0.7, noNaN: true }),
        fc.double({ min: 0.05, max: 0.2, noNaN: true }),
        fc.double({ min: 0.1, max: 100, noNaN: true }),
        (taps, pass, room, weight) => {
          const spec = lowPass(taps, pass, pass + room, weight)
          const found = equiripple(spec, RATE)
          expectAlternation(found, Math.ceil(taps / 2))
          return Math.max(...worst(found.taps, spec.bands, 600)) < 1.002 * found.ripple + 1e-12
        },
      ),
      { numRuns: 40 },
    )
  })

  it('are refused where the ripple is lost in rounding, with fewer taps', () => {
    expect(() => equiripple(lowPass(601, 0.1, 0.8), RATE)).toThrow(
      expect.objectContaining({ code: 'not-converged', field: 'fir.taps' }),
    )
  })
})
