import { isFir, type DigitalFilter, type Filter } from '../forms/filter'
import { cosHalfTurns, foldedTurns, refuseFrequency, sinHalfTurns } from './axis'
import type { AnyFilter, RootFactors, RootFilter } from './factors'
import { firDelayInto, firPhaseInto } from './fir'
import { circleDistance, factorsOf, PAIR_STRIDE, REAL_STRIDE, splitRoots } from './factors'

/** Angles of one list of factors at one frequency; each is 0 at DC and continuous, with a step of π at a zero on the axis or circle. */
function listAngle(
  list: RootFactors['zeros'],
  u: number,
  v: number,
  t: number,
  p: number,
  q: number,
  downward: boolean,
): number {
  let angle = 0
  for (let i = 0; i < list.pairCount * PAIR_STRIDE; i += PAIR_STRIDE) {
    const re = list.pairs[i]! + list.pairs[i + 1]! * u + list.pairs[i + 2]! * v
    const slope = list.pairs[i + 3]!
    if (slope !== 0) angle += Math.atan2(slope * t, re)
    else if (re < 0) angle += downward ? -Math.PI : Math.PI
  }
  for (let i = 0; i < list.realCount * REAL_STRIDE; i += REAL_STRIDE) {
    angle += Math.atan2(list.reals[i + 1]! * q, list.reals[i]! * p)
  }
  return angle
}

/** Phase gained by one list over a whole turn of the circle: 2π a pair and π a real root, signed by the side of the circle it is on. */
function turnAngle(list: RootFactors['zeros']): number {
  let angle = 0
  for (let i = 0; i < list.pairCount * PAIR_STRIDE; i += PAIR_STRIDE) {
    angle += list.pairs[i + 3]! < 0 ? -2 * Math.PI : 2 * Math.PI
  }
  for (let i = 0; i < list.realCount * REAL_STRIDE; i += REAL_STRIDE) {
    angle += list.reals[i + 1]! < 0 ? -Math.PI : Math.PI
  }
  return angle
}

/**
 * Unwrapped phase in radians, written into the caller's array.
 * @see phaseResponse
 */
export function phaseResponseInto(filter: AnyFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  if (isFir(filter)) {
    firPhaseInto(filter, frequenciesHz, out)
    return
  }
  const factors = factorsOf(filter)
  const { zeros, poles, qPower, pPower, halfTurns, scale } = factors
  const digital = factors.domain === 'z'
  const base = factors.gainMantissa < 0 ? Math.PI : 0
  const perTurn = digital ? turnAngle(zeros) - turnAngle(poles) + Math.PI * (pPower + qPower + halfTurns) : 0
  for (let n = 0; n < frequenciesHz.length; n++) {
    const frequencyHz = frequenciesHz[n]!
    if (!(frequencyHz - frequencyHz === 0)) refuseFrequency(n)
    if (digital) {
      const x = foldedTurns(frequencyHz, scale)
      const turns = Math.round(frequencyHz / scale - x)
      const s = sinHalfTurns(x)
      const c = cosHalfTurns(x)
      const downward = x < 0
      // A zero at z = 1 turns the phase by π/2 on either side of DC; at DC itself the value from above is given.
      const side = downward ? -Math.PI / 2 : Math.PI / 2
      out[n] =
        base +
        perTurn * turns +
        listAngle(zeros, s * s, c * c, s * c, c, s, downward) -
        listAngle(poles, s * s, c * c, s * c, c, s, downward) +
        qPower * side +
        Math.PI * x * halfTurns
    } else {
      const w = (2 * Math.PI * frequencyHz) / scale
      const downward = frequencyHz < 0
      const side = downward ? -Math.PI / 2 : Math.PI / 2
      out[n] =
        base +
        listAngle(zeros, w * w, 0, w, 1, w, downward) -
        listAngle(poles, w * w, 0, w, 1, w, downward) +
        qPower * side
    }
  }
}

/**
 * Phase in radians, unwrapped: the sum of the root angles, continuous from its value at DC, so that no choice of 2π is ever made.
 * Where a zero lies on the axis or the circle the phase steps by +π, as the response changes its sign there. A filter that keeps a
 * parallel form too is taken by its roots.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N phases in radians; at DC 0 (π for a negative gain), plus π/2 for each zero there
 * @throws DesignError `not-finite` for a frequency that is no finite number
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §5.3.2 (continuous phase from poles and zeros).
 */
export function phaseResponse(filter: AnyFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const out = new Float64Array(frequenciesHz.length)
  phaseResponseInto(filter, frequenciesHz, out)
  return out
}

/** Roots laid out for the delay sums; `weight` is half of 1 − |z|² (digital) or −σ (analog), signed + for poles and − for zeros. */
interface DelayTable {
  readonly pairs: Float64Array
  readonly reals: Float64Array
  /** What roots contribute at every frequency alike, in samples. */
  readonly constant: number
}

const DELAY_STRIDE = 3

