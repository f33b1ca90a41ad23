import FFT from 'fft.js'
import fc from 'fast-check'
import { freqz } from 'mathjs'
import { describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { designFromSpec, frequencyResponse, isFir, type AnyDigital, type DigitalFilter, type FirDesign } from '@/dsp'
import { filtersOf } from '@/lib/designs/coefficients'
import { coefficientSet, type ExportOptions } from '@/lib/exports'
import { runCascade, runDirectForm, runRatio, steadyRatioState } from '@/lib/exports/reference-run'
import { effectOfRatio, effectOfSections, effectOfTaps, isStable } from '@/lib/exports/rounding'
import { testInput, testVectorLength } from '@/lib/exports/test-vector'
import { everyKind, firDesign, firKinds, lowPass, sourceOf } from '../helpers/export-sources'

// Hundreds of designs; on a busy machine that takes longer than a test usually may.
vi.setConfig({ testTimeout: 120_000 })

/*
 * The numbers in the files against paths that share no code with the ones that made them: mathjs evaluates b/a, fft.js transforms the
 * impulse response of the exported arithmetic; both are held against the response from the roots.
 */

const base: ExportOptions = {
  format: 'json',
  structure: 'sections',
  number: 'double',
  feedback: 'subtract',
  literals: 'decimal',
}
const ratioOf = (source: Parameters<typeof coefficientSet>[0]) => {
  const { numbers } = coefficientSet(source, { ...base, structure: 'ratio' })
  if (numbers.structure !== 'ratio') throw new Error('A ratio was asked for.')
  return numbers
}
function firOf(spec: FirDesign) {
  const { digital } = designFromSpec(spec)
  if (!isFir(digital)) throw new Error('Taps were stated.')
  return digital
}
const complexList = z.object({ h: z.array(z.object({ re: z.number(), im: z.number() })) })

describe('b/a', () => {
  it('has the response of the roots by mathjs freqz, at low order', () => {
    const part = Array.from({ length: 60 }, (_, k) => (k + 0.5) / 60)
    for (const spec of everyKind([1, 3])) {
      const source = sourceOf(spec)
      const { b, a } = ratioOf(source)
      const { h } = complexList.parse(
        freqz(
          [...b],
          [1, ...a],
          part.map((x) => x * Math.PI),
        ),
      )
      const { digital } = filtersOf(source.kept)
      const truth = frequencyResponse(
        digital,
        part.map((x) => (x * spec.sampleRateHz) / 2),
      )
      h.forEach(({ re, im }, k) => {
        const error = Math.hypot(re - (truth.re[k] ?? 0), im - (truth.im[k] ?? 0))
        // Both sides evaluate in doubles; what is left is their rounding, against a peak of about one.
        expect(error, JSON.stringify(spec)).toBeLessThan(1e-10)
      })
    }
  })
})

describe('the exported arithmetic', () => {
  /** A unit impulse of a power of two of samples, long enough for the slowest pole to fade below a double's last digit. */
  function impulseFor({ poles }: DigitalFilter): Float64Array {
    const slowest = Math.min(...poles.map(({ re, im }) => 1 - Math.hypot(re, im)))
    const impulse = new Float64Array(2 ** Math.ceil(Math.log2(Math.max(256, 50 / slowest))))
    impulse[0] = 1
    return impulse
  }

  function worstError(digital: AnyDigital, output: Float64Array): number {
    const fft = new FFT(output.length)
    const spectrum = fft.createComplexArray()
    fft.realTransform(spectrum, Array.from(output))
    const frequencies = Array.from(
      { length: output.length / 2 + 1 },
      (_, k) => (k * digital.sampleRateHz) / output.length,
    )
    const truth = frequencyResponse(digital, frequencies)
    return frequencies.reduce((worst, _, k) => {
      const re = (spectrum[2 * k] ?? 0) - (truth.re[k] ?? 0)
      const im = (spectrum[2 * k + 1] ?? 0) - (truth.im[k] ?? 0)
      return Math.max(worst, Math.hypot(re, im))
    }, 0)
  }

  it('has the response of the roots, from its impulse response by fft.js', () => {
    for (const spec of everyKind([1, 4])) {
      const source = sourceOf(spec)
      const { digital } = filtersOf(source.kept)
      const sections = coefficientSet(source, base).numbers
      if (sections.structure !== 'sections') throw new Error('Sections were asked for.')
      const { b, a } = ratioOf(source)
      const impulse = impulseFor(digital)
      const about = JSON.stringify(spec)
      expect(worstError(digital, runCascade(sections.sections, impulse, 'double')), about).toBeLessThan(1e-11)
      expect(worstError(digital, runRatio(b, a, impulse, 'double')), about).toBeLessThan(1e-8)
    }
  })

  it('has the response of the taps, from its impulse response by fft.js', () => {
    for (const spec of firKinds) {
      const { numbers } = coefficientSet(sourceOf(spec), { ...base, structure: 'taps' })
      if (numbers.structure !== 'taps') throw new Error('Taps were asked for.')
      const impulse = new Float64Array(512)
      impulse[0] = 1
      const size = numbers.taps.reduce((sum, tap) => sum + Math.abs(tap), 0)
      const error = worstError(firOf(spec), runDirectForm(numbers.taps, impulse, 'double'))
      expect(error, JSON.stringify(spec)).toBeLessThan(1e-13 * Math.max(1, size))
    }
  })

  it('rounds every operation to a single, so that its output is of singles', () => {
    const source = sourceOf(lowPass({ order: 6 }))
    for (const structure of ['sections', 'ratio'] as const) {
      const { testVector, numbers } = coefficientSet(source, { ...base, structure, number: 'float' })
      if (numbers.structure === 'taps') throw new Error('A family has no taps.')
      const values = [...testVector.output, ...numbers.steadyState.flat()]
      expect(values.map(Math.fround)).toEqual(values)
    }
  })

  it('starts a ratio settled', () => {
    for (const spec of everyKind([2])) {
      const source = sourceOf(spec)
      const { b, a } = ratioOf(source)
      const level = frequencyResponse(filtersOf(source.kept).digital, [0]).re[0] ?? Number.NaN
      const output = runRatio(b, a, new Float64Array(200).fill(1), 'double', steadyRatioState(b, a))
      for (const value of output) expect(Math.abs(value - level)).toBeLessThan(1e-9)
    }
  })
})

describe('the test input', () => {
  it('is an impulse, a step and noise, exact in every type', () => {
    const input = testInput()
    expect(input).toHaveLength(testVectorLength)
    expect(Array.from(input.subarray(0, 17))).toEqual([1, ...new Array<number>(15).fill(0), 1])
    for (const value of input) {
      expect(Number.isInteger(value * 64)).toBe(true)
      expect(Math.abs(value)).toBeLessThan(4)
    }
    const noise = input.subarray(32)
    expect(new Set(noise).size).toBeGreaterThan(20)
    expect(testInput()).toEqual(input)
  })
})

describe('what rounding does', () => {
  const source = sourceOf(lowPass({ order: 6 }))
  const { digital } = filtersOf(source.kept)

  it('is nothing to speak of for the unrounded sections', () => {
    for (const spec of everyKind([2, 7])) {
      const { digital: filter } = filtersOf(sourceOf(spec).kept)
      const effect = effectOfSections(filter, filter.sections)
      expect(effect.stable).toBe(true)
      expect(effect.worstDeviationDb, JSON.stringify(spec)).toBeLessThan(1e-6)
    }
  })

  it('is as large as what was done to them', () => {
    const factor = 10 ** (0.25 / 20)
    const louder = digital.sections.map((section, k) =>
      k === 0 ? { ...section, b0: section.b0 * factor, b1: section.b1 * factor, b2: section.b2 * factor } : section,
    )
    expect(effectOfSections(digital, louder).worstDeviationDb).toBeCloseTo(0.25, 9)
    const { b, a } = ratioOf(source)
    expect(
      effectOfRatio(
        digital,
        b.map((value) => value * factor),
        a,
      ).worstDeviationDb,
    ).toBeCloseTo(0.25, 6)
  })

  it('is measured of taps at every ripple', () => {
    const fir = firOf(firDesign())
    const factor = 10 ** (0.25 / 20)
    expect(effectOfTaps(fir, [...fir.taps]).worstDeviationDb).toBe(0)
    expect(
      effectOfTaps(
        fir,
        Array.from(fir.taps, (tap) => tap * factor),
      ).worstDeviationDb,
    ).toBeCloseTo(0.25, 9)
    for (const spec of firKinds) {
      const { rounding } = coefficientSet(sourceOf(spec), { ...base, structure: 'taps', number: 'float' })
      // A tap is off by 2^-25 of itself at most, and 80 dB down the response is 1e-4 of its peak.
      expect(rounding.worstDeviationDb).toBeGreaterThan(0)
      expect(rounding.worstDeviationDb).toBeLessThan(0.05)
    }
  })

  it('sees a pole outside the circle, in either form', () => {
    const unstable = digital.sections.map((section, k) => (k === 0 ? { ...section, a2: 1.0001 } : section))
    expect(effectOfSections(digital, unstable).stable).toBe(false)
    fc.assert(
      fc.property(
        fc.array(
          fc.record({
            radius: fc.double({ min: 0.05, max: 1.2, noNaN: true }),
            angle: fc.double({ min: 0, max: Math.PI, noNaN: true }),
          }),
          {
            minLength: 1,
            maxLength: 3,
          },
        ),
        (poles) => {
          fc.pre(poles.every(({ radius }) => Math.abs(radius - 1) > 1e-3))
          const denominator = poles.reduce<number[]>(
            (product, { radius, angle }) => convolved(product, [1, -2 * radius * Math.cos(angle), radius * radius]),
            [1],
          )
          expect(isStable(denominator)).toBe(poles.every(({ radius }) => radius < 1))
        },
      ),
    )
  })

  it('is stated in the file', () => {
    const worst = (number: ExportOptions['number']) =>
      coefficientSet(source, { ...base, number }).rounding.worstDeviationDb
    expect(worst('double')).toBeLessThan(1e-9)
    expect(worst('float')).toBeGreaterThan(1e-8)
    expect(worst('float')).toBeLessThan(1e-3)
  })
})

function convolved(one: readonly number[], other: readonly number[]): number[] {
  const product = new Array<number>(one.length + other.length - 1).fill(0)
  one.forEach((x, i) => other.forEach((y, j) => (product[i + j] = (product[i + j] ?? 0) + x * y)))
  return product
}
