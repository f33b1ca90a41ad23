import { DesignError } from '../errors'
import type { Complex, DigitalFilter, Filter, FirFilter } from '../forms/filter'

/** What a response can be asked of: an analog filter, or a digital one that knows its sampling rate. */
export type AnyFilter = Filter<'s'> | DigitalFilter | FirFilter

/** Those known by their roots. */
export type RootFilter = Filter<'s'> | DigitalFilter

/*
 * A filter's roots, compiled once into factors that are cheap and accurate to evaluate on the frequency axis.
 *
 * Both domains share one shape. Each conjugate pair gives (α + β·u + γ·v) + j·κ·t and each real root ρ·p + j·ι·q, where
 *   analog:  u = ω²,        v = 0,          t = ω,                p = 1,        q = ω          (ω scaled by a power of two)
 *   digital: u = sin²(ω/2), v = cos²(ω/2),  t = sin(ω/2)cos(ω/2), p = cos(ω/2), q = sin(ω/2)   (ω = 2πf/fs)
 * The digital forms follow from taking the factor e^{jω/2} out of every root: (e^{jω} − r) = e^{jω/2}[(1−r)cos(ω/2) + j(1+r)sin(ω/2)],
 * and for a pair (e^{jω} − z)(e^{jω} − z*) = e^{jω}[|1−z|² − 2(1+|z|²)sin²(ω/2) + 2j(1−|z|²)sin(ω/2)cos(ω/2)]. Nothing is
 * subtracted that is nearly equal while ω and the distance of the root from z = 1 are small, so a corner at 1e-5 of the rate keeps
 * its digits; for roots in the left half the same is done from z = −1 with cos². Every factor's angle is 0 at DC and continuous,
 * which is why a phase built from them needs no unwrapping.
 */

interface FactorList {
  /** Conjugate pairs, five numbers each: α, β, γ, κ, and the angle's sense is that of κ. */
  readonly pairs: Float64Array
  readonly pairCount: number
  /** Real roots, two numbers each: ρ, ι. */
  readonly reals: Float64Array
  readonly realCount: number
}

export interface RootFactors {
  readonly domain: 's' | 'z'
  /** Analog: ω is divided by this power of two. Digital: the sampling rate in Hz. */
  readonly scale: number
  readonly zeros: FactorList
  readonly poles: FactorList
  /** Net powers (zeros minus poles) of the bare factors: p for roots at z = −1, j·q for roots at z = 1 or s = 0. */
  readonly pPower: number
  readonly qPower: number
  /** Digital: what is left of the factored-out rotations, H carries e^{jω·halfTurns/2}. Analog: 0. */
  readonly halfTurns: number
  /** Gain = gainMantissa · 2^gainExponent, all scalings folded in; its sign is that of the response's first non-zero term at DC. */
  readonly gainMantissa: number
  readonly gainExponent: number
}

export const PAIR_STRIDE = 4
export const REAL_STRIDE = 2

/** |1 − |z|²| below this is a root on the circle: bilinear and closed-form zeros carry at most a few units of rounding. */
const CIRCLE_TOLERANCE = 2 ** -48
const AXIS_TOLERANCE = 1e-15

/** x² as an unevaluated sum of two doubles (Dekker 1971), so that 1 − |z|² keeps its digits near the circle. */
function squareExactly(x: number): readonly [number, number] {
  const high = x * x
  const split = 134217729 * x
  const head = split - (split - x)
  const tail = x - head
  return [high, head * head - high + 2 * head * tail + tail * tail]
}

/** 1 − |z|², accurate relative to itself for the stored doubles; exactly 0 for a root on the circle. */
export function circleDistance(re: number, im: number): number {
  const [h1, l1] = squareExactly(re)
  const [h2, l2] = squareExactly(im)
  const distance = 1 - Math.max(h1, h2) - Math.min(h1, h2) - (l1 + l2)
  return Math.abs(distance) <= CIRCLE_TOLERANCE ? 0 : distance
}

/** Splits roots into pairs (the half with im > 0) and reals; a root without its conjugate is refused. */
export function splitRoots(
  roots: readonly Complex[],
  field: string,
): { readonly pairs: readonly Complex[]; readonly reals: readonly number[] } {
  const pairs: Complex[] = []
  const reals: number[] = []
  let below = 0
  for (const root of roots) {
    if (!Number.isFinite(root.re) || !Number.isFinite(root.im)) {
      throw new DesignError('not-finite', field, `A root among the ${field} is not a finite number.`)
    }
    if (root.im > 0) pairs.push(root)
    else if (root.im < 0) below += 1
    else reals.push(root.re)
  }
  if (below !== pairs.length) {
    throw new DesignError('unpaired-roots', field, `Complex ${field} must come in conjugate pairs.`)
  }
  return { pairs, reals }
}

/** x = mantissa · 2^exponent with 1 ≤ |mantissa| < 2 (0 stays 0). */
function splitExponent(x: number): readonly [number, number] {
  if (x === 0 || !Number.isFinite(x)) return [x, 0]
  let exponent = Math.floor(Math.log2(Math.abs(x)))
  let mantissa = scaleByPowerOfTwo(x, -exponent)
  while (Math.abs(mantissa) >= 2) {
    mantissa /= 2
    exponent += 1
  }
  while (Math.abs(mantissa) < 1) {
    mantissa *= 2
    exponent -= 1
  }
  return [mantissa, exponent]
}

