import type { DesignSpec } from '@/dsp'
import type { WordKey } from '@/lib/designs/statement'
import { refusalOf } from '../store'
import { withQuantity } from './apply'

const HALVINGS = 48
const isCountKey = (key: WordKey): boolean => key === 'analog.order' || key === 'fir.taps' || key === 'how.order'

/**
 * The value nearest to a refused one that makes a design, for the word that was edited, whichever part of the spec the refusal
 * itself names.
 */
export function nearestThatWorks(spec: DesignSpec, key: WordKey, standing: number, refused: number): number | null {
  return nearestWorking((value) => refusalOf(withQuantity(spec, key, value)) === null, {
    standing,
    refused,
    isCount: isCountKey(key),
  })
}

/** Halving between the value that stands and the refused one, then rounded towards the one that stands. */
export function nearestWorking(
  works: (value: number) => boolean,
  { standing, refused, isCount }: { readonly standing: number; readonly refused: number; readonly isCount: boolean },
): number | null {
  // Below nothing there is no nearest value that anybody would want.
  if (!Number.isFinite(refused) || refused <= 0 || !works(standing)) return null
  let good = standing
  let bad = refused
  for (let halving = 0; halving < HALVINGS; halving += 1) {
    const middle = isCount ? Math.trunc((good + bad) / 2) : (good + bad) / 2
    if (middle === good || middle === bad) break
    if (works(middle)) good = middle
    else bad = middle
  }
  const towards = good > standing ? Math.floor : Math.ceil
  const digit = 10 ** (Math.floor(Math.log10(Math.abs(good) || 1)) - 3)
  const rounded = Number((towards(good / digit) * digit).toPrecision(12))
  return works(rounded) ? rounded : good
}
