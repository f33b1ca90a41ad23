import { magnitudeDb, type AnyDigital, type DigitalFilter, type FirFilter, type Section } from '@/dsp'

/*
 * What rounding coefficients to a number type does to the filter: how far the response moves, and whether it stays stable. The
 * comparison is with the filter's own response, at frequencies that crowd around its poles, where rounding shows first.
 */

/** Response is judged down to this far below its peak; further down a level is set by rounding in any arithmetic. */
export const judgedRangeDb = 80

export interface RoundingEffect {
  /** Largest change of the level, in dB, where the filter is within `judgedRangeDb` of its peak. */
  readonly worstDeviationDb: number
  readonly stable: boolean
}

/** Radians per sample: even on a logarithmic scale down to a hundredth of the lowest pole angle, and dense around every pole. */
function judgedAngles(filter: DigitalFilter): Float64Array {
  const angles: number[] = [0, Math.PI]
  let lowest = 0.1
  for (const { re, im } of filter.poles) {
    if (im < 0) continue
    const angle = Math.atan2(im, re)
    const width = Math.max(Math.abs(1 - Math.hypot(re, im)), 1e-12)
    lowest = Math.min(lowest, Math.max(angle, width))
    for (let k = -8; k <= 8; k++) angles.push(angle + (k / 4) * width)
  }
  const count = 400
  const from = Math.log(lowest / 100)
  for (let k = 0; k <= count; k++) angles.push(Math.exp(from + ((Math.log(Math.PI) - from) * k) / count))
  for (let k = 1; k < 100; k++) angles.push((Math.PI * k) / 100)
  return Float64Array.from(angles.filter((angle) => angle >= 0 && angle <= Math.PI)).sort()
}

function effect(
  filter: AnyDigital,
  angles: Float64Array,
  levelDb: (radians: number, index: number) => number,
  stable: boolean,
): RoundingEffect {
  const truth = magnitudeDb(
    filter,
    angles.map((angle) => (angle / (2 * Math.PI)) * filter.sampleRateHz),
  )
  const peak = truth.reduce((most, level) => Math.max(most, level), Number.NEGATIVE_INFINITY)
  let worst = 0
  truth.forEach((level, k) => {
    if (level < peak - judgedRangeDb) return
    const deviation = Math.abs(levelDb(angles[k] ?? 0, k) - level)
    // NaN (an infinite level on both sides) is as bad as can be.
    worst = Number.isNaN(deviation) ? Number.POSITIVE_INFINITY : Math.max(worst, deviation)
  })
  return { worstDeviationDb: worst, stable }
}

/**
 * |c₀ + c₁·z⁻¹ + c₂·z⁻²| on the circle. Written about z = 1 with sin²(ω/2), so that low corners lose no digits:
 * z·C = (c₀ + c₁ + c₂) − 2(c₀ + c₂)·sin²(ω/2) + j(c₀ − c₂)·sin ω.
 */
function quadraticSize(c0: number, c1: number, c2: number, radians: number): number {
  const half = Math.sin(radians / 2)
  return Math.hypot(c0 + c1 + c2 - 2 * (c0 + c2) * half * half, (c0 - c2) * Math.sin(radians))
}

/** Effect of running these (rounded) sections instead of the filter. */
export function effectOfSections(filter: DigitalFilter, sections: readonly Section[]): RoundingEffect {
  // Stability triangle of a second-order section.
  const stable = sections.every(({ a1, a2 }) => Math.abs(a2) < 1 && Math.abs(a1) < 1 + a2)
  const levelDb = (radians: number) => {
    let level = 0
    for (const { b0, b1, b2, a1, a2 } of sections)
      level += 20 * Math.log10(quadraticSize(b0, b1, b2, radians) / quadraticSize(1, a1, a2, radians))
    return level
  }
  return effect(filter, judgedAngles(filter), levelDb, stable)
}

/** Effect of running this (rounded) ratio instead of the filter; `a` without its leading 1. */
export function effectOfRatio(filter: DigitalFilter, b: readonly number[], a: readonly number[]): RoundingEffect {
  const denominator = [1, ...a]
  const levelDb = (radians: number) =>
    20 * Math.log10(polynomialSize(b, radians) / polynomialSize(denominator, radians))
  return effect(filter, judgedAngles(filter), levelDb, isStable(denominator))
}

/** Places between two zeros of a response of N taps, whose ripples are 1/N of the rate apart. */
const PLACES_PER_TAP = 4
const LEAST_PLACES = 512

/** Effect of running these (rounded) taps instead of the filter; they are stable whatever they are. */
export function effectOfTaps(filter: FirFilter, taps: readonly number[]): RoundingEffect {
  const count = Math.max(LEAST_PLACES, PLACES_PER_TAP * taps.length)
  const angles = Float64Array.from({ length: count + 1 }, (_, k) => (Math.PI * k) / count)
  const rounded: FirFilter = { ...filter, taps: Float64Array.from(taps) }
  const levels = magnitudeDb(
    rounded,
    angles.map((angle) => (angle / (2 * Math.PI)) * filter.sampleRateHz),
  )
  return effect(filter, angles, (_, k) => levels[k] ?? Number.NaN, true)
}

function polynomialSize(coefficients: readonly number[], radians: number): number {
  let re = 0
  let im = 0
  coefficients.forEach((value, k) => {
    re += value * Math.cos(k * radians)
    im -= value * Math.sin(k * radians)
  })
  return Math.hypot(re, im)
}

/** All roots inside the circle, by the Schur–Cohn recursion: every reflection coefficient is smaller than one. */
export function isStable(denominator: readonly number[]): boolean {
  let current = [...denominator]
  while (current.length > 1) {
    const lead = current[0] ?? 1
    const reflection = (current.at(-1) ?? 0) / lead
    if (!(Math.abs(reflection) < 1)) return false
    const last = current.length - 1
    const scale = 1 - reflection * reflection
    current = current
      .slice(0, last)
      .map((value, k) => (value / lead - reflection * ((current[last - k] ?? 0) / lead)) / scale)
  }
  return true
}
