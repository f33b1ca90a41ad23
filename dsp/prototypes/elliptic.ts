import { complex } from '../numeric/complex'
import {
  completeIntegral,
  incompleteIntegral,
  jacobi,
  jacobiOfQuarter,
  modulusOfRatio,
  swap,
  type Modulus,
  type Triple,
} from '../numeric/elliptic-functions'
import { lossToEpsilonSquared, lossToGain } from './chebyshev'
import type { Complex } from '../forms/filter'
import type { Prototype } from './prototype'

/** The modulus k₁ = ε_pass/ε_stop of the loss, and its complement without cancellation where both losses are close. */
function lossModulus(rippleDb: number, attenuationDb: number): Modulus {
  const stop = lossToEpsilonSquared(attenuationDb)
  const k = Math.sqrt(lossToEpsilonSquared(rippleDb) / stop)
  const tenth = Math.LN10 / 10
  const between = Math.exp(rippleDb * tenth) * Math.expm1((attenuationDb - rippleDb) * tenth)
  return { k, complement: Math.sqrt(between / stop) }
}

/**
 * The selectivity k = ω_pass/ω_stop that an elliptic filter of this order reaches: the degree equation K′/K = K₁′/(n·K₁)
 * (Orfanidis 2006, eq. 44), solved through the nome.
 */
export function selectivity(order: number, rippleDb: number, attenuationDb: number): Modulus {
  const loss = lossModulus(rippleDb, attenuationDb)
  return modulusOfRatio(completeIntegral(swap(loss)) / (completeIntegral(loss) * order))
}

/** The (real) order at which pass and stop edge, `ratio` = ω_stop/ω_pass apart, are both met exactly. */
export function ellipticOrder(ratio: number, rippleDb: number, attenuationDb: number): number {
  const loss = lossModulus(rippleDb, attenuationDb)
  const band = { k: 1 / ratio, complement: Math.sqrt((ratio - 1) * (ratio + 1)) / ratio }
  return (
    (completeIntegral(band) * completeIntegral(swap(loss))) / (completeIntegral(swap(band)) * completeIntegral(loss))
  )
}

/**
 * Elliptic (Cauer) low-pass: equal ripple down to −rippleDb up to the pass edge at 1 rad/s, at least attenuationDb from the stop edge
 * at 1/k on, and both reached exactly there. Maximum 0 dB, so that an even order has its DC at −rippleDb.
 *
 * Steps (S. J. Orfanidis, Lecture Notes on Elliptic Filter Design, 2006; real forms of the functions from Abramowitz & Stegun 16.17,
 * 16.20, 16.21): 1. k from the degree equation; 2. zeros ±j/(k·cd(uᵢK, k)), uᵢ = (2i − 1)/n; 3. v₀ from sc(v₀, k₁′) = 1/ε_pass;
 * 4. poles j·cd(uᵢK − j·v₀K/(n·K₁), k), in a form where neither the real nor the imaginary part cancels.
 *
 * @param order 1–24
 * @param rippleDb pass-band ripple in dB, > 0
 * @param attenuationDb least stop-band attenuation in dB, > rippleDb
 */
export function elliptic(order: number, rippleDb: number, attenuationDb: number): Prototype {
  const band = selectivity(order, rippleDb, attenuationDb)
  const loss = lossModulus(rippleDb, attenuationDb)
  const quarter = completeIntegral(band)
  const epsilon = Math.sqrt(lossToEpsilonSquared(rippleDb))
  const depth = (incompleteIntegral(1 / epsilon, swap(loss)) * quarter) / (order * completeIntegral(loss))
  const vertical = jacobi(depth, swap(band))

  const zeros: Complex[] = []
  const poles: Complex[] = []
  for (let i = 1; i <= Math.floor(order / 2); i += 1) {
    const u = (2 * i - 1) / order
    const across = jacobiOfQuarter(u, band)
    zeros.push(complex(0, across.dn / (band.k * across.cn)))
    poles.push(cdAcross(across, vertical, band))
  }
  if (order % 2 === 1) poles.push(complex(-vertical.sn / vertical.cn))
  return { zeros, poles, dcGain: order % 2 === 0 ? lossToGain(rippleDb) : 1 }
}

/**
 * j·cd(x − jy, k) = (−k′²·s·s₁·c₁ + j·c·d·d₁)/(k′²·c₁² + k²·c²) with s, c, d = sn, cn, dn(x, k) and s₁, c₁, d₁ those of (y, k′):
 * 16.21.2–4 of Abramowitz & Stegun brought to one denominator, in which every part is a product or a sum of positive terms.
 */
function cdAcross(x: Triple, y: Triple, { k, complement }: Modulus): Complex {
  const denominator = (complement * y.cn) ** 2 + (k * x.cn) ** 2
  return complex((-complement * complement * x.sn * y.sn * y.cn) / denominator, (x.cn * x.dn * y.dn) / denominator)
}
