import Complex from 'complex.js'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, frequencyResponse, type AnalogSpec, type Filter } from '@/dsp'

/*
 * Responses once more, by complex.js and the definition H(x) = gain · ∏(x − zeros) / ∏(x − poles): a library that shares no code with
 * dsp. Orders are low, so that the plain product keeps its digits.
 */

function byDefinition({ zeros, poles, gain }: Filter<'s'> | Filter<'z'>, x: Complex): Complex {
  let value = new Complex(gain, 0)
  // Zeros and poles by turns, so that the product neither overflows nor underflows.
  for (let index = 0; index < Math.max(zeros.length, poles.length); index += 1) {
    const [zero, pole] = [zeros[index], poles[index]]
    if (zero) value = value.mul(x.sub(new Complex(zero.re, zero.im)))
    if (pole) value = value.div(x.sub(new Complex(pole.re, pole.im)))
  }
  return value
}

const specs = fc.record({
  family: fc.constantFrom('butterworth', 'chebyshev1', 'chebyshev2', 'elliptic', 'bessel', 'critically-damped'),
  response: fc.constantFrom('lowpass', 'highpass', 'bandpass', 'bandstop'),
  order: fc.integer({ min: 1, max: 6 }),
  edge: fc.double({ min: 5, max: 150, noNaN: true }),
  ripple: fc.double({ min: 0.1, max: 3, noNaN: true }),
  attenuation: fc.double({ min: 20, max: 80, noNaN: true }),
  part: fc.double({ min: 0.01, max: 0.49, noNaN: true }),
})

function specOf({
  family,
  response,
  order,
  edge,
  ripple,
  attenuation,
}: typeof specs extends fc.Arbitrary<infer T> ? T : never): AnalogSpec {
  const isBand = response === 'bandpass' || response === 'bandstop'
  return {
    family,
    response,
    order,
    edgesHz: isBand ? [edge, edge * 2] : [edge],
    ...(family === 'chebyshev1' || family === 'elliptic' ? { rippleDb: ripple } : {}),
    ...(family === 'chebyshev2' || family === 'elliptic' ? { attenuationDb: attenuation } : {}),
  }
}

function expectSame(got: { re: Float64Array; im: Float64Array }, expected: Complex) {
  const scale = Math.max(expected.abs(), 1e-6)
  expect(Math.abs((got.re[0] ?? Number.NaN) - expected.re) / scale).toBeLessThan(1e-9)
  expect(Math.abs((got.im[0] ?? Number.NaN) - expected.im) / scale).toBeLessThan(1e-9)
}

describe('responses against complex.js', () => {
  it('agree on the axis and on the circle', () => {
    fc.assert(
      fc.property(specs, (parts) => {
        const spec = specOf(parts)
        const rate = 1000
        const hertz = parts.part * rate
        const analog = designAnalog(spec)
        expectSame(frequencyResponse(analog, [hertz]), byDefinition(analog, new Complex(0, 2 * Math.PI * hertz)))
        const digital = discretize(spec, rate, { method: 'bilinear', hold: 'edges' })
        const angle = (2 * Math.PI * hertz) / rate
        expectSame(
          frequencyResponse(digital, [hertz]),
          byDefinition(digital, new Complex(Math.cos(angle), Math.sin(angle))),
        )
      }),
      { numRuns: 200 },
    )
  })

  it('take roots that are values of complex.js', () => {
    const filter = { domain: 's', zeros: [], poles: [new Complex(-2, 0)], gain: 2 } as const
    const { re, im } = frequencyResponse(filter, [2 / (2 * Math.PI)])
    expect(re[0]).toBeCloseTo(0.5, 14)
    expect(im[0]).toBeCloseTo(-0.5, 14)
  })
})
