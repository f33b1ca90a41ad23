import type { FeedbackSign, Structure } from './options'

/*
 * The sign convention, printed as what the firmware computes. The equation says everything: whether a feedback coefficient is added
 * or subtracted, and that the coefficient of y[n] is 1 and is not listed.
 */

/** Difference equation of one section, or of a ratio or taps of that order, in ASCII as files carry it. */
export function differenceEquation(structure: Structure, feedback: FeedbackSign, order: number): string {
  if (structure === 'taps') return `y[n] = ${series('h', 'x', 0, order).join(' + ')}`
  const highest = structure === 'sections' ? 2 : order
  const sign = feedback === 'subtract' ? '-' : '+'
  const forward = series('b', 'x', 0, highest).join(' + ')
  const backward = series('a', 'y', 1, highest).join(` ${sign} `)
  return `y[n] = ${forward} ${sign} ${backward}`
}

function series(letter: string, signal: string, first: number, last: number): string[] {
  const term = (k: number) => `${letter}${k}*${signal}[n${k === 0 ? '' : `-${k}`}]`
  const terms = Array.from({ length: last - first + 1 }, (_, k) => term(first + k))
  // A long equation keeps its first two terms and its last one.
  return terms.length > 4 ? [...terms.slice(0, 2), '...', ...terms.slice(-1)] : terms
}

/** The same with subscripts and signs as a screen shows it. */
export function typesetEquation(structure: Structure, feedback: FeedbackSign, order: number): string {
  return differenceEquation(structure, feedback, order)
    .replace(/([abh])(\d+)/g, (_, letter: string, digits: string) => letter + subscript(digits))
    .replace(/\*/g, '·')
    .replace(/ - /g, ' − ')
    .replace(/\[n-/g, '[n−')
    .replace(/\.\.\./g, '…')
}

const subscript = (digits: string) => digits.replace(/\d/g, (digit) => '₀₁₂₃₄₅₆₇₈₉'[Number(digit)] ?? digit)

export const signWords: Readonly<Record<FeedbackSign, string>> = {
  subtract: 'feedback coefficients are subtracted, as they stand in the denominator',
  add: 'feedback coefficients are added: the denominator’s, negated',
}

/** What a file of taps says in place of a sign. */
export const noFeedbackWords = 'none: taps have no feedback'
