import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, type AnalogSpec, type DigitalFilter, type Method } from '@/dsp'
import { analogAt, cascadeAt, decibels, digitalAt, relative, size, spaced } from '../helpers/dsp'

const HALF_POWER_DB = -10 * Math.log10(2)
const RATE = 1000

/** A corner from a thousandth of the rate to 0.45 of it, spread evenly in its logarithm. */
const corner = fc.double({ min: Math.log(1), max: Math.log(450), noNaN: true }).map(Math.exp)
const order = fc.integer({ min: 1, max: 12 })

const band = fc
  .tuple(corner, fc.double({ min: 1.05, max: 20, noNaN: true }))
  .map(([low, ratio]) => (low * ratio < 470 ? [low, low * ratio] : [low / ratio, low]))

const shape = fc.oneof(
  fc.record({
    response: fc.constantFrom('lowpass' as const, 'highpass' as const),
    edgesHz: corner.map((edge) => [edge]),
  }),
  fc.record({ response: fc.constantFrom('bandpass' as const, 'bandstop' as const), edgesHz: band }),
)

const rippleDb = fc.double({ min: 0.01, max: 3, noNaN: true })
const attenuationDb = fc.double({ min: 20, max: 100, noNaN: true })

const anyFamily = fc.constantFrom(
  'butterworth',
  'chebyshev1',
  'chebyshev2',
  'elliptic',
  'bessel',
  'critically-damped' as const,
)
const anySpec = fc
  .tuple(anyFamily, shape, order, rippleDb, attenuationDb)
  .map(([family, part, n, ripple, attenuation]): AnalogSpec => ({
    family,
    ...part,
    order: n,
    rippleDb: ripple,
    attenuationDb: attenuation,
  }))

const anyMethod: fc.Arbitrary<Method> = fc.oneof(
  fc.constant<Method>({ method: 'bilinear', hold: 'edges' }),
  fc.constant<Method>({ method: 'bilinear', hold: 'none' }),
  fc.double({ min: 1, max: 480, noNaN: true }).map((hold): Method => ({ method: 'bilinear', hold })),
  fc.constant<Method>({ method: 'matched-z' }),
  fc.constant<Method>({ method: 'step-invariant' }),
)

const bilinear = (spec: AnalogSpec) => discretize(spec, RATE, { method: 'bilinear', hold: 'edges' })
const levelAt = (filter: DigitalFilter, hz: number) => decibels(digitalAt(filter, (2 * Math.PI * hz) / RATE))

/** Frequencies on the pass side and on the stop side of the edges, and the way they run (towards the stop band). */
function sides({ response, edgesHz }: AnalogSpec): { pass: number[][]; stop: number[][] } {
  const [low = 0, high = 0] = edgesHz
  const top = RATE / 2 - 1e-3
  const [a, b] = [spaced(1e-3, low, 60), spaced(low, top, 60)]
  if (response === 'lowpass') return { pass: [a], stop: [b] }
  if (response === 'highpass') return { pass: [b.toReversed()], stop: [a.toReversed()] }
  const inside = spaced(low, high, 60)
  const above = spaced(high, top, 60)
  return response === 'bandpass'
    ? { pass: [inside], stop: [a.toReversed(), above] }
    : { pass: [a, above.toReversed()], stop: [inside] }
}

