import { show } from '../check'
import { DesignError } from '../errors'
import { expand, fromHalf } from '../forms/zeros-poles-gain'
import { complex, divide, modulus } from '../numeric/complex'
import { FixedPoint, timesPowerOfTwo } from '../numeric/fixed-point'
import { polynomialRoots } from '../numeric/polynomial-roots'
import { checkGain, checkPoles } from './roots'
import type { Complex, Diagnostic, Filter } from '../forms/filter'
import type { OwnTarget } from '../spec'

type PolynomialTarget = Extract<OwnTarget, { given: 'polynomials' }>

const MOST_DEGREE = 24
const BITS = 512
/** Ratios of coefficients from here to its inverse keep their digits. */
const LEAST_RATIO = 1e-300
/** A change in the sixth digit of a coefficient then moves a pole by a thousandth of itself, or by a tenth. */
const NOTED_CONDITION = 1e3
const CAUTIONED_CONDITION = 1e5
/** From here on the poles count as one that is repeated. */
const REPEATED_CONDITION = 1e9

function trimmed(coefficients: readonly number[], field: string): number[] {
  coefficients.forEach((value, index) => {
    if (Number.isFinite(value)) return
    throw new DesignError('not-finite', `${field}.${index}`, 'This coefficient is not a finite number.', 0)
  })
  const first = coefficients.findIndex((value) => value !== 0)
  return first < 0 ? [] : coefficients.slice(first)
}

/** A power of two near the geometric mean of the sizes of the roots other than 0. */
function unitExponent(highestFirst: readonly number[]): number {
  const last = highestFirst.reduce((at, value, k) => (value === 0 ? at : k), 0)
  if (last === 0) return 0
  return Math.round(Math.log2(Math.abs((highestFirst[last] ?? 1) / (highestFirst[0] ?? 1))) / last)
}

const ratioRefusal = (field: string): DesignError =>
  new DesignError(
    'coefficients-too-unlike',
    field,
    'The coefficients lie too far apart: the ratio of one to the first leaves the range of double precision. Another unit of time brings them together.',
  )

/** Every coefficient is used as a part of the first one. */
function checkRatios(highestFirst: readonly number[], field: string): void {
  for (const value of highestFirst) {
    const ratio = Math.abs(value / (highestFirst[0] ?? 1))
    if (value !== 0 && !(ratio >= LEAST_RATIO && ratio <= 1 / LEAST_RATIO)) throw ratioRefusal(field)
  }
}

/** Roots in half form, sought in s/2^exponent on long numbers that hold the scaled coefficients exactly. */
function rootsOf(highestFirst: readonly number[], field: string): Complex[] {
  checkRatios(highestFirst, field)
  const exponent = unitExponent(highestFirst)
  const fx = new FixedPoint(BITS)
  const scaled = rescaled(highestFirst, exponent).map((value) => {
    if (Number.isFinite(value)) return fx.fromNumber(value)
    throw ratioRefusal(field)
  })
  const unit = 2 ** exponent
  return polynomialRoots(scaled).map(({ re, im }) => complex(re * unit, im * unit))
}

/** |p′(x)| at a point of the unit circle, coefficients from the highest power down. */
function slopeAt(highestFirst: readonly number[], x: Complex): number {
  let slope = complex(0)
  let value = complex(0)
  for (const coefficient of highestFirst) {
    slope = complex(slope.re * x.re - slope.im * x.im + value.re, slope.re * x.im + slope.im * x.re + value.im)
    value = complex(value.re * x.re - value.im * x.im + coefficient, value.re * x.im + value.im * x.re)
  }
  return modulus(slope)
}

/** Coefficients of a(size·x) up to a common factor, so that roots of this size become of size one. */
const rescaled = (highestFirst: readonly number[], exponent: number): number[] =>
  highestFirst.map((value, k) => timesPowerOfTwo(value / (highestFirst[0] ?? 1), -exponent * k))