/** x · 2^exponent without overflow on the way. */
export function scaleByPowerOfTwo(x: number, exponent: number): number {
  let left = exponent
  let result = x
  while (left > 1000) {
    result *= 2 ** 1000
    left -= 1000
  }
  while (left < -1000) {
    result *= 2 ** -1000
    left += 1000
  }
  return result * 2 ** left
}

interface Compiled {
  readonly list: FactorList
  readonly atP: number
  readonly atQ: number
  readonly rotation: number
  readonly sign: number
}

function compileAnalog(roots: readonly Complex[], field: string, scale: number, onAxis: boolean): Compiled {
  const { pairs, reals } = splitRoots(roots, field)
  const pairData = new Float64Array(pairs.length * PAIR_STRIDE)
  pairs.forEach((root, i) => {
    const re = root.re / scale
    const im = root.im / scale
    const straight = onAxis && Math.abs(re) <= AXIS_TOLERANCE * im
    pairData.set([straight ? im * im : re * re + im * im, -1, 0, straight ? 0 : -2 * re], i * PAIR_STRIDE)
  })
  const realData: number[] = []
  let atQ = 0
  let sign = 1
  for (const re of reals) {
    if (re === 0) {
      atQ += 1
      continue
    }
    // A root in the right half is turned round, −(σ − jω), so that its angle too begins at 0.
    if (re > 0) sign = -sign
    realData.push(Math.abs(re) / scale, re > 0 ? -1 : 1)
  }
  const list = {
    pairs: pairData,
    pairCount: pairs.length,
    reals: Float64Array.from(realData),
    realCount: realData.length / 2,
  }
  return { list, atP: 0, atQ, rotation: 0, sign }
}

function compileDigital(roots: readonly Complex[], field: string): Compiled {
  const { pairs, reals } = splitRoots(roots, field)
  const pairData = new Float64Array(pairs.length * PAIR_STRIDE)
  pairs.forEach((root, i) => {
    const { re, im } = root
    const distance = circleDistance(re, im)
    const sum = distance === 0 ? 2 : 1 + re * re + im * im
    const values =
      re >= 0
        ? [(1 - re) * (1 - re) + im * im, -2 * sum, 0, 2 * distance]
        : [-((1 + re) * (1 + re) + im * im), 0, 2 * sum, 2 * distance]
    pairData.set(values, i * PAIR_STRIDE)
  })
  const realData: number[] = []
  let atP = 0
  let atQ = 0
  let rotation = 2 * pairs.length
  let sign = 1
  for (const re of reals) {
    if (re === 0) {
      rotation += 2
      continue
    }
    rotation += 1
    if (re === -1) atP += 1
    else if (re === 1) atQ += 1
    else if (re > 1) {
      sign = -sign
      realData.push(re - 1, -(1 + re))
    } else realData.push(1 - re, 1 + re)
  }
  const list = {
    pairs: pairData,
    pairCount: pairs.length,
    reals: Float64Array.from(realData),
    realCount: realData.length / 2,
  }
  return { list, atP, atQ, rotation, sign }
}

/** A power of two near the geometric mean of the roots' magnitudes, so that scaled factors stay near 1. */
function analogScale(filter: Filter<'s'>): number {
  let sum = 0
  let count = 0
  for (const root of [...filter.poles, ...filter.zeros]) {
    const magnitude = Math.hypot(root.re, root.im)
    if (magnitude === 0) continue
    sum += Math.log2(magnitude)
    count += 1
  }
  return count === 0 ? 1 : 2 ** Math.round(sum / count)
}

function compile(filter: RootFilter): RootFactors {
  if (!Number.isFinite(filter.gain)) {
    throw new DesignError('not-finite', 'gain', 'The gain of the filter is not a finite number.')
  }
  const digital = filter.domain === 'z'
  if (digital && !(filter.sampleRateHz > 0 && Number.isFinite(filter.sampleRateHz))) {
    throw new DesignError('not-positive', 'sampleRateHz', 'The sampling rate must be above 0 Hz.')
  }
  const scale = digital ? filter.sampleRateHz : analogScale(filter)
  const zeros = digital ? compileDigital(filter.zeros, 'zeros') : compileAnalog(filter.zeros, 'zeros', scale, true)
  const poles = digital ? compileDigital(filter.poles, 'poles') : compileAnalog(filter.poles, 'poles', scale, false)
  const [mantissa, exponent] = splitExponent(filter.gain)
  // Bare factors at z = ±1 are 2·cos(ω/2) and 2·sin(ω/2); at s = 0 just ω.
  const shift = digital
    ? zeros.atP + zeros.atQ - poles.atP - poles.atQ
    : Math.log2(scale) * (filter.zeros.length - filter.poles.length)
  return {
    domain: filter.domain,
    scale,
    zeros: zeros.list,
    poles: poles.list,
    pPower: zeros.atP - poles.atP,
    qPower: zeros.atQ - poles.atQ,
    halfTurns: zeros.rotation - poles.rotation,
    gainMantissa: mantissa * zeros.sign * poles.sign,
    gainExponent: exponent + shift,
  }
}

const compiled = new WeakMap<RootFilter, RootFactors>()

/** The factors of a filter, compiled on first use. A filter is never changed once made, so they stay valid. */
export function factorsOf(filter: RootFilter): RootFactors {
  const known = compiled.get(filter)
  if (known !== undefined) return known
  const fresh = compile(filter)
  compiled.set(filter, fresh)
  return fresh
}
