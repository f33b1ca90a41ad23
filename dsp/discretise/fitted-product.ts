import { fullCount, type HalfForm, type HalfRoots } from '../forms/zeros-poles-gain'
import type { Complex } from '../forms/filter'
import type { Linearised, SquaresProblem } from '../numeric/levenberg-marquardt'

/*
 * A digital filter as the fit moves it. The unit circle is looked at through λ = (z − 1)/((z + 1)·t), t = tan(ω/2) at the upper end of the
 * fit: the band is then the stretch 0 … j of the imaginary axis, however low it lies, and the inside of the circle is the left half-plane.
 * Poles are kept as quadratics λ² + e^α·λ + e^β and one λ + e^α when their number is odd. Such poles lie left of the axis whatever
 * α and β are, so that no step of the fit can leave the circle.
 */

export interface Product {
  /** n0 + n1·λ + n2·λ², three numbers each; a root at infinity (z = −1) is n2 = 0. */
  readonly zeroPairs: Float64Array
  /** n0 + n1·λ, where the free zeros are odd in number. */
  readonly zeroSingle: Float64Array | null
  /** α, β of each pair. */
  readonly polePairs: Float64Array
  readonly poleSingle: number | null
  readonly gain: number
  /** Samples by which the fitted version may come later. */
  readonly delay: number
}

/** Zeros that every fitted version of one original has exactly, since the original has them inside the band. */
export interface PinnedZeros {
  /** Number at 0 Hz. */
  readonly atZero: number
  /** Angles of pairs on the circle, in rad per sample. */
  readonly angles: readonly number[]
}

export const pinnedCount = ({ atZero, angles }: PinnedZeros): number => atZero + 2 * angles.length

/** What is fitted: weighted values of a response on a grid, all of it in samples and rad per sample. */
export interface FitTarget {
  readonly omega: Float64Array
  readonly re: Float64Array
  readonly im: Float64Array
  readonly weight: Float64Array
  readonly upTo: number
  readonly pinned: PinnedZeros
  readonly freeDelay: boolean
}

const MOST_MOVE = 1.5

/** Roots r = x/y in projective form, so that infinity is a root like others. */
type Root = readonly [x: Complex, y: number]

function quadraticRoots(n0: number, n1: number, n2: number): Root[] {
  const discriminant = n1 * n1 - 4 * n0 * n2
  if (discriminant < 0) {
    const root = { re: -n1 / 2, im: Math.sqrt(-discriminant) / 2 }
    return [[n2 < 0 ? { re: -root.re, im: root.im } : root, Math.abs(n2)]]
  }
  const half = -(n1 + (n1 < 0 ? -1 : 1) * Math.sqrt(discriminant)) / 2
  if (half === 0) return n2 === 0 ? [[{ re: 1, im: 0 }, 0], [{ re: 1, im: 0 }, 0]] : [[{ re: 0, im: 0 }, 1], [{ re: 0, im: 0 }, 1]] // prettier-ignore
  return [
    [{ re: half, im: 0 }, n2],
    [{ re: n0, im: 0 }, half],
  ]
}

/** z = (y + t·x)/(y − t·x); null when that is at infinity to all digits. */
function toCircle([x, y]: Root, t: number): Complex | null {
  const [ar, ai] = [y + t * x.re, t * x.im]
  const [br, bi] = [y - t * x.re, -t * x.im]
  const square = br * br + bi * bi
  const scale = y * y + t * t * (x.re * x.re + x.im * x.im)
  if (square <= 1e-24 * scale) return null
  if (x.im === 0) return { re: ar / br, im: 0 }
  return { re: (ar * br + ai * bi) / square, im: Math.abs((ai * br - ar * bi) / square) }
}

function poleRoots(product: Product): Root[] {
  const roots: Root[] = []
  for (let k = 0; k < product.polePairs.length; k += 2) {
    roots.push(...quadraticRoots(Math.exp(product.polePairs[k + 1]!), Math.exp(product.polePairs[k]!), 1))
  }
  if (product.poleSingle !== null) roots.push([{ re: -Math.exp(product.poleSingle), im: 0 }, 1])
  return roots
}

