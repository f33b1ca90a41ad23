import { firZeros, MOST_TAPS_FOR_ZEROS, multipliesPerSample, type FirFilter } from '@/dsp'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { grouped, modulus } from '../../planes/root-groups'
import { directFormCost } from './cost'
import type { NamedCost } from './structures'

/* What a reader wants to know of taps beside their values. */

export const symmetryWords: Record<FirFilter['symmetry'], string> = {
  even: 'symmetric: linear phase',
  odd: 'antisymmetric: linear phase and a quarter turn',
  none: 'not symmetric',
}

/** The constant delay of symmetric taps. */
export function delayWords({ taps, symmetry, sampleRateHz }: FirFilter): string {
  if (symmetry === 'none') return 'its delay changes with frequency'
  const samples = (taps.length - 1) / 2
  return `delays every frequency by ${formatNumber(samples)} ${samples === 1 ? 'sample' : 'samples'}, ${formatSeconds(samples / sampleRateHz, 4)}`
}

/** Number of the tap that mirrors another; null without symmetry and for the middle one. */
export function mirrorOf({ taps, symmetry }: FirFilter, k: number): number | null {
  const mirror = taps.length - 1 - k
  return symmetry === 'none' || mirror === k ? null : mirror
}

/** One sample through the taps as they stand and, where they are symmetric, with the two samples of like taps added first. */
export function tapsCosts(filter: FirFilter): readonly NamedCost[] {
  const direct = directFormCost(filter.taps, [1])
  if (filter.symmetry === 'none') return [{ name: 'direct', cost: direct }]
  // Each pair is added (or subtracted) before it is multiplied instead of after: the additions are as many.
  const folded = { ...direct, multiplies: multipliesPerSample(filter) }
  return [
    { name: 'direct', cost: direct },
    { name: 'folded by symmetry', cost: folded },
  ]
}

export interface TapsSums {
  /** The gain at 0 Hz. */
  readonly plain: number
  /** The most that an input within ±1 can make. */
  readonly ofMagnitudes: number
}

export function tapsSums({ taps }: FirFilter): TapsSums {
  let plain = 0
  let ofMagnitudes = 0
  for (const tap of taps) {
    plain += tap
    ofMagnitudes += Math.abs(tap)
  }
  return { plain, ofMagnitudes }
}

export interface ZeroRow {
  readonly where: string
  readonly radius: string
  readonly times: number
}

const ON_CIRCLE = 1e-6

/** Zeros by frequency, a conjugate pair in one row; or why there is no such table. */
export function zeroRows(filter: FirFilter): readonly ZeroRow[] | string {
  const zeros = firZeros(filter)
  if (zeros === null)
    return `Of more than ${MOST_TAPS_FOR_ZEROS} taps the zeros aren’t sought: they are too many to be read one by one.`
  if (zeros.length === 0) return 'These taps have no zeros: they delay and scale.'
  return grouped(zeros)
    .filter(({ at }) => at.im >= 0)
    .map(({ at, multiplicity }) => ({ radius: modulus(at), angle: Math.atan2(at.im, at.re), times: multiplicity }))
    .sort((one, other) => one.angle - other.angle || one.radius - other.radius)
    .map(({ radius, angle, times }) => ({
      where: radius === 0 ? 'origin' : formatHz((angle * filter.sampleRateHz) / (2 * Math.PI), 5),
      radius: Math.abs(radius - 1) < ON_CIRCLE ? 'on the circle' : formatNumber(radius, 5),
      times,
    }))
}

/** Tab-separated, one line a tap: plain numbers, plain minus signs. */
export const tapsAsText = (taps: ArrayLike<number>): string =>
  ['k\th', ...Array.from(taps, (tap, k) => `${k}\t${tap}`), ''].join('\n')
