import type { ChainSpec, Interferer } from '@/dsp'
import { sameValue } from '@/lib/designs/same-value'
import { changesBetween, factsAt } from './facts'
import { chainLineText, chainRequirementKindWords } from './words'

/* What differs between two versions of a chain beside their stages. */

export interface ChangeRow {
  readonly what: string
  readonly left: string
  readonly right: string
}

const NOTHING = '—'

/** Kept band, lines of the sheet, interferers and the settings of the tolerance run; what is the same is left out. */
export function otherChanges(left: ChainSpec, right: ChainSpec): readonly ChangeRow[] {
  const plain = (path: 'kept' | 'tolerance') =>
    changesBetween(left, path, right, path).map(({ label, before, after }) => ({
      what: path === 'kept' ? label : `Tolerance: ${label.charAt(0).toLowerCase()}${label.slice(1)}`,
      left: before ?? NOTHING,
      right: after ?? NOTHING,
    }))
  return [
    ...plain('kept'),
    ...pairedRows(linesOf(left), linesOf(right)),
    ...pairedRows(interferersOf(left), interferersOf(right)),
    ...plain('tolerance'),
  ]
}

interface Item {
  /** Items of the two sides with the same key are the same thing, changed or not. */
  readonly key: string
  readonly what: string
  readonly text: string
  readonly value: unknown
}

/** The first, second … of each name. */
function numbered(items: readonly Omit<Item, 'key'>[]): readonly Item[] {
  const seen = new Map<string, number>()
  return items.map((item) => {
    const count = (seen.get(item.what) ?? 0) + 1
    seen.set(item.what, count)
    return { ...item, key: `${item.what} ${count}` }
  })
}

const linesOf = (spec: ChainSpec): readonly Item[] =>
  numbered(
    spec.sheet.map((line, index) => ({
      what: chainRequirementKindWords[line.kind],
      text: chainLineText(spec, index),
      value: line,
    })),
  )

const interferersOf = (spec: ChainSpec): readonly Item[] =>
  numbered(
    spec.interferers.map((one, index) => ({
      what: `Interferer ${one.name}`,
      text: interfererText(spec, one, index),
      value: one,
    })),
  )

function interfererText(spec: ChainSpec, { kind }: Interferer, index: number): string {
  const numbers = factsAt(spec, `interferers.${index}`)
    .filter(({ path }) => path !== 'kind' && path !== 'name')
    .map(({ label, text }) => `${label.charAt(0).toLowerCase()}${label.slice(1)} ${text}`)
  return `${kind}, ${numbers.join(', ')}`
}

function pairedRows(left: readonly Item[], right: readonly Item[]): ChangeRow[] {
  const gone = left.filter(({ key }) => !right.some((item) => item.key === key))
  return [...right, ...gone].flatMap(({ key, what }): ChangeRow[] => {
    const [before, after] = [left, right].map((items) => items.find((item) => item.key === key))
    if (before && after && sameValue(before.value, after.value)) return []
    return [{ what, left: before?.text ?? NOTHING, right: after?.text ?? NOTHING }]
  })
}
