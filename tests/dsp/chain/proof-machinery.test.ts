import { describe, expect, it } from 'vitest'
import { convolve, designAnalog } from '@/dsp'
import { runAnalog, splineGain } from '@/dsp/chain/proof/analog-run'
import { averagingGain, quantise, runAveraging } from '@/dsp/chain/proof/convert'
import { integratePeriodic, runCicPeriodic, runSectionsPeriodic } from '@/dsp/chain/proof/digital-run'
import { linesOf } from '@/dsp/chain/proof/lines'
import { synthesise } from '@/dsp/chain/proof/synthesis'

function finish<Result>(steps: Generator<unknown, Result>): Result {
  for (;;) {
    const next = steps.next()
    if (next.done === true) return next.value
  }
}

const tone = (length: number, cycles: number, amplitude = 1, phase = 0): Float64Array =>
  Float64Array.from({ length }, (_, n) => amplitude * Math.cos((2 * Math.PI * cycles * n) / length + phase))

describe('what the proof runs on', () => {
  it('makes sums of tones for lengths that are no power of two', () => {
    const tones = [
      { cycles: 3, amplitude: 1, phaseRadians: 0.3 },
      { cycles: 401, amplitude: 0.25, phaseRadians: -2 },
    ]
    const made = finish(synthesise(960, tones))
    const [first, second] = tones.map(({ cycles, amplitude, phaseRadians }) =>
      tone(960, cycles, amplitude, phaseRadians),
    )
    made.forEach((value, n) => expect(value).toBeCloseTo(first![n]! + second![n]!, 12))
  })

  // H = 1/(1 + jf/fc): at the corner 1/√2 and −45°. The spline adds images 80 dB down at a fiftieth of the rate.
  it.each([
    ['fast', 100],
    ['slower than the record is long', 1],
  ])('runs a first-order low-pass, %s, in its steady state', (_, cornerHz) => {
    const filter = designAnalog({ family: 'butterworth', response: 'lowpass', order: 1, edgesHz: [cornerHz] })
    const length = 1024
    const rate = 5120
    const cycles = 20
    const coefficients = tone(length, cycles, 1 / splineGain(cycles / length))
    const { re, im } = linesOf(finish(runAnalog(filter, coefficients, rate)))
    const ratio = (cycles * rate) / length / cornerHz
    expect(re[cycles]).toBeCloseTo(1 / (1 + ratio * ratio), 6)
    expect(im[cycles]).toBeCloseTo(-ratio / (1 + ratio * ratio), 6)
    // Nothing elsewhere: no transient is left.
    expect(Math.hypot(re[cycles + 1]!, im[cycles + 1]!)).toBeLessThan(1e-12)
  })

  it('averages as sin(πf/fs)/(πf/fs) does, half a period late', () => {
    const cycles = 8
    const steps = 16
    const { re, im } = linesOf(runAveraging(tone(512, cycles, 1 / averagingGain(cycles / 512)), steps, 1))
    const x = (Math.PI * cycles * steps) / 512
    expect(Math.hypot(re[cycles]!, im[cycles]!)).toBeCloseTo(Math.abs(Math.sin(x) / x), 12)
    expect(Math.atan2(im[cycles]!, re[cycles]!)).toBeCloseTo(-x, 10)
  })

  it('has a CIC filter that equals its boxcars, wrapping or not', () => {
    const [order, factor, combDelay] = [3, 5, 2]
    const box = new Float64Array(factor * combDelay).fill(1 / (factor * combDelay))
    const taps = convolve(convolve(box, box), box)
    const period = Float64Array.from({ length: 200 }, (_, n) => Math.sin(n * n) + 0.5)
    const whole = Float64Array.from([...period, ...period])
    const plain = convolve(whole, taps)
    const run = runCicPeriodic({ order, factor, combDelay }, period)
    expect(run).toHaveLength(40)
    run.forEach((value, m) => expect(value).toBeCloseTo(plain[200 + m * factor]!, 10))
  })

  it('brings a recursive section to what it comes back to', () => {
    // A pole at 0.9999 remembers ten thousand samples; the period has 64.
    const sections = [{ b0: 1e-4, b1: 0, b2: 0, a1: -0.9999, a2: 0 }]
    const period = tone(64, 5)
    const out = runSectionsPeriodic(sections, period)
    const before = out.at(-1)!
    out.forEach((value, n) => {
      const last = n === 0 ? before : out[n - 1]!
      expect(value).toBeCloseTo(0.9999 * last + 1e-4 * period[n]!, 14)
    })
  })

  it('integrates a cosine to a sine, by the trapezoidal rule’s own gain', () => {
    const rate = 256
    const out = integratePeriodic(tone(256, 4), 1, rate)
    // T/2·cot(ωT/2) in place of 1/ω.
    const gain = 1 / (2 * rate * Math.tan((Math.PI * 4) / rate))
    out.forEach((value, n) => expect(value).toBeCloseTo(gain * Math.sin((2 * Math.PI * 4 * n) / rate), 12))
  })

  it('rounds to steps, and adds a twelfth of their square', () => {
    const volts = Float64Array.from({ length: 4096 }, (_, n) => 0.9 * Math.sin(n * Math.SQRT2) * Math.cos(n * 0.37))
    const { samples, added } = quantise(volts, 12, 1, 'x')
    const step = 2 / 2 ** 12
    for (const value of samples) expect(value / step).toBe(Math.round(value / step))
    const square = added.reduce((sum, value) => sum + value * value, 0) / added.length
    expect(square / (step * step)).toBeCloseTo(1 / 12, 2)
    expect(quantise(Float64Array.of(2, -2), 8, 1, 'x').samples).toEqual(Float64Array.of(127 / 128, -1))
  })
})
