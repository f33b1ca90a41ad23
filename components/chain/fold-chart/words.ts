import type { ComputedChain, FoldChart, FoldPath, FoldStrip } from '@/dsp'
import { listed } from '@/components/studio/compare/sides'
import { stageLabel } from '@/lib/chains/words'
import { formatFixed, formatHz, formatNumber } from '@/lib/format/quantity'

/* What the fold chart says in words. */

export function ordinal(number: number): string {
  const lastTwo = number % 100
  const ending = lastTwo > 10 && lastTwo < 14 ? 'th' : (['th', 'st', 'nd', 'rd'][number % 10] ?? 'th')
  return `${number}${ending}`
}

/** How far a level lies under unity: 83.6 dB down; above it: 4.0 dB up; nothing at all for an exact zero. */
export function downWords(levelDb: number): string {
  if (levelDb === Number.NEGATIVE_INFINITY) return 'nothing'
  return levelDb > 0 ? `${formatFixed(levelDb, 1)}\u2009dB up` : `${formatFixed(-levelDb, 1)}\u2009dB down`
}

/** The bound that a worst level is for all the others. */
export function boundWords(levelDb: number): string {
  if (levelDb === Number.NEGATIVE_INFINITY) return 'nothing comes through'
  return levelDb > 0 ? `up to ${downWords(levelDb)}` : `at least ${downWords(levelDb)}`
}

/** Strips are counted as they lie: the base band is the first. */
export const stripName = ({ strip }: Pick<FoldStrip, 'strip'>): string => `${ordinal(strip + 1)} strip`

/** One strip in a line: how far down it is in the kept band, and whether it is the one to look at. */
export function stripWords(strip: FoldStrip, isWeak: boolean, isShort = false): string {
  const name = isShort ? ordinal(strip.strip + 1) : stripName(strip)
  if (strip.worst === null) return `${name}: nothing of it is kept`
  const where = isShort ? '' : ' in the kept band'
  return `${name}: ${downWords(strip.worst.levelDb)}${where}${isWeak ? ', the weak fold' : ''}`
}

/** The weak strip, wherever it stands: of very many strips a chart holds only some. */
export const weakOf = ({ strips, weakStrip }: Pick<FoldChart, 'strips' | 'weakStrip'>): FoldStrip | undefined =>
  strips.find(({ strip }) => strip === weakStrip)

/** Where and how the weak fold does its worst: the sentence under the chart. */
export function weakFoldSentence(chain: ComputedChain, chart: FoldChart): string {
  const weak = weakOf(chart)
  if (!weak || weak.strip === 0 || weak.worst === null) return 'Nothing folds into the kept band.'
  const { levelDb, inputHz, outputHz } = weak.worst
  const maker = stageNameOf(chain, weak.foldsAtStageId)
  return `The weak fold is the ${stripName(weak)}: what is at ${formatHz(inputHz)} lands on ${formatHz(outputHz)}, ${downWords(levelDb)}${maker === null ? '' : `; it folds at ${maker}`}.`
}

/** What is said of images that were not looked at one by one. */
export const beyondWords = ({ lookedUpToHz, beyondAtMostDb }: FoldChart): string =>
  `Images are looked at up to ${formatHz(lookedUpToHz)}; above it, ${boundWords(beyondAtMostDb)}.`

const LISTED = 7

/** Frequencies in one unit, so that the unit is said once: 215, 285 and 465 Hz. */
function frequencyList(hertz: readonly number[], more: number): string {
  const inKilohertz = Math.max(...hertz) >= 10_000
  const numbers = hertz.map((value) => formatNumber(inKilohertz ? value / 1000 : value, 6))
  const unit = inKilohertz ? 'kHz' : 'Hz'
  if (more === 0) return `${listed(numbers)}\u2009${unit}`
  return `${numbers.join(', ')}\u2009${unit} and ${more} more`
}

/** 35 Hz also hears 215, 285, 465 … Hz. */
export function traceWords(outputHz: number, paths: readonly FoldPath[]): string {
  const images = imagesOf(paths)
  if (images.length === 0) return `${formatHz(outputHz, 6)} hears itself alone`
  const first = images.slice(0, LISTED).map(({ inputHz }) => inputHz)
  return `${formatHz(outputHz, 6)} also hears ${frequencyList(first, images.length - first.length)}`
}

/** The same with the loudest of them, for those who hear the chart. */
export function spokenTrace(outputHz: number, paths: readonly FoldPath[]): string {
  const images = imagesOf(paths)
  const [first] = images
  if (!first) return traceWords(outputHz, paths)
  const loudest = images.reduce((most, path) => (path.levelDb > most.levelDb ? path : most), first)
  return `${traceWords(outputHz, paths)}; the loudest of them is ${formatHz(loudest.inputHz, 6)}, ${downWords(loudest.levelDb)}`
}

const imagesOf = (paths: readonly FoldPath[]): readonly FoldPath[] => paths.filter(({ strip }) => strip > 0)

/** A stage as the chart names it at a fold. */
export function stageNameOf(chain: ComputedChain, stageId: string | null): string | null {
  const found = chain.stages.find(({ stage }) => stage.id === stageId)
  return found ? stageLabel(found.stage) : null
}

/**
 * The stage that folds the axis at this frequency: the first in signal order of whose half output rate it is a multiple. Null where
 * nothing folds.
 */
export function foldMaker(chain: ComputedChain, hertz: number): string | null {
  for (const { stage, outRateHz } of chain.stages) {
    if (outRateHz === null || (stage.kind !== 'converter' && stage.kind !== 'decimate') || stage.bypassed) continue
    const turns = hertz / (outRateHz / 2)
    if (Math.round(turns) > 0 && Math.abs(turns - Math.round(turns)) < 1e-6) return stageLabel(stage)
  }
  return null
}
