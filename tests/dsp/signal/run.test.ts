import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  createRunner,
  DesignError,
  minimumSamplesForZeroPhase,
  runFilter,
  seededNoise,
  steadyState,
  zeroPhaseMagnitudeDb,
  zeroPhasePadLength,
  type Section,
} from '@/dsp'
import { bilinearLowpass } from '@/tests/helpers/root-filters'

const noise = (count: number, seed = 1) => {
  const next = seededNoise(seed)
  return Float64Array.from({ length: count }, next)
}

/** The difference equation as it is written, section after section: y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂. */
function byDefinition(sections: readonly Section[], samples: ArrayLike<number>): number[] {
  let signal = Array.from(samples)
  for (const { b0, b1, b2, a1, a2 } of sections) {
    const out: number[] = []
    signal.forEach((x, n) => {
      out.push(
        b0 * x +
          b1 * (signal[n - 1] ?? 0) +
          b2 * (signal[n - 2] ?? 0) -
          a1 * (out[n - 1] ?? 0) -
          a2 * (out[n - 2] ?? 0),
      )
    })
    signal = out
  }
  return signal
}

const section: fc.Arbitrary<Section> = fc
  .record({
    radius: fc.double({ min: 0, max: 0.97, noNaN: true }),
    angle: fc.double({ min: 0, max: Math.PI, noNaN: true }),
    b0: fc.double({ min: -1, max: 1, noNaN: true }),
    b1: fc.double({ min: -1, max: 1, noNaN: true }),
    b2: fc.double({ min: -1, max: 1, noNaN: true }),
  })
  .map(({ radius, angle, b0, b1, b2 }) => ({ b0, b1, b2, a1: -2 * radius * Math.cos(angle), a2: radius * radius }))
const cascade = fc.array(section, { minLength: 1, maxLength: 13 })

describe('causal run', () => {
  it('is the difference equation, for cascades of any length', () => {
    fc.assert(
      fc.property(cascade, fc.integer({ min: 1, max: 300 }), (sections, count) => {
        const samples = noise(count)
        const expected = byDefinition(sections, samples)
        const got = runFilter(sections, samples, { mode: 'causal' })
        const peak = Math.max(...expected.map(Math.abs), 1e-30)
        const worst = Math.max(...expected.map((value, n) => Math.abs(value - got[n]!)))
        // The transposed form adds in another order; 13 sections of poles at 0.97 magnify ε by their gain.
        expect(worst).toBeLessThan(1e-9 * peak + 1e-12)
      }),
    )
  })

  it('starts without a transient on a constant, when asked', () => {
    for (const order of [1, 2, 5, 8, 24]) {
      const { sections } = bilinearLowpass(order, 50, 1000)
      const got = runFilter(sections, new Float64Array(2000).fill(3), { mode: 'causal', start: 'steady' })
      expect(Math.max(...got.map((value) => Math.abs(value - 3)))).toBeLessThan(1e-9)
      const atRest = runFilter(sections, new Float64Array(3).fill(3), { mode: 'causal' })
      expect(atRest[0]).toBeLessThan(1)
    }
  })

  it('steadyState is the state that an endless step ends in', () => {
    const { sections } = bilinearLowpass(5, 100, 1000)
    const state = steadyState(sections)
    // One sample of 1 leaves it as it is: y = s₁ + b0·x and so on, section by section.
    let x = 1
    sections.forEach(({ b0, b1, b2, a1, a2 }, i) => {
      const [s1, s2] = [state[2 * i]!, state[2 * i + 1]!]
      const y = b0 * x + s1
      expect(b1 * x - a1 * y + s2).toBeCloseTo(s1, 13)
      expect(b2 * x - a2 * y).toBeCloseTo(s2, 13)
      x = y
    })
    expect(x).toBeCloseTo(1, 13)
  })

  it('writes where it is told to, in place too, and leaves the input alone otherwise', () => {
    const { sections } = bilinearLowpass(6, 100, 1000)
    const samples = noise(5000)
    const kept = samples.slice()
    const fresh = runFilter(sections, samples, { mode: 'causal' })
    expect(samples).toEqual(kept)
    const into = new Float64Array(6000)
    expect(runFilter(sections, samples, { mode: 'causal', into })).toEqual(fresh)
    expect(into.subarray(0, 5000)).toEqual(fresh)
    expect(runFilter(sections, samples, { mode: 'causal', into: samples })).toEqual(fresh)
    expect(() => runFilter(sections, samples, { mode: 'causal', into: new Float64Array(10) })).toThrow(
      /5000 are needed/,
    )
  })

  it('takes no sections as a wire, and no samples as none', () => {
    expect(runFilter([], noise(10), { mode: 'causal' })).toEqual(noise(10))
    expect(
      runFilter(bilinearLowpass(2, 1, 10).sections, new Float64Array(0), { mode: 'causal', start: 'steady' }),
    ).toHaveLength(0)
  })
})

