import { upper, type HalfForm, type HalfRoots } from '../forms/zeros-poles-gain'
import { add, complex, divide, modulus, multiply, subtract } from '../numeric/complex'
import { leastSquares } from '../numeric/least-squares'
import type { Complex } from '../forms/filter'
import type { FitTarget } from './fitted-product'

/*
 * A start for a fit from nothing but the values of a response: vector fitting. Response and denominator are written as partial fractions on
 * the same poles, which makes the problem linear; the zeros of the denominator are the next poles. Worked in λ, where the circle is the
 * left half-plane (see fitted-product). Only a start, so that it may be coarse.
 * Sources: C. K. Sanathanan & J. Koerner, IEEE Trans. Autom. Control 8, 1963; B. Gustavsen & A. Semlyen, IEEE Trans. Power Delivery 14, 1999.
 */

const ROUNDS = 8
const ZERO_ROUNDS = 30
/** Beyond this a zero is one at infinity, z = −1. */
const FAR = 1e6
/** Poles nearer to each other than this, relative to their size, are moved apart. */
const APART = 1e-3

/** Pairs with light damping spread over the band, as Gustavsen and Semlyen advise; evenly in log frequency where the points are so. */
function startPoles(order: number, nu: Float64Array): HalfRoots {
  const positive = nu.filter((value) => value > 0)
  const pairs = Math.floor(order / 2)
  const poles = Array.from({ length: pairs }, (_, k): Complex => {
    const at = positive[Math.round(((k + 0.5) / pairs) * (positive.length - 1))] ?? 1
    return { re: -0.1 * at, im: at }
  })
  const middle = positive[positive.length >> 1] ?? 1
  return separated(order % 2 === 1 ? [...poles, complex(-middle)] : poles)
}

function separated(half: HalfRoots): HalfRoots {
  const out: Complex[] = []
  for (let root of half) {
    while (out.some((other) => modulus(subtract(root, other)) < APART * modulus(root))) {
      root = { re: root.re * 1.02, im: root.im * 1.01 }
    }
    out.push(root)
  }
  return out
}

/** Values of the real partial-fraction basis at jν: two for a pair, 1/(λ−p) + 1/(λ−p*) and j/(λ−p) − j/(λ−p*); one for a real pole. */
function basisAt(poles: HalfRoots, nu: number): Complex[] {
  return poles.flatMap((pole) => {
    const first = divide(complex(1), { re: -pole.re, im: nu - pole.im })
    if (pole.im === 0) return [first]
    const second = divide(complex(1), { re: -pole.re, im: nu + pole.im })
    const difference = subtract(first, second)
    return [add(first, second), { re: -difference.im, im: difference.re }]
  })
}

/** The full lists of poles and residues behind real coefficients of the basis. */
function fractions(poles: HalfRoots, coefficients: ArrayLike<number>): { poles: Complex[]; residues: Complex[] } {
  const full: Complex[] = []
  const residues: Complex[] = []
  let at = 0
  for (const pole of poles) {
    if (pole.im === 0) {
      full.push(pole)
      residues.push(complex(coefficients[at++] ?? 0))
      continue
    }
    const residue = { re: coefficients[at] ?? 0, im: coefficients[at + 1] ?? 0 }
    at += 2
    full.push(pole, { re: pole.re, im: -pole.im })
    residues.push(residue, { re: residue.re, im: -residue.im })
  }
  return { poles: full, residues }
}

/** All zeros of d + Σ r/(λ − p) by the Ehrlich–Aberth iteration on it times ∏(λ − p), then brought into pairs. */
function zerosOf(direct: number, poles: HalfRoots, coefficients: ArrayLike<number>): HalfRoots {
  const sum = fractions(poles, coefficients)
  const lead = direct === 0 ? 1e-300 : direct
  // Where one fraction rules, its zero lies here; turned a little, so that real ones may become a pair.
  const roots = sum.poles.map((pole, k) => {
    const move = divide(sum.residues[k]!, complex(lead))
    const bounded = modulus(move) > FAR ? multiply(move, complex(FAR / modulus(move))) : move
    const start = subtract(pole, bounded)
    const size = Math.max(modulus(start), 1e-6)
    return { re: start.re + 1e-3 * size * Math.cos(k + 1), im: start.im + 1e-3 * size * Math.sin(k + 1) }
  })
  for (let round = 0; round < ZERO_ROUNDS; round++) {
    let moved = 0
    roots.forEach((root, index) => {
      let value = complex(lead)
      let slope = complex(0)
      let near = complex(0)
      sum.poles.forEach((pole, k) => {
        const inverse = divide(complex(1), subtract(root, pole))
        const term = multiply(sum.residues[k]!, inverse)
        value = add(value, term)
        slope = subtract(slope, multiply(term, inverse))
        near = add(near, inverse)
      })
      const newton = divide(value, add(slope, multiply(value, near)))
      let pull = complex(0)
      roots.forEach((other, k) => {
        if (k !== index) pull = add(pull, divide(complex(1), subtract(root, other)))
      })
      const move = divide(newton, subtract(complex(1), multiply(newton, pull)))
      if (!Number.isFinite(move.re) || !Number.isFinite(move.im)) return
      roots[index] = subtract(root, move)
      moved = Math.max(moved, modulus(move) / Math.max(modulus(root), 1e-9))
    })
    if (moved < 1e-10) break
  }
  return paired(roots)
}

