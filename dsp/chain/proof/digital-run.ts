import { createTapsRunner } from '../../fir/run-taps'
import type { Section } from '../../forms/filter'
import { leastSquares } from '../../numeric/least-squares'

/*
 * Digital stages run over one period of a signal that has been there for ever. What a stage remembers is either the end of the period
 * before (finite responses), or the state that comes back after a period (recursive ones).
 */

const modulo = (n: number, length: number): number => ((n % length) + length) % length

/** `count` samples that come before the period, and the period itself. */
function withHistory(period: Float64Array, count: number): Float64Array {
  const { length } = period
  const whole = new Float64Array(count + length)
  for (let n = 0; n < count; n++) whole[n] = period[modulo(n - count, length)]!
  whole.set(period, count)
  return whole
}

/** Taps over a period; as long as the period. */
export function runTapsPeriodic(taps: Float64Array, period: Float64Array): Float64Array {
  const history = taps.length - 1
  const whole = withHistory(period, history)
  createTapsRunner(taps).process(whole, whole)
  return whole.slice(history)
}

/** One section in transposed direct form II from a state, which it leaves where it ends. */
function runSection({ b0, b1, b2, a1, a2 }: Section, x: Float64Array, state: [number, number], y: Float64Array): void {
  let [s1, s2] = state
  for (let n = 0; n < x.length; n++) {
    const value = x[n]!
    const out = b0 * value + s1
    s1 = b1 * value - a1 * out + s2
    s2 = b2 * value - a2 * out
    y[n] = out
  }
  state[0] = s1
  state[1] = s2
}

/** The states that a section comes to after `steps` samples of nothing, from (1, 0) and from (0, 1), by squaring its step matrix. */
function forgetting({ a1, a2 }: Section, steps: number): readonly [number, number, number, number] {
  let power = [-a1, 1, -a2, 0] as const
  let result = [1, 0, 0, 1] as const
  const times = (p: readonly number[], q: readonly number[]) =>
    [
      p[0]! * q[0]! + p[1]! * q[2]!,
      p[0]! * q[1]! + p[1]! * q[3]!,
      p[2]! * q[0]! + p[3]! * q[2]!,
      p[2]! * q[1]! + p[3]! * q[3]!,
    ] as unknown as typeof power
  for (let rest = steps; rest > 0; rest = Math.floor(rest / 2)) {
    if (rest % 2 === 1) result = times(power, result) as unknown as typeof result
    power = times(power, power)
  }
  return result
}

/**
 * A cascade over a period, each section from the state that it comes back to: from rest it reaches g after a period; then (I − A^P)·s = g.
 */
export function runSectionsPeriodic(sections: readonly Section[], period: Float64Array): Float64Array {
  let signal = period
  for (const section of sections) {
    const out = new Float64Array(period.length)
    const state: [number, number] = [0, 0]
    runSection(section, signal, state, out)
    const [p, q, r, s] = forgetting(section, period.length)
    const [s1 = 0, s2 = 0] = leastSquares(Float64Array.of(1 - p, -q, -r, 1 - s), Float64Array.from(state), 2)
    runSection(section, signal, [s1, s2], out)
    signal = out
  }
  return signal
}

/**
 * Integration over time by trapezoids, so many times. What a constant comes to is left open at 0 Hz, where nothing is measured: each pass
 * starts so that its output has no mean, which is where a high-pass ahead of it brings it to in time.
 *
 * @param period without a mean, which would grow without bound
 */
export function integratePeriodic(period: Float64Array, times: number, sampleRateHz: number): Float64Array {
  let signal = withoutMean(period)
  for (let pass = 0; pass < times; pass++) {
    const out = new Float64Array(signal.length)
    let sum = 0
    let before = signal.at(-1) ?? 0
    for (let n = 0; n < signal.length; n++) {
      sum += (signal[n]! + before) / (2 * sampleRateHz)
      before = signal[n]!
      out[n] = sum
    }
    signal = withoutMean(out)
  }
  return signal
}

function withoutMean(period: Float64Array): Float64Array {
  const mean = period.reduce((sum, value) => sum + value, 0) / period.length
  return period.map((value) => value - mean)
}

/** Bits of the whole numbers that a CIC filter takes, beside what it adds. */
const CIC_INPUT_BITS = 48

export interface CicRun {
  readonly order: number
  readonly combDelay: number
  readonly factor: number
}

/**
 * A CIC filter as hardware runs it: integrators that wrap round in two's complement at the input rate, every R-th kept, combs at the output
 * rate, all in whole numbers of as many bits as the result needs, so that wrapping cancels. Divided by its gain (R·M)^N.
 *
 * @param period brought to whole numbers of 48 bits, its largest value at the end of their range; that adds noise 290 dB below it
 * @returns a period at the output rate
 * Source: E. B. Hogenauer, An economical class of digital filters for decimation and interpolation, IEEE Trans. Acoust. Speech Signal
 * Process. 29(2), 1981.
 */
export function runCicPeriodic({ order, combDelay, factor }: CicRun, period: Float64Array): Float64Array {
  const span = factor * combDelay
  const growth = order * Math.ceil(Math.log2(span))
  const bits = CIC_INPUT_BITS + 1 + growth
  const wrap = (value: bigint): bigint => BigInt.asIntN(bits, value)
  const range = period.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const unit = (range > 0 ? range : 1) / 2 ** (CIC_INPUT_BITS - 1)
  // A whole number of output samples, so that those of the period stay on their instants.
  const history = order * span
  const whole = withHistory(period, history)
  const integrators = Array.from({ length: order }, () => BigInt(0))
  const combs = Array.from({ length: order }, () => Array.from({ length: combDelay }, () => BigInt(0)))
  const gain = span ** order
  const skipped = history / factor
  const out = new Float64Array(period.length / factor)
  for (let n = 0; n < whole.length; n++) {
    let value = BigInt(Math.round(whole[n]! / unit))
    for (let k = 0; k < order; k++) {
      value = wrap(integrators[k]! + value)
      integrators[k] = value
    }
    if (n % factor !== 0) continue
    const m = n / factor
    for (const comb of combs) {
      const slot = m % combDelay
      const older = comb[slot]!
      comb[slot] = value
      value = wrap(value - older)
    }
    if (m >= skipped) out[m - skipped] = (Number(value) / gain) * unit
  }
  return out
}

/** Samples 0, factor, 2·factor … */
export function keepEvery(period: Float64Array, factor: number): Float64Array {
  return Float64Array.from({ length: period.length / factor }, (_, m) => period[m * factor]!)
}
