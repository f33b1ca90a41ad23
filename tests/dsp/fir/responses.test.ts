import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  createTapsRunner,
  designFir,
  frequencyResponse,
  groupDelay,
  impulseResponse,
  magnitudeDb,
  phaseDelay,
  phaseResponse,
  runTaps,
  stepFigures,
  stepResponse,
  type FirFilter,
} from '@/dsp'
import { everyKind, lowPass, RATE } from './specs'

const given = (taps: readonly number[], symmetry: FirFilter['symmetry']): FirFilter => ({
  domain: 'z',
  taps: Float64Array.from(taps),
  sampleRateHz: RATE,
  symmetry,
  diagnostics: [],
})
const noise = (length: number) =>
  Float64Array.from({ length }, (_, n) => Math.sin(n * n * 0.37) + 0.2 * Math.cos(3 * n))

describe('responses of FIR filters', () => {
  it('are the plain sum over the taps, at any frequency', () => {
    const hz = [-0.3, 0, 0.001, 0.37, 0.5, 0.999, 1, 1.3, 2, 3.7]
    for (const spec of everyKind) {
      const filter = designFir(spec, RATE)
      const size = filter.taps.reduce((sum, tap) => sum + Math.abs(tap), 0)
      const { re, im } = frequencyResponse(filter, hz)
      const phase = phaseResponse(filter, hz)
      const level = magnitudeDb(filter, hz)
      hz.forEach((f, k) => {
        let [x, y] = [0, 0]
        filter.taps.forEach((tap, n) => {
          x += tap * Math.cos(Math.PI * f * n)
          y -= tap * Math.sin(Math.PI * f * n)
        })
        expect(Math.hypot(re[k]! - x, im[k]! - y)).toBeLessThan(2e-13 * size)
        const modulus = Math.hypot(x, y)
        expect(Number.isNaN(level[k]!) || Number.isNaN(phase[k]!)).toBe(false)
        if (modulus < 1e-6 * size) return
        expect(level[k]).toBeCloseTo(20 * Math.log10(modulus), 6)
        expect(modulus * Math.cos(phase[k]!)).toBeCloseTo(x, 6)
        expect(modulus * Math.sin(phase[k]!)).toBeCloseTo(y, 6)
      })
    }
  })

  it('delay a symmetric filter by exactly half its length, and its phase is that line', () => {
    for (const spec of everyKind.filter(({ kind }) => kind !== 'minimum-phase')) {
      const filter = designFir(spec, RATE)
      const seconds = (filter.taps.length - 1) / 2 / RATE
      expect([...groupDelay(filter, [0, 0.2, 0.77, 1])]).toEqual([seconds, seconds, seconds, seconds])
      for (const hz of [0.05, 0.4, 0.63, 0.9]) {
        const turns = (phaseResponse(filter, [hz])[0]! + 2 * Math.PI * hz * seconds) / Math.PI
        const quarter = filter.symmetry === 'odd' ? 0.5 : 0
        // Nothing but a change of sign is added to the line.
        expect([0, 1].some((sign) => Math.abs(turns - quarter - sign) < 1e-12)).toBe(true)
      }
    }
  })

  it('have the delay that their continuous phase says, without symmetry too', () => {
    const filter = designFir(lowPass('minimum-phase', 31, 0.3, 0.4), RATE)
    const hz = Float64Array.from({ length: 601 }, (_, k) => (0.35 * k) / 600)
    const [phase, delay] = [phaseResponse(filter, hz), groupDelay(filter, hz)]
    const step = 0.35 / 600
    for (let k = 1; k < 600; k++) {
      const slope = -(phase[k + 1]! - phase[k - 1]!) / (2 * step) / (2 * Math.PI)
      expect(Math.abs(slope - delay[k]!)).toBeLessThan(2e-3 * Math.max(1, delay[k]!))
    }
    expect(phaseDelay(filter, [0])[0]).toBeCloseTo(delay[0]!, 12)
    // All zeros inside the circle: the phase comes back to where it began.
    expect(Math.abs(phaseResponse(filter, [1])[0]!)).toBeLessThan(1e-6)
  })

  it('of a symmetric filter are the same when its symmetry is not told', () => {
    const filter = designFir(lowPass('equiripple', 41, 0.3, 0.4), RATE)
    const plain: FirFilter = { ...filter, symmetry: 'none' }
    groupDelay(plain, [0, 0.1, 0.29, 0.45, 0.9]).forEach((delay) => expect(delay).toBeCloseTo(10, 4))
    expect(magnitudeDb(plain, [0.1])[0]).toBeCloseTo(magnitudeDb(filter, [0.1])[0]!, 10)
  })

  it('are −∞ dB at an exact zero, and the delay is finite there', () => {
    expect(magnitudeDb(given([0.5, 0.5], 'even'), [0, 1])).toEqual(Float64Array.of(0, -Infinity))
    expect(magnitudeDb(given([0.5, 0, 0.5], 'even'), [0.5])[0]).toBe(-Infinity)
    expect(magnitudeDb(given([1, 0, -1], 'odd'), [0, 1])).toEqual(Float64Array.of(-Infinity, -Infinity))
    expect(magnitudeDb(given([1, -1], 'odd'), [0])[0]).toBe(-Infinity)
    expect(groupDelay(given([0.5, 0.5], 'none'), [1])[0]).toBeCloseTo(0.5 / RATE, 6)
    expect(magnitudeDb(given([0, 0, 0], 'none'), [0.3])[0]).toBe(-Infinity)
    expect(groupDelay(given([0, 0, 0], 'none'), [0.3])[0]).toBe(1 / RATE)
  })

  it('refuse what is no number', () => {
    expect(() => frequencyResponse(given([1, 1], 'even'), [0, Number.NaN])).toThrow(/index 1/)
    expect(() => phaseResponse(given([1, 2], 'none'), [Infinity])).toThrow(/index 0/)
    expect(() => magnitudeDb(given([1, Number.NaN], 'none'), [0])).toThrow(/tap at index 1/)
  })

  it('in time are the taps and their running sum', () => {
    const filter = designFir(everyKind[0]!, RATE)
    const { values } = impulseResponse(filter, { count: 45 })
    expect(values.subarray(0, 41)).toEqual(filter.taps)
    expect([...values.subarray(41)]).toEqual([0, 0, 0, 0])
    const steps = stepResponse(filter, { count: 45 }).values
    const shape = stepFigures(filter)
    expect(shape.finalValue).toBeCloseTo(1, 12)
    expect(shape.overshoot).toBeCloseTo(Math.max(...steps) - 1, 12)
    const last = steps.findLastIndex((value) => Math.abs(value - 1) > 0.01)
    expect(shape.settlingSeconds.within1).toBeCloseTo((last + 1) / RATE, 12)
  })
})

