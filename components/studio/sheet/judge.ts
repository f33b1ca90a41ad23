import { useDeferredValue, useMemo } from 'react'
import { DesignError, checkSheet, type DesignSpec, type Requirement, type RequirementResult } from '@/dsp'
import { sheetOf } from '@/lib/designs/sheet-edits'
import { orRefusal } from '../or-refusal'
import { statedDesign } from '../stated-design'

/** What is said of each line; a line that is not in here is still being worked out. */
export type Judgements = ReadonlyMap<Requirement, RequirementResult>

const none: Judgements = new Map()

const kept = new WeakMap<DesignSpec, Judgements>()

/** The judgement of every line of the spec's sheet, worked out once, however many ask; of none where the spec makes no design. */
export function judgementsOf(spec: DesignSpec): Judgements {
  const known = kept.get(spec)
  if (known) return known
  const judgements = workedOut(spec)
  kept.set(spec, judgements)
  return judgements
}

function workedOut(spec: DesignSpec): Judgements {
  const sheet = sheetOf(spec)
  const design = statedDesign(spec)
  if (sheet.length === 0 || design instanceof DesignError) return none
  const results = orRefusal(() => checkSheet(design, sheet))
  if (results instanceof DesignError) return none
  return new Map(results.map((result) => [result.requirement, result]))
}

/** The judgements, worked out after the rest of the page has been drawn and anew only with the spec. */
export function useJudgements(spec: DesignSpec): Judgements {
  const judged = useDeferredValue<DesignSpec | null>(spec, null)
  return useMemo(() => (judged ? judgementsOf(judged) : none), [judged])
}
