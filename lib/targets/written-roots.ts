import type { Complex } from '@/dsp'

/*
 * Roots and polynomials as people write them: one root a line, a pair once with ±, in rad/s or in Hz; coefficients in one row from the
 * highest power down.
 */

export type RootUnit = 'rad/s' | 'Hz'

export interface WrittenProblem {
  readonly line: number
  readonly reason: string
}

export type Read<Value> =
  { readonly ok: true; readonly value: Value } | { readonly ok: false; readonly problems: readonly WrittenProblem[] }

const NUMBER = String.raw`(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?`
const REAL = new RegExp(`^([+-]?${NUMBER})$`, 'i')
const COMPLEX = new RegExp(
  `^([+-]?${NUMBER})?(\\+-|[+±-])(${NUMBER})?[ji]$|^([+-]?${NUMBER})?(\\+-|[+±-])[ji](${NUMBER})?$`,
  'i',
)

/** Spaces out, the typographic minus to a hyphen, a decimal comma to a point. */
const tidy = (text: string): string =>
  text
    .replace(/[\s\u2009\u202f\u00a0]/g, '')
    .replace(/−/g, '-')
    .replace(/(\d),(\d)/g, '$1.$2')

const SCALE: Record<RootUnit, number> = { 'rad/s': 1, Hz: 2 * Math.PI }

/** "-120", "-120 ± 300j", "−120 + 300j": one root, or a pair, a line. Empty lines don't count. */
export function readRoots(text: string, unit: RootUnit): Read<readonly Complex[]> {
  const roots: Complex[] = []
  const problems: WrittenProblem[] = []
  text.split('\n').forEach((written, index) => {
    const line = tidy(written)
    if (line === '') return
    const found = rootsOf(line)
    if (found) roots.push(...found.map(({ re, im }) => ({ re: re * SCALE[unit], im: im * SCALE[unit] })))
    else problems.push({ line: index + 1, reason: `“${written.trim()}” isn’t a root; write −120 or −120 ± 300j.` })
  })
  return problems.length > 0 ? { ok: false, problems } : { ok: true, value: roots }
}

function rootsOf(line: string): readonly Complex[] | null {
  const real = REAL.exec(line)
  if (real) return [{ re: Number(real[1]), im: 0 }]
  const both = COMPLEX.exec(line)
  if (!both) return null
  const [, re1, sign1, im1, re2, sign2, im2] = both
  const re = Number(re1 ?? re2 ?? 0)
  const sign = sign1 ?? sign2
  const size = Number(im1 ?? im2 ?? 1)
  if (sign === '±' || sign === '+-')
    return [
      { re, im: size },
      { re, im: -size },
    ]
  return [{ re, im: sign === '-' ? -size : size }]
}

/** Pairs once with ±, as they are read. */
export function writtenRoots(roots: readonly Complex[], unit: RootUnit): string {
  const number = (value: number) => String(Number((value / SCALE[unit]).toPrecision(15)))
  const left = [...roots]
  const lines: string[] = []
  while (left.length > 0) {
    const root = left.shift()
    if (!root) break
    const mate = root.im === 0 ? -1 : left.findIndex(({ re, im }) => re === root.re && im === -root.im)
    if (mate >= 0) left.splice(mate, 1)
    const size = number(Math.abs(root.im))
    if (root.im === 0) lines.push(number(root.re))
    else lines.push(`${number(root.re)} ${mate >= 0 ? '±' : root.im < 0 ? '-' : '+'} ${size}j`)
  }
  return lines.join('\n')
}

/** "1 2.5 3" or "1; 2,5; 3": coefficients from the highest power of s down. */
export function readCoefficients(text: string): Read<readonly number[]> {
  const words = text
    .replace(/−/g, '-')
    .replace(/(\d),(\d)/g, '$1.$2')
    .split(/[\s;,]+/)
    .filter((word) => word !== '')
  if (words.length === 0)
    return { ok: false, problems: [{ line: 1, reason: 'Write coefficients, such as 1 250 40000.' }] }
  const wrong = words.filter((word) => !REAL.test(word))
  if (wrong.length > 0)
    return { ok: false, problems: wrong.map((word) => ({ line: 1, reason: `“${word}” isn’t a number.` })) }
  return { ok: true, value: words.map(Number) }
}

/** The gain with which the response is one at DC, or null where a root lies at the origin. */
export function gainForUnityAtDc(zeros: readonly Complex[], poles: readonly Complex[]): number | null {
  // The product of −root over a conjugate-symmetric list is real: moduli with the signs of the real ones.
  const product = (roots: readonly Complex[]) =>
    roots.reduce((size, { re, im }) => size * (im === 0 ? -re : Math.hypot(re, im)), 1)
  const gain = product(poles) / product(zeros)
  return Number.isFinite(gain) && gain !== 0 ? gain : null
}
