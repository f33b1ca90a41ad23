import { fullCount, type HalfForm, type HalfRoots } from '../forms/zeros-poles-gain'
import type { Complex } from '../forms/filter'

/*
 * A digital filter as the fit moves it. The unit circle is looked at through λ = (z − 1)/((z + 1)·t), t = tan(ω/2) at the upper end of the
 * fit: the band is then the stretch 0 … j of the imaginary axis, however low it lies, and the inside of the circle is the left half-plane.
 * Poles are kept as quadratics λ² + e^α·λ + e^β and one λ + e^α when their number is odd. Such poles lie left of the axis whatever
 * α and β are, so that no step of the fit can leave the circle; a least distance from it is kept besides.
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

const pinnedCount = ({ atZero, angles }: PinnedZeros): number => atZero + 2 * angles.length

/** What is fitted: weighted values of a response on a grid, all of it in samples and rad per sample. */
export interface FitTarget {
  readonly omega: Float64Array
  readonly re: Float64Array
  readonly im: Float64Array
  readonly weight: Float64Array
  readonly upTo: number
  readonly pinned: PinnedZeros
  readonly freeDelay: boolean
  /** Least 1 − |z|² of a pole that the fit may come to, so that nothing rings outside the band where it isn't seen. */
  readonly leastMargin: number
}

/** Roots r = x/y in projective form, so that infinity is a root like others. */
type Root = readonly [x: Complex, y: number]

function quadraticRoots(n0: number, n1: number, n2: number): Root[] {
  const discriminant = n1 * n1 - 4 * n0 * n2
  if (discriminant < 0) {
    const root = { re: -n1 / 2, im: Math.sqrt(-discriminant) / 2 }
    return [[n2 < 0 ? { re: -root.re, im: root.im } : root, Math.abs(n2)]]
  }
  const half = -(n1 + (n1 < 0 ? -1 : 1) * Math.sqrt(discriminant)) / 2
  if (half === 0)
    return n2 === 0
      ? [
          [{ re: 1, im: 0 }, 0],
          [{ re: 1, im: 0 }, 0],
        ]
      : [
          [{ re: 0, im: 0 }, 1],
          [{ re: 0, im: 0 }, 1],
        ]
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
 * A start for the fit from roots on the z-plane, its gain still to be found. Its pinned zeros are taken out: those
 * nearest to a pinned one. Free zeros that are missing are put at z = −1.
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
  return {
    zeroPairs: Float64Array.from(above.pairs.flat()),
    zeroSingle: above.single === null ? null : Float64Array.from(above.single),
    polePairs: Float64Array.from(below.pairs.flatMap(logs)),
    poleSingle: below.single === null ? null : Math.log(Math.max(below.single[0]!, LEAST)),
    gain: 1,
    delay: 0,
  }
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
