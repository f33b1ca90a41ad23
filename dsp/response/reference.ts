import type { AnyDigital, Filter } from '../forms/filter'
import type { FirBand } from '../spec'
import { measuredAt, type MeasuredPoint, type MeasuredTable } from '../targets/measured'
import { groupDelay, phaseResponse } from './delay'
import { frequencyResponse, magnitudeDb } from './frequency'
import { useBandOf } from './use-band'

/** What a digital filter is held against: the line drawn in ink. */
export type Reference =
  | { readonly kind: 'analog'; readonly filter: Filter<'s'> }
  | { readonly kind: 'measured'; readonly table: MeasuredTable }
  | {
      readonly kind: 'ideal'
      readonly bands: readonly FirBand[]
      readonly isDifferentiator: boolean
      /** The constant delay that comes with a linear-phase filter; 0 for a minimum-phase one, whose phase is not stated. */
      readonly delaySeconds: number
      readonly sampleRateHz: number
    }

type Ideal = Extract<Reference, { kind: 'ideal' }>

const TURN = 2 * Math.PI

/** The real factor that an ideal has at a frequency, NaN between its bands; of a differentiator, that of j. */
function idealGain({ bands, isDifferentiator }: Ideal, hertz: number): number {
  const band = bands.find(({ fromHz, toHz }) => hertz >= fromHz && hertz <= toHz)
  if (band === undefined) return Number.NaN
  return isDifferentiator ? band.gain * TURN * hertz : band.gain
}

/** The phase of an ideal: its delay, a quarter turn for a differentiator, half a turn for a negative gain; NaN where it states none. */
function idealPhase(ideal: Ideal, hertz: number): number {
  if (ideal.delaySeconds === 0) return Number.NaN
  const gain = idealGain(ideal, hertz)
  if (Number.isNaN(gain) || (gain === 0 && !ideal.isDifferentiator)) return Number.NaN
  return (gain < 0 ? Math.PI : 0) + (ideal.isDifferentiator ? Math.PI / 2 : 0) - TURN * hertz * ideal.delaySeconds
}

function fromTable(
  table: MeasuredTable,
  frequenciesHz: ArrayLike<number>,
  pick: (point: MeasuredPoint) => number,
): Float64Array {
  return Float64Array.from(frequenciesHz, (hertz) => {
    const point = measuredAt(table, hertz)
    return point === null ? Number.NaN : pick(point)
  })
}

/**
 * Level of a reference in dB.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N levels; −Infinity where it passes nothing; NaN where it says nothing: outside a table's rows, between the bands of an ideal
 */
export function referenceMagnitudeDb(reference: Reference, frequenciesHz: ArrayLike<number>): Float64Array {
  switch (reference.kind) {
    case 'analog':
      return magnitudeDb(reference.filter, frequenciesHz)
    case 'measured':
      return fromTable(reference.table, frequenciesHz, ({ db }) => db)
    case 'ideal':
      return Float64Array.from(frequenciesHz, (hertz) => 20 * Math.log10(Math.abs(idealGain(reference, hertz))))
  }
}

/**
 * Continuous phase of a reference in radians.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N phases; NaN where it says nothing, which an ideal of minimum phase and a stop band do everywhere
 */
export function referencePhase(reference: Reference, frequenciesHz: ArrayLike<number>): Float64Array {
  switch (reference.kind) {
    case 'analog':
      return phaseResponse(reference.filter, frequenciesHz)
    case 'measured':
      return fromTable(reference.table, frequenciesHz, ({ phaseRadians }) => phaseRadians)
    case 'ideal':
      return Float64Array.from(frequenciesHz, (hertz) => idealPhase(reference, hertz))
  }
}

/**
 * Complex response of a reference.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns `re` and `im`, N values each; NaN where level or phase isn't known; 0 in the stop band of an ideal
 */
export function referenceResponse(
  reference: Reference,
  frequenciesHz: ArrayLike<number>,
): { re: Float64Array; im: Float64Array } {
  if (reference.kind === 'analog') return frequencyResponse(reference.filter, frequenciesHz)
  const db = referenceMagnitudeDb(reference, frequenciesHz)
  const phase = referencePhase(reference, frequenciesHz)
  const part = (trig: (x: number) => number) =>
    db.map((level, n) => (level === -Infinity ? 0 : 10 ** (level / 20) * trig(phase[n]!)))
  return { re: part(Math.cos), im: part(Math.sin) }
}

/**
 * Group delay of a reference in seconds: of an analog filter the sum over its roots; of a table the derivative of the interpolated phase, which
 * is only as good as its rows are close; of an ideal its constant delay.
 *
 * @param frequenciesHz N frequencies in Hz
 * @returns N delays; NaN where it says nothing
 */
export function referenceDelay(reference: Reference, frequenciesHz: ArrayLike<number>): Float64Array {
  switch (reference.kind) {
    case 'analog':
      return groupDelay(reference.filter, frequenciesHz)
    case 'measured':
      return fromTable(reference.table, frequenciesHz, ({ delaySeconds }) => delaySeconds)
    case 'ideal':
      return Float64Array.from(frequenciesHz, (hertz) =>
        Number.isNaN(idealPhase(reference, hertz)) ? Number.NaN : reference.delaySeconds,
      )
  }
}

/** A strong row of a table is one within 20 dB of its peak. */
const STRONG_DB = 20

/** A frequency below half the rate at which the phases of a version and of its reference must be less than half a turn apart. */
export function anchorHz(reference: Reference, digital: AnyDigital): number {
  const most = 0.45 * digital.sampleRateHz
  switch (reference.kind) {
    case 'analog':
      return Math.min(useBandOf(reference.filter).fromHz, most)
    case 'measured': {
      const { frequenciesHz, magnitudeDb: db } = reference.table
      const peak = db.reduce((high, level, k) => (frequenciesHz[k]! < most ? Math.max(high, level) : high), -Infinity)
      const at = db.findIndex((level, k) => frequenciesHz[k]! >= most || level >= peak - STRONG_DB)
      return frequenciesHz[Math.max(at, 0)]!
    }
    case 'ideal': {
      const band = reference.bands.find(({ gain }) => gain !== 0) ?? reference.bands[0]!
      return (band.fromHz + band.toHz) / 2
    }
  }
}