/** The z-plane form with gain 1, in exact pairs. */
export function rootsOf(product: Product, { pinned, upTo }: FitTarget): HalfForm {
  const t = Math.tan(upTo / 2)
  const free: Root[] = []
  const { zeroPairs, zeroSingle } = product
  for (let k = 0; k < zeroPairs.length; k += 3) {
    free.push(...quadraticRoots(zeroPairs[k]!, zeroPairs[k + 1]!, zeroPairs[k + 2]!))
  }
  if (zeroSingle !== null) free.push([{ re: -zeroSingle[0]!, im: 0 }, zeroSingle[1]!])
  const mapped = (roots: Root[]) =>
    roots.map((root) => toCircle(root, t)).filter((root): root is Complex => root !== null)
  return {
    zeros: [
      ...Array.from({ length: pinned.atZero }, () => ({ re: 1, im: 0 })),
      ...pinned.angles.map((angle) => ({ re: Math.cos(angle), im: Math.sin(angle) })),
      ...mapped(free),
    ],
    poles: mapped(poleRoots(product)),
    gain: 1,
  }
}

/** λ of a root on the z-plane; [1, 0] for z = −1. */
const toBand = (root: Complex, t: number): Root => {
  const [ar, ai] = [root.re - 1, root.im]
  const [br, bi] = [(root.re + 1) * t, root.im * t]
  const square = br * br + bi * bi
  if (square === 0) return [{ re: 1, im: 0 }, 0]
  return [{ re: (ar * br + ai * bi) / square, im: (ai * br - ar * bi) / square }, 1]
}

/** The root factors of a half list by pairs, lowest power first: [y, −x] for a real root, [|x|², −2·Re x, y²] for a pair. */
function factors(half: readonly Root[]): { pairs: number[][]; single: number[] | null } {
  const pairs: number[][] = []
  let open: number[] | null = null
  for (const [x, y] of half) {
    if (x.im !== 0) {
      pairs.push([x.re * x.re + x.im * x.im, -2 * x.re * y, y * y])
      continue
    }
    const linear = [-x.re, y]
    if (open === null) open = linear
    else {
      pairs.push([open[0]! * linear[0]!, open[0]! * linear[1]! + open[1]! * linear[0]!, open[1]! * linear[1]!])
      open = null
    }
  }
  return { pairs, single: open }
}

const LEAST = 1e-12

/**
 * A start for the fit from roots on the z-plane, its pinned zeros taken out: those nearest to a pinned one. Free zeros that are missing
 * are put at z = −1.
 */
export function productOf(form: HalfForm, order: number, target: FitTarget): Product {
  const t = Math.tan(target.upTo / 2)
  const room = order - pinnedCount(target.pinned)
  const zeros = withoutPinned(form.zeros, target.pinned)
  while (fullCount(zeros) > room) zeros.pop()
  const lacking = room - fullCount(zeros)
  const all = [...zeros, ...Array.from({ length: lacking }, () => ({ re: -1, im: 0 }))]
  const above = factors(all.map((root) => toBand(root, t)))
  const below = factors(form.poles.map((root) => toBand(root, t)))
  const logs = ([n0 = 1, n1 = 1]: number[]) => [Math.log(Math.max(n1, LEAST)), Math.log(Math.max(n0, LEAST * LEAST))]
  const unscaled: Product = {
    zeroPairs: Float64Array.from(above.pairs.flat()),
    zeroSingle: above.single === null ? null : Float64Array.from(above.single),
    polePairs: Float64Array.from(below.pairs.flatMap(logs)),
    poleSingle: below.single === null ? null : Math.log(Math.max(below.single[0]!, LEAST)),
    gain: 1,
    delay: 0,
  }
  return bestGain(unscaled, target)
}

function withoutPinned(zeros: HalfRoots, pinned: PinnedZeros): Complex[] {
  const pool = [...zeros]
  const wanted = [...Array.from({ length: pinned.atZero }, () => 0), ...pinned.angles]
  for (const angle of wanted) {
    let best = -1
    let least = Infinity
    pool.forEach((root, index) => {
      const apart = Math.hypot(root.re - Math.cos(angle), root.im - Math.sin(angle))
      if (root.im > 0 === angle > 0 && apart < least) [best, least] = [index, apart]
    })
    if (best >= 0) pool.splice(best, 1)
  }
  return pool
}

