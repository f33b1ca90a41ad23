import 'server-only'
import { designFromSpec, DesignError, ENGINE_VERSION, type Complex, type DesignSpec, type Section } from '@/dsp'
import {
  coefficientsOf,
  isStoredTaps,
  type StoredCoefficients,
  type StoredRoots,
  type StoredTaps,
} from './coefficients'
import type { RecomputeDifference } from './types'

/** Below this a difference is the last bits of another processor's or engine's elementary functions, not another filter. */
const TOLERANCE = 1e-12

const modulus = ({ re, im }: Complex) => Math.hypot(re, im)
const distance = (one: Complex, other: Complex) => Math.hypot(one.re - other.re, one.im - other.im)

/** Relative to the larger of the two; 0 when both are 0. */
function relative(one: number, other: number): number {
  const scale = Math.max(Math.abs(one), Math.abs(other))
  return scale === 0 ? 0 : Math.abs(one - other) / scale
}

/** Each root against the nearest one not yet taken, relative to the largest root of its kind. An engine may list roots in another order. */
function rootDifference(stored: readonly Complex[], fresh: readonly Complex[]): number {
  if (stored.length !== fresh.length) return Infinity
  const scale = Math.max(0, ...stored.map(modulus), ...fresh.map(modulus))
  if (scale === 0) return 0
  const left = [...fresh]
  let worst = 0
  for (const root of stored) {
    const distances = left.map((candidate) => distance(root, candidate))
    const nearest = distances.indexOf(Math.min(...distances))
    worst = Math.max(worst, distances[nearest] ?? Infinity)
    left.splice(nearest, 1)
  }
  return worst / scale
}

const numbersOf = ({ b0, b1, b2, a1, a2 }: Section) => [
  [b0, b1, b2],
  [1, a1, a2],
]

/** Numerators and denominators apart, each relative to its own largest coefficient: a tiny b0 must not hide behind a1. */
function sectionDifference(stored: readonly Section[], fresh: readonly Section[]): number {
  if (stored.length !== fresh.length) return Infinity
  let worst = 0
  stored.forEach((section, index) => {
    const other = fresh[index]
    if (!other) return
    const otherNumbers = numbersOf(other)
    numbersOf(section).forEach((coefficients, role) => {
      const others = otherNumbers[role] ?? []
      const scale = Math.max(...coefficients.map(Math.abs), ...others.map(Math.abs))
      if (scale === 0) return
      coefficients.forEach((value, at) => {
        worst = Math.max(worst, Math.abs(value - (others[at] ?? NaN)) / scale)
      })
    })
  })
  return worst
}

/** The largest relative difference of two sets of coefficients, over the roles: gains, zeros, poles, sections; analog and digital. */
export function worstRelativeDifference(stored: StoredCoefficients, fresh: StoredCoefficients): number {
  if (isStoredTaps(stored) || isStoredTaps(fresh))
    return isStoredTaps(stored) && isStoredTaps(fresh) ? tapsDifference(stored, fresh) : Infinity
  if ((stored.parallel === null) !== (fresh.parallel === null)) return Infinity
  return Math.max(
    relative(stored.sampleRateHz, fresh.sampleRateHz),
    relative(stored.gain, fresh.gain),
    rootDifference(stored.zeros, fresh.zeros),
    rootDifference(stored.poles, fresh.poles),
    sectionDifference(stored.sections, fresh.sections),
    relative(stored.parallel?.direct ?? 0, fresh.parallel?.direct ?? 0),
    sectionDifference(stored.parallel?.terms ?? [], fresh.parallel?.terms ?? []),
    originalDifference(stored.analog, fresh.analog),
  )
}

function originalDifference(stored: StoredRoots | null, fresh: StoredRoots | null): number {
  if (!stored || !fresh) return stored === fresh ? 0 : Infinity
  return Math.max(
    relative(stored.gain, fresh.gain),
    rootDifference(stored.zeros, fresh.zeros),
    rootDifference(stored.poles, fresh.poles),
  )
}

/** Relative to the largest tap. */
function tapsDifference(stored: StoredTaps, fresh: StoredTaps): number {
  if (stored.taps.length !== fresh.taps.length) return Infinity
  const scale = Math.max(...stored.taps.map(Math.abs))
  const differences = stored.taps.map((tap, k) => Math.abs(tap - (fresh.taps[k] ?? NaN)) / scale)
  return Math.max(relative(stored.sampleRateHz, fresh.sampleRateHz), ...differences)
}

interface StoredVersion {
  readonly number: number
  readonly spec: DesignSpec
  readonly coefficients: StoredCoefficients
  readonly engineVersion: string
}

/** Computes a version anew; says how far the result is from what was stored, or null when it is the same filter. */
export function recomputeDifference(version: StoredVersion): RecomputeDifference | null {
  const worstRelative = freshDifference(version)
  // Written so that NaN counts as a difference.
  if (worstRelative <= TOLERANCE) return null
  return {
    versionNumber: version.number,
    storedEngine: version.engineVersion,
    currentEngine: ENGINE_VERSION,
    worstRelative,
  }
}

function freshDifference({ spec, coefficients }: StoredVersion): number {
  try {
    return worstRelativeDifference(coefficients, coefficientsOf(designFromSpec(spec)))
  } catch (error) {
    // The engine of today refuses what an earlier one computed: as different as can be.
    if (error instanceof DesignError) return Infinity
    throw error
  }
}
