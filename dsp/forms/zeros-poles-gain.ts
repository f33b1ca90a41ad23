import { DesignError } from '../errors'
import { complex, conjugate, divide, modulus, multiply, subtract } from '../numeric/complex'
import type { Complex, Domain, Filter } from './filter'

/*
 * Design works on "half" lists: a root with im > 0 stands for itself and its conjugate, a root with im = 0 for itself alone. Every
 * transform maps half lists to half lists, so that conjugate pairs are exact by construction and never by luck.
 */

/** Roots with im ≥ 0; those with im > 0 count twice, the second time conjugated. */
export type HalfRoots = readonly Complex[]

/** Zeros and poles of a real filter in half form, with the gain factor of the full form. */
export interface HalfForm {
  readonly zeros: HalfRoots
  readonly poles: HalfRoots
  readonly gain: number
}

/** Number of roots that a half list stands for. */
export const fullCount = (half: HalfRoots): number => half.reduce((count, root) => count + (root.im > 0 ? 2 : 1), 0)

/** A root anywhere, reflected into the upper half plane; used where only its pair matters. */
export const upper = (root: Complex): Complex => (root.im < 0 ? conjugate(root) : root)

/** The full list: each pair as upper, lower; real roots as they are. */
export function expand(half: HalfRoots): Complex[] {
  const full: Complex[] = []
  for (const root of half) {
    if (root.im > 0) full.push(root, conjugate(root))
    else full.push(complex(root.re))
  }
  return full
}

/** The half list of a full one whose pairs are exact. */
export const halve = (full: readonly Complex[]): HalfRoots => full.filter((root) => root.im >= 0)

/** `count` copies of one real root. */
export const repeated = (root: number, count: number): Complex[] => Array.from({ length: count }, () => complex(root))

/**
 * Builds a filter from its half form; the one place where a form is validated.
 *
 * @throws DesignError `not-finite` when a root or the gain left the range of double precision, `improper` when zeros outnumber poles.
 */
export function fromHalf<D extends Domain>(domain: D, form: HalfForm): Filter<D> {
  const zeros = expand(form.zeros)
  const poles = expand(form.poles)
  const finite = (root: Complex) => Number.isFinite(root.re) && Number.isFinite(root.im)
  if (!zeros.every(finite) || !poles.every(finite) || !Number.isFinite(form.gain) || form.gain === 0) {
    throw new DesignError(
      'not-finite',
      'analog',
      'These values lead outside the range of double precision; move the edges closer to 1 Hz.',
    )
  }
  if (zeros.length > poles.length) {
    throw new DesignError(
      'improper',
      'analog',
      `A filter with ${zeros.length} zeros and ${poles.length} poles can’t be realised.`,
    )
  }
  return { domain, zeros, poles, gain: form.gain }
}

export const toHalf = (filter: Filter<Domain>): HalfForm => ({
  zeros: halve(filter.zeros),
  poles: halve(filter.poles),
  gain: filter.gain,
})

/**
 * H(x) from the roots. Zeros and poles are taken by turns, so that 48 factors of 10⁹ don't overflow on their way.
 *
 * @param x point in the plane of the filter's domain (rad/s for 's').
 */
export function valueAt(filter: Filter<Domain>, x: Complex): Complex {
  let value = complex(filter.gain)
  for (let k = 0; k < filter.poles.length; k += 1) {
    const pole = filter.poles[k]
    const zero = filter.zeros[k]
    if (zero !== undefined) value = multiply(value, subtract(x, zero))
    if (pole !== undefined) value = divide(value, subtract(x, pole))
  }
  return value
}

export const magnitudeAt = (filter: Filter<Domain>, x: Complex): number => modulus(valueAt(filter, x))

/** ∏ |r| over the full list, which is ∏ (−r) where every real root is ≤ 0. */
export function modulusRatio(numerator: HalfRoots, denominator: HalfRoots): number {
  let ratio = 1
  const length = Math.max(numerator.length, denominator.length)
  for (let k = 0; k < length; k += 1) {
    const above = numerator[k]
    const below = denominator[k]
    if (above !== undefined) ratio *= above.im > 0 ? modulus(above) ** 2 : Math.abs(above.re)
    if (below !== undefined) ratio /= below.im > 0 ? modulus(below) ** 2 : Math.abs(below.re)
  }
  return ratio
}
