import type { Section } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import type { ZeroFact } from './section-facts'

/** Every digit that a double needs to come back as itself, with a true minus sign; small ones with a power of ten. */
export function fullDigits(value: number): string {
  const magnitude = Math.abs(value)
  const digits = magnitude > 0 && magnitude < 1e-3 ? value.toExponential() : String(value)
  return digits.replace(/-/g, '−')
}

/** The difference equations that the coefficients belong to; the sign of the feedback is part of them. */
export const sectionEquation = 'y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂'
export const directEquation = 'y = b[0]·x + b[1]·x₁ + b[2]·x₂ + … − a[1]·y₁ − a[2]·y₂ − …'

export function zeroText({ hertz, radius, isDouble }: ZeroFact): string {
  const where =
    radius === 0
      ? 'origin'
      : Math.abs(radius - 1) < 1e-12
        ? formatHz(hertz, 5)
        : `${formatHz(hertz, 5)} at radius ${formatNumber(radius, 4)}`
  return isDouble ? `${where}, double` : where
}

const names = ['b0', 'b1', 'b2', 'a1', 'a2'] as const satisfies readonly (keyof Section)[]

/** Tab-separated text for spreadsheets and code: plain numbers, plain minus signs. */
export function sectionsAsText(sections: readonly Section[]): string {
  const lines = sections.map((section, index) => [index + 1, ...names.map((name) => section[name])].join('\t'))
  return [['section', ...names].join('\t'), ...lines, ''].join('\n')
}

/** One line for each power of z⁻¹. */
export function ratioAsText(b: ArrayLike<number>, a: ArrayLike<number>): string {
  const lines = Array.from({ length: Math.max(b.length, a.length) }, (_, k) => `${k}\t${b[k] ?? 0}\t${a[k] ?? 0}`)
  return ['delay\tb\ta', ...lines, ''].join('\n')
}
