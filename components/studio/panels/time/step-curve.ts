import { frequencyResponse, isFir, stepResponse, type AnyFilter, type Complex, type FirFilter } from '@/dsp'

type WithPoles = Exclude<AnyFilter, FirFilter>

/*
 * A step response followed until it has died away, closely enough that no swing of it is missed.
 */

export interface StepCurve {
  readonly filter: AnyFilter
  /** From 0 in equal steps, in seconds. */
  readonly timesSeconds: Float64Array
  readonly values: Float64Array
  /** H(0), where the response ends. */
  readonly finalValue: number
  /** False when the response was still moving at the end of what can be followed. */
  readonly complete: boolean
}

/** What counts as died away: a fifth of the narrowest settling band offered (1 %). */
const STILL_MOVING = 0.002
const POINTS_PER_SWING = 24
const LEAST_POINTS = 2048
const MOST_POINTS = 1 << 19

export function stepCurve(filter: AnyFilter): StepCurve {
  const finalValue = frequencyResponse(filter, [0]).re[0] ?? 0
  if (isFir(filter)) return finiteCurve(filter, finalValue)
  const { slowestSeconds, fastestHz } = paceOf(filter)
  let horizonSeconds = slowestSeconds * (7 + filter.poles.length / 4)
  for (;;) {
    const wanted = pointsOver(filter, horizonSeconds, fastestHz)
    const count = Math.min(wanted, MOST_POINTS)
    const stepSeconds = filter.domain === 'z' ? 1 / filter.sampleRateHz : horizonSeconds / (count - 1)
    const { timesSeconds, values } = stepResponse(filter, { count, stepSeconds })
    const complete = hasDied(values, finalValue)
    if (complete || wanted >= MOST_POINTS) return { filter, timesSeconds, values, finalValue, complete }
    horizonSeconds *= 2
  }
}

/** After as many samples as there are taps an FIR filter stands still. */
function finiteCurve(filter: FirFilter, finalValue: number): StepCurve {
  const { timesSeconds, values } = stepResponse(filter, {
    count: filter.taps.length + 2,
    stepSeconds: 1 / filter.sampleRateHz,
  })
  return { filter, timesSeconds, values, finalValue, complete: true }
}

function pointsOver(filter: WithPoles, seconds: number, fastestHz: number): number {
  if (filter.domain === 'z') return Math.ceil(seconds * filter.sampleRateHz) + 2
  return Math.max(LEAST_POINTS, Math.ceil(seconds * fastestHz * POINTS_PER_SWING))
}

/** Nothing but a small rest in the last fifth. */
function hasDied(values: Float64Array, finalValue: number): boolean {
  const size = Math.max(Math.abs(finalValue), largest(values))
  const from = Math.floor(values.length * 0.8)
  for (let k = from; k < values.length; k++) {
    if (Math.abs((values[k] ?? 0) - finalValue) > STILL_MOVING * size) return false
  }
  return true
}

export function largest(values: Float64Array): number {
  let most = 0
  for (const value of values) most = Math.max(most, Math.abs(value))
  return most
}

/** The slowest decay and the fastest swing among the poles; a digital pole counts by its logarithm. */
function paceOf(filter: WithPoles): { slowestSeconds: number; fastestHz: number } {
  let slowestSeconds = filter.domain === 'z' ? 1 / filter.sampleRateHz : 0
  let fastestHz = 0
  for (const pole of filter.poles) {
    const { decay, radians } = filter.domain === 'z' ? digitalPace(pole, filter.sampleRateHz) : analogPace(pole)
    if (decay > 0) slowestSeconds = Math.max(slowestSeconds, 1 / decay)
    fastestHz = Math.max(fastestHz, radians / (2 * Math.PI))
  }
  return { slowestSeconds: slowestSeconds || 1, fastestHz }
}

const analogPace = ({ re, im }: Complex) => ({ decay: -re, radians: Math.hypot(re, im) })

function digitalPace({ re, im }: Complex, sampleRateHz: number) {
  const squaredLessOne = (re - 1) * (re + 1) + im * im
  return {
    decay: (-Math.log1p(squaredLessOne) / 2) * sampleRateHz,
    radians: Math.abs(Math.atan2(im, re)) * sampleRateHz,
  }
}
