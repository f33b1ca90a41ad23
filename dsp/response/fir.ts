import { DesignError } from '../errors'
import type { FirFilter } from '../forms/filter'
import { cosHalfTurns, foldedTurns, refuseFrequency, sinHalfTurns } from './axis'

/*
 * Responses of a filter given by its taps. A symmetric one is a real sum of cosines or sines, the amplitude A, turned by an exact delay;
 * any other is a complex sum. Both go through Clenshaw's recurrence b_k = a_k + 2cos ω·b_{k+1} − b_{k+2}, near ω = 0 and ω = π in the form of
 * Reinsch, which carries the sum (or difference) of neighbours and keeps the digits that 2cos ω ≈ ±2 would cancel.
 * Sources: C. W. Clenshaw, Math. Tables Aids Comput. 9, 1955; J. Stoer & R. Bulirsch, Introduction to Numerical Analysis, 3rd ed., §2.3.2
 * (Goertzel's sums as mended by Reinsch).
 */

/** What one run of the recurrence leaves: b₁, and b₀ − b₁·cos ω, b₀ − b₁, b₀ + b₁, each without cancellation. */
interface Sums {
  first: number
  cosine: number
  difference: number
  sum: number
}

/** Within this of ω = 0 and π, in turns, the mended forms are used; between, cos ω itself, which is exactly 0 at a quarter of the rate. */
const END = 0.125

function recur(terms: Float64Array, x: number, into: Sums): void {
  const a = Math.abs(x)
  let next = 0
  let carried = 0
  if (a < END) {
    const s = sinHalfTurns(a)
    const delta = -4 * s * s
    for (let k = terms.length - 1; k > 0; k--) {
      carried = terms[k]! + delta * next + carried
      next += carried
    }
    const d = terms[0]! + delta * next + carried
    into.cosine = d - 0.5 * delta * next
    into.difference = d
    into.sum = d + 2 * next
  } else if (a > 0.5 - END) {
    const c = cosHalfTurns(a)
    const delta = 4 * c * c
    for (let k = terms.length - 1; k > 0; k--) {
      carried = terms[k]! + delta * next - carried
      next = carried - next
    }
    const d = terms[0]! + delta * next - carried
    into.cosine = d - 0.5 * delta * next
    into.difference = d - 2 * next
    into.sum = d
  } else {
    const cosine = a > 0.25 ? -sinHalfTurns(2 * (a - 0.25)) : sinHalfTurns(2 * (0.25 - a))
    const twice = 2 * cosine
    let after = 0
    for (let k = terms.length - 1; k > 0; k--) {
      const value = terms[k]! + twice * next - after
      after = next
      next = value
    }
    const b = terms[0]! + twice * next - after
    into.cosine = terms[0]! + cosine * next - after
    into.difference = b - next
    into.sum = b + next
  }
  into.first = next
}

interface Compiled {
  readonly terms: Float64Array
  /** k·h[k], for the delay of a filter without symmetry. */
  readonly ramp: Float64Array
  readonly isHalf: boolean
  readonly size: number
}

const compiled = new WeakMap<FirFilter, Compiled>()

function compile(filter: FirFilter): Compiled {
  const { taps, symmetry, sampleRateHz } = filter
  if (!(sampleRateHz > 0 && Number.isFinite(sampleRateHz))) {
    throw new DesignError('not-positive', 'sampleRateHz', 'The sampling rate must be above 0 Hz.')
  }
  const bad = taps.findIndex((tap) => !Number.isFinite(tap))
  if (bad >= 0) throw new DesignError('not-finite', `taps.${bad}`, `The tap at index ${bad} is not a finite number.`)
  const count = taps.length
  const size = taps.reduce((sum, tap) => sum + Math.abs(tap), 0)
  if (symmetry === 'none') return { terms: taps, ramp: taps.map((tap, k) => k * tap), isHalf: false, size }
  const isHalf = count % 2 === 0
  const middle = isHalf ? count / 2 - 1 : (count - 1) / 2
  const terms = Float64Array.from({ length: middle + 1 }, (_, k) => 2 * taps[middle - k]!)
  if (!isHalf) terms[0] = taps[middle]!
  return { terms, ramp: new Float64Array(0), isHalf, size }
}

function compiledOf(filter: FirFilter): Compiled {
  const known = compiled.get(filter)
  if (known !== undefined) return known
  const fresh = compile(filter)
  compiled.set(filter, fresh)
  return fresh
}

const newSums = (): Sums => ({ first: 0, cosine: 0, difference: 0, sum: 0 })

