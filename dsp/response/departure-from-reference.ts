import { DesignError } from '../errors'
import { isFir, type AnyDigital } from '../forms/filter'
import { groupDelay, phaseResponse } from './delay'
import { departure, type Departure } from './departure'
import { analogCurve, bestDelay } from './departure-curve'
import { departureGrid } from './departure-grid'
import { frequencyResponse, magnitudeDb } from './frequency'
import {
  anchorHz,
  referenceDelay,
  referenceMagnitudeDb,
  referencePhase,
  referenceResponse,
  type Reference,
} from './reference'

const DEGREES = 180 / Math.PI
const TURN = 2 * Math.PI
const MICRO = 1e6
const EVEN_POINTS = 384
/** Under this part of the peak a reference is too weak for a level or a phase of it to be judged. */
const JUDGED_DEPTH_DB = 100

/** Phase of a version minus that of its reference in radians, with the turn chosen where the reference is strong; NaN where it says nothing. */
function phaseDifference(reference: Reference, digital: AnyDigital, frequenciesHz: Float64Array): Float64Array {
  const at = [anchorHz(reference, digital)]
  const apart = phaseResponse(digital, at)[0]! - referencePhase(reference, at)[0]!
  const turns = Number.isNaN(apart) ? 0 : TURN * Math.round(apart / TURN)
  const wanted = referencePhase(reference, frequenciesHz)
  return phaseResponse(digital, frequenciesHz).map((phase, n) => phase - wanted[n]! - turns)
}

/** Frequencies on which a reference is compared over a band: the rows of a table, the neighbourhood of analog roots, and an even spread. */
function judgingGrid(reference: Reference, digital: AnyDigital, fromHz: number, toHz: number): Float64Array {
  if (reference.kind === 'analog') {
    return departureGrid(fromHz, toHz, reference.filter, isFir(digital) ? null : digital, EVEN_POINTS)
  }
  const even = Array.from({ length: EVEN_POINTS + 1 }, (_, k) => fromHz + ((toHz - fromHz) * k) / EVEN_POINTS)
  const rows = reference.kind === 'measured' ? [...reference.table.frequenciesHz] : []
  const inside = rows.filter((hertz) => hertz > fromHz && hertz < toHz)
  return Float64Array.from(new Set([...even, ...inside])).sort()
}

/** 1 where a phase counts: where it is known, and of an analog reference outside its notches. */
function countsOf(reference: Reference, grid: Float64Array, radians: Float64Array): Uint8Array {
  const counts =
    reference.kind === 'analog' ? analogCurve(reference.filter, grid).counts : new Uint8Array(grid.length).fill(1)
  return counts.map((one, n) => (Number.isNaN(radians[n]!) ? 0 : one))
}

function delayOver(reference: Reference, digital: AnyDigital, fromHz: number, toHz: number): number {
  const grid = judgingGrid(reference, digital, fromHz, toHz)
  const radians = phaseDifference(reference, digital, grid)
  const counts = countsOf(reference, grid, radians)
  return bestDelay(
    grid,
    radians.map((value) => (Number.isNaN(value) ? 0 : value)),
    counts,
  )
}

function checkBand(field: string, fromHz: number, toHz: number, sampleRateHz: number): void {
  const fold = sampleRateHz / 2
  if (fromHz >= 0 && fromHz < toHz && toHz <= fold) return
  const message = `A band lies between 0 and ${fold} Hz (half the rate), its lower end first.`
  throw new DesignError(
    'range',
    field,
    message,
    fromHz >= 0 && fromHz < fold ? Math.min(Math.max(toHz, fromHz), fold) : fold,
  )
}

/**
 * Departure of a digital filter from what it is held against: digital minus reference. Against an analog original, a filter given by its roots is
 * compared exactly as `departure` does.
 *
 * @param frequenciesHz N frequencies in Hz
 * @param options.removeDelayOver [from, to] in Hz: the best constant delay over this band is taken off degrees and microseconds
 * @returns N values each; NaN where the reference says nothing, and `db` also where an ideal passes nothing, from which no level can depart
 * @throws DesignError `range` for a band that isn't 0 ≤ from < to ≤ half the rate; `not-finite` for a frequency
 */
