import { FixedPoint } from '../numeric/fixed-point'

/*
 * Whether the roots of a rounded polynomial lie where a stable filter's must. The recursions lose digits without bound as roots near
 * the boundary, so they run on long fixed-point numbers; the coefficients themselves are taken as exact.
 */

/** Bits that outlast the recursion: each step may cost the square of a root's distance from the boundary (10⁻¹⁵ at worst). */
const arithmeticFor = (degree: number) => new FixedPoint(256 + 160 * degree)

/**
 * Schur–Cohn test (step-down recursion; Oppenheim & Schafer 11.6, J. D. Markel & A. H. Gray 1976): all roots inside the unit circle.
 *
 * @param a a₀ … aₙ in powers of z⁻¹, a₀ ≠ 0
 */
export function rootsInsideCircle(a: ArrayLike<number>): boolean {
  const fx = arithmeticFor(a.length)
  const lead = fx.fromNumber(a[0] ?? 1)
  let polynomial = Array.from(a, (value) => fx.divide(fx.fromNumber(value), lead))
  for (let m = polynomial.length - 1; m > 0; m -= 1) {
    const reflection = polynomial[m] ?? 0n
    const margin = fx.one - fx.multiply(reflection, reflection)
    if (margin <= 0n) return false
    const current = polynomial
    polynomial = current
      .slice(0, m)
      .map((value, k) => fx.divide(value - fx.multiply(reflection, current[m - k] ?? 0n), margin))
  }
  return true
}

/**
 * Routh's test (E. J. Routh 1877): all roots left of the imaginary axis.
 *
 * @param a highest power first, a₀ ≠ 0; scale the variable so that the roots are of order one
 */
export function rootsInLeftHalf(a: ArrayLike<number>): boolean {
  const fx = arithmeticFor(a.length)
  const lead = fx.fromNumber(a[0] ?? 1)
  const monic = Array.from(a, (value) => fx.divide(fx.fromNumber(value), lead))
  let upper = monic.filter((_, k) => k % 2 === 0)
  let lower = monic.filter((_, k) => k % 2 === 1)
  while (lower.length > 0) {
    const pivot = lower[0] ?? 0n
    if (pivot <= 0n) return false
    const ratio = fx.divide(upper[0] ?? 0n, pivot)
    const row = lower
    const next = upper.slice(1).map((value, k) => value - fx.multiply(ratio, row[k + 1] ?? 0n))
    upper = row
    lower = next
  }
  return true
}
