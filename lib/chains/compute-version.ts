import { setImmediate as nextTurn } from 'node:timers/promises'
import {
  analogSections,
  chainSheetLines,
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
  type ToleranceShard,
} from '@/dsp'
import { heldFigures, heldLines } from './held-figures'
import { oneAtATime } from './one-at-a-time'
import { chainNumbersOf, type StoredChainNumbers } from './stored-numbers'
import type { ChainFigures } from './types'

/*
 * What a version of a chain is saved with: computed on the server, whatever the browser had computed. One chain at a time, and in pieces
 * between which the server answers others.
 */

/** Frequencies at which the match between channels is kept. */
const MATCH_POINTS = 33
/** Sections × channels × frequencies that are drawn in one piece: some 30 ms of work. */
const PIECE = 500_000

export interface ComputedChainVersion {
  readonly figures: ChainFigures
  readonly numbers: StoredChainNumbers
}

export interface JudgedChain {
  readonly chain: ComputedChain
  readonly match: ToleranceResult
  readonly results: readonly ChainRequirementResult[]
}

const inTurn = oneAtATime()

/** A chain with the lines of its sheet, judged with a tolerance run of its own seed. @throws DesignError as computeChain */
export const judgedChain = (spec: ChainSpec): Promise<JudgedChain> => inTurn(() => judge(spec))

/** @throws DesignError where the spec makes no chain, or one whose figures are no numbers, with the field that is to blame */
export const computeChainVersion = (spec: ChainSpec): Promise<ComputedChainVersion> => inTurn(() => compute(spec))

async function judge(spec: ChainSpec): Promise<JudgedChain> {
  const chain = computeChain(spec)
  const match = await matchOf(chain)
  const results: ChainRequirementResult[] = []
  await nextTurn()
  for (const result of chainSheetLines(chain, match)) {
    results.push(result)
    await nextTurn()
  }
  return { chain, match, results }
}

async function matchOf(chain: ComputedChain): Promise<ToleranceResult> {
  const frequenciesHz = toleranceFrequencies(chain, MATCH_POINTS)
  const { channels } = chain.spec.tolerance
  const sections = Math.max(1, analogSections(chain).length)
  const piece = Math.max(1, Math.floor(PIECE / (MATCH_POINTS * sections)))
  const shards: ToleranceShard[] = []
  for (let from = 0; from < channels; from += piece) {
    await nextTurn()
    shards.push(toleranceShard(chain, frequenciesHz, from, Math.min(from + piece, channels)))
  }
  await nextTurn()
  return toleranceResult(chain, frequenciesHz, shards)
}

async function compute(spec: ChainSpec): Promise<ComputedChainVersion> {
  const { chain, match, results } = await judge(spec)
  await nextTurn()
  const worstAliasDb = worstAlias(chain).levelDb
  await nextTurn()
  const { delaySeconds, multipliesPerStoredSample } = chainSketch(chain)
  const count = (met: boolean | null) => results.filter((line) => line.met === met).length
  const figures = {
    outputRateHz: chain.outputRateHz,
    delaySeconds,
    worstAliasDb,
    effectiveBits: noiseBudget(chain).effectiveBits,
    multipliesPerStoredSample,
    met: count(true),
    missed: count(false),
    unjudged: count(null),
    match: matchRows(match),
    lines: heldLines(results),
  }
  return { figures: heldFigures(figures, chain), numbers: chainNumbersOf(chain) }
}

function matchRows({ frequenciesHz, gainMatchDb, phaseMatchDegrees }: ToleranceResult): ChainFigures['match'] {
  return Array.from(frequenciesHz, (hz, k) => ({
    hz,
    gainDb: gainMatchDb.p95[k] ?? Number.NaN,
    phaseDegrees: phaseMatchDegrees.p95[k] ?? Number.NaN,
  }))
}
