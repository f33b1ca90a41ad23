import type { CandidateParts, CandidateRow, OfferedRow } from '@/dsp'
import { firName } from '@/lib/designs/fir-statement'
import { familyWords, methodLabels } from '@/lib/designs/words'
import { formatFixed, formatNumber, formatSeconds } from '@/lib/format/quantity'

/* The columns of the table as data: what each is called, how it is ranked and how it is written. */

export type ColumnId = 'margin' | 'delay' | 'spread' | 'phase' | 'multiplies' | 'overshoot'

export interface Column {
  readonly id: ColumnId
  readonly name: string
  readonly title: string
  /** The better value first: rising or falling. */
  readonly better: 'less' | 'more'
  /** Null is worse than anything. */
  value(row: OfferedRow): number | null
  text(row: OfferedRow): string
}

const percent = (value: number) => `${formatNumber(value, 3)}\u2009%`

export const columns: readonly Column[] = [
  {
    id: 'margin',
    name: 'margin',
    title: 'Least room of any line, as a part of its limit',
    better: 'more',
    value: ({ figures }) => figures.marginParts,
    text: ({ figures }) => percent(figures.marginParts * 100),
  },
  {
    id: 'delay',
    name: 'delay',
    title: 'Largest group delay in the pass bands',
    better: 'less',
    value: ({ figures }) => figures.delaySeconds,
    text: ({ figures }) => formatSeconds(figures.delaySeconds, 3),
  },
  {
    id: 'spread',
    name: 'delay spread',
    title: 'Largest less least group delay in the pass bands',
    better: 'less',
    value: ({ figures }) => figures.delaySpreadSeconds,
    // A linear-phase filter has none but for rounding.
    text: ({ figures }) => (figures.delaySpreadSeconds < 1e-12 ? 'none' : formatSeconds(figures.delaySpreadSeconds, 3)),
  },
  {
    id: 'phase',
    name: 'phase departure',
    title: 'Worst departure in phase up to the highest pass edge',
    better: 'less',
    value: ({ figures }) => figures.phaseDepartureDegrees,
    text: ({ figures }) =>
      figures.phaseDepartureDegrees === null ? '—' : `${formatFixed(figures.phaseDepartureDegrees, 2)}°`,
  },
  {
    id: 'multiplies',
    name: 'multiplies',
    title: 'Multiplications a sample',
    better: 'less',
    value: ({ figures }) => figures.multiplies,
    text: ({ figures }) => String(figures.multiplies),
  },
  {
    id: 'overshoot',
    name: 'overshoot',
    title: 'Of the step response',
    better: 'less',
    value: ({ figures }) => figures.overshootPercent,
    text: ({ figures }) => (figures.overshootPercent === null ? '—' : percent(figures.overshootPercent)),
  },
]

export interface Ranking {
  readonly by: ColumnId
  readonly bestFirst: boolean
}

/** Ranked by a column; what has no value there comes last either way. */
export function ranked(rows: readonly OfferedRow[], { by, bestFirst }: Ranking): readonly OfferedRow[] {
  const column = columns.find(({ id }) => id === by)
  if (!column) return rows
  const sign = (column.better === 'less' ? 1 : -1) * (bestFirst ? 1 : -1)
  return [...rows].sort((one, other) => {
    const [a, b] = [column.value(one), column.value(other)]
    if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1
    return sign * (a - b)
  })
}

export const kindFilters = [
  { value: 'all', label: 'all' },
  { value: 'poles', label: 'with poles' },
  { value: 'fir', label: 'FIR' },
] as const
export type KindFilter = (typeof kindFilters)[number]['value']

export const isOfKind = ({ parts }: CandidateRow, filter: KindFilter): boolean =>
  filter === 'all' || (filter === 'fir') === 'firKind' in parts

export function nameOf(parts: CandidateParts): string {
  if ('firKind' in parts)
    return firName({ kind: parts.firKind, ...(parts.window === undefined ? {} : { window: parts.window }) })
  return `${familyWords[parts.family]}, ${methodLabels[parts.method]}`
}

export const sizeOf = ({ parts, size }: OfferedRow): string => ('firKind' in parts ? `${size} taps` : `order ${size}`)
