import { DesignError } from '../errors'
import type { Section } from '../forms/filter'
import { createCascade, firstNotFinite, refuseSample, runCascade, setState, steadyState } from './cascade'
import { runZeroPhase } from './zero-phase'

export interface RunOptions {
  /** `causal`: as in real time. `zero-phase`: forward and backward, offline only; the magnitude acts twice, the phase not at all. */
  readonly mode: 'causal' | 'zero-phase'
  /**
   * State before the first sample. `zero`: at rest, the default of a causal run. `steady`: as if the first sample had been there for
   * ever; a zero-phase run always starts so, at both ends.
   */
  readonly start?: 'zero' | 'steady'
  /** Zero-phase: samples of odd extension at each end; {@link zeroPhasePadLength} by default. */
  readonly padLength?: number
  /** Array to write into, at least as long as the samples (it may be the samples); saves its making, which costs more than the run. */
  readonly into?: Float64Array
}

/** Samples looked at and run before the next are touched, small enough to stay in the nearest cache. */
const PIECE = 2048

function runCausal(
  sections: readonly Section[],
  samples: Float64Array,
  start: 'zero' | 'steady',
  out: Float64Array,
): void {
  const cascade = createCascade(sections)
  if (start === 'steady' && samples.length > 0) {
    const bad = firstNotFinite(samples, 0, 1)
    if (bad >= 0) refuseSample(samples[bad]!, bad)
    setState(cascade, steadyState(sections), samples[0])
  }
  for (let from = 0; from < samples.length; from += PIECE) {
    const to = Math.min(from + PIECE, samples.length)
    const bad = firstNotFinite(samples, from, to)
    if (bad >= 0) refuseSample(samples[bad]!, bad)
    runCascade(cascade, samples, out, from, to)
  }
}

/**
 * Runs a cascade over a whole recording.
 *
 * @param sections cascade; y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂ each
 * @param samples N samples; not changed, unless given as `into` too
 * @returns N samples, `into` (or its first N values) where that was given
 * @throws DesignError `not-finite` naming the index of a sample that is NaN or infinite; `too-short` when a zero-phase run has fewer
 *   samples than it needs, with the least number; `integrator` for a steady start of a section with a pole at z = 1; `overflow` when
 *   the sections are unstable; `length` when `into` is too short
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §6.3.3 (transposed forms); F. Gustafsson, Determining the
 * initial states in forward-backward filtering, IEEE Trans. Signal Process. 44(4), 1996, for what the two ends need.
 */
export function runFilter(sections: readonly Section[], samples: Float64Array, options: RunOptions): Float64Array {
  const { into } = options
  if (into !== undefined && into.length < samples.length) {
    throw new DesignError(
      'length',
      'into',
      `The output holds ${into.length} samples; ${samples.length} are needed.`,
      samples.length,
    )
  }
  const out = into === undefined ? new Float64Array(samples.length) : into.subarray(0, samples.length)
  if (options.mode === 'zero-phase') runZeroPhase(sections, samples, out, options.padLength)
  else runCausal(sections, samples, options.start ?? 'zero', out)
  return out
}

export interface Runner {
  /** Filters one block; `output` is as long as `input` and may be it. A block with a bad sample is refused before the state moves. */
  process(input: Float64Array, output: Float64Array): void
  /** Back to the start: the next sample is the first. */
  reset(): void
}

/**
 * A cascade that carries its state from block to block, in constant memory. How the stream is cut into blocks doesn't change a bit of
 * the output. Nothing is allocated per block.
 *
 * @param options.start `zero` (default) or `steady`, as in {@link RunOptions}, settled by the first sample that comes
 * @throws DesignError from `process`: `not-finite` with the index counted from the start of the stream, `length`, `overflow`
 */
export function createRunner(
  sections: readonly Section[],
  options: { readonly start?: 'zero' | 'steady' } = {},
): Runner {
  const cascade = createCascade(sections)
  const steady = options.start === 'steady' ? steadyState(sections) : null
  let begun = false
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
      if (input.length === 0) return
      const bad = firstNotFinite(input, 0, input.length)
      if (bad >= 0) refuseSample(input[bad]!, position + bad)
      if (!begun) setState(cascade, steady, input[0])
      begun = true
      runCascade(cascade, input, output, 0, input.length)
      position += input.length
    },
    reset() {
      begun = false
      position = 0
    },
  }
}
