import { show } from '../check'
import type { Judged } from '../requirements/departure-line'
import { checkRequirement, type RequirementResult } from '../requirements/evaluate'
import { duration, lineName } from '../requirements/line-words'
import type { Requirement, RequirementSheet } from '../requirements/requirement'
import type { Miss } from './screen'

export type Verdict = { readonly results: readonly RequirementResult[] } | { readonly miss: Miss }

/** What is quick to judge comes first. */
const EFFORT: Readonly<Record<Requirement['kind'], number>> = {
  cost: 0,
  'keep-tone': 1,
  'lose-tone': 1,
  delay: 2,
  'delay-spread': 3,
  pass: 3,
  stop: 4,
  'magnitude-departure': 5,
  'phase-departure': 5,
  settling: 6,
  overshoot: 6,
  'word-length': 7,
}

/** Lines of the magnitude itself. */
export const LEVEL_KINDS: ReadonlySet<Requirement['kind']> = new Set(['pass', 'stop', 'keep-tone', 'lose-tone'])

/** Misses further than this, or without a measure, are all alike. */
const FAR = 1e3

function missOf(index: number, result: RequirementResult): Miss {
  const parts = -result.margin / (result.limit > 0 ? result.limit : 1)
  return {
    index,
    parts: Number.isFinite(parts) ? Math.min(parts, FAR) : FAR,
    words: words(index, result),
    isLate: !LEVEL_KINDS.has(result.requirement.kind),
  }
}

function amount({ unit, margin }: RequirementResult): string {
  const size = Math.abs(margin)
  if (unit === 's') return duration(Number(size.toPrecision(3)))
  const rounded = show(Number(size.toPrecision(3)))
  if (unit === 'multiplies') return `${rounded} ${size === 1 ? 'multiply' : 'multiplies'}`
  return unit === '°' ? `${rounded}°` : `${rounded} ${unit}`
}

function words(index: number, result: RequirementResult): string {
  const name = lineName(index, result.requirement)
  if (Number.isFinite(result.margin)) return `misses ${name} by ${amount(result)}`
  return result.reason === undefined ? `misses ${name}` : `misses ${name}: ${result.reason}`
}

/** Judges line after line, the quick ones first, and stops at the first that is missed; only lines of some kinds if asked. */
export function judge(design: Judged, sheet: RequirementSheet, isAsked = (_: Requirement): boolean => true): Verdict {
  const order = sheet
    .map((line, index) => ({ line, index }))
    .filter(({ line }) => isAsked(line))
    .sort((a, b) => EFFORT[a.line.kind] - EFFORT[b.line.kind])
  const results: RequirementResult[] = []
  for (const { line, index } of order) {
    const result = checkRequirement(design, line, sheet)
    if (!result.met) return { miss: missOf(index, result) }
    results[index] = result
  }
  return { results }
}
