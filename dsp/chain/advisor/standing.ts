import { show } from '../../check'
import type { ChainRequirementResult, ComputedChain } from '../chain'
import { checkChainSheet } from '../sheet'
import type { Needs } from './needs'

/** How an option stands to the whole sheet, of which a search works to flatness and images alone. */
export interface Standing {
  /** Lines that the option's own chain misses; a channel match, which waits for a tolerance run, is never among them. */
  readonly missed: readonly ChainRequirementResult[]
  /** What was taken where the sheet asks for no flatness, or for no alias floor, in a few words each. */
  readonly assumed: readonly string[]
}

export const standingOf = (chain: ComputedChain, { flat, alias }: Needs): Standing => ({
  missed: checkChainSheet(chain, null).filter(({ met }) => met === false),
  assumed: [
    ...flat.flatMap(({ index, withinDb }) => (index === null ? [`±${show(withinDb)} dB`] : [])),
    ...alias.flatMap(({ index, atLeastDb }) => (index === null ? [`images ${show(atLeastDb)} dB down`] : [])),
  ],
})

/** Those that meet every line which can be judged come first; the order among them stays. */
export const metFirst = (a: Pick<Standing, 'missed'>, b: Pick<Standing, 'missed'>): number =>
  Math.min(a.missed.length, 1) - Math.min(b.missed.length, 1)
