import { chainResponse, computeChain, DesignError, type ChainSpec, type ComputedChain } from '@/dsp'
import type { Curve, Curves, PlacedCurve } from '@/components/studio/compare/curves'

/* The responses of two chains, from the sensor to the stored sample, on one frequency axis, and what the second differs from the first. */

const POINTS = 600
/** Below the kept band, far enough to see the high-pass. */
const BELOW = 5
const DECADES_MOST = 1e5
const degree = 180 / Math.PI

/** Null where today's engine refuses one of them. */
export function chainCurves(left: ChainSpec, right: ChainSpec): Curves | null {
  const chains = [left, right].map(computed)
  const [one, other] = chains
  if (!one || !other) return null
  const toHz = Math.max(one.outputRateHz, other.outputRateHz) / 2
  const lowest = Math.min(...[left, right].map(({ kept }) => kept.fromHz || kept.toHz / 100))
  const fromHz = Math.max(lowest / BELOW, toHz / DECADES_MOST)
  const shared = gridUpTo(fromHz, Math.min(one.outputRateHz, other.outputRateHz) / 2)
  return {
    fromHz,
    toHz,
    sides: [one, other].map((chain, place) => ({ place, ...curveOn(chain, gridUpTo(fromHz, chain.outputRateHz / 2)) })),
    differences: [differenceOf(curveOn(one, shared), curveOn(other, shared))],
  }
}

function computed(spec: ChainSpec): ComputedChain | null {
  try {
    return computeChain(spec)
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}

function gridUpTo(fromHz: number, toHz: number): Float64Array {
  const start = Math.min(fromHz, toHz / 2)
  const grid = Float64Array.from({ length: POINTS }, (_, k) => start * (toHz / start) ** (k / (POINTS - 1)))
  grid[POINTS - 1] = toHz
  return grid
}

function curveOn(chain: ComputedChain, frequenciesHz: Float64Array): Curve {
  const { magnitudeDb, phaseRadians, groupDelaySeconds } = chainResponse(chain, frequenciesHz)
  return {
    frequenciesHz,
    magnitudeDb,
    phaseDegrees: phaseRadians.map((radians) => radians * degree),
    delaySeconds: groupDelaySeconds,
  }
}

const minus = (other: Float64Array, one: Float64Array) => other.map((value, k) => value - (one[k] ?? Number.NaN))

const differenceOf = (one: Curve, other: Curve): PlacedCurve => ({
  place: 1,
  frequenciesHz: one.frequenciesHz,
  // Where both are −∞ there is no difference to speak of: NaN, a gap in the trace.
  magnitudeDb: minus(other.magnitudeDb, one.magnitudeDb),
  phaseDegrees: minus(other.phaseDegrees, one.phaseDegrees),
  delaySeconds: minus(other.delaySeconds, one.delaySeconds),
})
