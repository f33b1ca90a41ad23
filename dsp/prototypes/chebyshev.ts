import { complex, divide } from '../numeric/complex'
import { upper } from '../forms/zeros-poles-gain'
import type { Complex } from '../forms/filter'
import type { Prototype } from './prototype'

/** ε² = 10^(dB/10) − 1, with its digits kept for small losses. */
export const lossToEpsilonSquared = (db: number): number => Math.expm1((db * Math.LN10) / 10)

/** Amplitude gain of a loss in dB. */
export const lossToGain = (db: number): number => Math.exp((-db * Math.LN10) / 20)

/** The poles of 1/(1 + ε²·Tₙ²): −sinh v·sin θ ± j·cosh v·cos θ with v = asinh(1/ε)/n, θ = (2k − 1)π/2n. */
function ellipsePoles(order: number, epsilon: number): Complex[] {
  const v = Math.asinh(1 / epsilon) / order
  const poles: Complex[] = []
  for (let k = 1; k <= Math.floor(order / 2); k += 1) {
    const theta = ((2 * k - 1) * Math.PI) / (2 * order)
    poles.push(complex(-Math.sinh(v) * Math.sin(theta), Math.cosh(v) * Math.cos(theta)))
  }
  if (order % 2 === 1) poles.push(complex(-Math.sinh(v)))
  return poles
}

/**
 * Chebyshev I low-pass, |H(jω)|² = 1/(1 + ε²·Tₙ²(ω)): equal ripple down to −rippleDb in the pass band, whose edge (the last point at
 * −rippleDb) is 1 rad/s; maximum 0 dB, so that an even order has its DC at −rippleDb.
 * Source: P. L. Chebyshev's polynomials as in L. Weinberg, Network Analysis and Synthesis (1962), ch. 11; Oppenheim & Schafer B.2.
 *
 * @param order 1–24
 * @param rippleDb pass-band ripple in dB, > 0
 */
export function chebyshev1(order: number, rippleDb: number): Prototype {
  const poles = ellipsePoles(order, Math.sqrt(lossToEpsilonSquared(rippleDb)))
  return { zeros: [], poles, dcGain: order % 2 === 0 ? lossToGain(rippleDb) : 1 }
}

/**
 * Chebyshev II (inverse) low-pass: monotone pass band, 0 dB at DC, and a stop band whose edge (the first point at −attenuationDb) is
 * 1 rad/s. Poles are the reciprocals of Chebyshev I poles with ε = 1/√(10^(A/10) − 1); zeros ±j/cos θ.
 * Source: as chebyshev1; Oppenheim & Schafer B.2.
 *
 * @param order 1–24
 * @param attenuationDb least attenuation in the stop band in dB, > 0
 */
export function chebyshev2(order: number, attenuationDb: number): Prototype {
  const epsilon = 1 / Math.sqrt(lossToEpsilonSquared(attenuationDb))
  const poles = ellipsePoles(order, epsilon).map((pole) => upper(divide(complex(1), pole)))
  const zeros: Complex[] = []
  for (let k = 1; k <= Math.floor(order / 2); k += 1) {
    zeros.push(complex(0, 1 / Math.cos(((2 * k - 1) * Math.PI) / (2 * order))))
  }
  return { zeros, poles, dcGain: 1 }
}