function amplitudeAt({ terms, isHalf }: Compiled, isOdd: boolean, x: number, sums: Sums): number {
  recur(terms, x, sums)
  if (isOdd) return isHalf ? sums.sum * sinHalfTurns(x) : sums.first * 2 * sinHalfTurns(x) * cosHalfTurns(x)
  // Σ a_k·cos kω = b₀ − b₁·cos ω
  return isHalf ? sums.difference * cosHalfTurns(x) : sums.cosine
}

/** Complex sum Σ a_k·e^{−jkω} = (b₀ − b₁·cos ω) − j·b₁·sin ω. */
function sumAt(terms: Float64Array, x: number, sums: Sums): void {
  recur(terms, x, sums)
  sums.first *= -2 * sinHalfTurns(x) * cosHalfTurns(x)
}

/**
 * Amplitude A of a symmetric filter: H = A·e^{−jω(N−1)/2} for even symmetry, j times that for odd. Real, with sign, exactly 0 where symmetry
 * forces a zero.
 *
 * @param frequenciesHz F frequencies in Hz
 * @returns F amplitudes
 * @throws DesignError `not-symmetric`, `not-finite`
 */
export function firAmplitude(filter: FirFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const { symmetry, sampleRateHz, taps } = filter
  if (symmetry === 'none') {
    throw new DesignError('not-symmetric', 'symmetry', 'Only a filter of linear phase has an amplitude with a sign.')
  }
  const parts = compiledOf(filter)
  const sums = newSums()
  const out = new Float64Array(frequenciesHz.length)
  for (let n = 0; n < out.length; n++) {
    const hertz = frequenciesHz[n]!
    if (!Number.isFinite(hertz)) refuseFrequency(n)
    const x = foldedTurns(hertz, sampleRateHz)
    const value = amplitudeAt(parts, symmetry === 'odd', x, sums)
    // With an even number of taps the amplitude changes its sign from one turn to the next.
    const turns = Math.round(hertz / sampleRateHz - x)
    out[n] = taps.length % 2 === 0 && turns % 2 !== 0 ? -value : value
  }
  return out
}

/** Complex response, written into the caller's arrays. @see frequencyResponse */
export function firResponseInto(
  filter: FirFilter,
  frequenciesHz: ArrayLike<number>,
  re: Float64Array,
  im: Float64Array,
): void {
  const { symmetry, sampleRateHz, taps } = filter
  const parts = compiledOf(filter)
  const sums = newSums()
  const middle = (taps.length - 1) / 2
  for (let n = 0; n < frequenciesHz.length; n++) {
    const hertz = frequenciesHz[n]!
    if (!Number.isFinite(hertz)) refuseFrequency(n)
    const x = foldedTurns(hertz, sampleRateHz)
    if (symmetry === 'none') {
      sumAt(parts.terms, x, sums)
      re[n] = sums.cosine + 0
      im[n] = sums.first + 0
      continue
    }
    const amplitude = amplitudeAt(parts, symmetry === 'odd', x, sums)
    const turns = x * middle
    const angle = -2 * Math.PI * (turns - Math.round(turns))
    const [c, s] = [amplitude * Math.cos(angle), amplitude * Math.sin(angle)]
    re[n] = (symmetry === 'odd' ? -s : c) + 0
    im[n] = (symmetry === 'odd' ? c : s) + 0
  }
}

/** 20·lg|H|, −Infinity at an exact zero. @see magnitudeDb */
export function firMagnitudeDbInto(filter: FirFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { symmetry, sampleRateHz } = filter
  const parts = compiledOf(filter)
  const sums = newSums()
  for (let n = 0; n < frequenciesHz.length; n++) {
    const hertz = frequenciesHz[n]!
    if (!Number.isFinite(hertz)) refuseFrequency(n)
    const x = foldedTurns(hertz, sampleRateHz)
    if (symmetry === 'none') {
      sumAt(parts.terms, x, sums)
      out[n] = 20 * Math.log10(Math.hypot(sums.cosine, sums.first))
    } else out[n] = 20 * Math.log10(Math.abs(amplitudeAt(parts, symmetry === 'odd', x, sums)))
  }
}

/** Half a step to either side of a zero on the circle, in turns, where the delay is taken instead. */
const BESIDE = 2 ** -17

