import type { DigitalFilter, Filter } from '../forms/filter'
import { phaseResponse } from './delay'
import { magnitudeDb } from './frequency'
import type { SampledSystem } from './sampled'
import { sampledResponse } from './sampled'
import { USE_DEPTH_DB, useBandOf } from './use-band'

/*
 * Digital minus analog on a grid: level in dB and phase in radians. The phase is continuous, and its turn is chosen once, at the low end
 * of the analog pass band, where any sane version is less than half a turn away.
 */

/** A digital version under comparison: designed, or by its sampled state space with a gain. */
export type Version =
  | { readonly by: 'roots'; readonly filter: DigitalFilter }
  | { readonly by: 'samples'; readonly system: SampledSystem; readonly gain: number }

export interface AnalogCurve {
  readonly frequenciesHz: Float64Array
  readonly db: Float64Array
  readonly phase: Float64Array
  /** 1 where a departure counts: everywhere but in notches deeper than 20 dB with frequencies in use above them. */
  readonly counts: Uint8Array
}

export interface DepartureCurve {
  readonly db: Float64Array
  readonly radians: Float64Array
}

const TURN = 2 * Math.PI

export function analogCurve(analog: Filter<'s'>, frequenciesHz: Float64Array): AnalogCurve {
  const db = magnitudeDb(analog, frequenciesHz)
  const { peakDb, fromHz, toHz } = useBandOf(analog)
  const floorDb = peakDb - USE_DEPTH_DB
  const counts = new Uint8Array(db.length)
  for (let n = 0; n < db.length; n++) {
    const hertz = frequenciesHz[n]!
    counts[n] = db[n]! >= floorDb || hertz > toHz || hertz < fromHz ? 1 : 0
  }
  return { frequenciesHz, db, phase: phaseResponse(analog, frequenciesHz), counts }
}

/** A difference of levels, 0 where both are −∞. */
const levelDifference = (digital: number, analog: number): number => (digital === analog ? 0 : digital - analog)

/** Multiple of 2π by which the digital phase stands off the analog one where the comparison begins. */
function turnsApart(analog: Filter<'s'>, filter: DigitalFilter): number {
  const startHz = [Math.min(useBandOf(analog).fromHz, 0.45 * filter.sampleRateHz)]
  const apart = phaseResponse(filter, startHz)[0]! - phaseResponse(analog, startHz)[0]!
  return TURN * Math.round(apart / TURN)
}

function byRoots(analog: Filter<'s'>, curve: AnalogCurve, filter: DigitalFilter): DepartureCurve {
  const db = magnitudeDb(filter, curve.frequenciesHz)
  const radians = phaseResponse(filter, curve.frequenciesHz)
  const turns = turnsApart(analog, filter)
  for (let n = 0; n < db.length; n++) {
    db[n] = levelDifference(db[n]!, curve.db[n]!)
    radians[n] = radians[n]! - curve.phase[n]! - turns
  }
  return { db, radians }
}

function bySamples(analog: Filter<'s'>, curve: AnalogCurve, system: SampledSystem, gain: number): DepartureCurve {
  const { re, im } = sampledResponse(system, curve.frequenciesHz)
  const count = re.length
  const db = new Float64Array(count)
  const radians = new Float64Array(count)
  for (let n = 0; n < count; n++) {
    db[n] = levelDifference(20 * Math.log10(Math.hypot(re[n]!, im[n]!) * gain), curve.db[n]!)
    const apart = Math.atan2(im[n]!, re[n]!) - curve.phase[n]!
    radians[n] = apart - TURN * Math.round(apart / TURN)
  }
  // Continuous away from where the comparison begins, both ways.
  const { fromHz } = useBandOf(analog)
  let start = 0
  while (start < count - 1 && curve.frequenciesHz[start]! < fromHz) start++
  for (let n = start + 1; n < count; n++) radians[n]! -= TURN * Math.round((radians[n]! - radians[n - 1]!) / TURN)
  for (let n = start - 1; n >= 0; n--) radians[n]! -= TURN * Math.round((radians[n]! - radians[n + 1]!) / TURN)
  return { db, radians }
}

export function departureCurve(analog: Filter<'s'>, curve: AnalogCurve, version: Version): DepartureCurve {
  return version.by === 'roots'
    ? byRoots(analog, curve, version.filter)
    : bySamples(analog, curve, version.system, version.gain)
}

/**
 * The constant delay τ in seconds that best explains a phase departure: least squares of Δφ + ωτ over the judged part of the grid, each
 * point weighted by the stretch of frequency it stands for, and no constant phase allowed beside it. τ > 0: the digital one is later.
 */
export function bestDelay(frequenciesHz: Float64Array, radians: Float64Array, counts: Uint8Array): number {
  return bestDelays(frequenciesHz, radians, counts)(radians.length)
}

/** The same for the first `end` points, for any `end`, from sums made once. */
export function bestDelays(
  frequenciesHz: Float64Array,
  radians: Float64Array,
  counts: Uint8Array,
): (end: number) => number {
  const count = radians.length
  const tops = new Float64Array(count + 1)
  const bottoms = new Float64Array(count + 1)
  for (let n = 0; n < count; n++) {
    const weight = frequenciesHz[Math.min(n + 1, count - 1)]! - frequenciesHz[Math.max(n - 1, 0)]!
    const omega = counts[n] === 1 ? TURN * frequenciesHz[n]! : 0
    tops[n + 1] = tops[n]! - weight * omega * radians[n]!
    bottoms[n + 1] = bottoms[n]! + weight * omega * omega
  }
  return (end) => {
    if (end < 1) return 0
    // The last point stands for its lower half only.
    const last = end - 1
    const weight = frequenciesHz[last]! - frequenciesHz[Math.max(last - 1, 0)]!
    const omega = counts[last] === 1 ? TURN * frequenciesHz[last]! : 0
    const bottom = bottoms[last]! + weight * omega * omega
    return bottom > 0 ? (tops[last]! - weight * omega * radians[last]!) / bottom : 0
  }
}