/** Values of the product on the grid, delay taken off; `into` holds re and im by turns. */
function evaluate(product: Product, target: FitTarget, axis: Axis, into: Float64Array): void {
  const { zeroPairs, zeroSingle, polePairs, poleSingle, gain, delay } = product
  const a = polePairs.map((value) => Math.exp(value))
  const single = poleSingle === null ? 0 : Math.exp(poleSingle)
  for (let k = 0; k < target.omega.length; k++) {
    const nu = axis.nu[k]!
    const square = nu * nu
    let re = gain * axis.re[k]!
    let im = gain * axis.im[k]!
    const steps = Math.max(zeroPairs.length / 3, a.length / 2)
    for (let i = 0; i < steps; i++) {
      if (3 * i < zeroPairs.length) {
        const fr = zeroPairs[3 * i]! - zeroPairs[3 * i + 2]! * square
        const fi = zeroPairs[3 * i + 1]! * nu
        const next = re * fr - im * fi
        im = re * fi + im * fr
        re = next
      }
      if (2 * i < a.length) {
        const fr = a[2 * i + 1]! - square
        const fi = a[2 * i]! * nu
        const norm = fr * fr + fi * fi
        const next = (re * fr + im * fi) / norm
        im = (im * fr - re * fi) / norm
        re = next
      }
    }
    if (zeroSingle !== null) {
      const fr = zeroSingle[0]!
      const fi = zeroSingle[1]! * nu
      const next = re * fr - im * fi
      im = re * fi + im * fr
      re = next
    }
    if (poleSingle !== null) {
      const norm = single * single + square
      const next = (re * single + im * nu) / norm
      im = (im * single - re * nu) / norm
      re = next
    }
    if (delay !== 0) {
      const c = Math.cos(delay * target.omega[k]!)
      const s = Math.sin(delay * target.omega[k]!)
      const next = re * c - im * s
      im = re * s + im * c
      re = next
    }
    into[2 * k] = re
    into[2 * k + 1] = im
  }
}

/** The grid as the products see it, with the factor of the pinned zeros. */
interface Axis {
  readonly nu: Float64Array
  readonly re: Float64Array
  readonly im: Float64Array
}

const axes = new WeakMap<FitTarget, Axis>()

function axisOf(target: FitTarget): Axis {
  const known = axes.get(target)
  if (known !== undefined) return known
  const t = Math.tan(target.upTo / 2)
  const nu = target.omega.map((omega) => Math.tan(omega / 2) / t)
  const re = new Float64Array(nu.length)
  const im = new Float64Array(nu.length)
  const pairs = target.pinned.angles.map((angle) => (Math.tan(angle / 2) / t) ** 2)
  nu.forEach((value, k) => {
    const size = value ** target.pinned.atZero * pairs.reduce((product, at) => product * (at - value * value), 1)
    const turn = target.pinned.atZero % 4
    re[k] = turn === 0 ? size : turn === 2 ? -size : 0
    im[k] = turn === 1 ? size : turn === 3 ? -size : 0
  })
  const axis = { nu, re, im }
  axes.set(target, axis)
  return axis
}

/** The same product with the real gain that fits best. */
export function bestGain(product: Product, target: FitTarget): Product {
  const values = new Float64Array(2 * target.omega.length)
  evaluate(product, target, axisOf(target), values)
  let above = 0
  let below = 0
  target.weight.forEach((weight, k) => {
    const [re, im] = [weight * values[2 * k]!, weight * values[2 * k + 1]!]
    above += weight * (re * target.re[k]! + im * target.im[k]!)
    below += re * re + im * im
  })
  return below > 0 && above !== 0 ? { ...product, gain: (product.gain * above) / below } : product
}

/** Weighted sum of squares of the complex error. */
function costOf(values: Float64Array, target: FitTarget): number {
  let cost = 0
  for (let k = 0; k < target.omega.length; k++) {
    const weight = target.weight[k]!
    const re = weight * (values[2 * k]! - target.re[k]!)
    const im = weight * (values[2 * k + 1]! - target.im[k]!)
    cost += re * re + im * im
  }
  return cost
}

/** The coefficient of each zero factor that stands still: the one that counts most inside the band. */
const largest = (values: ArrayLike<number>, from: number, count: number): number => {
  let best = 0
  for (let i = 1; i < count; i++) if (Math.abs(values[from + i]!) > Math.abs(values[from + best]!)) best = i
  return best
}

