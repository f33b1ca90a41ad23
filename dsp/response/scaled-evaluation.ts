import type { Complex } from '../forms/filter'
import { cosHalfTurns, foldedTurns, sinHalfTurns } from './axis'
import type { RootFactors } from './factors'
import { PAIR_STRIDE, REAL_STRIDE } from './factors'

/** Multiplies (re, im) by j^power. */
function quarterTurns(power: number, re: number, im: number): Complex {
  switch (((power % 4) + 4) % 4) {
    case 1:
      return { re: -im, im: re }
    case 2:
      return { re: -re, im: -im }
    case 3:
      return { re: im, im: -re }
    default:
      return { re, im }
  }
}

interface Scaled {
  readonly re: number
  readonly im: number
  /** The value is (re + j·im) · 2^exponent. */
  readonly exponent: number
}

/**
 * The response at one frequency with its exponent kept apart: the way for values that leave the range of a double on the way, at
 * high orders far from the corner. Slower, so used only where the plain products ran out of range.
 */
export function evaluateScaled(factors: RootFactors, frequencyHz: number): Scaled {
  const digital = factors.domain === 'z'
  const x = digital ? foldedTurns(frequencyHz, factors.scale) : 0
  const s = digital ? sinHalfTurns(x) : 0
  const c = digital ? cosHalfTurns(x) : 0
  const w = digital ? 0 : (2 * Math.PI * frequencyHz) / factors.scale
  const u = digital ? s * s : w * w
  const v = c * c
  const t = digital ? s * c : w
  const p = digital ? c : 1
  const q = digital ? s : w

  let re = factors.gainMantissa
  let im = 0
  let exponent = factors.gainExponent
  const multiply = (fr: number, fi: number, inverse: boolean): void => {
    if (inverse) {
      const big = Math.max(Math.abs(fr), Math.abs(fi))
      const [nr, ni] = [fr / big, fi / big]
      const norm = (nr * nr + ni * ni) * big
      ;[re, im] = [(re * nr + im * ni) / norm, (im * nr - re * ni) / norm]
    } else {
      ;[re, im] = [re * fr - im * fi, re * fi + im * fr]
    }
    const size = Math.max(Math.abs(re), Math.abs(im))
    if (size === 0 || (size < 1e100 && size > 1e-100)) return
    const shift = size > 1 ? -300 : 300
    re *= 2 ** shift
    im *= 2 ** shift
    exponent -= shift
  }
  const run = (list: RootFactors['zeros'], inverse: boolean): void => {
    for (let i = 0; i < list.pairCount * PAIR_STRIDE; i += PAIR_STRIDE) {
      const fr = list.pairs[i]! + list.pairs[i + 1]! * u + list.pairs[i + 2]! * v
      multiply(fr, list.pairs[i + 3]! * t, inverse)
    }
    for (let i = 0; i < list.realCount * REAL_STRIDE; i += REAL_STRIDE) {
      multiply(list.reals[i]! * p, list.reals[i + 1]! * q, inverse)
    }
  }
  // Zeros first: an exact zero then stays exactly 0 whatever follows.
  run(factors.zeros, false)
  for (let i = 0; i < Math.abs(factors.pPower); i++) multiply(p, 0, factors.pPower < 0)
  for (let i = 0; i < Math.abs(factors.qPower); i++) multiply(q, 0, factors.qPower < 0)
  run(factors.poles, true)
  const turned = quarterTurns(factors.qPower, re, im)
  if (factors.halfTurns === 0) return { ...turned, exponent }
  const angle = Math.PI * x * factors.halfTurns
  const [cr, ci] = [Math.cos(angle), Math.sin(angle)]
  return { re: turned.re * cr - turned.im * ci, im: turned.re * ci + turned.im * cr, exponent }
}
