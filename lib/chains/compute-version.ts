import {
  checkChainSheet,
  chainSketch,
  computeChain,
  noiseBudget,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  worstAlias,
  type ChainRequirementResult,
  type ChainSpec,
  type ComputedChain,
  type ToleranceResult,
} from '@/dsp'
import { chainNumbersOf, type StoredChainNumbers } from './stored-numbers'
import type { ChainFigures } from './types'

/* What a version of a chain is saved with: computed on the server, whatever the browser had computed. */

/** Frequencies at which the match between channels is kept. */
const MATCH_POINTS = 33
/** An image that is exactly zero somewhere has no level; in double precision none is heard below this. */
const DEEPEST_DB = -400

export interface ComputedChainVersion {
  readonly figures: ChainFigures
  readonly numbers: StoredChainNumbers
}

export interface JudgedChain {
  readonly chain: ComputedChain
  readonly match: ToleranceResult
  readonly results: readonly ChainRequirementResult[]
}

/** A chain with the lines of its sheet, judged with a tolerance run of its own seed. @throws DesignError as computeChain */
export function judgedChain(spec: ChainSpec): JudgedChain {
  const chain = computeChain(spec)
  const frequenciesHz = toleranceFrequencies(chain, MATCH_POINTS)
  const match = toleranceResult(chain, frequenciesHz, [
    toleranceShard(chain, frequenciesHz, 0, spec.tolerance.channels),
  ])
  return { chain, match, results: checkChainSheet(chain, match) }
}

/** @throws DesignError where the spec makes no chain, with the field that is to blame */
export function computeChainVersion(spec: ChainSpec): ComputedChainVersion {
  const { chain, match, results } = judgedChain(spec)
  const { delaySeconds, multipliesPerStoredSample } = chainSketch(chain)
  const count = (met: boolean | null) => results.filter((line) => line.met === met).length
  return {
    figures: {
      outputRateHz: chain.outputRateHz,
      delaySeconds,
      worstAliasDb: Math.max(worstAlias(chain).levelDb, DEEPEST_DB),
      effectiveBits: noiseBudget(chain).effectiveBits,
      multipliesPerStoredSample,
      met: count(true),
      missed: count(false),
      unjudged: count(null),
      match: matchRows(match),
    },
    numbers: chainNumbersOf(chain),
  }
}

function matchRows({ frequenciesHz, gainMatchDb, phaseMatchDegrees }: ToleranceResult): ChainFigures['match'] {
  return Array.from(frequenciesHz, (hz, k) => ({
    hz,
    gainDb: gainMatchDb.p95[k] ?? 0,
    phaseDegrees: phaseMatchDegrees.p95[k] ?? 0,
  }))
}
