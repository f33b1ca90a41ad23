import type { Complex } from '@/dsp'

/* Roots as they are drawn: those that fall on one place become one mark with a number. */

export interface RootGroup {
  readonly at: Complex
  readonly multiplicity: number
}

/** Roots closer together than `tolerance` × the largest modulus are one. */
export function grouped(roots: readonly Complex[], tolerance = 1e-6): readonly RootGroup[] {
  const reach = Math.max(0, ...roots.map(modulus)) * tolerance
  const groups: { at: Complex; multiplicity: number }[] = []
  for (const root of roots) {
    const same = groups.find(({ at }) => Math.hypot(at.re - root.re, at.im - root.im) <= reach)
    if (same) same.multiplicity++
    else groups.push({ at: root, multiplicity: 1 })
  }
  return groups
}

export const modulus = ({ re, im }: Complex): number => Math.hypot(re, im)

export interface Ellipse {
  /** Half axes along σ and along ω, rad/s. */
  readonly sigma: number
  readonly omega: number
}

/**
 * The ellipse about the origin that all poles lie on: a circle for Butterworth prototypes, an ellipse for Chebyshev I. Least squares in
 * 1/σ² and 1/ω²; null when the poles lie on none (Bessel–Thomson, elliptic, band-pass) or are too few to tell.
 */
export function ellipseThrough(poles: readonly Complex[]): Ellipse | null {
  const upper = poles.filter((pole) => pole.im >= 0)
  const largest = Math.max(0, ...upper.map(modulus))
  if (upper.length === 0 || largest === 0) return null
  // Sums of the normal equations for A·σ² + B·ω² = 1, with roots scaled to 1.
  let ss = 0
  let so = 0
  let oo = 0
  let s = 0
  let o = 0
  for (const { re, im } of upper) {
    const sigma2 = (re / largest) ** 2
    const omega2 = (im / largest) ** 2
    ss += sigma2 * sigma2
    so += sigma2 * omega2
    oo += omega2 * omega2
    s += sigma2
    o += omega2
  }
  const determinant = ss * oo - so * so
  // One or two poles fit any number of ellipses; the circle through them is the plain one.
  const isCircle = upper.every((pole) => Math.abs(modulus(pole) / largest - 1) < 1e-9)
  if (isCircle) return { sigma: largest, omega: largest }
  if (upper.length < 2 || Math.abs(determinant) < 1e-12) return null
  const a = (s * oo - o * so) / determinant
  const b = (o * ss - s * so) / determinant
  if (!(a > 0 && b > 0)) return null
  const fits = upper.every(({ re, im }) => Math.abs(a * (re / largest) ** 2 + b * (im / largest) ** 2 - 1) < 1e-6)
  return fits && upper.length > 2 ? { sigma: largest / Math.sqrt(a), omega: largest / Math.sqrt(b) } : null
}
