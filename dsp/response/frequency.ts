import { DesignError } from '../errors'
import { isFir } from '../forms/filter'
import { cosHalfTurns, foldedTurns, refuseFrequency, sinHalfTurns } from './axis'
import { firMagnitudeDbInto, firResponseInto } from './fir'
import type { AnyFilter, RootFactors } from './factors'
import { factorsOf, PAIR_STRIDE, REAL_STRIDE, scaleByPowerOfTwo } from './factors'
import { evaluateScaled } from './scaled-evaluation'

/** Products outside this range are computed again with their exponent kept apart. */
const LEAST = 1e-140
const MOST = 1e140

function checkRoom(name: string, room: number, needed: number): void {
  if (room < needed) {
    throw new DesignError('length', name, `The array ${name} holds ${room} values; ${needed} are needed.`, needed)
  }
}

function rootsInto(
  factors: RootFactors,
  frequenciesHz: ArrayLike<number>,
  outRe: Float64Array,
  outIm: Float64Array,
): void {
  const { zeros, poles, pPower, qPower, halfTurns, scale } = factors
  const digital = factors.domain === 'z'
  const toOmega = (2 * Math.PI) / scale
  const zeroPairs = zeros.pairs
  const zeroReals = zeros.reals
  const polePairs = poles.pairs
  const poleReals = poles.reals
  const zeroPairEnd = zeros.pairCount * PAIR_STRIDE
  const zeroRealEnd = zeros.realCount * REAL_STRIDE
  const polePairEnd = poles.pairCount * PAIR_STRIDE
  const poleRealEnd = poles.realCount * REAL_STRIDE
  const pUp = Math.max(pPower, 0)
  const pDown = Math.max(-pPower, 0)
  const qUp = Math.max(qPower, 0)
  const qDown = Math.max(-qPower, 0)
  const quarter = ((qPower % 4) + 4) % 4
  const direct = factors.gainExponent > -1000 && factors.gainExponent < 1000
  const gain = direct ? factors.gainMantissa * 2 ** factors.gainExponent : 0
  const count = frequenciesHz.length
  for (let n = 0; n < count; n++) {
    const frequencyHz = frequenciesHz[n]!
    if (!(frequencyHz - frequencyHz === 0)) refuseFrequency(n)
    let x = 0
    let u = 0
    let v = 0
    let t = 0
    let p = 1
    let q = 0
    if (digital) {
      x = foldedTurns(frequencyHz, scale)
      q = sinHalfTurns(x)
      p = cosHalfTurns(x)
      u = q * q
      v = p * p
      t = q * p
    } else {
      q = toOmega * frequencyHz
      u = q * q
      t = q
    }
    let nr = 1
    let ni = 0
    for (let i = 0; i < zeroPairEnd; i += PAIR_STRIDE) {
      const fr = zeroPairs[i]! + zeroPairs[i + 1]! * u + zeroPairs[i + 2]! * v
      const fi = zeroPairs[i + 3]! * t
      const next = nr * fr - ni * fi
      ni = nr * fi + ni * fr
      nr = next
    }
    for (let i = 0; i < zeroRealEnd; i += REAL_STRIDE) {
      const fr = zeroReals[i]! * p
      const fi = zeroReals[i + 1]! * q
      const next = nr * fr - ni * fi
      ni = nr * fi + ni * fr
      nr = next
    }
    let bare = 1
    for (let i = 0; i < pUp; i++) bare *= p
    for (let i = 0; i < qUp; i++) bare *= q
    nr *= bare
    ni *= bare
    let dr = 1
    let di = 0
    for (let i = 0; i < polePairEnd; i += PAIR_STRIDE) {
      const fr = polePairs[i]! + polePairs[i + 1]! * u + polePairs[i + 2]! * v
      const fi = polePairs[i + 3]! * t
      const next = dr * fr - di * fi
      di = dr * fi + di * fr
      dr = next
    }
    for (let i = 0; i < poleRealEnd; i += REAL_STRIDE) {
      const fr = poleReals[i]! * p
      const fi = poleReals[i + 1]! * q
      const next = dr * fr - di * fi
      di = dr * fi + di * fr
      dr = next
    }
    bare = 1
    for (let i = 0; i < pDown; i++) bare *= p
    for (let i = 0; i < qDown; i++) bare *= q
    dr *= bare
    di *= bare

    const nSize = Math.abs(nr) + Math.abs(ni)
    const dSize = Math.abs(dr) + Math.abs(di)
    if (direct && nSize > LEAST && nSize < MOST && dSize > LEAST && dSize < MOST) {
      const norm = dr * dr + di * di
      let re = ((nr * dr + ni * di) / norm) * gain
      let im = ((ni * dr - nr * di) / norm) * gain
      if (quarter === 1) {
        const next = -im
        im = re
        re = next
      } else if (quarter === 2) {
        re = -re
        im = -im
      } else if (quarter === 3) {
        const next = im
        im = -re
        re = next
      }
      if (halfTurns !== 0) {
        const angle = Math.PI * x * halfTurns
        const cr = Math.cos(angle)
        const ci = Math.sin(angle)
        const next = re * cr - im * ci
        im = re * ci + im * cr
        re = next
      }
      outRe[n] = re
      outIm[n] = im
    } else {
      const value = evaluateScaled(factors, frequencyHz)
      // + 0, so that an exact zero is 0 and not −0.
      outRe[n] = scaleByPowerOfTwo(value.re, value.exponent) + 0
      outIm[n] = scaleByPowerOfTwo(value.im, value.exponent) + 0
    }
  }
}