describe('a run in blocks', () => {
  it('has the bits of a run at once, however the stream is cut', () => {
    fc.assert(
      fc.property(
        cascade,
        fc.array(fc.integer({ min: 0, max: 700 }), { minLength: 1, maxLength: 12 }),
        fc.constantFrom('zero' as const, 'steady' as const),
        (sections, blocks, start) => {
          const total = blocks.reduce((sum, size) => sum + size, 0)
          const samples = noise(total)
          const whole = runFilter(sections, samples, { mode: 'causal', start })
          const runner = createRunner(sections, { start })
          const pieces = new Float64Array(total)
          let at = 0
          for (const size of blocks) {
            runner.process(samples.subarray(at, at + size), pieces.subarray(at, at + size))
            at += size
          }
          expect(Array.from(pieces)).toEqual(Array.from(whole))
        },
      ),
    )
  })

  it('has the same bits while it dies away through the smallest numbers', () => {
    const { sections } = bilinearLowpass(8, 20, 1000)
    const samples = new Float64Array(40_000)
    samples.set(noise(100))
    const whole = runFilter(sections, samples, { mode: 'causal' })
    const runner = createRunner(sections)
    const pieces = new Float64Array(40_000)
    for (let at = 0; at < 40_000; at += 77) {
      runner.process(samples.subarray(at, at + 77), pieces.subarray(at, at + 77))
    }
    expect(Array.from(pieces)).toEqual(Array.from(whole))
    // It ends at 0, and hardly passes through denormals on the way (fewer than the 512 samples between two looks).
    expect(whole.at(-1)).toBe(0)
    expect(whole.filter((value) => value !== 0 && Math.abs(value) < 2.3e-308).length).toBeLessThan(512)
  })

  it('changes nothing above 1e-300 by that', () => {
    const { sections } = bilinearLowpass(2, 20, 1000)
    const samples = new Float64Array(8000)
    samples[0] = 1
    const got = runFilter(sections, samples, { mode: 'causal' })
    byDefinition(sections, samples).forEach((value, n) => {
      if (Math.abs(value) > 1e-280) expect(Math.abs(got[n]! / value - 1)).toBeLessThan(1e-6)
    })
  })

  it('starts over after reset', () => {
    const runner = createRunner(bilinearLowpass(3, 100, 1000).sections)
    const [first, second] = [new Float64Array(100), new Float64Array(100)]
    runner.process(noise(100), first)
    runner.reset()
    runner.process(noise(100), second)
    expect(second).toEqual(first)
  })
})

