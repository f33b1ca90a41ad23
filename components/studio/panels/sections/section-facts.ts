import { magnitudeDb, type Complex, type DigitalFilter, type Section } from '@/dsp'
import { rootsBySection, type SectionRoots } from './section-roots'

/** What a reader wants to know of one section beside its coefficients. */
export interface SectionFacts {
  readonly section: Section
  /** Of the pole pair, or of the one real pole, as if it were an analog one: |ln p|·fs/2π. */
  readonly poleHz: number
  /** Of the pole pair; null for a single pole. */
  readonly q: number | null
  /** Distance of the outermost pole from the origin. */
  readonly radius: number
  readonly zeros: readonly ZeroFact[]
  /** Largest gain from the cascade's input to this section's output, in dB over all frequencies. */
  readonly nodePeakDb: number
}

export interface ZeroFact {
  readonly hertz: number
  /** 1 on the unit circle, 0 at the origin. */
  readonly radius: number
  /** Two real zeros in one place; a pair of conjugates is one entry and not double. */
  readonly isDouble: boolean
}

export function sectionFacts(filter: DigitalFilter, sections: readonly Section[]): readonly SectionFacts[] {
  const held = rootsBySection(filter, sections)
  const grid = peakGrid(filter)
  return held.map((roots, index) => {
    const { poleHz, q } = poleFigures(roots.poles, filter.sampleRateHz)
    return {
      section: roots.section,
      poleHz,
      q,
      radius: Math.max(0, ...roots.poles.map(modulus)),
      zeros: zeroFacts(roots.zeros, filter.sampleRateHz),
      nodePeakDb: peakDb(partialCascade(filter, held.slice(0, index + 1)), grid),
    }
  })
}

const modulus = ({ re, im }: Complex) => Math.hypot(re, im)

/** ln of a root that may lie close to 1: ln|p| through log1p keeps the digits. */
function logarithm(root: Complex): Complex {
  const { re, im } = root
  const squaredLessOne = (re - 1) * (re + 1) + im * im
  return { re: Math.log1p(squaredLessOne) / 2, im: Math.atan2(im, re) }
}

/**
 * Natural frequency and Q of the poles mapped back by s = fs·ln z: f0 = √(s₁s₂)/2π, Q = √(s₁s₂)/−(s₁ + s₂). A real pole on the left of
 * the origin has no analog counterpart of its own; it counts with its distance from s = 0.
 */
export function poleFigures(poles: readonly Complex[], sampleRateHz: number): { poleHz: number; q: number | null } {
  const mapped = poles.filter((pole) => modulus(pole) > 0).map(logarithm)
  const [first, second] = mapped
  if (!first) return { poleHz: Number.POSITIVE_INFINITY, q: null }
  const toHz = (radians: number) => (radians * sampleRateHz) / (2 * Math.PI)
  if (!second) return { poleHz: toHz(modulus(first)), q: null }
  const product = Math.sqrt(modulus(first) * modulus(second))
  return { poleHz: toHz(product), q: product / -(first.re + second.re) }
}

function zeroFacts(zeros: readonly Complex[], sampleRateHz: number): readonly ZeroFact[] {
  const facts: ZeroFact[] = []
  for (const zero of zeros) {
    const hertz = (Math.abs(Math.atan2(zero.im, zero.re)) * sampleRateHz) / (2 * Math.PI)
    const radius = modulus(zero)
    const same = facts.findIndex((fact) => fact.hertz === hertz && fact.radius === radius)
    if (same < 0) facts.push({ hertz, radius, isDouble: false })
    else if (zero.im === 0) facts[same] = { hertz, radius, isDouble: true }
  }
  return facts
}

function partialCascade(filter: DigitalFilter, held: readonly SectionRoots[]): DigitalFilter {
  return {
    domain: 'z',
    sampleRateHz: filter.sampleRateHz,
    poles: held.flatMap(({ poles }) => poles),
    zeros: held.flatMap(({ zeros }) => zeros),
    gain: held.reduce((product, { gain }) => product * gain, 1),
    sections: held.map(({ section }) => section),
    diagnostics: [],
  }
}

/** Frequencies in Hz, close together around each pole: a peak there is as narrow as the pole is near the circle. */
function peakGrid(filter: DigitalFilter): Float64Array {
  const nyquist = filter.sampleRateHz / 2
  const grid: number[] = []
  for (let k = 0; k <= 256; k++) grid.push((nyquist * k) / 256)
  for (const pole of filter.poles) {
    if (pole.im < 0) continue
    const { re, im } = logarithm(pole)
    const centre = (Math.abs(im) * filter.sampleRateHz) / (2 * Math.PI)
    const halfWidth = (Math.abs(re) * filter.sampleRateHz) / (2 * Math.PI)
    for (let k = -40; k <= 40; k++) grid.push(centre + Math.sinh(k / 8) * halfWidth * 0.25)
  }
  return Float64Array.from(grid.filter((hertz) => hertz >= 0 && hertz <= nyquist)).sort()
}

const GOLDEN = (Math.sqrt(5) - 1) / 2

/** The greatest of the grid, then a golden-section search between its neighbours. */
function peakDb(filter: DigitalFilter, grid: Float64Array): number {
  const levels = magnitudeDb(filter, grid)
  let at = 0
  for (let k = 1; k < levels.length; k++) if ((levels[k] ?? -Infinity) > (levels[at] ?? -Infinity)) at = k
  const level = (hertz: number) => magnitudeDb(filter, [hertz])[0] ?? -Infinity
  let low = grid[Math.max(0, at - 1)] ?? 0
  let high = grid[Math.min(grid.length - 1, at + 1)] ?? 0
  let best = levels[at] ?? -Infinity
  for (let step = 0; step < 40 && high > low; step++) {
    const left = high - GOLDEN * (high - low)
    const right = low + GOLDEN * (high - low)
    const [atLeft, atRight] = [level(left), level(right)]
    best = Math.max(best, atLeft, atRight)
    if (atLeft > atRight) high = right
    else low = left
  }
  return best
}