/**
 * Complex response on the frequency axis, written into the caller's arrays; allocates nothing per point.
 * @see frequencyResponse
 */
export function frequencyResponseInto(
  filter: AnyFilter,
  frequenciesHz: ArrayLike<number>,
  re: Float64Array,
  im: Float64Array,
): void {
  checkRoom('re', re.length, frequenciesHz.length)
  checkRoom('im', im.length, frequenciesHz.length)
  if (isFir(filter)) firResponseInto(filter, frequenciesHz, re, im)
  else rootsInto(factorsOf(filter), frequenciesHz, re, im)
}

/**
 * Complex frequency response H, evaluated from the roots. Analog filters are evaluated at s = j2πf, digital ones at z = e^{j2πf/fs}, to
 * any f (beyond half the rate the image appears). A filter that keeps a parallel form too is taken by its roots, which hold their
 * relative accuracy in the stop band, where a sum of residues cancels (see parallelResponse).
 *
 * @param filter analog (roots in rad/s) or digital with its sampling rate
 * @param frequenciesHz N frequencies in Hz
 * @returns `re` and `im`, N values each; exactly 0 where a zero lies on the axis or the circle at that frequency
 * @throws DesignError `not-finite` for a frequency that is no finite number, `unpaired-roots` for a filter that is not real
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §5.3 (response from poles and zeros).
 */
export function frequencyResponse(
  filter: AnyFilter,
  frequenciesHz: ArrayLike<number>,
): { re: Float64Array; im: Float64Array } {
  const re = new Float64Array(frequenciesHz.length)
  const im = new Float64Array(frequenciesHz.length)
  frequencyResponseInto(filter, frequenciesHz, re, im)
  return { re, im }
}

const DECIBELS_PER_OCTAVE = 20 * Math.log10(2)

/**
 * 20·lg|H| in dB, written into the caller's array.
 * @see magnitudeDb
 */
export function magnitudeDbInto(filter: AnyFilter, frequenciesHz: ArrayLike<number>, out: Float64Array): void {
  const count = frequenciesHz.length
  checkRoom('out', out.length, count)
  if (isFir(filter)) {
    firMagnitudeDbInto(filter, frequenciesHz, out)
    return
  }
  const factors = factorsOf(filter)
  const imaginary = new Float64Array(count)
  rootsInto(factors, frequenciesHz, out, imaginary)
  for (let n = 0; n < count; n++) {
    const re = out[n]!
    const im = imaginary[n]!
    const power = re * re + im * im
    if (power > 1e-280 && power < 1e280) {
      out[n] = 10 * Math.log10(power)
    } else {
      // Out of a double's range as a power, not as a level.
      const value = evaluateScaled(factors, frequenciesHz[n]!)
      out[n] = 20 * Math.log10(Math.hypot(value.re, value.im)) + DECIBELS_PER_OCTAVE * value.exponent
    }
  }
}

/**
 * Magnitude in dB (20·lg|H|), also where |H| itself is too small for a double; −Infinity at an exact zero, never NaN.
 * @param frequenciesHz N frequencies in Hz
 * @returns N levels in dB
 * @throws DesignError as {@link frequencyResponse}
 */
export function magnitudeDb(filter: AnyFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const out = new Float64Array(frequenciesHz.length)
  magnitudeDbInto(filter, frequenciesHz, out)
  return out
}

/**
 * Magnitude in dB that running the filter forward and backward has: |H|², so twice the level, and no phase. Its −3 dB point is where
 * the filter itself is at −1.5 dB. Offline only.
 * @returns N levels in dB
 */
export function zeroPhaseMagnitudeDb(filter: AnyFilter, frequenciesHz: ArrayLike<number>): Float64Array {
  const out = magnitudeDb(filter, frequenciesHz)
  for (let n = 0; n < out.length; n++) out[n] = 2 * out[n]!
  return out
}