/** The fit as a least-squares problem: unknowns are two numbers for each pair, one for a single root, the gain, and the delay if free. */
export function fitProblem(target: FitTarget): SquaresProblem<Product> {
  const axis = axisOf(target)
  const count = target.omega.length
  const values = new Float64Array(2 * count)

  const cost = (product: Product): number => {
    evaluate(product, target, axis, values)
    const found = costOf(values, target)
    return Number.isFinite(found) ? found : Infinity
  }

  const unknowns = (product: Product): number =>
    (2 * product.zeroPairs.length) / 3 +
    (product.zeroSingle === null ? 0 : 1) +
    product.polePairs.length +
    (product.poleSingle === null ? 0 : 1) +
    1 +
    (target.freeDelay ? 1 : 0)

  const linearise = (product: Product): Linearised => {
    const size = unknowns(product)
    evaluate(product, target, axis, values)
    const { zeroPairs, zeroSingle, polePairs, poleSingle } = product
    const a = polePairs.map((value) => Math.exp(value))
    const normal = new Float64Array(size * size)
    const gradient = new Float64Array(size)
    const rowRe = new Float64Array(size)
    const rowIm = new Float64Array(size)
    const still = Array.from({ length: zeroPairs.length / 3 }, (_, i) => largest(zeroPairs, 3 * i, 3))
    const stillSingle = zeroSingle === null ? 0 : largest(zeroSingle, 0, 2)
    for (let k = 0; k < count; k++) {
      const nu = axis.nu[k]!
      const square = nu * nu
      const weight = target.weight[k]!
      const hr = weight * values[2 * k]!
      const hi = weight * values[2 * k + 1]!
      let at = 0
      // Each entry is H times the logarithmic derivative (nr + j·ni)/(dr + j·di).
      const put = (nr: number, ni: number, dr: number, di: number) => {
        const norm = dr * dr + di * di
        const qr = norm > 0 ? (nr * dr + ni * di) / norm : 0
        const qi = norm > 0 ? (ni * dr - nr * di) / norm : 0
        rowRe[at] = hr * qr - hi * qi
        rowIm[at] = hr * qi + hi * qr
        at += 1
      }
      for (let i = 0; i < still.length; i++) {
        const dr = zeroPairs[3 * i]! - zeroPairs[3 * i + 2]! * square
        const di = zeroPairs[3 * i + 1]! * nu
        if (still[i] !== 0) put(1, 0, dr, di)
        if (still[i] !== 1) put(0, nu, dr, di)
        if (still[i] !== 2) put(-square, 0, dr, di)
      }
      if (zeroSingle !== null) {
        if (stillSingle === 0) put(0, nu, zeroSingle[0]!, zeroSingle[1]! * nu)
        else put(1, 0, zeroSingle[0]!, zeroSingle[1]! * nu)
      }
      for (let i = 0; i < a.length; i += 2) {
        const dr = a[i + 1]! - square
        const di = a[i]! * nu
        put(0, -di, dr, di)
        put(-a[i + 1]!, 0, dr, di)
      }
      if (poleSingle !== null) put(-Math.exp(poleSingle), 0, Math.exp(poleSingle), nu)
      put(1, 0, 1, 0)
      if (target.freeDelay) put(0, target.omega[k]!, 1, 0)
      const er = hr - weight * target.re[k]!
      const ei = hi - weight * target.im[k]!
      for (let i = 0; i < size; i++) {
        const ar = rowRe[i]!
        const ai = rowIm[i]!
        gradient[i] = gradient[i]! + ar * er + ai * ei
        const row = i * size
        for (let j = 0; j <= i; j++) normal[row + j] = normal[row + j]! + ar * rowRe[j]! + ai * rowIm[j]!
      }
    }
    return { normal, gradient, cost: costOf(values, target) }
  }

  const moved = (product: Product, step: Float64Array): Product => {
    let at = 0
    const next = () => step[at++]!
    const bounded = () => Math.max(-MOST_MOVE, Math.min(MOST_MOVE, next()))
    const zeroPairs = product.zeroPairs.slice()
    for (let i = 0; i < zeroPairs.length; i += 3) {
      const still = largest(product.zeroPairs, i, 3)
      for (let j = 0; j < 3; j++) if (j !== still) zeroPairs[i + j] = zeroPairs[i + j]! + next()
    }
    let zeroSingle = product.zeroSingle
    if (zeroSingle !== null) {
      const index = 1 - largest(zeroSingle, 0, 2)
      zeroSingle = zeroSingle.slice()
      zeroSingle[index] = zeroSingle[index]! + next()
    }
    const polePairs = product.polePairs.map((value) => value + bounded())
    const poleSingle = product.poleSingle === null ? null : product.poleSingle + bounded()
    const gain = product.gain * Math.max(0.2, 1 + next())
    const delay = target.freeDelay ? product.delay + next() : product.delay
    return { zeroPairs, zeroSingle, polePairs, poleSingle, gain, delay }
  }

  return { cost, linearise, moved }
}
