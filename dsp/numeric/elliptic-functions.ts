/*
 * Elliptic integrals and functions of a real argument. The modulus is passed together with its complement, since near k = 1 (sharp
 * elliptic filters) or k = 0 (large attenuation) one of them can't be computed from the other.
 */

/** k and k′ = √(1 − k²), each with full relative accuracy. */
export interface Modulus {
  readonly k: number
  readonly complement: number
}

export const swap = ({ k, complement }: Modulus): Modulus => ({ k: complement, complement: k })

/** Arithmetic–geometric mean (Abramowitz & Stegun 17.6). */
function mean(a: number, b: number): number {
  let arithmetic = a
  let geometric = b
  for (let round = 0; round < 60 && Math.abs(arithmetic - geometric) > Number.EPSILON * arithmetic; round += 1) {
    const next = (arithmetic + geometric) / 2
    geometric = Math.sqrt(arithmetic * geometric)
    arithmetic = next
  }
  return arithmetic
}

/** Complete integral of the first kind, K(k) = π/(2·agm(1, k′)) (Abramowitz & Stegun 17.6.3). */
export const completeIntegral = ({ complement }: Modulus): number => Math.PI / (2 * mean(1, complement))

/**
 * Carlson's R_F by duplication (B. C. Carlson, Numer. Math. 33, 1979), good to rounding.
 *
 * @param x, y, z non-negative, at most one of them zero
 */
function carlsonRF(x: number, y: number, z: number): number {
  let [a, b, c] = [x, y, z]
  for (let round = 0; round < 600; round += 1) {
    const average = (a + b + c) / 3
    const dx = 1 - a / average
    const dy = 1 - b / average
    const dz = -dx - dy
    if (Math.max(Math.abs(dx), Math.abs(dy), Math.abs(dz)) < 1e-3) {
      const e2 = dx * dy - dz * dz
      const e3 = dx * dy * dz
      return (1 - e2 / 10 + e3 / 14 + (e2 * e2) / 24 - (3 * e2 * e3) / 44) / Math.sqrt(average)
    }
    const root = Math.sqrt(a) * Math.sqrt(b) + Math.sqrt(b) * Math.sqrt(c) + Math.sqrt(c) * Math.sqrt(a)
    a = (a + root) / 4
    b = (b + root) / 4
    c = (c + root) / 4
  }
  throw new RangeError('carlsonRF takes non-negative finite arguments of which at most one is zero')
}

/** Incomplete integral F(φ, k) for 0 ≤ φ ≤ π/2, by tan φ so that small and steep angles keep their digits: sin φ · R_F(cos², 1 − k² sin², 1). */
export function incompleteIntegral(tangent: number, { complement }: Modulus): number {
  const cosineSquared = 1 / (1 + tangent * tangent)
  const sineSquared = 1 - cosineSquared > 0.5 ? 1 - cosineSquared : tangent * tangent * cosineSquared
  return Math.sqrt(sineSquared) * carlsonRF(cosineSquared, cosineSquared + complement * complement * sineSquared, 1)
}

/** Jacobi's three functions at one argument. */
export interface Triple {
  readonly sn: number
  readonly cn: number
  readonly dn: number
}

/**
 * Jacobi's sn, cn, dn of a real argument by the descending Landen transformation in its arithmetic–geometric form
 * (Abramowitz & Stegun 16.4).
 */
export function jacobi(u: number, { k, complement }: Modulus): Triple {
  const a = [1]
  const c = [k]
  let arithmetic = 1
  let geometric = complement
  while (Math.abs(c[c.length - 1] ?? 0) > Number.EPSILON * arithmetic && a.length < 60) {
    const next = (arithmetic + geometric) / 2
    c.push((arithmetic - geometric) / 2)
    geometric = Math.sqrt(arithmetic * geometric)
    arithmetic = next
    a.push(arithmetic)
  }
  let phi = 2 ** (a.length - 1) * arithmetic * u
  for (let n = a.length - 1; n > 0; n -= 1) phi = (phi + Math.asin(((c[n] ?? 0) / (a[n] ?? 1)) * Math.sin(phi))) / 2
  const sn = Math.sin(phi)
  const cn = Math.cos(phi)
  return { sn, cn, dn: Math.sqrt(complement * complement + k * k * cn * cn) }
}

/**
 * sn, cn, dn of `fraction`·K, 0 ≤ fraction ≤ 1. In the upper half of the quarter period they come from the lower one
 * (Abramowitz & Stegun 16.8.3: sn = cd, cn = k′·sd, dn = k′·nd of K − u), since cos φ near φ = π/2 would lose its digits.
 */
export function jacobiOfQuarter(fraction: number, modulus: Modulus): Triple {
  const quarter = completeIntegral(modulus)
  if (fraction <= 0.5) return jacobi(fraction * quarter, modulus)
  const { sn, cn, dn } = jacobi((1 - fraction) * quarter, modulus)
  return { sn: cn / dn, cn: (modulus.complement * sn) / dn, dn: modulus.complement / dn }
}

/**
 * The modulus whose quarter periods have the ratio K′/K = `ratio`, by theta functions of the smaller of the two nomes
 * (Abramowitz & Stegun 16.38): k = (θ₂/θ₃)², k′ = (θ₄/θ₃)².
 */
export function modulusOfRatio(ratio: number): Modulus {
  if (ratio < 1) return swap(modulusOfRatio(1 / ratio))
  const q = Math.exp(-Math.PI * ratio)
  let theta2 = 0
  let theta3 = 1
  let theta4 = 1
  for (let m = 0; m < 6; m += 1) {
    theta2 += q ** (m * (m + 1))
    if (m > 0) {
      theta3 += 2 * q ** (m * m)
      theta4 += 2 * (m % 2 === 1 ? -1 : 1) * q ** (m * m)
    }
  }
  return { k: 4 * Math.sqrt(q) * (theta2 / theta3) ** 2, complement: (theta4 / theta3) ** 2 }
}
