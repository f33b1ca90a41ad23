import { expand, fullCount, repeated, upper, valueAt, type HalfForm } from '../forms/zeros-poles-gain'
import { exponential, modulus } from '../numeric/complex'
import type { Complex, Filter } from '../forms/filter'

/** Poles of one second-order section, or one first-order section, and the zeros given to it, in half form. */
interface AnalogSection {
  readonly poles: readonly Complex[]
  readonly zeros: readonly Complex[]
}

/** Pairs first, then real roots by twos. */
function byTwos(half: readonly Complex[]): Complex[][] {
  const groups = half.filter((root) => root.im > 0).map((root) => [root])
  const real = half.filter((root) => root.im === 0)
  for (let k = 0; k < real.length; k += 2) groups.push(real.slice(k, k + 2))
  return groups
}

function analogSections(form: HalfForm): AnalogSection[] {
  const poles = byTwos(form.poles)
  const zeros = byTwos(form.zeros)
  // A lone real zero goes with a lone real pole, so that no section has more zeros than poles.
  const lone = zeros.findIndex((group) => fullCount(group) === 1)
  const single = poles.findIndex((group) => fullCount(group) === 1)
  const last = lone >= 0 && single >= 0 ? zeros.splice(lone, 1)[0] : undefined
  return poles.map((group, index) => ({
    poles: group,
    zeros: index === single && last !== undefined ? last : fullCount(group) < 2 ? [] : (zeros.shift() ?? []),
  }))
}

/** |N(jω)/D(jω)|² of a section. */
function power({ poles, zeros }: AnalogSection, omega: number): number {
  const filter: Filter<'s'> = { domain: 's', zeros: expand(zeros), poles: expand(poles), gain: 1 }
  const value = valueAt(filter, { re: 0, im: omega })
  return value.re * value.re + value.im * value.im
}

/** Zeros of b0 + b1·z⁻¹ + b2·z⁻² on the z-plane, in half form. */
function zerosOf(b0: number, b1: number, b2: number): Complex[] {
  const discriminant = b1 * b1 - 4 * b0 * b2
  if (b0 === 0) return []
  if (discriminant < 0) return [{ re: -b1 / (2 * b0), im: Math.abs(Math.sqrt(-discriminant) / (2 * b0)) }]
  const half = -(b1 + (b1 < 0 ? -1 : 1) * Math.sqrt(discriminant)) / 2
  if (half === 0) return repeated(0, 2)
  return [
    { re: half / b0, im: 0 },
    { re: b2 / half, im: 0 },
  ]
}

/**
 * The magnitude-matched two-pole section: poles at e^{sT}; the squared magnitude of the numerator, linear in three numbers B₀, B₁, B₂
 * over cos²(ω/2), sin²(ω/2) and sin²ω, is matched at 0, at half the rate and at the natural frequency of the section, and factored with
 * the zeros inside the circle.
 * Source: M. Vicanek, Matched Second Order Digital Filters (2016), from memory; the same for sections with any zeros.
 */
function matchedSection(section: AnalogSection): { zeros: Complex[]; poles: Complex[] } {
  const poles = section.poles.map((pole) => upper(exponential(pole)))
  const [first, second] = poles
  if (first === undefined) return { zeros: [], poles: [] }
  if (fullCount(poles) === 1) {
    const [zero] = section.zeros
    return { zeros: [zero === undefined ? { re: 0, im: 0 } : { re: Math.exp(zero.re), im: 0 }], poles }
  }
  const [sum, product] =
    second === undefined ? [2 * first.re, first.re ** 2 + first.im ** 2] : [first.re + second.re, first.re * second.re]
  const below = [(1 - sum + product) ** 2, (1 + sum + product) ** 2, -4 * product] as const
  const centre = Math.min(
    Math.sqrt(
      section.poles.reduce(
        (size, pole) => size * modulus(pole),
        section.poles.length === 1 ? modulus(section.poles[0]!) : 1,
      ),
    ),
    2,
  )
  const s = Math.sin(centre / 2) ** 2
  const at = power(section, centre) * (below[0] * (1 - s) + below[1] * s + below[2] * 4 * s * (1 - s))
  const b0 = power(section, 0) * below[0]
  const b1 = power(section, Math.PI) * below[1]
  const b2 = (at - b0 * (1 - s) - b1 * s) / (4 * s * (1 - s))
  const half = (Math.sqrt(b0) + Math.sqrt(b1)) / 2
  const lead = (half + Math.sqrt(Math.max(0, half * half + b2))) / 2
  return { zeros: zerosOf(lead, (Math.sqrt(b0) - Math.sqrt(b1)) / 2, -b2 / (4 * lead)), poles }
}

/**
 * A cascade of magnitude-matched two-pole sections, as a start for a fit; the gain is left at 1.
 *
 * @param form analog filter in rad per sample
 */
export function magnitudeMatched(form: HalfForm): HalfForm {
  const sections = analogSections(form).map(matchedSection)
  return { zeros: sections.flatMap(({ zeros }) => zeros), poles: sections.flatMap(({ poles }) => poles), gain: 1 }
}