describe('any filter, any method', () => {
  it('is stable, real, finite, and its sections multiply back', () => {
    fc.assert(
      fc.property(anySpec, anyMethod, (spec, how) => {
        const filter = discretize(spec, RATE, how)
        expect(filter.poles.length).toBe(spec.order * spec.edgesHz.length)
        for (const pole of filter.poles) expect(size(pole)).toBeLessThan(1)
        for (const roots of [filter.poles, filter.zeros]) {
          for (const root of roots) {
            expect(Number.isFinite(root.re) && Number.isFinite(root.im)).toBe(true)
            expect(roots.some((other) => other.re === root.re && other.im === -root.im)).toBe(true)
          }
        }
        for (const { a1, a2 } of filter.sections) {
          expect(Math.abs(a2)).toBeLessThan(1)
          expect(Math.abs(a1)).toBeLessThan(1 + a2)
        }
        for (const omega of [0.05, 0.7, 2]) {
          const wanted = digitalAt(filter, omega)
          // A corner of a thousandth of the rate costs a cascade of 12 sections about 7 of its 16 digits near its poles.
          if (size(wanted) > 1e-9) expect(relative(cascadeAt(filter.sections, omega), wanted)).toBeLessThan(1e-7)
        }
      }),
      { numRuns: 250, seed: 20 },
    )
  })

  it('impulse-invariant: stable, and the same as its cascade and its sum of sections', () => {
    const allowed = anySpec.filter(
      ({ family, response, order: n }) =>
        (response === 'lowpass' || response === 'bandpass') &&
        !((family === 'chebyshev2' || family === 'elliptic') && n % 2 === 0),
    )
    fc.assert(
      fc.property(allowed, fc.boolean(), fc.boolean(), (spec, halfFirstSample, restoreGain) => {
        const filter = discretize(spec, RATE, { method: 'impulse-invariant', halfFirstSample, restoreGain })
        for (const pole of filter.poles) expect(size(pole)).toBeLessThan(1)
        const peak = Math.max(...spaced(0, Math.PI, 200).map((omega) => size(digitalAt(filter, omega))))
        for (const omega of [0.02, 0.3, 1.5]) {
          const wanted = digitalAt(filter, omega)
          const got = cascadeAt(filter.sections, omega)
          expect(Math.hypot(got.re - wanted.re, got.im - wanted.im) / peak).toBeLessThan(1e-7)
        }
        const residue = filter.diagnostics.find((entry) => entry.code === 'aliased-residue')
        expect(residue?.value).toBeLessThan(60)
        expect(residue?.value).toBeGreaterThanOrEqual(-300)
      }),
      { numRuns: 120, seed: 21 },
    )
  })
})

