import type { DecimalMark } from './plan'

/** 10^k, exact in double precision for k ≤ 22. */
export const POWERS_OF_TEN = Float64Array.from({ length: 23 }, (_, k) => Number(`1e${k}`))

/** Below this a mantissa of decimal digits is held exactly. */
export const EXACT_MANTISSA = 2 ** 53

const POINT = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/
const COMMA = /^[+-]?(?:\d+,?\d*|,\d+)(?:[eE][+-]?\d+)?$/
const INFINITE = /^[+-]?(?:inf|infinity|∞)$/i
const MISSING = /^(?:nan|n\/?a|null|none|-+|—|\?|#n\/a)$/i

export type Cell = { readonly value: number } | { readonly reason: string }

/**
 * Reads a cell as a number, to the last bit (by Number), or says why it is none. This is the slow way, for what the byte-level reader
 * leaves over; both give the same values.
 */
export function readCell(raw: string, decimal: DecimalMark): Cell {
  const text = unquote(raw.trim()).replace(/^\u2212/, '-')
  if (text === '') return { reason: 'blank cell' }
  if ((decimal === '.' ? POINT : COMMA).test(text)) {
    const value = Number(decimal === ',' ? text.replace(',', '.') : text)
    return Number.isFinite(value) ? { value } : { reason: `${quoted(text)} is beyond the largest double` }
  }
  if (INFINITE.test(text)) return { reason: `${quoted(text)} is infinite` }
  if (MISSING.test(text)) return { reason: `${quoted(text)} stands for no value` }
  if ((decimal === '.' ? COMMA : POINT).test(text)) return { reason: `${quoted(text)} has the other decimal mark` }
  if (/^[+-]?\d{1,3}(?:[ .,'\u00a0\u2009\u202f]\d{3})+(?:[.,]\d+)?$/.test(text))
    return { reason: `${quoted(text)} has marks between its thousands` }
  return { reason: `${quoted(text)} is not a number` }
}

export function unquote(text: string): string {
  if (text.length < 2 || text[0] !== '"' || text[text.length - 1] !== '"') return text
  return text.slice(1, -1).replaceAll('""', '"').trim()
}

const quoted = (text: string): string => `“${text.length > 24 ? `${text.slice(0, 23)}…` : text}”`
