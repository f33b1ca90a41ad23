import type { Linearised, SquaresProblem } from '../numeric/levenberg-marquardt'
import type { FitTarget, Product } from './fitted-product'

const MOST_MOVE = 1.5

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

/** Keeps α and β of a pair where neither pole is nearer to the circle than the least margin m; with t, 1 − |z|² = 2ta/(1 + ta + t²b). */
function keepInside(pairs: Float64Array, at: number, t: number, margin: number): void {
  const most = 4 / (margin * t)
  let a = Math.min(Math.exp(pairs[at]!), most)
  let b = Math.min(Math.exp(pairs[at + 1]!), most * most)
  a = Math.max(a, (margin * (1 + t * t * b)) / (t * (2 - margin)))
  // Two real poles: the slower is near b/a.
  if (a * a > 4 * b) b = Math.max(b, (margin * a) / (4 * t))
  pairs[at] = Math.log(a)
  pairs[at + 1] = Math.log(b)
}

/** The fit as a least-squares problem: unknowns are two numbers for each pair, one for a single root, the gain, and the delay if free. */
export function fitProblem(target: FitTarget): SquaresProblem<Product> {
  const axis = axisOf(target)
  const t = Math.tan(target.upTo / 2)
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
    for (let i = 0; i < polePairs.length; i += 2) keepInside(polePairs, i, t, target.leastMargin)
    const slowest = Math.log(target.leastMargin / (4 * t))
    const fastest = Math.log(4 / (target.leastMargin * t))
    const poleSingle =
      product.poleSingle === null ? null : Math.min(Math.max(product.poleSingle + bounded(), slowest), fastest)
    const gain = product.gain * Math.max(0.2, 1 + next())
    const delay = target.freeDelay ? product.delay + next() : product.delay
    return { zeroPairs, zeroSingle, polePairs, poleSingle, gain, delay }
  }

  return { cost, linearise, moved }
}