function delayTable(filter: RootFilter): DelayTable {
  const pairs: number[] = []
  const reals: number[] = []
  for (const [roots, field, sign] of [
    [filter.poles, 'poles', 1],
    [filter.zeros, 'zeros', -1],
  ] as const) {
    const split = splitRoots(roots, field)
    for (const root of split.pairs) {
      const onAxis = field === 'zeros' && Math.abs(root.re) <= 1e-15 * root.im
      const weight = filter.domain === 'z' ? circleDistance(root.re, root.im) / 2 : onAxis ? 0 : -root.re
      if (weight !== 0) pairs.push(root.re, root.im, sign * weight)
    }
    for (const root of split.reals) {
      const weight = filter.domain === 'z' ? circleDistance(root, 0) / 2 : -root
      if (weight !== 0) reals.push(root, 0, sign * weight)
    }
  }
  return {
    pairs: Float64Array.from(pairs),
    reals: Float64Array.from(reals),
    constant: filter.domain === 'z' ? (filter.poles.length - filter.zeros.length) / 2 : 0,
  }
}

const delayTables = new WeakMap<RootFilter, DelayTable>()

function delayTableOf(filter: RootFilter): DelayTable {
  const known = delayTables.get(filter)
  if (known !== undefined) return known
  const fresh = delayTable(filter)
  delayTables.set(filter, fresh)
  return fresh
}

function analogDelayInto(filter: Filter<'s'>, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { pairs, reals } = delayTableOf(filter)
  for (let n = 0; n < frequenciesHz.length; n++) {
    const frequencyHz = frequenciesHz[n]!
    if (!(frequencyHz - frequencyHz === 0)) refuseFrequency(n)
    const w = 2 * Math.PI * frequencyHz
    let delay = 0
    for (let i = 0; i < pairs.length; i += DELAY_STRIDE) {
      const re = pairs[i]!
      const above = w - pairs[i + 1]!
      const below = w + pairs[i + 1]!
      delay += pairs[i + 2]! * (1 / (re * re + above * above) + 1 / (re * re + below * below))
    }
    for (let i = 0; i < reals.length; i += DELAY_STRIDE) {
      const re = reals[i]!
      delay += reals[i + 2]! / (re * re + w * w)
    }
    out[n] = delay
  }
}

function digitalDelayInto(filter: DigitalFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const { pairs, reals, constant } = delayTableOf(filter)
  const { sampleRateHz } = filter
  for (let n = 0; n < frequenciesHz.length; n++) {
    const frequencyHz = frequenciesHz[n]!
    if (!(frequencyHz - frequencyHz === 0)) refuseFrequency(n)
    const x = foldedTurns(frequencyHz, sampleRateHz)
    const s = sinHalfTurns(x)
    const c = cosHalfTurns(x)
    const sine = 2 * s * c
    let delay = constant
    for (let i = 0; i < pairs.length; i += DELAY_STRIDE) {
      const re = pairs[i]!
      // Re(e^{jω} − z), from z = 1 or from z = −1, whichever is nearer.
      const along = re >= 0 ? 1 - re - 2 * s * s : 2 * c * c - (1 + re)
      const above = sine - pairs[i + 1]!
      const below = sine + pairs[i + 1]!
      const square = along * along
      delay += pairs[i + 2]! * (1 / (square + above * above) + 1 / (square + below * below))
    }
    for (let i = 0; i < reals.length; i += DELAY_STRIDE) {
      const re = reals[i]!
      const along = re >= 0 ? 1 - re - 2 * s * s : 2 * c * c - (1 + re)
      delay += reals[i + 2]! / (along * along + sine * sine)
    }
    out[n] = delay / sampleRateHz
  }
}

/**
 * Group delay −dφ/dω in seconds, written into the caller's array.
 * @see groupDelay
 */
export function groupDelayInto(filter: AnyFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  if (isFir(filter)) firDelayInto(filter, frequenciesHz, out)
  else if (filter.domain === 's') analogDelayInto(filter, frequenciesHz, out)
  else digitalDelayInto(filter, frequenciesHz, out)
}

/**
 * Group delay −dφ/dω in seconds: the analytic sum over the roots, never a difference of phases.
 *
 * A pole at σ + jω₀ adds −σ/(σ² + (ω−ω₀)²); on the z-plane a pole adds ½ + ½(1−|z|²)/|e^{jω}−z|² samples, a zero takes the same
 * away. Written so, a zero exactly on the circle takes away its half sample and nothing else: no spike. A filter that keeps a
 * parallel form too is taken by its roots.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N delays in seconds
 * @throws DesignError `not-finite` for a frequency that is no finite number
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., eq. (5.64) (group delay of a first-order factor).
 */
export function groupDelay(filter: AnyFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const out = new Float64Array(frequenciesHz.length)
  groupDelayInto(filter, frequenciesHz, out)
  return out
}

/**
 * Phase delay −φ/ω in seconds, from the unwrapped phase.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N delays in seconds; at 0 Hz the limit, which is the group delay there, or ∓Infinity where the phase at DC is not 0
 * @throws DesignError `not-finite` for a frequency that is no finite number
 */
export function phaseDelay(filter: AnyFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const out = phaseResponse(filter, frequenciesHz)
  for (let n = 0; n < out.length; n++) {
    const phase = out[n]!
    const frequencyHz = frequenciesHz[n]!
    if (frequencyHz !== 0) out[n] = -phase / (2 * Math.PI * frequencyHz)
    else out[n] = phase === 0 ? groupDelay(filter, [0])[0]! : phase > 0 ? -Infinity : Infinity
  }
  return out
}
