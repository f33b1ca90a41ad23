import type { Complex } from '../forms/filter'
import { add, complex, distance, divide, modulus, multiply, subtract } from './complex'
import { bitLength, ratio, shortPoint, timesPowerOfTwo, timesShort, type BigComplex } from './fixed-point'

/*
 * Roots of a polynomial whose coefficients are long integers (one common scale, which doesn't matter). They are sought in w = z − 1,
 * where the zeros that gather around z = 1 keep their digits.
 */

/** Coefficients of p(w + 1), lowest power first, from those of p(z), highest first: repeated synthetic division, exact. */
function shiftByOne(highestFirst: readonly bigint[]): bigint[] {
  const work = [...highestFirst]
  for (let end = work.length; end > 1; end -= 1) {
    for (let k = 1; k < end; k += 1) work[k] = (work[k] ?? 0n) + (work[k - 1] ?? 0n)
  }
  return work.reverse()
}

/**
 * Start values on circles whose radii come from the upper convex hull of log|coefficients| (D. A. Bini, Numer. Algorithms 13, 1996),
 * so that roots of very different size are each begun near their own; smallest first.
 */
function circles(lowestFirst: readonly bigint[]): Complex[] {
  const degree = lowestFirst.length - 1
  const height = lowestFirst.map((c) => (c === 0n ? Number.NEGATIVE_INFINITY : logTwo(c)))
  const hull: number[] = []
  const at = (k: number) => height[k] ?? Number.NEGATIVE_INFINITY
  for (let k = 0; k <= degree; k += 1) {
    if (at(k) === Number.NEGATIVE_INFINITY) continue
    for (;;) {
      const b = hull.at(-1)
      const a = hull.at(-2)
      if (a === undefined || b === undefined || (at(b) - at(a)) * (k - a) > (at(k) - at(a)) * (b - a)) break
      hull.pop()
    }
    hull.push(k)
  }
  const values: Complex[] = []
  for (let h = 1; h < hull.length; h += 1) {
    const from = hull[h - 1] ?? 0
    const to = hull[h] ?? 0
    const count = to - from
    const radius = 2 ** ((at(from) - at(to)) / count)
    for (let k = 0; k < count; k += 1) {
      const angle = (2 * Math.PI * k) / count + 0.7 + h
      values.push(complex(radius * Math.cos(angle), radius * Math.sin(angle)))
    }
  }
  return values
}

/** Roots nearer to z = 1 than this are looked for in w. */
const NEAR_ONE = 0.3

/** Start values in w: those near z = 1 from the circles in w, the others from the circles in z that are farthest from |z| = 1. */
function startValues(inW: readonly bigint[], inZ: readonly bigint[]): Complex[] {
  const near = circles(inW).filter((w) => modulus(w) < NEAR_ONE)
  const away = (z: Complex) => Math.abs(Math.log(modulus(z)))
  const others = circles(inZ)
    .sort((a, b) => away(b) - away(a))
    .slice(0, inZ.length - 1 - near.length)
  return [...near, ...others.map((z) => complex(z.re - 1, z.im))]
}

function logTwo(x: bigint): number {
  const drop = Math.max(0, bitLength(x) - 60)
  return Math.log2(Math.abs(Number(x >> BigInt(drop)))) + drop
}

/** p(w)/p′(w) by Horner on long numbers. */
function newton(lowestFirst: readonly bigint[], w: Complex): Complex {
  const point = shortPoint(w)
  let p: BigComplex = { re: 0n, im: 0n }
  let d: BigComplex = { re: 0n, im: 0n }
  for (let k = lowestFirst.length - 1; k >= 0; k -= 1) {
    d = timesShort(d, point)
    d = { re: d.re + p.re, im: d.im + p.im }
    p = timesShort(p, point)
    p = { re: p.re + (lowestFirst[k] ?? 0n), im: p.im }
  }
  if (d.re === 0n && d.im === 0n) return complex(0)
  return ratio(p, d)
}

interface InDoubles {
  readonly coefficients: readonly number[]
  /** The variable is divided by this power of two. */
  readonly unit: number
}

/**
 * The polynomial in doubles, its variable scaled so that first and last coefficient are alike; the very small ones may vanish, which
 * only costs accuracy of the first approach.
 */
function inDoubles(lowestFirst: readonly bigint[]): InDoubles {
  const degree = lowestFirst.length - 1
  const levels = lowestFirst.map((c) => (c === 0n ? Number.NEGATIVE_INFINITY : logTwo(c)))
  const exponent = Math.round(((levels[0] ?? 0) - (levels[degree] ?? 0)) / degree)
  const highest = Math.max(...levels.map((level, k) => level + exponent * k))
  const coefficients = lowestFirst.map((c, k) => {
    const drop = Math.max(0, bitLength(c) - 60)
    return timesPowerOfTwo(Number(c >> BigInt(drop)), drop + exponent * k - Math.round(highest))
  })
  return { coefficients, unit: timesPowerOfTwo(1, exponent) }
}