describe('running taps', () => {
  const { taps } = designFir(everyKind[0]!, RATE)

  it('block by block is the whole run to the last bit', () => {
    const samples = noise(6000)
    const whole = runTaps(taps, samples, { mode: 'causal' })
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 900 }), { minLength: 5, maxLength: 40 }), (sizes) => {
        const runner = createTapsRunner(taps)
        const out = new Float64Array(6000)
        for (let from = 0, k = 0; from < 6000; k += 1) {
          const to = Math.min(6000, from + sizes[k % sizes.length]!)
          runner.process(samples.subarray(from, to), out.subarray(from, to))
          from = to
        }
        return out.every((value, n) => value === whole[n])
      }),
      { numRuns: 15 },
    )
  })

  it('is the convolution, in place as well, and begins anew after a reset', () => {
    const samples = noise(200)
    const out = runTaps(taps, samples, { mode: 'causal' })
    for (const n of [0, 5, 40, 199]) {
      let sum = 0
      for (let k = 0; k < taps.length && k <= n; k += 1) sum += taps[k]! * samples[n - k]!
      expect(out[n]).toBeCloseTo(sum, 13)
    }
    const runner = createTapsRunner(taps)
    runner.process(noise(77), new Float64Array(77))
    runner.reset()
    runner.process(samples, samples)
    expect(samples).toEqual(out)
  })

  it('without delay leaves a constant and a slope alone, and acts once', () => {
    const ramp = Float64Array.from({ length: 100 }, (_, n) => 3 + 0.5 * n)
    runTaps(taps, ramp, { mode: 'zero-phase' }).forEach((value, n) => expect(value).toBeCloseTo(ramp[n]!, 9))
    const samples = noise(300)
    const causal = runTaps(taps, samples, { mode: 'causal' })
    const centred = runTaps(taps, samples, { mode: 'zero-phase' })
    for (let n = 40; n < 300; n++) expect(centred[n - 20]).toBeCloseTo(causal[n]!, 13)
  })

  it('names the sample that is no number from the start of the stream, and leaves the state as it was', () => {
    const bad = noise(50)
    bad[17] = Number.NaN
    const runner = createTapsRunner(taps)
    const out = new Float64Array(50)
    runner.process(noise(50), out)
    expect(() => runner.process(bad, out)).toThrow(/index 67/)
    runner.process(noise(50), out)
    const twice = runTaps(taps, Float64Array.from([...noise(50), ...noise(50)]), { mode: 'causal' })
    expect(out).toEqual(twice.slice(50))
  })

  it('is refused where it can’t be', () => {
    expect(() => runTaps(taps, noise(20), { mode: 'zero-phase' })).toThrow(/at least 21/)
    expect(() => runTaps(taps.slice(1), noise(100), { mode: 'zero-phase' })).toThrow(/symmetric taps of odd number/)
    expect(() => createTapsRunner(new Float64Array(0))).toThrow(/at least one tap/)
    expect(() => createTapsRunner(Float64Array.of(1, Infinity))).toThrow(/tap at index 1/)
    expect(() => createTapsRunner(taps).process(noise(5), new Float64Array(4))).toThrow(/5 samples/)
  })
})