function delayAt(parts: Compiled, x: number, sums: Sums, isBeside = false): number {
  const { terms, ramp, size } = parts
  sumAt(terms, x, sums)
  const { cosine: re, first: im } = sums
  const power = re * re + im * im
  if (!(Math.sqrt(power) > 1e-10 * size)) {
    // Delay is a smooth function that only its quotient doesn't give here: the mean of its neighbours stands for it.
    if (isBeside || size === 0) return (terms.length - 1) / 2
    return (delayAt(parts, x - BESIDE, sums, true) + delayAt(parts, x + BESIDE, sums, true)) / 2
  }
  sumAt(ramp, x, sums)
  return (sums.cosine * re + sums.first * im) / power
}

/** Group delay in seconds: exactly (N − 1)/2 samples for a symmetric filter, else Re{Σ k·h[k]·e^{−jkω} / H}. @see groupDelay */
export function firDelayInto(filter: FirFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { symmetry, sampleRateHz, taps } = filter
  const parts = compiledOf(filter)
  const sums = newSums()
  const constant = (taps.length - 1) / 2 / sampleRateHz
  for (let n = 0; n < frequenciesHz.length; n++) {
    const hertz = frequenciesHz[n]!
    if (!Number.isFinite(hertz)) refuseFrequency(n)
    out[n] = symmetry === 'none' ? delayAt(parts, foldedTurns(hertz, sampleRateHz), sums) / sampleRateHz : constant
  }
}

/** Continuous phase of a filter without symmetry at equally spaced turns from 0 to ½. */
interface PhaseTrack {
  readonly phase: Float64Array
  readonly step: number
}

const tracks = new WeakMap<FirFilter, PhaseTrack>()

/** A residue of the phase against what the delay foretells, brought between −0.9π and 1.1π: a zero on the circle steps upward. */
const residue = (angle: number): number => angle - 2 * Math.PI * Math.ceil(angle / (2 * Math.PI) - 0.55)

const POINTS_PER_TAP = 16

function trackOf(filter: FirFilter): PhaseTrack {
  const known = tracks.get(filter)
  if (known !== undefined) return known
  const parts = compiledOf(filter)
  const sums = newSums()
  const count = POINTS_PER_TAP * filter.taps.length + 1
  const step = 0.5 / (count - 1)
  const phase = new Float64Array(count)
  let delay = 0
  for (let n = 0; n < count; n++) {
    const x = n * step
    sumAt(parts.terms, x, sums)
    const angle = Math.atan2(sums.first + 0, sums.cosine)
    const here = delayAt(parts, x, sums)
    if (n === 0) phase[0] = angle
    else {
      const foretold = phase[n - 1]! - Math.PI * step * (delay + here)
      phase[n] = foretold + residue(angle - foretold)
    }
    delay = here
  }
  const track = { phase, step }
  tracks.set(filter, track)
  return track
}

/** Continuous phase in radians. @see phaseResponse */
export function firPhaseInto(filter: FirFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { symmetry, sampleRateHz, taps } = filter
  if (symmetry === 'none') return trackedPhaseInto(filter, frequenciesHz, out)
  const amplitude = firAmplitude(filter, frequenciesHz)
  const samples = (taps.length - 1) / 2
  for (let n = 0; n < frequenciesHz.length; n++) {
    const turns = frequenciesHz[n]! / sampleRateHz
    const side = turns < 0 ? -1 : 1
    const constant = symmetry === 'odd' ? Math.PI / 2 : 0
    out[n] = constant - 2 * Math.PI * turns * samples + (amplitude[n]! < 0 ? side * Math.PI : 0)
  }
}

function trackedPhaseInto(filter: FirFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { phase, step } = trackOf(filter)
  const parts = compiledOf(filter)
  const sums = newSums()
  const perTurn = 2 * (phase[phase.length - 1]! - phase[0]!)
  for (let n = 0; n < frequenciesHz.length; n++) {
    const hertz = frequenciesHz[n]!
    if (!Number.isFinite(hertz)) refuseFrequency(n)
    const x = foldedTurns(hertz, filter.sampleRateHz)
    const turns = Math.round(hertz / filter.sampleRateHz - x)
    const a = Math.abs(x)
    const at = Math.min(Math.floor(a / step), phase.length - 1)
    sumAt(parts.terms, a, sums)
    const angle = Math.atan2(sums.first + 0, sums.cosine)
    const here = delayAt(parts, a, sums)
    const foretold = phase[at]! - 2 * Math.PI * (a - at * step) * here
    const value = foretold + residue(angle - foretold)
    out[n] = (x < 0 ? 2 * phase[0]! - value : value) + turns * perTurn
  }
}