/** p(x)/p′(x) in doubles; beyond the unit circle through the reversed polynomial, so that powers don't overflow. */
function newtonInDoubles(lowestFirst: readonly number[], x: Complex): Complex {
  const outside = modulus(x) > 1
  const y = outside ? divide(complex(1), x) : x
  const degree = lowestFirst.length - 1
  let [pr, pi, dr, di] = [0, 0, 0, 0]
  for (let k = degree; k >= 0; k -= 1) {
    const c = lowestFirst[outside ? degree - k : k] ?? 0
    ;[dr, di] = [dr * y.re - di * y.im + pr, dr * y.im + di * y.re + pi]
    ;[pr, pi] = [pr * y.re - pi * y.im + c, pr * y.im + pi * y.re]
  }
  const [p, d] = [complex(pr, pi), complex(dr, di)]
  if (!outside) return divide(p, d)
  // p(x) = xⁿ·q(y), y = 1/x: p/p′ = x·q/(n·q − y·q′)
  const below = subtract({ re: degree * pr, im: degree * pi }, multiply(y, d))
  return divide(multiply(x, p), below)
}

/** Ehrlich–Aberth without assumed symmetry, since it isn't known beforehand which roots are real. */
function iterate(
  step: (w: Complex) => Complex,
  start: readonly Complex[],
  tolerance: number,
  rounds: number,
): Complex[] {
  const roots = [...start]
  const settled = roots.map(() => false)
  for (let round = 0; round < rounds && settled.includes(false); round += 1) {
    for (let k = 0; k < roots.length; k += 1) {
      const w = roots[k]
      if (w === undefined || settled[k] === true) continue
      const newton = step(w)
      let pull = complex(0)
      roots.forEach((other, index) => {
        if (index !== k && distance(w, other) > 0) pull = add(pull, divide(complex(1), subtract(w, other)))
      })
      const move = divide(newton, subtract(complex(1), multiply(newton, pull)))
      roots[k] = subtract(w, move)
      if (modulus(move) <= tolerance * modulus(w)) settled[k] = true
    }
  }
  return roots
}

/** A first approach in doubles where that works, and the start values themselves where it doesn't. */
function approach(inW: readonly bigint[], inZ: readonly bigint[]): Complex[] {
  const start = startValues(inW, inZ)
  const [w, z] = [inDoubles(inW), inDoubles(inZ)]
  const step = (at: Complex): Complex => {
    const near = modulus(at) < NEAR_ONE
    const { coefficients, unit } = near ? w : z
    const move = newtonInDoubles(coefficients, { re: (near ? at.re : at.re + 1) / unit, im: at.im / unit })
    return { re: move.re * unit, im: move.im * unit }
  }
  const found = iterate(step, start, 1e-9, 30)
  const usable = found.every(
    (root, k) =>
      Number.isFinite(root.re) &&
      Number.isFinite(root.im) &&
      found.every((other, index) => index <= k || distance(root, other) > 1e-12 * modulus(root)),
  )
  return usable ? found : start
}

/** Makes the list exactly symmetric: near-real roots are polished on the axis, the others keep their upper member. */
function symmetrise(lowestFirst: readonly bigint[], roots: readonly Complex[]): Complex[] {
  const half: Complex[] = []
  const onAxis = (root: Complex) => {
    let w = root.re
    for (let round = 0; round < 4; round += 1) {
      const step = newton(lowestFirst, complex(w)).re
      if (Math.abs(step) > 1e-6 * Math.abs(w)) break
      w -= step
    }
    return complex(w)
  }
  const lower = roots.filter((root) => root.im < 0)
  for (const root of roots.filter((candidate) => candidate.im >= 0)) {
    const mirrored = { re: root.re, im: -root.im }
    let partner = -1
    lower.forEach((candidate, index) => {
      const best = lower[partner]
      if (best === undefined || distance(candidate, mirrored) < distance(best, mirrored)) partner = index
    })
    const match = lower[partner]
    if (match !== undefined && distance(match, mirrored) <= 1e-9 * modulus(root) && root.im > 1e-12 * modulus(root)) {
      lower.splice(partner, 1)
      half.push(root)
    } else half.push(onAxis(root))
  }
  for (const root of lower) half.push(onAxis(root))
  return half
}

/**
 * Roots of Σ cₖ·z^(n−k) with real long-integer coefficients, good to the last digits of (z − 1).
 *
 * @param highestFirst c₀ … cₙ, c₀ ≠ 0, as fixed-point numbers: Horner rounds to whole units, so the last ones must mean nothing
 * @returns half list: im > 0 stands for a pair, im = 0 for one real root
 */
export function polynomialRoots(highestFirst: readonly bigint[]): Complex[] {
  const coefficients = [...highestFirst]
  const roots: Complex[] = []
  while (coefficients.length > 1 && coefficients.at(-1) === 0n) {
    roots.push(complex(0))
    coefficients.pop()
  }
  if (coefficients.length < 2) return roots
  const shifted = shiftByOne(coefficients)
  const settled = iterate(
    (w) => newton(shifted, w),
    approach(shifted, coefficients.toReversed()),
    4 * Number.EPSILON,
    60,
  )
  const half = symmetrise(shifted, settled)

  return [...roots, ...half.map((w) => complex(1 + w.re, w.im))]
}