/**
 * The largest relative movement of a pole for a relative change of all coefficients: Σ|aₖ·p^(n−k)|/|p·a′(p)|
 * (J. H. Wilkinson, Rounding Errors in Algebraic Processes, 1963).
 */
function conditionOf(denominator: readonly number[], poles: readonly Complex[]): number {
  const exponent = unitExponent(denominator)
  const unit = 2 ** exponent
  const scaled = rescaled(denominator, exponent)
  return poles.reduce((worst, pole) => {
    const size = modulus(pole) / unit
    const terms = scaled.map((value, k) => value * size ** (scaled.length - 1 - k))
    const sum = terms.reduce((total, term) => total + Math.abs(term), 0)
    return Math.max(worst, sum / slopeAt(terms, divide(pole, complex(modulus(pole)))))
  }, 0)
}

function conditionDiagnostics(denominator: readonly number[], poles: readonly Complex[]): Diagnostic[] {
  const condition = conditionOf(denominator, poles)
  if (!(condition > NOTED_CONDITION)) return []
  return [
    {
      code: 'polynomials-ill-conditioned',
      severity: condition > CAUTIONED_CONDITION ? 'caution' : 'note',
      message:
        condition < REPEATED_CONDITION
          ? `A change of a coefficient in its sixth digit moves a pole by up to ${show(Number((condition * 1e-4).toPrecision(2)))} %; where the poles are known, give the roots.`
          : 'A pole is repeated, so that it moves far for the smallest change of a coefficient; where the poles are known, give the roots.',
      field: 'own.denominator',
      value: Math.min(condition, Number.MAX_VALUE),
    },
  ]
}

/**
 * The analog filter given by the polynomials of s. Leading zeros are left out; the roots are found on long numbers, so that only the
 * digits given limit them, which a diagnostic tells where it matters.
 *
 * @param own coefficients from the highest power of s (in rad/s) down to the constant
 * @throws DesignError `no-poles`, `no-numerator`, `improper`, `order-out-of-range`, `not-finite`, `unstable-pole`, `pole-out-of-range`,
 * `coefficients-too-unlike`, `gain-out-of-range`
 */
export function filterOfPolynomials(own: Pick<PolynomialTarget, 'numerator' | 'denominator'>): {
  readonly filter: Filter<'s'>
  readonly diagnostics: readonly Diagnostic[]
} {
  const numerator = trimmed(own.numerator, 'own.numerator')
  const denominator = trimmed(own.denominator, 'own.denominator')
  const degree = denominator.length - 1
  if (degree < 1) {
    throw new DesignError(
      'no-poles',
      'own.denominator',
      'The denominator must hold a power of s: a filter takes at least one pole.',
      1,
    )
  }
  if (degree > MOST_DEGREE) {
    throw new DesignError(
      'order-out-of-range',
      'own.denominator',
      `The order is at most ${MOST_DEGREE}; ${degree} was given.`,
      MOST_DEGREE,
    )
  }
  if (numerator.length === 0) {
    throw new DesignError('no-numerator', 'own.numerator', 'A numerator of zeros alone passes nothing.', 1)
  }
  if (numerator.length > denominator.length) {
    throw new DesignError(
      'improper',
      'own.numerator',
      `A numerator of degree ${numerator.length - 1} over a denominator of degree ${degree}: the gain would grow without bound at high frequencies.`,
      degree,
    )
  }
  const poles = rootsOf(denominator, 'own.denominator')
  checkPoles(expand(poles), () => 'own.denominator')
  const zeros = numerator.length > 1 ? rootsOf(numerator, 'own.numerator') : []
  const gain = (numerator[0] ?? 1) / (denominator[0] ?? 1)
  checkGain(gain, 'own.numerator')
  return { filter: fromHalf('s', { zeros, poles, gain }), diagnostics: conditionDiagnostics(denominator, poles) }
}