describe('zero-phase run', () => {
  it('acts twice on the magnitude and not at all on the phase', () => {
    const filter = bilinearLowpass(4, 50, 1000)
    const samples = new Float64Array(4097)
    samples[2048] = 1
    const got = runFilter(filter.sections, samples, { mode: 'zero-phase' })
    for (let k = 1; k < 1500; k++) expect(got[2048 + k]).toBeCloseTo(got[2048 - k]!, 13)
    for (const hertz of [0, 20, 50, 80]) {
      const re = got.reduce((sum, value, n) => sum + value * Math.cos((2 * Math.PI * hertz * (n - 2048)) / 1000), 0)
      expect(20 * Math.log10(Math.abs(re))).toBeCloseTo(zeroPhaseMagnitudeDb(filter, [hertz])[0]!, 6)
    }
  })

  it('leaves a constant and a straight line as they are, to their ends', () => {
    const { sections } = bilinearLowpass(3, 100, 1000)
    const line = Float64Array.from({ length: 500 }, (_, n) => 2 + 0.01 * n)
    const got = runFilter(sections, line, { mode: 'zero-phase', padLength: 200 })
    expect(Math.max(...got.map((value, n) => Math.abs(value - line[n]!)))).toBeLessThan(1e-9)
    const flat = new Float64Array(40).fill(7)
    expect(Math.max(...runFilter(sections, flat, { mode: 'zero-phase' }).map((v) => Math.abs(v - 7)))).toBeLessThan(
      1e-12,
    )
  })

  it('is forward and backward over the odd extension, as defined', () => {
    const { sections } = bilinearLowpass(4, 120, 1000)
    const samples = noise(300)
    const pad = zeroPhasePadLength(sections)
    const extended = [
      ...Array.from({ length: pad }, (_, i) => 2 * samples[0]! - samples[pad - i]!),
      ...samples,
      ...Array.from({ length: pad }, (_, i) => 2 * samples[299]! - samples[298 - i]!),
    ]
    const forward = runFilter(sections, Float64Array.from(extended), { mode: 'causal', start: 'steady' })
    const backward = runFilter(sections, forward.reverse(), { mode: 'causal', start: 'steady' }).reverse()
    const got = runFilter(sections, samples, { mode: 'zero-phase' })
    got.forEach((value, n) => expect(value).toBeCloseTo(backward[pad + n]!, 13))
  })

  it('states its extension and its least length exactly', () => {
    // 3·(2S + 1 − sections of first order)
    expect(zeroPhasePadLength(bilinearLowpass(4, 50, 1000).sections)).toBe(15)
    expect(zeroPhasePadLength(bilinearLowpass(5, 50, 1000).sections)).toBe(18)
    const { sections } = bilinearLowpass(5, 50, 1000)
    const least = minimumSamplesForZeroPhase(sections)
    expect(least).toBe(19)
    expect(runFilter(sections, noise(least), { mode: 'zero-phase' })).toHaveLength(least)
    expect(() => runFilter(sections, noise(least - 1), { mode: 'zero-phase' })).toThrow(
      expect.objectContaining({ code: 'too-short', field: 'samples', nearest: 19 }),
    )
  })

  it('runs in place', () => {
    const { sections } = bilinearLowpass(5, 50, 1000)
    const samples = noise(3000)
    const fresh = runFilter(sections, samples, { mode: 'zero-phase' })
    expect(runFilter(sections, samples, { mode: 'zero-phase', into: samples })).toEqual(fresh)
  })
})

describe('refusals', () => {
  const { sections } = bilinearLowpass(4, 100, 1000)
  it.each([
    ['causal', 0, Number.NaN],
    ['causal', 2047, Infinity],
    ['causal', 2048, Number.NaN],
    ['zero-phase', 4999, -Infinity],
  ] as const)('a %s run names the index %i of a sample that is %d', (mode, index, value) => {
    const samples = noise(5000)
    samples[index] = value
    expect(() => runFilter(sections, samples, { mode })).toThrow(
      expect.objectContaining({
        code: 'not-finite',
        field: 'samples',
        message: expect.stringContaining(`index ${index} `),
      }),
    )
  })

  it('a runner counts the index from the start of the stream and keeps its state', () => {
    const runner = createRunner(sections)
    const out = new Float64Array(100)
    runner.process(noise(100, 1), out)
    const bad = noise(100, 2)
    bad[17] = Number.NaN
    expect(() => runner.process(bad, out)).toThrow(/index 117 /)
    runner.process(noise(100, 2), out)
    const whole = runFilter(sections, Float64Array.from([...noise(100, 1), ...noise(100, 2)]), { mode: 'causal' })
    expect(out).toEqual(whole.slice(100))
    expect(() => runner.process(noise(10), out)).toThrow(DesignError)
  })

  it('unstable sections, an integrator with a steady start, a coefficient that is no number', () => {
    const unstable: Section = { b0: 1, b1: 0, b2: 0, a1: -3, a2: 0 }
    expect(() => runFilter([unstable], noise(5000), { mode: 'causal' })).toThrow(/unstable/)
    const integrator: Section = { b0: 1, b1: 0, b2: 0, a1: -1, a2: 0 }
    expect(() => runFilter([integrator], noise(50), { mode: 'causal', start: 'steady' })).toThrow(/integrates/)
    expect(() => createRunner([{ ...integrator, a1: Number.NaN }])).toThrow(/Section 1/)
  })
})
