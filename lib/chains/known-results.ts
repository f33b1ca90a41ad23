import 'server-only'
import { DesignError, ENGINE_VERSION, type ChainRequirementResult } from '@/dsp'
import { judgedChain } from './compute-version'
import { savedLines } from './held-figures'
import type { ChainVersionSummary } from './types'

type Results = readonly ChainRequirementResult[] | null

const MOST_KEPT = 100
const kept = new Map<string, Promise<Results>>()

/**
 * The lines of a saved version's sheet as they were judged when it was saved. For a version that was saved without them they are judged now,
 * once in each process: null where the engine of today refuses what an earlier one computed.
 */
export async function knownResults({
  checksum,
  spec,
  figures,
}: Pick<ChainVersionSummary, 'checksum' | 'spec' | 'figures'>): Promise<Results> {
  const saved = savedLines(spec, figures)
  if (saved) return saved
  const key = `${checksum} ${ENGINE_VERSION}`
  const known = kept.get(key)
  if (known !== undefined) return known
  const fresh = resultsOf(spec)
  const [oldest] = kept.keys()
  if (kept.size >= MOST_KEPT && oldest !== undefined) kept.delete(oldest)
  kept.set(key, fresh)
  // What failed for another reason than the chain's own may go well the next time.
  fresh.catch(() => kept.delete(key))
  return fresh
}

async function resultsOf(spec: ChainVersionSummary['spec']): Promise<Results> {
  try {
    return (await judgedChain(spec)).results
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}
