import { complex } from '../numeric/complex'
import type { Prototype } from './prototype'

/**
 * Butterworth low-pass: |H(jω)|² = 1/(1 + ω²ⁿ), 10·lg 2 = 3.0103 dB down at 1 rad/s.
 * Poles −sin θ + j·cos θ with θ = (2k − 1)π/2n, k = 1 … n (S. Butterworth, 1930; Oppenheim & Schafer, appendix B.1).
 *
 * @param order 1–24
 */
export function butterworth(order: number): Prototype {
  const poles = []
  for (let k = 1; k <= Math.floor(order / 2); k += 1) {
    const theta = ((2 * k - 1) * Math.PI) / (2 * order)
    poles.push(complex(-Math.sin(theta), Math.cos(theta)))
  }
  if (order % 2 === 1) poles.push(complex(-1))
  return { zeros: [], poles, dcGain: 1 }
}
