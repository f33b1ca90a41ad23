import { contradictions } from '../requirements/contradictions'
import { checkSheet } from '../requirements/evaluate'
import type { Design } from '../design'
import { familySchema, firKindSchema, type DesignSpec, type Family, type MethodName } from '../spec'
import { figuresOf, sketchOf } from './figures'
import { FINITE_KINDS, searchFinite } from './finite'
import { outlineOf, type Outline } from './outline'
import { methodOf, searchRecursive } from './recursive'
import {
  isOffered,
  type CandidateOutcome,
  type CandidateParts,
  type CandidateRequest,
  type CandidateRow,
} from './request'

const FAMILIES: readonly Family[] = familySchema.options
const METHODS: readonly MethodName[] = ['bilinear', 'matched-z', 'impulse-invariant', 'step-invariant', 'fitted']

/** What a search of one kind comes to: a design, or the line that stops it. */
type Outcome =
  | { readonly spec: DesignSpec; readonly design: Design; readonly size: number }
  | { readonly miss: number | null; readonly reason: string }

/** What a search came to, as a row. */
function rowOf(
  request: CandidateRequest,
  outline: Outline,
  id: string,
  parts: CandidateParts,
  found: Outcome,
): CandidateRow {
  if ('reason' in found) return { id, parts, refused: { requirementIndex: found.miss, reason: found.reason } }
  const { spec, design, size } = found
  const results = checkSheet(design, request.sheet)
  return {
    id,
    parts,
    spec,
    size,
    results,
    figures: figuresOf(design, outline, results, request.budget.removeDelay),
    sketch: sketchOf(design.digital, request.sheet),
  }
}

/** One search after another, each a row. */
function* searches(request: CandidateRequest, outline: Outline): Generator<CandidateRow | null> {
  for (const method of request.methods ?? METHODS) {
    for (const family of request.families ?? FAMILIES) {
      const found = yield* searchRecursive(request, outline, family, methodOf(method, outline, request))
      yield rowOf(request, outline, `${family}:${method}`, { family, method }, found)
    }
  }
  const kinds = request.firKinds ?? firKindSchema.options
  for (const what of FINITE_KINDS) {
    if (!kinds.includes(what.kind)) continue
    const found = yield* searchFinite(request, outline, what)
    const { kind, window } = what
    const isNamed = kind === 'windowed' && window !== undefined
    const parts = { firKind: kind, ...(isNamed ? { window } : {}) }
    yield rowOf(request, outline, isNamed ? `${kind}:${window}` : kind, parts, found)
  }
}

/**
 * The search step by step: each `next()` does a little work, and gives a row when one is ready or null when there is none yet, so that
 * whoever runs it can show rows as they come and stop between steps.
 * @see searchCandidates
 */
export function* candidateSteps(request: CandidateRequest): Generator<CandidateRow | null, CandidateOutcome> {
  const nothing = { contradictions: [], unclear: null, offered: 0, refused: 0, isCancelled: false }
  const against = contradictions(request.sheet, request.sampleRateHz)
  if (against.length > 0) return { ...nothing, contradictions: against }
  const outline = outlineOf(request.sheet, request.sampleRateHz)
  if (typeof outline === 'string') return { ...nothing, unclear: outline }
  let offered = 0
  let refused = 0
  for (const row of searches(request, outline)) {
    if (row !== null && isOffered(row)) offered += 1
    else if (row !== null) refused += 1
    yield row
  }
  return { ...nothing, offered, refused }
}

/**
 * From a sheet alone, the least design of every family by every method, and of every FIR kind, that meets all of its lines; what can't is
 * listed with the line that stops it. Rows come as they are found.
 *
 * Every row offered was judged by checkSheet on its digital filter, never by a formula alone. Orders up to 24 and up to 400 taps are
 * looked at. A recursive design's edges slide by one number between its limits (see slide.ts), so that a design which only unequal
 * edges would bring about is not found.
 *
 * @param request the sheet, the rate, and what room is to be spent on
 * @param onRow called with each row
 * @param isCancelled asked between steps; may wait, e.g. for a message to a worker to come in
 * @returns how it ended: with contradictions in the sheet nothing is searched
 */
export async function searchCandidates(
  request: CandidateRequest,
  onRow: (row: CandidateRow) => void,
  isCancelled: () => boolean | Promise<boolean> = () => false,
): Promise<CandidateOutcome> {
  const steps = candidateSteps(request)
  let offered = 0
  let refused = 0
  for (;;) {
    const { done, value } = steps.next()
    if (done === true) return value
    if (value !== null) {
      if (isOffered(value)) offered += 1
      else refused += 1
      onRow(value)
    }
    if (await isCancelled()) return { contradictions: [], unclear: null, offered, refused, isCancelled: true }
  }
}
