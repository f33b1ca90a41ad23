import { magnitudeAt } from './zeros-poles-gain'
import type { Complex, Filter, Section } from './filter'

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

/** The strongest of DC, half the rate and the pole angles, in rad per sample. */
function strongestAngle(filter: Filter<'z'>): number {
  let best = 0
  let most = -1
  for (const angle of [
    0,
    Math.PI,
    ...filter.poles.filter((pole) => pole.im > 0).map((pole) => Math.atan2(pole.im, pole.re)),
  ]) {
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
  const shared = monic.map((section) => {
    const factor = each / sectionMagnitude(section, angle)
    remaining /= factor
    return amplify(section, factor)
  })
  // What rounding (and the sign) left over goes into the first section, so that the product is the gain to the last digit.
  return shared.map((section, index) => (index === 0 ? amplify(section, remaining) : section))
}

export function scaleSections(
  sections: readonly Section[],
  _poles: readonly Complex[],
  scale: SectionScale,
): readonly Section[] {
  if (scale === 'none') return sections
  return sections
}
