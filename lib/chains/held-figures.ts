import { DesignError, type ChainRequirementResult, type ChainSpec, type ComputedChain } from '@/dsp'
import type { ChainFigures, StoredLine } from './types'

/* Figures as they can be kept: every one of them a finite number. */

/** What is exactly zero somewhere has no level; in double precision nothing is heard below this, nor does anything depart by more. */
const DEEPEST_DB = -400

const held = (decibels: number): number => Math.max(DEEPEST_DB, Math.min(decibels, -DEEPEST_DB))

/**
 * The lines of a sheet without what the spec says of them.
 *
 * @throws DesignError `figure-not-finite` with field `sheet.<i>`
 */
export function heldLines(results: readonly ChainRequirementResult[]): readonly StoredLine[] {
  return results.map(({ requirement: _, value, margin, ...line }, index) => {
    const within = (figure: number | null) => (figure === null || line.unit !== 'dB' ? figure : held(figure))
    const stored = { ...line, value: within(value), margin: within(margin) }
    demandFinite([stored.value, stored.margin, stored.limit, stored.worstHz], `sheet.${index}`, 'This line')
    return stored
  })
}

/** @throws DesignError `figure-not-finite` with the field that the figure hangs on most */
export function heldFigures(figures: ChainFigures, chain: ComputedChain): ChainFigures {
  const { outputRateHz, delaySeconds, effectiveBits, multipliesPerStoredSample, match } = figures
  const worstAliasDb = held(figures.worstAliasDb)
  const converter = `stages.${chain.converterIndex}`
  const gain = match.flatMap(({ gainDb, phaseDegrees }) => [gainDb, phaseDegrees])
  demandFinite([outputRateHz, multipliesPerStoredSample], `${converter}.sampleRateHz`, 'The rate of the stored samples')
  demandFinite([delaySeconds], 'kept.toHz', 'The delay in the middle of the kept band')
  demandFinite([worstAliasDb], 'kept.toHz', 'The highest image in the kept band')
  demandFinite([effectiveBits], `${converter}.fullScaleVolts`, 'The number of effective bits')
  demandFinite(gain, 'tolerance.spread', 'The match between channels')
  return { ...figures, worstAliasDb }
}

function demandFinite(figures: readonly (number | null)[], field: string, what: string): void {
  if (figures.every((figure) => figure === null || Number.isFinite(figure))) return
  const message = `${what} comes to no finite number, so that this version can’t be kept; take a more usual value here.`
  throw new DesignError('figure-not-finite', field, message)
}

/** The lines of a saved version's sheet, put together again; null for one that was saved before they were kept. */
export function savedLines(
  { sheet }: ChainSpec,
  { lines }: Pick<ChainFigures, 'lines'>,
): readonly ChainRequirementResult[] | null {
  return lines?.length === sheet.length
    ? sheet.flatMap((requirement, index) => {
        const line = lines[index]
        return line ? [{ requirement, ...line }] : []
      })
    : null
}