/** As many roots as came, in half form: the upper ones with their nearest mirror images, what is left over on the axis. */
function paired(roots: readonly Complex[]): HalfRoots {
  const isReal = (root: Complex) => Math.abs(root.im) <= 1e-7 * modulus(root)
  const half = roots.filter(isReal).map(({ re }) => complex(re))
  const lower = roots.filter((root) => !isReal(root) && root.im < 0)
  for (const root of roots.filter((candidate) => !isReal(candidate) && candidate.im > 0)) {
    let best = -1
    lower.forEach((other, k) => {
      const leader = lower[best]
      const apart = ({ re, im }: Complex) => Math.hypot(re - root.re, im + root.im)
      if (leader === undefined || apart(other) < apart(leader)) best = k
    })
    if (best < 0) half.push(complex(root.re))
    else {
      lower.splice(best, 1)
      half.push(root)
    }
  }
  return [...half, ...lower.map(({ re }) => complex(re))]
}

/** Mirrored into the left half-plane, and off the axis. */
const stable = (half: HalfRoots): HalfRoots =>
  half.map((pole) => {
    const size = Math.min(Math.max(modulus(pole), 1e-9), FAR)
    const factor = size / Math.max(modulus(pole), 1e-300)
    return { re: -Math.max(Math.abs(pole.re) * factor, 1e-6 * size), im: pole.im * factor }
  })

/** Coefficients of response (and of denominator − 1 when relocating) by linear least squares. */
function solve(poles: HalfRoots, target: FitTarget, nu: Float64Array, relocating: boolean): Float64Array {
  const basis = basisAt(poles, 1).length
  const columns = relocating ? 2 * basis + 1 : basis + 1
  const count = nu.length
  const a = new Float64Array(2 * count * columns)
  const b = new Float64Array(2 * count)
  for (let k = 0; k < count; k++) {
    const weight = target.weight[k]!
    const [re, im] = [target.re[k]! * weight, target.im[k]! * weight]
    const row = 2 * k * columns
    basisAt(poles, nu[k]!).forEach((value, j) => {
      a[row + j] = weight * value.re
      a[row + columns + j] = weight * value.im
      if (!relocating) return
      a[row + basis + 1 + j] = -(re * value.re - im * value.im)
      a[row + columns + basis + 1 + j] = -(re * value.im + im * value.re)
    })
    a[row + basis] = weight
    b[2 * k] = re
    b[2 * k + 1] = im
  }
  return leastSquares(a, b, columns)
}

/** z = (1 + tλ)/(1 − tλ); from far away z = −1. */
function toCircle(root: Complex, t: number): Complex {
  if (modulus(root) >= FAR) return complex(-1)
  const s = { re: root.re * t, im: root.im * t }
  return upper(divide({ re: 1 + s.re, im: s.im }, { re: 1 - s.re, im: -s.im }))
}

/** The z-plane form with these poles (in λ) and the zeros that suit them best; the gain is left at 1. */
function formWith(poles: HalfRoots, target: FitTarget, nu: Float64Array): HalfForm {
  const t = Math.tan(target.upTo / 2)
  const coefficients = solve(poles, target, nu, false)
  const zeros = zerosOf(coefficients[coefficients.length - 1]!, poles, coefficients)
  return { zeros: zeros.map((zero) => toCircle(zero, t)), poles: poles.map((pole) => toCircle(pole, t)), gain: 1 }
}

const bandOf = (target: FitTarget): Float64Array => {
  const t = Math.tan(target.upTo / 2)
  return target.omega.map((omega) => Math.tan(omega / 2) / t)
}

/**
 * Starts for a fit of a given order, found from the response alone.
 *
 * @param order poles; at least half as many points as 2·order + 1 are needed
 * @returns z-plane forms, all poles inside the circle
 */
export function vectorFit(target: FitTarget, order: number): HalfForm[] {
  const nu = bandOf(target)
  let poles = startPoles(order, nu)
  const found: HalfForm[] = []
  for (let round = 1; round <= ROUNDS; round++) {
    const coefficients = solve(poles, target, nu, true)
    const basis = (coefficients.length - 1) / 2
    poles = separated(stable(zerosOf(1, poles, coefficients.slice(basis + 1))))
    if (round === ROUNDS / 2 || round === ROUNDS) found.push(formWith(poles, target, nu))
  }
  return found
}
