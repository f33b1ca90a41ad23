import type { Complex } from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'
import { grouped, modulus } from './root-groups'

/* The planes in words and numbers. */

const MINUS = '−'

/** −0.35 + 0.2j with a common number of digits; conjugate pairs are written once, with ±. */
export function rootText({ re, im }: Complex): string {
  const real = formatNumber(re, 4)
  if (im === 0) return real
  const sign = im < 0 ? MINUS : '+'
  return `${real} ${sign} ${formatNumber(Math.abs(im), 4)}j`
}

export interface RootRow {
  readonly kind: 'pole' | 'zero'
  readonly text: string
  readonly multiplicity: number
  readonly modulus: number
}

/** One row a root, or a conjugate pair: the upper one stands for both. */
export function rootRows(roots: {
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
}): readonly RootRow[] {
  const rows = (kind: 'pole' | 'zero', list: readonly Complex[]): RootRow[] =>
    grouped(list)
      .filter(({ at }) => at.im >= 0)
      .map(({ at, multiplicity }) => ({
        kind,
        text: at.im > 0 ? rootText(at).replace('+', '±') : rootText(at),
        multiplicity,
        modulus: modulus(at),
      }))
  return [...rows('pole', roots.poles), ...rows('zero', roots.zeros)]
}

const count = (many: number, one: string): string => `${many} ${one}${many === 1 ? '' : 's'}`

export function describeAnalog({
  poles,
  zeros,
}: {
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
}): string {
  const atInfinity = poles.length - zeros.length
  const infinity = atInfinity > 0 ? ` and ${count(atInfinity, 'zero')} at infinity` : ''
  const radii = poles.map(modulus)
  const range =
    radii.length === 0
      ? ''
      : `; poles ${formatNumber(Math.min(...radii), 3)} to ${formatNumber(Math.max(...radii), 3)} rad/s from the origin`
  return `s-plane: ${count(poles.length, 'pole')}, ${count(zeros.length, 'zero')}${infinity}${range}.`
}

export function describeDigital(
  versions: readonly {
    readonly label: string
    readonly poles: readonly Complex[]
    readonly zeros: readonly Complex[]
  }[],
): string {
  if (versions.length === 0) return 'z-plane: no digital version is shown.'
  const parts = versions.map(({ label, poles, zeros }) => {
    const farthest = Math.max(0, ...poles.map(modulus))
    return `${label} ${count(poles.length, 'pole')}, the outermost at ${formatNumber(farthest, 4)} from the origin, ${count(zeros.length, 'zero')}`
  })
  return `z-plane with the unit circle: ${parts.join('; ')}.`
}
