import type { Complex, FirFilter } from '../forms/filter'
import { complex, distance, divide, modulus, multiply, subtract } from '../numeric/complex'

/** Above this number of taps the zeros are not sought: they are many, and more a texture than a picture. */
export const MOST_TAPS_FOR_ZEROS = 128
const ROUNDS = 200

/** p(x)/p′(x); beyond the circle through the reversed polynomial, so that powers don't overflow. Coefficients highest power first. */
function newtonStep(coefficients: Float64Array, x: Complex): Complex {
  const degree = coefficients.length - 1
  const isOutside = modulus(x) > 1
  const y = isOutside ? divide(complex(1), x) : x
  let [pr, pi, dr, di] = [0, 0, 0, 0]
  for (let k = 0; k <= degree; k++) {
    const nextD = dr * y.re - di * y.im + pr
    di = dr * y.im + di * y.re + pi
    dr = nextD
    const nextP = pr * y.re - pi * y.im + coefficients[isOutside ? degree - k : k]!
    pi = pr * y.im + pi * y.re
    pr = nextP
  }
  if (pr === 0 && pi === 0) return complex(0)
  if (!isOutside) return dr === 0 && di === 0 ? complex(1e-3) : divide(complex(pr, pi), complex(dr, di))
  const below = subtract(complex(degree * pr, degree * pi), multiply(y, complex(dr, di)))
  if (below.re === 0 && below.im === 0) return complex(1e-3)
  return divide(multiply(x, complex(pr, pi)), below)
}

/** Ehrlich–Aberth over all roots, none assumed real. */
function allRoots(coefficients: Float64Array): Complex[] {
  const degree = coefficients.length - 1
  const radius = Math.abs(coefficients[degree]! / coefficients[0]!) ** (1 / degree)
  const roots = Array.from({ length: degree }, (_, k) => {
    const angle = (2 * Math.PI * (k + 0.3)) / degree + 0.1
    const spread = radius * (k % 2 === 0 ? 0.93 : 1.07)
    return complex(spread * Math.cos(angle), spread * Math.sin(angle))
  })
  const isSettled = roots.map(() => false)
  for (let round = 0; round < ROUNDS && isSettled.includes(false); round++) {
    for (let k = 0; k < degree; k++) {
      if (isSettled[k]) continue
      const x = roots[k]!
      const newton = newtonStep(coefficients, x)
      let [re, im] = [0, 0]
      for (let j = 0; j < degree; j++) {
        if (j === k) continue
        const [dr, di] = [x.re - roots[j]!.re, x.im - roots[j]!.im]
        const power = dr * dr + di * di
        if (power === 0) continue
        re += dr / power
        im -= di / power
      }
      const move = divide(newton, subtract(complex(1), multiply(newton, complex(re, im))))
      roots[k] = subtract(x, move)
      if (modulus(move) <= 8 * Number.EPSILON * modulus(x)) isSettled[k] = true
    }
  }
  return roots
}

/** Exact conjugate pairs: each root of the upper half takes the nearest of the lower half with it; what finds none is real. */
function paired(roots: readonly Complex[]): Complex[] {
  const upper = roots.filter(({ im }) => im > 0).sort((a, b) => b.im - a.im)
  const lower = roots.filter(({ im }) => im <= 0)
  const out: Complex[] = []
  for (const root of upper) {
    const mirror = complex(root.re, -root.im)
    let best = -1
    lower.forEach((candidate, index) => {
      if (best < 0 || distance(candidate, mirror) < distance(lower[best]!, mirror)) best = index
    })
    // A pair this close to the axis is two real roots, or one double, told apart by rounding alone.
    const isPair = best >= 0 && distance(lower[best]!, mirror) <= Math.max(1e-6 * modulus(root), root.im)
    if (!isPair || root.im <= 1e-12 * modulus(root)) {
      out.push(complex(root.re))
      continue
    }
    const partner = lower.splice(best, 1)[0]!
    const re = (root.re + partner.re) / 2
    const im = (root.im - partner.im) / 2
    out.push(complex(re, im), complex(re, -im))
  }
  for (const { re } of lower) out.push(complex(re))
  return out
}

/**
 * Zeros of an FIR filter on the z-plane, in exact conjugate pairs, by simultaneous root finding in double precision. Taps that are 0 at the end
 * are zeros at z = 0; taps that are 0 at the start are a delay and have none.
 *
 * @returns null above {@link MOST_TAPS_FOR_ZEROS} taps
 * Source: O. Aberth, Iteration methods for finding all zeros of a polynomial simultaneously, Math. Comp. 27, 1973.
 */
export function firZeros({ taps }: Pick<FirFilter, 'taps'>): Complex[] | null {
  if (taps.length > MOST_TAPS_FOR_ZEROS) return null
  const first = taps.findIndex((tap) => tap !== 0)
  const last = taps.findLastIndex((tap) => tap !== 0)
  if (first < 0) return []
  const atOrigin = Array.from({ length: taps.length - 1 - last }, () => complex(0))
  if (first === last) return atOrigin
  return [...paired(allRoots(taps.slice(first, last + 1))), ...atOrigin]
}
