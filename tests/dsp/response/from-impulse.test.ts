import { describe, expect, it } from 'vitest'
import { discretize, frequencyResponse, methodSchema, analogSpecSchema } from '@/dsp'
import fixture from '@/tests/fixtures/responses-from-impulses.json'

/* Expected values: tests/fixtures/responses-from-impulses.json, by way of time and fft.js; generator beside it. */

describe('the response from roots is that of the impulse response', () => {
  it.each(fixture.cases)('$analog.family $analog.response by $how.method', (entry) => {
    const filter = discretize(analogSpecSchema.parse(entry.analog), entry.sampleRateHz, methodSchema.parse(entry.how))
    const { re, im } = frequencyResponse(filter, entry.frequenciesHz)
    const peak = Math.max(...entry.re.map((value, n) => Math.hypot(value, entry.im[n]!)))
    entry.frequenciesHz.forEach((hertz, n) => {
      const error = Math.hypot(re[n]! - entry.re[n]!, im[n]! - entry.im[n]!)
      // 4,500 ε of the peak: sections round their coefficients, and a narrow band magnifies that by its sharpness.
      expect(error / peak, `at ${hertz} Hz`).toBeLessThan(1e-12)
    })
  })
})
