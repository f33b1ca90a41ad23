import { DesignError } from '../errors'
import { modulus } from '../numeric/complex'
import { refinedAngles } from '../numeric/refined-axis'
import { magnitudeAt } from './zeros-poles-gain'
import type { Complex, Filter, Section } from './filter'

/** 'none': equal gain at the strongest frequency; else every partial cascade before the last has this norm equal to one. */
export type SectionScale = 'none' | 'l1' | 'l2' | 'linf'

export const amplify = (section: Section, factor: number): Section => ({
  ...section,
  b0: section.b0 * factor,
  b1: section.b1 * factor,
  b2: section.b2 * factor,
})

/** |H(e^{jω})| of one section. */
export function sectionMagnitude({ b0, b1, b2, a1, a2 }: Section, radians: number): number {
  const c1 = Math.cos(radians)
  const s1 = Math.sin(radians)
  const c2 = Math.cos(2 * radians)
  const s2 = Math.sin(2 * radians)
  return Math.hypot(b0 + b1 * c1 + b2 * c2, b1 * s1 + b2 * s2) / Math.hypot(1 + a1 * c1 + a2 * c2, a1 * s1 + a2 * s2)
}

/**
 * The strongest of DC, half the rate and the pole angles, in rad per sample. Where all poles are real, a net between the two ends as well:
 * a band-pass of real poles is nothing at either of them.
 */
function strongestAngle(filter: Filter<'z'>): number {
  const angles = filter.poles.filter((pole) => pole.im > 0).map((pole) => Math.atan2(pole.im, pole.re))
  let best = 0
  let most = -1
  for (const angle of angles.length > 0 ? [0, Math.PI, ...angles] : refinedAngles(filter.poles, 32)) {
    const magnitude = magnitudeAt(filter, { re: Math.cos(angle), im: Math.sin(angle) })
    if (magnitude > most) {
      most = magnitude
      best = angle
    }
  }
  return best
}

/**
 * Shares the filter's gain over monic sections so that each has the same magnitude at the strongest frequency: none of them carries
 * all of it, and no node in between is many orders larger or smaller than the output.
 */
export function shareGain(monic: readonly Section[], filter: Filter<'z'>): Section[] {
  const angle = strongestAngle(filter)
  const peak = magnitudeAt(filter, { re: Math.cos(angle), im: Math.sin(angle) })
  const each = peak ** (1 / monic.length)
  let remaining = filter.gain
  const factors = monic.map((section) => {
    const factor = each / sectionMagnitude(section, angle)
    remaining /= factor
    return factor
  })
  // What rounding (and the sign) left over goes into the first section, so that the product is the gain to the last digits.
  return monic.map((section, index) => amplify(section, (factors[index] ?? 1) * (index === 0 ? remaining : 1)))
}

/** Largest magnitude of each partial cascade: refined net, then golden-section search in the best bracket. */
function peakNorms(sections: readonly Section[], poles: readonly Complex[]): number[] {
  const angles = refinedAngles(poles, 256)
  return sections.map((_, last) => {
    const part = sections.slice(0, last + 1)
    const at = (angle: number) => part.reduce((product, section) => product * sectionMagnitude(section, angle), 1)
    let best = 0
    let most = -1
    angles.forEach((angle, index) => {
      const value = at(angle)
      if (value > most) {
        most = value
        best = index
      }
    })
    return goldenMaximum(at, angles[best - 1] ?? 0, angles[best + 1] ?? Math.PI, most)
  })
}

/** Largest value of a function with one maximum in the bracket, to about nine digits of the value. */
function goldenMaximum(at: (x: number) => number, from: number, to: number, known: number): number {
  const golden = (Math.sqrt(5) - 1) / 2
  let [low, high, most] = [from, to, known]
  for (let round = 0; round < 48; round += 1) {
    const left = high - golden * (high - low)
    const right = low + golden * (high - low)
    const [atLeft, atRight] = [at(left), at(right)]
    most = Math.max(most, atLeft, atRight)
    if (atLeft > atRight) high = right
    else low = left
  }
  return most
}

/** Nodes (half of them) and weights of the 10-point Gauss–Legendre rule (Abramowitz & Stegun 25.4.30). */
const GAUSS: readonly (readonly [number, number])[] = [
  [0.1488743389816312, 0.2955242247147529],
  [0.4333953941292472, 0.2692667193099963],
  [0.6794095682990244, 0.219086362515982],
  [0.8650633666889845, 0.1494513491505806],
  [0.9739065285171717, 0.0666713443086881],
]

/** √(1/π·∫|H|² dω) of each partial cascade, by Gauss–Legendre between points that crowd at the resonances. */
function energyNorms(sections: readonly Section[], poles: readonly Complex[]): number[] {
  const angles = refinedAngles(poles, 32)
  const sums = sections.map(() => 0)
  for (let k = 1; k < angles.length; k += 1) {
    const from = angles[k - 1] ?? 0
    const to = angles[k] ?? 0
    const half = (to - from) / 2
    for (const [node, weight] of GAUSS) {
      for (const side of [-1, 1]) {
        let power = (weight * half) / Math.PI
        sections.forEach((section, index) => {
          power *= sectionMagnitude(section, (from + to) / 2 + side * node * half) ** 2
          sums[index] = (sums[index] ?? 0) + power
        })
      }
    }
  }
  return sums.map(Math.sqrt)
}

const LONGEST_SUM = 4_000_000

/** Σ|h[n]| of each partial cascade, by running it until its slowest pole has decayed to 10⁻¹². */
function absoluteNorms(sections: readonly Section[], poles: readonly Complex[]): number[] {
  const slowest = Math.max(...poles.map(modulus))
  const count = slowest === 0 ? 4 : Math.ceil(Math.log(1e-12) / Math.log(slowest)) + 4 * sections.length
  if (!(count <= LONGEST_SUM)) {
    throw new DesignError(
      'too-slow-for-l1',
      'scale',
      `The sum of |h| of a filter that rings for ${count} samples isn’t computed; the peak norm (linf) bounds a sine, l2 a noise.`,
      'linf',
    )
  }
  const state = sections.map(() => ({ first: 0, second: 0 }))
  const sums = sections.map(() => 0)
  for (let n = 0; n < count; n += 1) {
    let value = n === 0 ? 1 : 0
    sections.forEach((section, index) => {
      const memory = state[index]
      if (memory === undefined) return
      const output = section.b0 * value + memory.first
      memory.first = section.b1 * value - section.a1 * output + memory.second
      memory.second = section.b2 * value - section.a2 * output
      sums[index] = (sums[index] ?? 0) + Math.abs(output)
      value = output
    })
  }
  return sums
}

const NORMS = { l1: absoluteNorms, l2: energyNorms, linf: peakNorms }

/**
 * Scales a cascade so that from the input to the output of every section but the last the chosen norm is one; the last section takes
 * the rest, so that the filter itself is unchanged (L. B. Jackson, Bell Syst. Tech. J. 49, 1970).
 * 'l1' bounds any input, 'linf' a sine, 'l2' the power of white noise.
 *
 * @throws DesignError `too-slow-for-l1` when the impulse response is longer than four million samples
 */
export function scaleSections(
  sections: readonly Section[],
  poles: readonly Complex[],
  scale: SectionScale,
): readonly Section[] {
  if (scale === 'none') return sections
  const norms = NORMS[scale](sections, poles)
  return sections.map((section, index) => {
    const before = index === 0 ? 1 : (norms[index - 1] ?? 1)
    const after = index === sections.length - 1 ? 1 : (norms[index] ?? 1)
    return amplify(section, before / after)
  })
}