describe('families, digital by the bilinear transform with their edges held', () => {
  const specOf = (family: AnalogSpec['family']) => anySpec.map((spec): AnalogSpec => ({ ...spec, family }))

  it('Butterworth and critically damped: −3 dB at every edge, monotone on both sides', () => {
    fc.assert(
      fc.property(fc.oneof(specOf('butterworth'), specOf('critically-damped')), (spec) => {
        const filter = bilinear(spec)
        for (const edge of spec.edgesHz) expect(levelAt(filter, edge)).toBeCloseTo(HALF_POWER_DB, 5)
        const { pass, stop } = sides(spec)
        // From the pass band outward the level only falls; inside a band it does so from the middle, so only the outside is walked.
        for (const side of spec.response === 'bandpass'
          ? stop
          : spec.response === 'bandstop'
            ? pass
            : [...pass, ...stop]) {
          const levels = side.map((hz) => levelAt(filter, hz)).filter((level) => level > -200)
          levels.forEach((level, k) => expect(level).toBeLessThanOrEqual((levels[k - 1] ?? 0) + 1e-6))
        }
      }),
      { numRuns: 150, seed: 22 },
    )
  })

  it('Bessel: −3 dB at every edge, never above 0 dB', () => {
    fc.assert(
      fc.property(specOf('bessel'), (spec) => {
        const filter = bilinear(spec)
        for (const edge of spec.edgesHz) expect(levelAt(filter, edge)).toBeCloseTo(HALF_POWER_DB, 5)
        for (const hz of spaced(1e-3, RATE / 2 - 1e-3, 80)) expect(levelAt(filter, hz)).toBeLessThan(1e-6)
      }),
      { numRuns: 100, seed: 23 },
    )
  })

  it('Chebyshev I: equal ripple in the pass band, reaching both of its limits; falling outside', () => {
    fc.assert(
      fc.property(specOf('chebyshev1'), (spec) => {
        const filter = bilinear(spec)
        const ripple = spec.rippleDb ?? 0
        for (const edge of spec.edgesHz) expect(levelAt(filter, edge)).toBeCloseTo(-ripple, 5)
        const { pass, stop } = sides(spec)
        for (const hz of pass.flat()) {
          expect(levelAt(filter, hz)).toBeLessThan(1e-6)
          expect(levelAt(filter, hz)).toBeGreaterThan(-ripple - 1e-6)
        }
        for (const hz of stop.flat()) expect(levelAt(filter, hz)).toBeLessThan(-ripple + 1e-6)
      }),
      { numRuns: 120, seed: 24 },
    )
  })

  it('Chebyshev II: at its attenuation at the edge and below it beyond', () => {
    fc.assert(
      fc.property(specOf('chebyshev2'), (spec) => {
        const filter = bilinear(spec)
        const attenuation = spec.attenuationDb ?? 0
        for (const edge of spec.edgesHz) expect(levelAt(filter, edge)).toBeCloseTo(-attenuation, 4)
        for (const hz of sides(spec).stop.flat()) expect(levelAt(filter, hz)).toBeLessThan(-attenuation + 1e-4)
      }),
      { numRuns: 120, seed: 25 },
    )
  })

  it('elliptic: inside its ripple in the pass band, at −ripple at the edges', () => {
    fc.assert(
      fc.property(specOf('elliptic'), (spec) => {
        const filter = bilinear(spec)
        const ripple = spec.rippleDb ?? 0
        for (const edge of spec.edgesHz) expect(levelAt(filter, edge)).toBeCloseTo(-ripple, 4)
        for (const hz of sides(spec).pass.flat()) {
          expect(levelAt(filter, hz)).toBeLessThan(1e-5)
          expect(levelAt(filter, hz)).toBeGreaterThan(-ripple - 1e-5)
        }
      }),
      { numRuns: 120, seed: 26 },
    )
  })

  it('power complementarity: a Butterworth low-pass and high-pass of one corner add up to one', () => {
    fc.assert(
      fc.property(corner, order, fc.double({ min: 1, max: 499, noNaN: true }), (edge, n, hz) => {
        const base = { family: 'butterworth' as const, order: n, edgesHz: [edge] }
        const low = bilinear({ ...base, response: 'lowpass' })
        const high = bilinear({ ...base, response: 'highpass' })
        const omega = (2 * Math.PI * hz) / RATE
        expect(size(digitalAt(low, omega)) ** 2 + size(digitalAt(high, omega)) ** 2).toBeCloseTo(1, 9)
      }),
      { numRuns: 200, seed: 27 },
    )
  })

  it('power complementarity: a band-pass and a band-stop of the same edges add up to one', () => {
    fc.assert(
      fc.property(band, order, fc.double({ min: 1, max: 499, noNaN: true }), (edgesHz, n, hz) => {
        const base = { family: 'butterworth' as const, order: n, edgesHz }
        const pass = bilinear({ ...base, response: 'bandpass' })
        const stop = bilinear({ ...base, response: 'bandstop' })
        const omega = (2 * Math.PI * hz) / RATE
        expect(size(digitalAt(pass, omega)) ** 2 + size(digitalAt(stop, omega)) ** 2).toBeCloseTo(1, 8)
      }),
      { numRuns: 200, seed: 28 },
    )
  })
})

it('every method closes in on the analog response as the rate rises', () => {
  const smooth = anySpec.filter(
    ({ response, family, order: n }) =>
      response === 'lowpass' && !((family === 'elliptic' || family === 'chebyshev2') && n % 2 === 0) && n > 1,
  )
  const hows: Method[] = [
    { method: 'bilinear', hold: 'edges' },
    { method: 'matched-z' },
    { method: 'step-invariant' },
    { method: 'impulse-invariant', halfFirstSample: true },
  ]
  fc.assert(
    fc.property(smooth, (spec) => {
      const analog = designAnalog(spec)
      const [edge = 1] = spec.edgesHz
      for (const how of hows) {
        const error = (times: number) => {
          const rate = edge * times
          const digital = discretize(spec, rate, how)
          return Math.max(
            ...spaced(edge / 10, edge * 0.9, 9).map((hz) => {
              const [a, d] = [analogAt(analog, hz), digitalAt(digital, (2 * Math.PI * hz) / rate)]
              return Math.hypot(a.re - d.re, a.im - d.im)
            }),
          )
        }
        const [far, near] = [error(2000), error(20000)]
        // First order at least: the hold of the step-invariant version delays by half a sample.
        expect(near, how.method).toBeLessThan(Math.max(far / 5, 1e-8))
      }
    }),
    { numRuns: 40, seed: 29 },
  )
})
