import { designAnalog } from '../design-analog'
import { DesignError } from '../errors'
import { minimumOrder } from '../prototypes/order'
import { magnitudeDb } from '../response/frequency'
import type { Family } from '../spec'
import type { Task } from './places'

export const MOST_ORDER = 24

const hasFormula = (family: Family): boolean => family !== 'bessel' && family !== 'critically-damped'

const LEVEL_ROUNDS = 44

/** Ω at which a monotone prototype has lost so many dB, its edge at 1. */
function whereLost(family: Family, order: number, db: number): number {
  const prototype = designAnalog({ family, response: 'lowpass', order, edgesHz: [1] })
  let [low, high] = [1e-4, 1e4]
  for (let round = 0; round < LEVEL_ROUNDS; round++) {
    const middle = Math.sqrt(low * high)
    if (-magnitudeDb(prototype, [middle])[0]! < db) low = middle
    else high = middle
  }
  return high
}

/** Least order of a family without a formula that falls from one loss to the other fast enough: not always a higher one does. */
function leastByTrying(family: Family, rippleDb: number, attenuationDb: number, room: number): number {
  for (let order = 1; order <= MOST_ORDER; order++) {
    const ratio = whereLost(family, order, attenuationDb) / whereLost(family, order, rippleDb)
    if (ratio <= room * (1 + 1e-9)) return order
  }
  return Number.POSITIVE_INFINITY
}

/** A lower bound of the order, by the published formulas from the mildest lines; methods that don't keep to them may do with less. */
export function startOrder(task: Task): number {
  const { outline, slide, family, how, request } = task
  const kept = outline.stretches.filter(({ isKept }) => isKept)
  const lost = outline.stretches.filter(({ isKept }) => !isKept)
  const rippleDb = Math.max(...kept.map(({ mildestDb }) => mildestDb))
  const attenuationDb = Math.min(...lost.map(({ mildestDb }) => mildestDb))
  const isExact = how.method === 'bilinear'
  const spare = isExact ? 0 : 2
  const [low, high] = slide.edgesAt(1)
  const [stopLow, stopHigh] = slide.edgesAt(slide.wide)
  if (attenuationDb <= rippleDb || low === undefined || stopLow === undefined || slide.narrow !== 1) return 1
  if (!hasFormula(family)) {
    const least = leastByTrying(family, rippleDb, attenuationDb, slide.wide)
    return Math.min(Math.max(1, least - spare), MOST_ORDER)
  }
  const isBand = high !== undefined && stopHigh !== undefined
  try {
    const least = minimumOrder(family, {
      passHz: isBand ? [low, high] : low,
      stopHz: isBand ? [stopLow, stopHigh] : stopLow,
      rippleDb,
      attenuationDb,
      ...(isExact ? { sampleRateHz: request.sampleRateHz } : {}),
    })
    return Math.max(1, least.order - spare)
  } catch (error) {
    if (error instanceof DesignError) return error.code === 'order-too-high' ? MOST_ORDER : 1
    throw error
  }
}
