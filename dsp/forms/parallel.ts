import { add, divide, exponential } from '../numeric/complex'
import { amplify } from './section-scaling'
import type { FixedPoint, BigComplex } from '../numeric/fixed-point'
import type { Complex, ParallelForm, Section } from './filter'

/** As a partial fraction of the analog filter comes: coefficients of 1/(s − pole)ʲ, j = 1, 2 …; im > 0 stands for the pair. */
interface Fraction {
  readonly pole: Complex
  readonly coefficients: readonly BigComplex[]
}

/** A pole that a second-order section can hold: simple, or real and double. */
const fits = ({ pole, coefficients }: Fraction) =>
  coefficients.length === 1 || (coefficients.length === 2 && pole.im === 0)

/**
 * One term per pole or pole pair, h(k) = c₁·Pᵏ (+ c₂·k·Pᵏ), in powers of z⁻¹:
 * c/(1 − P·z⁻¹) and its conjugate add up to (2·Re c − 2·Re(c·P*)·z⁻¹)/(1 − 2·Re P·z⁻¹ + |P|²·z⁻²);
 * a double real pole gives (c₁ + (c₂ − c₁)·P·z⁻¹)/(1 − P·z⁻¹)².
 */
function term({ pole, coefficients }: Fraction, fx: FixedPoint): Section {
  const [first, second] = coefficients.map((coefficient) => fx.toComplex(coefficient))
  const c = first ?? { re: 0, im: 0 }
  const image = exponential(pole)
  if (pole.im > 0) {
    return {
      b0: 2 * c.re,
      b1: -2 * (c.re * image.re + c.im * image.im),
      b2: 0,
      a1: -2 * image.re,
      a2: image.re * image.re + image.im * image.im,
    }
  }
  if (second === undefined) return { b0: c.re, b1: 0, b2: 0, a1: -image.re, a2: 0 }
  return { b0: c.re, b1: (second.re - c.re) * image.re, b2: 0, a1: -2 * image.re, a2: image.re * image.re }
}

/**
 * Sum of sections with impulse response Σ c·Pᵏ, plus a constant on the first sample.
 *
 * @returns undefined when a pole is repeated beyond what sections of second order hold; such a filter is kept as a cascade
 */
export function parallelOfSamples(
  fractions: readonly Fraction[],
  fx: FixedPoint,
  direct: number,
): ParallelForm | undefined {
  if (!fractions.every(fits)) return undefined
  return { direct, terms: fractions.map((fraction) => term(fraction, fx)) }
}

/**
 * Sum of sections whose step response is Σ c·Pᵏ + dcGain: each term of the step samples times 1 − z⁻¹.
 *
 * @param fractions of H(s)/s; the one of the pole at the origin is `dcGain` and is left out
 */
export function parallelOfSteps(
  fractions: readonly Fraction[],
  fx: FixedPoint,
  dcGain: number,
): ParallelForm | undefined {
  const proper = fractions.filter(({ pole }) => pole.re !== 0 || pole.im !== 0)
  if (!proper.every(fits)) return undefined
  const terms = proper.map((fraction) => {
    const { b0, b1, a1, a2 } = term(fraction, fx)
    return { b0, b1: b1 - b0, b2: -b1, a1, a2 }
  })
  return { direct: dcGain, terms }
}

export const scaleParallel = (form: ParallelForm, factor: number): ParallelForm => ({
  direct: form.direct * factor,
  terms: form.terms.map((section) => amplify(section, factor)),
})

/** H(e^{jω}) of a sum of sections. */
export function parallelAt({ direct, terms }: ParallelForm, radians: number): Complex {
  const z1 = { re: Math.cos(radians), im: -Math.sin(radians) }
  const z2 = { re: Math.cos(2 * radians), im: -Math.sin(2 * radians) }
  return terms.reduce<Complex>(
    (sum, { b0, b1, b2, a1, a2 }) => {
      const above = { re: b0 + b1 * z1.re + b2 * z2.re, im: b1 * z1.im + b2 * z2.im }
      const below = { re: 1 + a1 * z1.re + a2 * z2.re, im: a1 * z1.im + a2 * z2.im }
      return add(sum, divide(above, below))
    },
    { re: direct, im: 0 },
  )
}
