import { useDeferredValue, useMemo } from 'react'
import {
  checkChainSheet,
  DesignError,
  type ChainRequirement,
  type ChainRequirementResult,
  type ChainSpec,
  type ToleranceResult,
} from '@/dsp'
import { orRefusal } from '@/components/studio/or-refusal'
import type { ChainFigures } from '@/lib/chains/types'
import { computedChain } from './computed-chain'

/** What is said of each line; a line that is not in here is still being worked out. */
export type ChainJudgements = ReadonlyMap<ChainRequirement, ChainRequirementResult>

const none: ChainJudgements = new Map()

const kept = new WeakMap<ChainSpec, { readonly match: ToleranceResult | null; readonly judgements: ChainJudgements }>()

/** The judgement of every line of the spec's sheet, worked out once, however many ask; of none where the spec makes no chain. */
export function chainJudgements(spec: ChainSpec, match: ToleranceResult | null): ChainJudgements {
  const known = kept.get(spec)
  if (known?.match === match) return known.judgements
  const judgements = workedOut(spec, match)
  kept.set(spec, { match, judgements })
  return judgements
}

function workedOut(spec: ChainSpec, match: ToleranceResult | null): ChainJudgements {
  const chain = computedChain(spec)
  if (spec.sheet.length === 0 || chain instanceof DesignError) return none
  const results = orRefusal(() => checkChainSheet(chain, match))
  if (results instanceof DesignError) return none
  return new Map(results.map((result) => [result.requirement, result]))
}

/** What a version was saved with, as the run that it was: the 95th percentile between two channels is all that its lines ask for. */
export function savedTolerance(
  spec: ChainSpec,
  { match }: Pick<ChainFigures, 'match'>,
): { readonly spec: ChainSpec; readonly result: ToleranceResult } | null {
  if (match.length === 0) return null
  const none = new Float64Array(0)
  const between = (p95: readonly number[]) => ({ p50: none, p95: Float64Array.from(p95), most: none })
  const nothing = { p5: none, p50: none, p95: none }
  return {
    spec,
    result: {
      settings: spec.tolerance,
      frequenciesHz: Float64Array.from(match, ({ hz }) => hz),
      magnitudeDb: nothing,
      phaseDegrees: nothing,
      gainMatchDb: between(match.map(({ gainDb }) => gainDb)),
      phaseMatchDegrees: between(match.map(({ phaseDegrees }) => phaseDegrees)),
    },
  }
}

const OLDER = 'The last run was of an older state of the chain; run the channels again.'

/** The judgements where there was a run, but of another state than the one that stands. */
export const withOlderRun = (judgements: ChainJudgements): ChainJudgements =>
  new Map(
    Array.from(judgements, ([line, result]) => [
      line,
      line.kind === 'channel-match' && result.met === null ? { ...result, reason: OLDER } : result,
    ]),
  )

/** The judgements, worked out after the rest of the page has been drawn and anew only with the spec or the tolerance run. */
export function useChainJudgements(spec: ChainSpec, match: ToleranceResult | null): ChainJudgements {
  const judged = useDeferredValue<ChainSpec | null>(spec, null)
  return useMemo(() => (judged ? chainJudgements(judged, match) : none), [judged, match])
}
