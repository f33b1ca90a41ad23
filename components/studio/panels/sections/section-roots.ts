import type { Complex, DigitalFilter, Section } from '@/dsp'

/*
 * Which of a filter's own roots each section of a cascade holds. The roots are the filter's, not those of the rounded coefficients: at a
 * low corner a quadratic loses the digits that tell a pole's frequency.
 */

export interface SectionRoots {
  readonly section: Section
  readonly poles: readonly Complex[]
  readonly zeros: readonly Complex[]
  /** Leading coefficient of the numerator in powers of z. */
  readonly gain: number
}

export function rootsBySection(filter: DigitalFilter, sections: readonly Section[]): readonly SectionRoots[] {
  const poles = [...filter.poles]
  const zeros = [...filter.zeros]
  return sections.map((section) => {
    const { b0, b1, b2, a1, a2 } = section
    const numerator = [b0, b1, b2]
    // A first-order section is delayed by nothing: its trailing zeros are no roots.
    const length = a2 === 0 && b2 === 0 ? (a1 === 0 && b1 === 0 ? 1 : 2) : 3
    return {
      section,
      poles: polynomialRoots([1, a1, a2].slice(0, length)).map((root) => takeNearest(poles, root)),
      zeros: polynomialRoots(numerator.slice(0, length)).map((root) => takeNearest(zeros, root)),
      gain: numerator.find((value) => value !== 0) ?? 0,
    }
  })
}

/** Roots of a polynomial of degree two at most, highest power first; leading zeros lower the degree. */
export function polynomialRoots(coefficients: readonly number[]): readonly Complex[] {
  const first = coefficients.findIndex((value) => value !== 0)
  const [a = 0, b, c] = first < 0 ? [] : coefficients.slice(first)
  if (b === undefined) return []
  if (c === undefined) return [{ re: -b / a, im: 0 }]
  const half = -b / (2 * a)
  const discriminant = half * half - c / a
  if (discriminant < 0) {
    const im = Math.sqrt(-discriminant)
    return [
      { re: half, im },
      { re: half, im: -im },
    ]
  }
  // The larger root first, the other from their product: no cancellation.
  const larger = half + (half < 0 ? -1 : 1) * Math.sqrt(discriminant)
  return [
    { re: larger, im: 0 },
    { re: larger === 0 ? 0 : c / a / larger, im: 0 },
  ]
}

/** The filter's root beside an approximate one; each is taken once. Without any left, the approximate root stands. */
function takeNearest(pool: Complex[], root: Complex): Complex {
  let best = -1
  let least = Number.POSITIVE_INFINITY
  pool.forEach((candidate, index) => {
    const distance = Math.hypot(candidate.re - root.re, candidate.im - root.im)
    if (distance < least) {
      least = distance
      best = index
    }
  })
  return best < 0 ? root : (pool.splice(best, 1)[0] ?? root)
}
