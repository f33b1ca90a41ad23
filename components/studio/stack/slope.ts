import { DesignError, designAnalog, magnitudeDb, type FamilyDesign, type Filter } from '@/dsp'
import { MOST_ORDER } from './spec-handles'

/** The order whose analog curve passes nearest to a level at a frequency; ties and plateaus keep to the order at hand. */
export type OrderFinder = (hz: number, db: number, orderNow: number) => number

/** A finder for one design; the candidates are designed on first use and kept, so that a drag asks each for one value only. */
export function orderFinder({ analog }: FamilyDesign): OrderFinder {
  let candidates: readonly { readonly order: number; readonly filter: Filter<'s'> }[] | null = null
  return (hz, db, orderNow) => {
    candidates ??= designedOrders(analog)
    let best = orderNow
    let bestMiss = Number.POSITIVE_INFINITY
    for (const { order, filter } of candidates) {
      const level = magnitudeDb(filter, [hz])[0] ?? Number.NaN
      if (Number.isNaN(level)) continue
      // A thousandth of a decibel per order of change decides between equals.
      const miss = Math.abs(Math.max(level, -400) - db) + 1e-3 * Math.abs(order - orderNow)
      if (miss < bestMiss) {
        best = order
        bestMiss = miss
      }
    }
    return best
  }
}

function designedOrders(analog: FamilyDesign['analog']) {
  const found: { order: number; filter: Filter<'s'> }[] = []
  for (let order = 1; order <= MOST_ORDER; order++) {
    try {
      found.push({ order, filter: designAnalog({ ...analog, order }) })
    } catch (error) {
      // An order that this family can't have is no candidate.
      if (!(error instanceof DesignError)) throw error
    }
  }
  return found
}
