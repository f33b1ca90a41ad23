import { stepResponse } from '@/dsp'
import { largest, type StepCurve } from './step-curve'

/*
 * What is said of a step response in numbers. An analog curve is searched between its points; a digital one has only its samples: its
 * peak is the largest sample, its settling the first sample from which all stay inside, and the crossings of its rise are read on the
 * straight line between two samples.
 */

export interface TimeFigures {
  readonly finalValue: number
  /**
   * The response ends at zero, or so near it (a stop band's floor) that there is no final value to refer to: the settling band is then a
   * part of the largest swing.
   */
  readonly returnsToZero: boolean
  /** Part of the final value by which the response exceeds it; 0 when it never does, null when it returns to zero. */
  readonly overshoot: number | null
  readonly peakSeconds: number | null
  /** From the first crossing of 10 % of the final value to the first of 90 %; null when the response returns to zero. */
  readonly riseSeconds: number | null
  /** From which on the response stays within the band; null when it can't be followed that far. */
  readonly settlingSeconds: number | null
}

/** No response that means its final value swings to twenty times it. */
const NEAR_ZERO = 0.05

/** @param tolerance half the settling band, as a part of the final value (0.02 for ±2 %) */
export function timeFigures(curve: StepCurve, tolerance: number): TimeFigures {
  const { finalValue } = curve
  const most = largest(curve.values)
  const returnsToZero = Math.abs(finalValue) <= NEAR_ZERO * most
  const size = returnsToZero ? most : Math.abs(finalValue)
  const peak = returnsToZero ? null : peakOf(curve)
  return {
    finalValue,
    returnsToZero,
    overshoot: peak && Math.max(0, peak.value / finalValue - 1),
    peakSeconds: peak && peak.value / finalValue > 1 ? peak.seconds : null,
    riseSeconds: returnsToZero ? null : riseOf(curve),
    settlingSeconds: curve.complete ? settlingOf(curve, tolerance * size) : null,
  }
}

interface Point {
  readonly seconds: number
  readonly value: number
}

const REFINED_POINTS = 65
const REFINEMENTS = 4

/** Farthest point in the direction of the final value. */
function peakOf(curve: StepCurve): Point {
  const sign = Math.sign(curve.finalValue)
  let { timesSeconds, values } = curve
  let at = farthest(values, sign)
  if (curve.filter.domain === 's') {
    for (let round = 0; round < REFINEMENTS; round++) {
      const from = timesSeconds[Math.max(0, at - 1)] ?? 0
      const to = timesSeconds[Math.min(values.length - 1, at + 1)] ?? from
      if (!(to > from)) break
      const stepSeconds = (to - from) / (REFINED_POINTS - 1)
      ;({ timesSeconds, values } = stepResponse(curve.filter, {
        count: REFINED_POINTS,
        startSeconds: from,
        stepSeconds,
      }))
      at = farthest(values, sign)
    }
  }
  return { seconds: timesSeconds[at] ?? 0, value: values[at] ?? 0 }
}

function farthest(values: Float64Array, sign: number): number {
  let at = 0
  for (let k = 1; k < values.length; k++) if (sign * (values[k] ?? 0) > sign * (values[at] ?? 0)) at = k
  return at
}

function riseOf(curve: StepCurve): number | null {
  const low = firstReach(curve, 0.1)
  const high = firstReach(curve, 0.9)
  return low === null || high === null ? null : high - low
}

/** When the response first reaches a part of its final value. */
function firstReach(curve: StepCurve, part: number): number | null {
  const { values, finalValue } = curve
  const isThere = (value: number) => value / finalValue >= part
  const at = values.findIndex(isThere)
  if (at < 0) return null
  return at === 0 ? 0 : crossing(curve, at, (value) => value / finalValue - part)
}

function settlingOf(curve: StepCurve, band: number): number | null {
  const { values, finalValue, timesSeconds } = curve
  const outside = (value: number) => Math.abs(value - finalValue) - band
  let last = values.length - 1
  while (last >= 0 && outside(values[last] ?? 0) <= 0) last--
  if (last < 0) return 0
  if (last === values.length - 1) return null
  return curve.filter.domain === 'z' ? (timesSeconds[last + 1] ?? null) : crossing(curve, last + 1, outside)
}

/** Where `level` changes its sign between the points `at − 1` and `at`. */
function crossing(curve: StepCurve, at: number, level: (value: number) => number): number {
  let [from, to] = [curve.timesSeconds[at - 1] ?? 0, curve.timesSeconds[at] ?? 0]
  let [atFrom, atTo] = [level(curve.values[at - 1] ?? 0), level(curve.values[at] ?? 0)]
  if (curve.filter.domain === 's') {
    for (let round = 0; round < REFINEMENTS; round++) {
      const stepSeconds = (to - from) / (REFINED_POINTS - 1)
      if (!(stepSeconds > 0)) break
      const { timesSeconds, values } = stepResponse(curve.filter, {
        count: REFINED_POINTS,
        startSeconds: from,
        stepSeconds,
      })
      // Out of a band and in again inside one interval: the last change is the one that counts.
      let k = values.length - 1
      while (k > 0 && Math.sign(level(values[k - 1] ?? 0)) === Math.sign(atTo)) k--
      if (k === 0) break
      ;[from, to] = [timesSeconds[k - 1] ?? from, timesSeconds[k] ?? to]
      ;[atFrom, atTo] = [level(values[k - 1] ?? 0), level(values[k] ?? 0)]
    }
  }
  return atTo === atFrom ? to : from + ((to - from) * atFrom) / (atFrom - atTo)
}
