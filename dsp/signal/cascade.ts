import { DesignError } from '../errors'
import type { Section } from '../forms/filter'

/*
 * A cascade of sections, run in transposed direct form II. Up to four sections share one loop with coefficients and states in locals;
 * longer cascades take several passes over a piece of CHUNK samples that stays in the nearest cache. The same operations happen in the
 * same order to every sample however the signal is cut, so that block size can't change a bit of the output.
 */

const FUSED = 4
const COEFFICIENTS = 5

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

/**
 * The states are written back inside the loop, at its last pass: were they used after it, the compiler would store all of them on
 * every pass, which made the loop a third slower (measured on Node 20).
 */
type Kernel = (
  k: Float64Array,
  s: Float64Array,
  at: number,
  input: Float64Array,
  output: Float64Array,
  from: number,
  to: number,
) => void

const one: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b0 = k[c]!
  const b1 = k[c + 1]!
  const b2 = k[c + 2]!
  const a1 = k[c + 3]!
  const a2 = k[c + 4]!
  let p = s[2 * at]!
  let q = s[2 * at + 1]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y = b0 * x + p
    p = b1 * x + q - a1 * y
    q = b2 * x - a2 * y
    output[n] = y
    if (n === last) {
      s[2 * at] = p
      s[2 * at + 1] = q
    }
  }
}

const two: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    output[n] = y1
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
    }
  }
}

const three: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const b20 = k[c + 10]!
  const b21 = k[c + 11]!
  const b22 = k[c + 12]!
  const a21 = k[c + 13]!
  const a22 = k[c + 14]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  let p2 = s[t + 4]!
  let q2 = s[t + 5]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    const y2 = b20 * y1 + p2
    p2 = b21 * y1 + q2 - a21 * y2
    q2 = b22 * y1 - a22 * y2
    output[n] = y2
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
      s[t + 4] = p2
      s[t + 5] = q2
    }
  }
}

const four: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const b20 = k[c + 10]!
  const b21 = k[c + 11]!
  const b22 = k[c + 12]!
  const a21 = k[c + 13]!
  const a22 = k[c + 14]!
  const b30 = k[c + 15]!
  const b31 = k[c + 16]!
  const b32 = k[c + 17]!
  const a31 = k[c + 18]!
  const a32 = k[c + 19]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  let p2 = s[t + 4]!
  let q2 = s[t + 5]!
  let p3 = s[t + 6]!
  let q3 = s[t + 7]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    const y2 = b20 * y1 + p2
    p2 = b21 * y1 + q2 - a21 * y2
    q2 = b22 * y1 - a22 * y2
    const y3 = b30 * y2 + p3
    p3 = b31 * y2 + q3 - a31 * y3
    q3 = b32 * y2 - a32 * y3
    output[n] = y3
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
      s[t + 4] = p2
      s[t + 5] = q2
      s[t + 6] = p3
      s[t + 7] = q3
    }
  }
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