export function departureFrom(
  reference: Reference,
  digital: AnyDigital,
  frequenciesHz: ArrayLike<number>,
  options: { readonly removeDelayOver?: readonly [number, number] } = {},
): Departure {
  if (reference.kind === 'analog' && !isFir(digital))
    return departure(reference.filter, digital, frequenciesHz, options)
  const grid = Float64Array.from(frequenciesHz)
  const wanted = referenceMagnitudeDb(reference, grid)
  const db = magnitudeDb(digital, grid).map((level, n) => {
    if (level === wanted[n]!) return 0
    return reference.kind === 'ideal' && wanted[n] === -Infinity ? Number.NaN : level - wanted[n]!
  })
  let delaySeconds = 0
  if (options.removeDelayOver !== undefined) {
    const [from, to] = options.removeDelayOver
    checkBand('removeDelayOver', from, to, digital.sampleRateHz)
    delaySeconds = delayOver(reference, digital, from, to)
  }
  const radians = phaseDifference(reference, digital, grid).map((value, n) => value + TURN * grid[n]! * delaySeconds)
  const microseconds = radians.map((rest, n) => {
    const omega = TURN * grid[n]!
    if (omega !== 0 || Number.isNaN(rest)) return (-rest / omega) * MICRO
    if (Math.abs(rest) > 1e-9) return rest > 0 ? -Infinity : Infinity
    return (groupDelay(digital, [0])[0]! - referenceDelay(reference, [0])[0]! - delaySeconds) * MICRO
  })
  return { db, degrees: radians.map((value) => value * DEGREES), microseconds, delaySeconds }
}

/** How far a digital filter is from its reference over a band. */
export interface Residual {
  /** Root mean square of the complex error |H − R| over the points compared, evenly spread. */
  readonly rms: number
  readonly worst: number
  /** Largest departures where the reference is within 100 dB of its peak. */
  readonly db: number
  readonly degrees: number
  readonly atHz: { readonly worst: number; readonly db: number; readonly degrees: number }
  /** The constant delay taken off first; 0 unless asked for. */
  readonly delaySeconds: number
  /** Points of the band at which the reference says something; 0 when it says nothing there. */
  readonly points: number
}

/**
 * What is left between a digital filter and its reference over a band: complex error, and departures in dB and degrees with the frequencies
 * at which they are worst. Where the reference says nothing, nothing is counted; where it knows no phase, only `db` is.
 *
 * @param options.removeDelay take the best constant delay over the band off first
 * @throws DesignError `range` for a band that isn't 0 ≤ from < to ≤ half the rate
 */
export function residual(
  reference: Reference,
  digital: AnyDigital,
  fromHz: number,
  toHz: number,
  options: { readonly removeDelay?: boolean } = {},
): Residual {
  checkBand('toHz', fromHz, toHz, digital.sampleRateHz)
  const grid = judgingGrid(reference, digital, fromHz, toHz)
  const off = departureFrom(
    reference,
    digital,
    grid,
    options.removeDelay === true ? { removeDelayOver: [fromHz, toHz] } : {},
  )
  const wanted = referenceResponse(reference, grid)
  const given = frequencyResponse(digital, grid)
  const levels = referenceMagnitudeDb(reference, grid)
  const floor = levels.reduce((most, level) => (level > most ? level : most), -Infinity) - JUDGED_DEPTH_DB
  const worst = { worst: 0, db: 0, degrees: 0 }
  const atHz = { worst: fromHz, db: fromHz, degrees: fromHz }
  let sum = 0
  let compared = 0
  let points = 0
  const note = (name: keyof typeof worst, value: number, n: number) => {
    if (!(value > worst[name])) return
    worst[name] = value
    atHz[name] = grid[n]!
  }
  for (let n = 0; n < grid.length; n++) {
    if (Number.isNaN(levels[n]!)) continue
    points += 1
    if (levels[n]! >= floor) {
      note('db', Math.abs(off.db[n]!), n)
      note('degrees', Math.abs(off.degrees[n]!), n)
    }
    const angle = TURN * grid[n]! * off.delaySeconds
    const [c, s] = [Math.cos(angle), Math.sin(angle)]
    const re = given.re[n]! * c - given.im[n]! * s - wanted.re[n]!
    const im = given.re[n]! * s + given.im[n]! * c - wanted.im[n]!
    const square = re * re + im * im
    if (Number.isNaN(square)) continue
    compared += 1
    sum += square
    note('worst', Math.sqrt(square), n)
  }
  return { rms: compared > 0 ? Math.sqrt(sum / compared) : 0, ...worst, atHz, delaySeconds: off.delaySeconds, points }
}
