import { DesignError } from '../../errors'

/**
 * The mean over one converter period, K steps of the input, by trapezoids over the samples; `order` times. A tone at f comes out as
 * (sin(πf/fs)/(πf/fs))^order times (x/tan x)^order with x = πf/f_in, which is undone ahead of the run ({@link averagingGain}).
 *
 * @param period one period of the input; the mean that ends at an instant stands at that instant
 * @param steps K
 */
export function runAveraging(period: Float64Array, steps: number, order: number): Float64Array {
  const { length } = period
  let signal = period
  for (let pass = 0; pass < order; pass++) {
    const out = new Float64Array(length)
    const at = (n: number): number => signal[n < 0 ? n + length : n]!
    let sum = 0
    for (let n = -steps; n < 0; n++) sum += (at(n) + at(n + 1)) / 2
    for (let n = 0; n < length; n++) {
      // The sum that ends at n; rounding can't run away over a period.
      out[n] = sum / steps
      sum += (at(n) + at((n + 1) % length)) / 2 - (at(n - steps) + at(n - steps + 1)) / 2
    }
    signal = out
  }
  return signal
}

/** What trapezoids make of a tone, over what the integral does: (x/tan x) with x = πf/f_in. */
export function averagingGain(turns: number): number {
  const x = Math.PI * turns
  return x === 0 ? 1 : x / Math.tan(x)
}

export interface Quantised {
  /** In volts, on the steps of the converter. */
  readonly samples: Float64Array
  /** What was added: converted minus true, volts. */
  readonly added: Float64Array
}

/**
 * An ideal converter: rounds to the nearest of 2^bits steps over ± full scale, the highest step one short of full scale.
 *
 * @throws DesignError `too-few-bits` where the signal is no larger than a step: what is added then goes with the signal and is no noise
 *   (B. Widrow & I. Kollár, Quantization Noise, 2008, ch. 4: from a deviation of one step on it is white to 1e-8)
 */
export function quantise(volts: Float64Array, bits: number, fullScaleVolts: number, field: string): Quantised {
  const step = (2 * fullScaleVolts) / 2 ** bits
  const highest = 2 ** (bits - 1) - 1
  const deviation = Math.sqrt(volts.reduce((sum, value) => sum + value * value, 0) / volts.length)
  if (deviation < step) {
    const needed = Math.min(32, bits + Math.ceil(Math.log2(step / deviation)))
    const message = `With ${bits} ${bits === 1 ? 'bit' : 'bits'} a step is larger than the signal, and a run would prove nothing; ${needed} bits are enough.`
    throw new DesignError('too-few-bits', field, message, needed)
  }
  const samples = volts.map((value) => step * Math.max(-highest - 1, Math.min(Math.round(value / step), highest)))
  return { samples, added: samples.map((value, n) => value - volts[n]!) }
}
