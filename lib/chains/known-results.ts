import 'server-only'
import { DesignError, ENGINE_VERSION, type ChainRequirementResult } from '@/dsp'
import { judgedChain } from './compute-version'
import type { ChainVersionSummary } from './types'

const MOST_KEPT = 100
const kept = new Map<string, readonly ChainRequirementResult[] | null>()

/**
 * The lines of a saved version's sheet, judged, once in each process: a version never changes, and a tolerance run takes its time. Null where
 * the engine of today refuses what an earlier one computed.
 */
export function knownResults({
  checksum,
  spec,
}: Pick<ChainVersionSummary, 'checksum' | 'spec'>): readonly ChainRequirementResult[] | null {
  const key = `${checksum} ${ENGINE_VERSION}`
  const known = kept.get(key)
  if (known !== undefined) return known
  const fresh = resultsOf(spec)
  const [oldest] = kept.keys()
  if (kept.size >= MOST_KEPT && oldest !== undefined) kept.delete(oldest)
  kept.set(key, fresh)
  return fresh
}

function resultsOf(spec: ChainVersionSummary['spec']): readonly ChainRequirementResult[] | null {
  try {
    return judgedChain(spec).results
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}
