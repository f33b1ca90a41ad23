import { describe, expect, it } from 'vitest'
import { frequencyResponse, groupDelay, magnitudeDb, phaseResponse } from '@/dsp'
import fixture from '@/tests/fixtures/response-high-precision.json'
import { asFilter } from '@/tests/helpers/root-filters'

/*
 * Expected values: tests/fixtures/response-high-precision.json, 60 decimal digits, generator beside it. The tolerances are those asked of
 * the engine: 1e-10 up to order 12 with corner/rate ≥ 1e-3, 1e-7 at order 24 or corner/rate 1e-5; what is met is far better, so they
 * are set at 1e-11 throughout, and at 1e-9 for bands of a thousandth and less, where the sine of the frequency itself is the limit.
 */
const toleranceOf = (name: string) => (/thousandth wide|1e-4 wide/.test(name) ? 1e-9 : 1e-11)
/** A stored zero misses the circle by a rounding, which the engine takes as on it; the 60 digits see the spike that this makes. */
const delayToleranceOf = (name: string) => (/on the circle/.test(name) ? 1e-9 : toleranceOf(name))

describe.each(fixture.cases)('$name', (entry) => {
  const filter = asFilter(entry)
  const tolerance = toleranceOf(entry.name)

  it('has the response of 60-digit arithmetic', () => {
    const { re, im } = frequencyResponse(filter, entry.frequenciesHz)
    entry.values.forEach((expected, n) => {
      const error = Math.hypot(re[n]! - expected.re, im[n]! - expected.im)
      const size = Math.hypot(expected.re, expected.im)
      // Values that a double can't hold as a power (below 1e-154) are judged by their level, further down.
      if (size === 0) expect(error).toBe(0)
      else if (size > 1e-290) expect(error / size, `at ${entry.frequenciesHz[n]} Hz`).toBeLessThan(tolerance)
    })
  })

  it('has its level in dB', () => {
    const level = magnitudeDb(filter, entry.frequenciesHz)
    entry.values.forEach((expected, n) => {
      const size = Math.hypot(expected.re, expected.im)
      if (size > 1e-290) expect(Math.abs(level[n]! - 20 * Math.log10(size))).toBeLessThan(1e-8)
      else expect(level[n]).toBeLessThan(-5000)
    })
  })

  it('has its group delay', () => {
    const delay = groupDelay(filter, entry.frequenciesHz)
    const scale = Math.max(...entry.values.map((value) => Math.abs(value.delay ?? 0)))
    entry.values.forEach((expected, n) => {
      if (expected.delay === null) return
      const error = Math.abs(delay[n]! - expected.delay)
      // A delay that is a difference of larger ones has the accuracy of the larger: 1e-14 of the largest in the band.
      expect(error, `at ${entry.frequenciesHz[n]} Hz`).toBeLessThan(
        delayToleranceOf(entry.name) * Math.abs(expected.delay) + 1e-14 * scale,
      )
    })
  })

  it('has a phase that is the angle of the response but for whole turns', () => {
    const phase = phaseResponse(filter, entry.frequenciesHz)
    entry.values.forEach((expected, n) => {
      if (Math.hypot(expected.re, expected.im) < 1e-290) return
      const turns = (phase[n]! - Math.atan2(expected.im, expected.re)) / (2 * Math.PI)
      expect(Math.abs(turns - Math.round(turns)), `at ${entry.frequenciesHz[n]} Hz`).toBeLessThan(tolerance)
    })
  })
})
