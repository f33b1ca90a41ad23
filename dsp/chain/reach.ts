import { highestPeakHz } from './analog-bound'
import type { ComputedChain } from './chain'
import { partsAhead } from './strips'

/** How far images are looked at, in converter rates. */
const LOOK_UP_RATES = 4
const MOST_LOOK_UP_RATES = 64

/** Up to four converter rates, and on by doublings while a pair of analog poles still has its peak above. */
export function lookedUpTo(chain: ComputedChain): number {
  const peaks = partsAhead(chain).map((part) => (part.kind === 'analog' ? highestPeakHz(part.filter) : 0))
  const least = 1.5 * Math.max(0, ...peaks)
  let rates = LOOK_UP_RATES
  while (rates < MOST_LOOK_UP_RATES && rates * chain.converterRateHz < least) rates *= 2
  return rates * chain.converterRateHz
}

/** Strips up to a frequency, the base band included. */
export const stripsUpTo = (chain: ComputedChain, upToHz: number): number =>
  Math.round((2 * upToHz) / chain.outputRateHz)
