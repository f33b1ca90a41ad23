import type { Complex } from '../forms/filter'
import { add, complex, divide, modulus, subtract } from './complex'

/** p(x)/p′(x), from whatever representation of p keeps its digits. */
export type NewtonStep = (x: Complex) => Complex

/**
 * All roots at once by the Ehrlich–Aberth iteration (O. Aberth, Math. Comp. 27, 1973): each estimate moves by its Newton step,
 * corrected for the pull of the other estimates; cubic convergence to simple roots. Where the roots come in conjugate pairs, only the
 * upper half of them is moved and the mirror images take part in the pull, so that pairs stay exact.
 *
 * @param step Newton step p/p′ at a point
 * @param upperStart one estimate per conjugate pair, im > 0, all different
 * @param realStart estimates of the real roots, im = 0
 * @param iterations upper limit; convergence takes about 10 from a sensible start
 * @returns the upper and the real roots, in the order of their estimates, and the largest last step relative to its root
 */
export function simultaneousRoots(
  step: NewtonStep,
  upperStart: readonly Complex[],
  realStart: readonly number[],
  iterations = 100,
): { upper: Complex[]; real: number[]; lastStep: number } {
  const upper = [...upperStart]
  const real = [...realStart]
  const one = complex(1)
  let lastStep = Number.POSITIVE_INFINITY

  const pull = (x: Complex, skipUpper: number, skipReal: number): Complex => {
    let sum = complex(0)
    upper.forEach((other, index) => {
      if (index !== skipUpper) sum = add(sum, divide(one, subtract(x, other)))
      sum = add(sum, divide(one, { re: x.re - other.re, im: x.im + other.im }))
    })
    real.forEach((other, index) => {
      if (index !== skipReal) sum = add(sum, divide(one, { re: x.re - other, im: x.im }))
    })
    return sum
  }

  const correction = (x: Complex, skipUpper: number, skipReal: number): Complex => {
    const newton = step(x)
    const weighted = pull(x, skipUpper, skipReal)
    const damped = subtract(one, {
      re: newton.re * weighted.re - newton.im * weighted.im,
      im: newton.re * weighted.im + newton.im * weighted.re,
    })
    return divide(newton, damped)
  }

  for (let round = 0; round < iterations && lastStep > 4 * Number.EPSILON; round += 1) {
    lastStep = 0
    for (let k = 0; k < upper.length; k += 1) {
      const x = upper[k]
      if (x === undefined) continue
      const move = correction(x, k, -1)
      upper[k] = subtract(x, move)
      lastStep = Math.max(lastStep, modulus(move) / modulus(x))
    }
    for (let k = 0; k < real.length; k += 1) {
      const x = real[k]
      if (x === undefined) continue
      const move = correction(complex(x), -1, k)
      real[k] = x - move.re
      lastStep = Math.max(lastStep, Math.abs(move.re) / Math.abs(x))
    }
  }
  return { upper, real, lastStep }
}
