import { DesignError } from '../errors'
import type { Complex, Filter } from '../forms/filter'
import { splitRoots } from './factors'

/*
 * An analog filter as a cascade of first- and second-order state-space sections, in time scaled by ω₀: x' = A·x + B·u, y = C·x + D·u.
 * A cascade doesn't mind repeated poles, which partial fractions can't bear; each section is in the scaled form
 *   x₁' = w·x₂,  x₂' = −w·x₁ − d₁·x₂ + w·u   for s² + d₁s + w²
 * whose entries are all near the size of the pole, also for two real poles and for a double one.
 */

export interface StateSpace {
  readonly order: number
  /** order × order, row by row; block lower triangular. */
  readonly a: Float64Array
  readonly b: Float64Array
  readonly c: Float64Array
  readonly d: number
  /** Sizes of the diagonal blocks, 1 or 2, from the first section to the last. */
  readonly blocks: readonly number[]
  /** Time in the matrices is seconds times this, in rad/s. */
  readonly radiansPerSecond: number
}

/** n2·s² + n1·s + n0 over s² + d1·s + d0, or n1·s + n0 over s + d0 when first order. */
interface AnalogSection {
  readonly secondOrder: boolean
  n2: number
  n1: number
  n0: number
  readonly d1: number
  readonly d0: number
  readonly frequency: number
}

function poleSections(poles: readonly Complex[]): AnalogSection[] {
  const { pairs, reals } = splitRoots(poles, 'poles')
  const sections = pairs.map(({ re, im }): AnalogSection => {
    const d0 = re * re + im * im
    return { secondOrder: true, n2: 0, n1: 0, n0: 1, d1: -2 * re, d0, frequency: Math.sqrt(d0) }
  })
  const sorted = [...reals].sort((left, right) => left - right)
  for (let i = 0; i + 1 < sorted.length; i += 2) {
    const [first, second] = [sorted[i]!, sorted[i + 1]!]
    const d0 = first * second
    sections.push({
      secondOrder: true,
      n2: 0,
      n1: 0,
      n0: 1,
      d1: -(first + second),
      d0,
      frequency: Math.sqrt(Math.abs(d0)),
    })
  }
  if (sorted.length % 2 === 1) {
    const last = sorted[sorted.length - 1]!
    sections.push({ secondOrder: false, n2: 0, n1: 0, n0: 1, d1: 0, d0: -last, frequency: Math.abs(last) })
  }
  // The least peaked first: what they let through is what the peaked ones ring on.
  return sections.sort((left, right) => right.d1 / right.frequency - left.d1 / left.frequency)
}

/** Hands each zero, or pair of zeros, to the section nearest in frequency that still has room for it. */
function giveZeros(sections: readonly AnalogSection[], zeros: readonly Complex[]): void {
  const { pairs, reals } = splitRoots(zeros, 'zeros')
  const room = sections.map((section) => (section.secondOrder ? 2 : 1))
  const take = (frequency: number, needed: number): AnalogSection | undefined => {
    let best = -1
    let bestDistance = Infinity
    sections.forEach((section, i) => {
      const distance =
        Math.abs(Math.log((section.frequency + 1e-30) / (frequency + 1e-30))) - (room[i] === needed ? 1e-9 : 0)
      if (room[i]! >= needed && distance < bestDistance) {
        best = i
        bestDistance = distance
      }
    })
    const chosen = sections[best]
    if (chosen !== undefined) room[best]! -= needed
    return chosen
  }
  const tooMany = () =>
    new DesignError(
      'improper',
      'zeros',
      'A filter with more zeros than poles has no response in time.',
      sections.length,
    )
  for (const { re, im } of pairs) {
    const section = take(Math.hypot(re, im), 2)
    if (section === undefined) throw tooMany()
    Object.assign(section, { n2: 1, n1: -2 * re, n0: re * re + im * im })
  }
  for (const zero of [...reals].sort((left, right) => Math.abs(right) - Math.abs(left))) {
    const section = take(Math.abs(zero), 1)
    if (section === undefined) throw tooMany()
    const { n1, n0 } = section
    Object.assign(section, { n2: n1, n1: n0 - zero * n1, n0: -zero * n0 })
  }
}

function magnitudeOf(section: AnalogSection, w: number): number {
  const top = Math.hypot(section.n0 - section.n2 * w * w, section.n1 * w)
  const bottom = section.secondOrder ? Math.hypot(section.d0 - w * w, section.d1 * w) : Math.hypot(section.d0, w)
  return top / bottom
}

/**
 * The cascade of a proper analog filter. Each partial cascade is scaled to a peak of 1 over the pole frequencies, so that round-off
 * in one section isn't amplified by the next.
 *
 * @throws DesignError `improper` when zeros outnumber poles
 */
export function realise(filter: Filter<'s'>): StateSpace {
  const order = filter.poles.length
  if (filter.zeros.length > order) {
    throw new DesignError('improper', 'zeros', 'A filter with more zeros than poles has no response in time.', order)
  }
  let logSum = 0
  for (const pole of filter.poles) logSum += Math.log(Math.max(Math.hypot(pole.re, pole.im), Number.MIN_VALUE))
  const w0 = order === 0 ? 1 : Math.exp(logSum / order)
  const scaled = (roots: readonly Complex[]) => roots.map(({ re, im }) => ({ re: re / w0, im: im / w0 }))
  const sections = poleSections(scaled(filter.poles))
  giveZeros(sections, scaled(filter.zeros))
  let gain = filter.gain
  for (let i = filter.zeros.length; i < order; i++) gain /= w0

  const probes = [0, ...sections.map((section) => section.frequency)]
  const reached = probes.map(() => 1)
  const a = new Float64Array(order * order)
  const b = new Float64Array(order)
  let row = new Float64Array(order)
  let direct = 1
  let at = 0
  for (const section of sections) {
    const level = Math.max(...probes.map((w, i) => reached[i]! * magnitudeOf(section, w)))
    const factor = level > 0 && Number.isFinite(level) ? 1 / level : 1
    probes.forEach((w, i) => (reached[i]! *= magnitudeOf(section, w) * factor))
    gain /= factor
    const w = section.frequency === 0 ? 1 : section.frequency
    const next = new Float64Array(order)
    let through: number
    if (section.secondOrder) {
      a[at * order + at + 1] = w
      a[(at + 1) * order + at] = -section.d0 / w
      a[(at + 1) * order + at + 1] = -section.d1
      for (let j = 0; j < at; j++) a[(at + 1) * order + j] = w * row[j]!
      b[at + 1] = w * direct
      through = section.n2 * factor
      next[at] = ((section.n0 - section.n2 * section.d0) / (w * w)) * factor
      next[at + 1] = ((section.n1 - section.n2 * section.d1) / w) * factor
    } else {
      a[at * order + at] = -section.d0
      for (let j = 0; j < at; j++) a[at * order + j] = w * row[j]!
      b[at] = w * direct
      through = section.n1 * factor
      next[at] = ((section.n0 - section.n1 * section.d0) / w) * factor
    }
    for (let j = 0; j < at; j++) next[j] = through * row[j]!
    row = next
    direct *= through
    at += section.secondOrder ? 2 : 1
  }
  return {
    order,
    a,
    b,
    c: row.map((value) => value * gain),
    d: direct * gain,
    blocks: sections.map((section) => (section.secondOrder ? 2 : 1)),
    radiansPerSecond: w0,
  }
}
