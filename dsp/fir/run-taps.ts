import { DesignError } from '../errors'
import { firstNotFinite, refuseSample } from '../signal/cascade'
import type { Runner } from '../signal/run'

/** Samples of history kept before the ring is moved together, at least. */
const LEAST_RING = 4096

/**
 * Taps that carry their state from block to block: y[n] = Σ taps[k]·x[n − k], at rest before the first sample. The products of a sample are
 * always summed in the same order, so that how the stream is cut into blocks doesn't change a bit. Nothing is allocated per sample or block.
 *
 * @returns `process(input, output)`, the output as long as the input, which it may be; `reset()`
 * @throws DesignError `not-finite` with the index counted from the start of the stream, before the state moves; `length`; `no-taps`
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §6.5.1 (direct form of FIR systems).
 */
export function createTapsRunner(taps: Float64Array): Runner {
  const count = taps.length
  if (count === 0) throw new DesignError('no-taps', 'taps', 'A filter has at least one tap.', 1)
  const bad = firstNotFinite(taps, 0, count)
  if (bad >= 0) throw new DesignError('not-finite', `taps.${bad}`, `The tap at index ${bad} is not a finite number.`)
  const backward = taps.toReversed()
  // The last count − 1 samples stand before `end`; when the ring is full they are moved to its start.
  const ring = new Float64Array(count - 1 + Math.max(LEAST_RING, count))
  let end = count - 1
  let position = 0
  return {
    process(input, output) {
      if (output.length !== input.length) {
        throw new DesignError(
          'length',
          'output',
          `The output block must hold ${input.length} samples, as the input does.`,
          input.length,
        )
      }
      const broken = firstNotFinite(input, 0, input.length)
      if (broken >= 0) refuseSample(input[broken]!, position + broken)
      for (let n = 0; n < input.length; n++) {
        if (end === ring.length) {
          ring.copyWithin(0, end - (count - 1), end)
          end = count - 1
        }
        ring[end] = input[n]!
        const start = end - (count - 1)
        let sum = 0
        for (let k = 0; k < count; k++) sum += backward[k]! * ring[start + k]!
        output[n] = sum
        end += 1
      }
      position += input.length
    },
    reset() {
      ring.fill(0)
      end = count - 1
      position = 0
    },
  }
}

export interface RunTapsOptions {
  /**
   * `causal`: as in real time, at rest before the first sample. `zero-phase`: of symmetric taps of odd number, once and moved forward by
   * their delay of (N − 1)/2 samples, so that the magnitude acts once; offline only. Other taps have no whole delay to make up for.
   */
  readonly mode: 'causal' | 'zero-phase'
}

/** Whether taps[k] = ±taps[N − 1 − k] throughout, to the last bit. */
function isLinearPhase(taps: Float64Array): boolean {
  const last = taps.length - 1
  return [1, -1].some((sign) => taps.every((tap, k) => tap === sign * taps[last - k]!))
}

/**
 * Runs taps over a whole recording.
 *
 * Zero-phase is delay compensation, not forward–backward running: output n is Σ taps[k]·x[n + (N−1)/2 − k]. Beyond both ends of the recording
 * it is taken to go on by odd reflection about its end samples (Gustafsson 1996 has the usual reasons); the first and last (N − 1)/2 samples
 * rest on that. A differentiator's quarter turn stays, since it is its work.
 *
 * @param samples R samples; at least (N + 1)/2 for zero-phase; not changed
 * @returns R samples
 * @throws DesignError `not-finite` with the index of the sample; `not-linear-phase`, `too-short` with the least number, `no-taps`
 */
export function runTaps(taps: Float64Array, samples: Float64Array, { mode }: RunTapsOptions): Float64Array {
  const runner = createTapsRunner(taps)
  const out = new Float64Array(samples.length)
  if (mode === 'causal') {
    runner.process(samples, out)
    return out
  }
  if (taps.length % 2 === 0 || !isLinearPhase(taps)) {
    throw new DesignError(
      'not-linear-phase',
      'taps',
      'Only symmetric taps of odd number delay by a whole number of samples, which a zero-phase run makes up for.',
    )
  }
  const delay = (taps.length - 1) / 2
  const count = samples.length
  if (count < delay + 1) {
    throw new DesignError(
      'too-short',
      'samples',
      `A zero-phase run of these taps needs at least ${delay + 1} samples; the recording has ${count}.`,
      delay + 1,
    )
  }
  const bad = firstNotFinite(samples, 0, count)
  if (bad >= 0) refuseSample(samples[bad]!, bad)
  const before = Float64Array.from({ length: delay }, (_, n) => 2 * samples[0]! - samples[delay - n]!)
  const after = Float64Array.from({ length: delay }, (_, n) => 2 * samples[count - 1]! - samples[count - 2 - n]!)
  // Fills the state with what stands before the recording, then drops the first `delay` outputs.
  runner.process(before, before)
  const whole = new Float64Array(count + delay)
  whole.set(samples)
  whole.set(after, count)
  runner.process(whole, whole)
  return whole.slice(delay)
}
