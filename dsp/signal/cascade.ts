import { DesignError } from '../errors'
import type { Section } from '../forms/filter'
import { COEFFICIENTS, four, FUSED, one, three, two } from './cascade-kernels'

/*
 * A cascade of sections, run in transposed direct form II. Up to four sections share one loop with coefficients and states in locals;
 * longer cascades take several passes over a piece of CHUNK samples that stays in the nearest cache. The same operations happen in the
 * same order to every sample however the signal is cut, so that block size can't change a bit of the output.
 */

/**
 * States are looked at once in CHUNK samples, counted from the start of the stream and not of the block: below FLUSH they are set to 0,
 * long before they become denormal numbers (2.2e-308), on which processors are a hundred times slower. Nothing above 1e-300 changes.
 */
export const CHUNK = 512
const FLUSH = 1e-300

export interface Cascade {
  readonly sectionCount: number
  readonly coefficients: Float64Array
  /** Two numbers a section; the running state, apart from the coefficients. */
  readonly state: Float64Array
  /** Samples run since the state was set. */
  position: number
}

export function createCascade(sections: readonly Section[]): Cascade {
  const coefficients = new Float64Array(sections.length * COEFFICIENTS)
  sections.forEach(({ b0, b1, b2, a1, a2 }, i) => {
    const values = [b0, b1, b2, a1, a2]
    if (!values.every(Number.isFinite)) {
      throw new DesignError(
        'not-finite',
        `sections.${i}`,
        `Section ${i + 1} has a coefficient that is not a finite number.`,
      )
    }
    coefficients.set(values, i * COEFFICIENTS)
  })
  return { sectionCount: sections.length, coefficients, state: new Float64Array(2 * sections.length), position: 0 }
}

/**
 * The state in which a cascade stands after an endless unit step: two numbers a section, in the order of the sections. Scaled by the
 * first sample it starts a run without a transient for the part of the signal that is constant.
 *
 * With y = G·x in the steady state of a section, s₁ = G − b0 and s₂ = b2 − a2·G, where y = b0·x + s₁, s₁' = b1·x − a1·y + s₂ and
 * s₂' = b2·x − a2·y; G = (b0+b1+b2)/(1+a1+a2), and each section is driven by the product of the gains before it.
 *
 * @throws DesignError `integrator` for a section with a pole at z = 1, which has no steady state
 */
export function steadyState(sections: readonly Section[]): Float64Array {
  const state = new Float64Array(2 * sections.length)
  let drive = 1
  sections.forEach(({ b0, b1, b2, a1, a2 }, i) => {
    const denominator = 1 + a1 + a2
    if (denominator === 0) {
      throw new DesignError(
        'integrator',
        `sections.${i}`,
        `Section ${i + 1} integrates, so it has no steady state; start it from zero.`,
      )
    }
    const gain = (b0 + b1 + b2) / denominator
    state[2 * i] = drive * (gain - b0)
    state[2 * i + 1] = drive * (b2 - a2 * gain)
    drive *= gain
  })
  return state
}

/** Sets the state to `scale` times `state`, or to zero. */
export function setState(cascade: Cascade, state: Float64Array | null, scale = 1): void {
  cascade.position = 0
  for (let i = 0; i < cascade.state.length; i++) cascade.state[i] = state === null ? 0 : state[i]! * scale
}

function tidy(state: Float64Array): void {
  for (let i = 0; i < state.length; i++) {
    const value = state[i]!
    if (value < FLUSH && value > -FLUSH) state[i] = 0
    else if (!(value - value === 0)) {
      throw new DesignError(
        'overflow',
        'sections',
        'The output left the range of double precision: these sections are unstable.',
      )
    }
  }
}

/**
 * Runs the samples from index `from` up to `to` of `input` into the same places of `output`, which may be the same array.
 * Allocates nothing. The input is taken as finite; callers check it.
 */
export function runCascade(
  cascade: Cascade,
  input: Float64Array,
  output: Float64Array,
  from: number,
  to: number,
): void {
  const { coefficients, state, sectionCount } = cascade
  if (sectionCount === 0) {
    if (input !== output) output.set(input.subarray(from, to), from)
    return
  }
  let at = from
  while (at < to) {
    const left = CHUNK - (cascade.position % CHUNK)
    const end = Math.min(at + left, to)
    let source = input
    for (let section = 0; section < sectionCount; section += FUSED) {
      const together = sectionCount - section
      if (together >= 4) four(coefficients, state, section, source, output, at, end)
      else if (together === 3) three(coefficients, state, section, source, output, at, end)
      else if (together === 2) two(coefficients, state, section, source, output, at, end)
      else one(coefficients, state, section, source, output, at, end)
      source = output
    }
    cascade.position += end - at
    if (end - at === left) tidy(state)
    at = end
  }
}

/** Index of the first sample that is NaN or infinite, or −1. Four sums at once, since each alone would wait for itself. */
export function firstNotFinite(samples: Float64Array, from: number, to: number): number {
  let a = 0
  let b = 0
  let c = 0
  let d = 0
  let n = from
  for (; n + 3 < to; n += 4) {
    a += samples[n]! * 0
    b += samples[n + 1]! * 0
    c += samples[n + 2]! * 0
    d += samples[n + 3]! * 0
  }
  for (; n < to; n++) a += samples[n]! * 0
  if (a + b + c + d === 0) return -1
  for (let i = from; i < to; i++) if (!Number.isFinite(samples[i]!)) return i
  return -1
}

export function refuseSample(value: number, index: number): never {
  const what = Number.isNaN(value) ? 'not a number' : 'infinite'
  throw new DesignError(
    'not-finite',
    'samples',
    `The sample at index ${index} is ${what}; mend or cut the recording there.`,
  )
}
