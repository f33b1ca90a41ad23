import { describe, expect, it } from 'vitest'
import { designAnalog, discretize, frequencyResponse, type AnalogSpec, type Complex } from '@/dsp'
import { warp } from '@/dsp/discretise/bilinear'
import { prototypeOf } from '@/dsp/prototypes/family'
import { expand } from '@/dsp/forms/zeros-poles-gain'

/*
 * The accuracy asked of a whole design, judged where the digital filter has a second description that never sees its roots: by the
 * bilinear transform with held edges, H(e^{jω}) is the low-pass prototype at the frequency that the edges and ω map to. That map is
 * evaluated here without cancellation, from the edges in hertz, and the prototype from its own poles, which are of order one.
 */

/** H of a prototype at jΩ; zeros and poles are of order one, so plain products keep their digits. */
function prototypeAt(spec: AnalogSpec, omega: number): Complex {
  const { zeros, poles, dcGain } = prototypeOf(spec)
  let [re, im] = [dcGain, 0]
  for (const [roots, sign] of [
    [expand(zeros), 1],
    [expand(poles), -1],
  ] as const) {
    for (const root of roots) {
      // (jΩ − r)/(−r) = 1 − jΩ/r
      const power = root.re * root.re + root.im * root.im
      const factor = { re: 1 - (omega * root.im) / power, im: (-omega * root.re) / power }
      const size = factor.re * factor.re + factor.im * factor.im
      const [fr, fi] = sign === 1 ? [factor.re, factor.im] : [factor.re / size, -factor.im / size]
      ;[re, im] = [re * fr - im * fi, re * fi + im * fr]
    }
  }
  return { re, im }
}

/** Prototype frequency of a digital one. tan a − tan b = sin(a − b)/(cos a·cos b), so that nothing nearly equal is subtracted. */
function prototypeFrequency({ response, edgesHz }: AnalogSpec, rate: number, hz: number): number {
  const [low = 0, high = 0] = edgesHz
  const t = warp(hz, rate)
  if (response === 'lowpass') return t / warp(low, rate)
  if (response === 'highpass') return -warp(low, rate) / t
  const cosine = (f: number) => Math.cos((Math.PI * f) / rate)
  const difference = (a: number, b: number) => Math.sin((Math.PI * (a - b)) / rate) / (cosine(a) * cosine(b))
  const width = difference(high, low)
  // t² − t₁t₂ = t·(t − t₁) + t₁·(t − t₂)
  const detuning = t * difference(hz, low) + warp(low, rate) * difference(hz, high)
  const bandpass = detuning / (width * t)
  return response === 'bandpass' ? bandpass : -1 / bandpass
}

const LEVELS = { rippleDb: 0.5, attenuationDb: 70 }
const FAMILIES = ['butterworth', 'chebyshev1', 'chebyshev2', 'elliptic', 'bessel', 'critically-damped'] as const
const RESPONSES = ['lowpass', 'highpass', 'bandpass', 'bandstop'] as const

function worstError(spec: AnalogSpec, rate: number): number {
  const [low = 0, high = low] = spec.edgesHz
  const frequencies = [0.3, 0.7, 0.9, 0.98, 1, 1.03, 1.2, 2, 5]
    .flatMap((factor) => [low * factor, high * factor])
    .filter((hz) => hz < rate / 2)
  const { re, im } = frequencyResponse(discretize(spec, rate, { method: 'bilinear', hold: 'edges' }), frequencies)
  let worst = 0
  frequencies.forEach((hz, k) => {
    const wanted = prototypeAt(spec, prototypeFrequency(spec, rate, hz))
    const size = Math.hypot(wanted.re, wanted.im)
    // At (and right beside) a zero of the filter a relative error says nothing.
    if (
      size < 1e-200 ||
      Math.min(
        ...prototypeOf(spec).zeros.map((zero) => Math.abs(Math.abs(prototypeFrequency(spec, rate, hz)) / zero.im - 1)),
        1,
      ) < 1e-3
    )
      return
    worst = Math.max(worst, Math.hypot((re[k] ?? 0) - wanted.re, (im[k] ?? 0) - wanted.im) / size)
  })
  return worst
}

const edgesOf = (response: AnalogSpec['response'], corner: number): number[] =>
  response === 'lowpass' || response === 'highpass' ? [corner] : [corner, 1.5 * corner]

describe.each(FAMILIES)('%s', (family) => {
  it.each(RESPONSES)('%s: 1e-10 up to order 12 with corner/rate from 1e-3', (response) => {
    for (const order of [1, 2, 3, 6, 9, 12]) {
      for (const corner of [1e-3, 1e-2, 0.1, 0.3]) {
        const spec: AnalogSpec = { family, response, order, edgesHz: edgesOf(response, corner), ...LEVELS }
        expect(worstError(spec, 1), `order ${order} at ${corner}`).toBeLessThan(1e-10)
      }
    }
  })

  it.each(RESPONSES)('%s: 1e-7 at order 24, and at a corner of 1e-5 of the rate', (response) => {
    for (const order of [4, 12, 24]) {
      for (const corner of [1e-5, 1e-3, 0.2]) {
        const spec: AnalogSpec = { family, response, order, edgesHz: edgesOf(response, corner), ...LEVELS }
        expect(worstError(spec, 1), `order ${order} at ${corner}`).toBeLessThan(1e-7)
      }
    }
  })
})

describe('analog designs', () => {
  it.each(FAMILIES)('%s: 1e-10 up to order 12 and 1e-7 at order 24, for bands of every width', (family) => {
    for (const order of [1, 5, 12, 24]) {
      for (const [response, edgesHz] of [
        ['lowpass', [3e-4]],
        ['highpass', [4e6]],
        ['bandpass', [100, 101]],
        ['bandpass', [1, 1000]],
        ['bandstop', [100, 130]],
      ] as const) {
        const spec: AnalogSpec = { family, response, order, edgesHz, ...LEVELS }
        const [low, high = low] = edgesHz
        const frequencies = [low * 0.5, low * 0.999, low, high * 1.0007, high * 1.6]
        const { re, im } = frequencyResponse(designAnalog(spec), frequencies)
        frequencies.forEach((hz, k) => {
          const omega =
            response === 'lowpass'
              ? hz / low
              : response === 'highpass'
                ? -low / hz
                : (hz * (hz - low) + low * (hz - high)) / ((high - low) * hz)
          const wanted = prototypeAt(spec, response === 'bandstop' ? -1 / omega : omega)
          const size = Math.hypot(wanted.re, wanted.im)
          const error = Math.hypot((re[k] ?? 0) - wanted.re, (im[k] ?? 0) - wanted.im)
          // Poles of a sharp filter in a band of 1 % lie 1e-7 of their size off the axis, and a double tells 1e-16 of that size.
          expect(error / size, `${response} ${order} at ${hz} Hz`).toBeLessThan(order === 24 ? 1e-7 : 1e-10)
        })
      }
    }
  })
})

it('the map itself is sound: the edges come from ±1', () => {
  for (const response of RESPONSES) {
    for (const edge of edgesOf(response, 0.1)) {
      const spec: AnalogSpec = { family: 'butterworth', response, order: 2, edgesHz: edgesOf(response, 0.1) }
      expect(Math.abs(prototypeFrequency(spec, 1, edge))).toBeCloseTo(1, 14)
    }
  }
})
