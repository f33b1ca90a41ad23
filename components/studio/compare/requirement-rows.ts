import { DesignError, checkRequirement, type Requirement, type RequirementResult, type RequirementSheet } from '@/dsp'
import { marginWords, requirementText, resultQuantity, worstWords } from '@/lib/designs/requirement-words'
import { sheetOf } from '@/lib/designs/sheet-edits'
import { orRefusal } from '../or-refusal'
import type { Side } from './figures'
import { inSentence, listed } from './sides'

/* Every line of every side's requirement sheet, and how each side's design stands to it. */

export interface RequirementCell {
  readonly met: boolean
  readonly value: string
  /** "met by 0.3 dB", "missed by 2.1°". */
  readonly margin: string
  /** "worst at 118 Hz". */
  readonly worst: string | null
  /** Why the line can't be judged on this design, or by what it was. */
  readonly reason: string | null
}

export interface RequirementRow {
  readonly text: string
  /** Whose sheet has the line, where not every one has it: "asked by version 3 alone". */
  readonly whose: string | null
  /** In the order of the sides. */
  readonly cells: readonly RequirementCell[]
}

interface Line {
  readonly line: Requirement
  /** The whole sheet that it stands in: words are judged over its pass bands. */
  readonly sheet: RequirementSheet
  readonly owners: readonly Side[]
}

/** The base's lines in its order, then those that only others have, each once. A line is the same when all its numbers are. */
export function linesOf(sides: readonly Side[]): readonly Line[] {
  const found = new Map<string, Line>()
  for (const side of sides) {
    const sheet = sheetOf(side.spec)
    for (const line of sheet) {
      const key = keyOf(line)
      const known = found.get(key)
      if (!known) found.set(key, { line, sheet, owners: [side] })
      else if (!known.owners.includes(side)) found.set(key, { ...known, owners: [...known.owners, side] })
    }
  }
  return [...found.values()]
}

/** The same line has the same text, in whatever order its fields were written. */
const keyOf = (line: Requirement): string =>
  JSON.stringify(Object.entries(line).sort(([one], [other]) => (one < other ? -1 : 1)))

/** Each side's design judged by each line, whoever asks for it. */
export function requirementRows(sides: readonly Side[]): readonly RequirementRow[] {
  return linesOf(sides).map(({ line, sheet, owners }) => ({
    text: requirementText(line),
    whose: owners.length === sides.length ? null : whoseWords(owners),
    cells: sides.map((side) => cellOf(side, line, sheet)),
  }))
}

function whoseWords(owners: readonly Side[]): string {
  const names = listed(owners.map(({ label }) => inSentence(label)))
  return owners.length === 1 ? `asked by ${names} alone` : `asked by ${names}`
}

function cellOf({ design, spec }: Side, line: Requirement, sheet: RequirementSheet): RequirementCell {
  const result = orRefusal(() => checkRequirement(design, line, sheet))
  if (result instanceof DesignError)
    return { met: false, value: '—', margin: 'can’t be judged', worst: null, reason: result.message }
  return {
    met: result.met,
    value: valueText(result),
    margin: marginWords(result),
    worst: worstWords(result.worstHz, spec.sampleRateHz),
    reason: result.reason ?? null,
  }
}

const valueText = (result: RequirementResult): string =>
  Number.isNaN(result.value) || (result.reason !== undefined && !Number.isFinite(result.value))
    ? '—'
    : resultQuantity(result.value, result)

/** How many of the lines each side meets: "5 of 6 met". */
export const countsMet = (rows: readonly RequirementRow[], sides: readonly Side[]): readonly string[] =>
  sides.map((_, at) => `${rows.filter(({ cells }) => cells[at]?.met).length} of ${rows.length} met`)
