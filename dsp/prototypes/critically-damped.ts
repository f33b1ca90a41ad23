import { repeated } from '../forms/zeros-poles-gain'
import type { Prototype } from './prototype'

/**
 * Critically damped low-pass: n equal real poles, so that the step response never overshoots; 3.0103 dB down at 1 rad/s.
 * The pole lies at −a with (1 + 1/a²)ⁿ = 2, so a = 1/√(2^(1/n) − 1) (U. Tietze & C. Schenk, Electronic Circuits, active filters).
 *
 * @param order 1–24
 */
export function criticallyDamped(order: number): Prototype {
  const distance = 1 / Math.sqrt(Math.expm1(Math.LN2 / order))
  return { zeros: [], poles: repeated(-distance, order), dcGain: 1 }
}
