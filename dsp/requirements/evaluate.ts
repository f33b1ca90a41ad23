import { multipliesPerSample } from '../forms/cost'
import { isFir, type AnyDigital } from '../forms/filter'
import { groupDelay } from '../response/delay'
import { magnitudeDb } from '../response/frequency'
import { departureExtreme, type Judged } from './departure-line'
import { bandGrid, largest, least, type Curve } from './extremes'
import { hertz, highestHz } from './line-words'
import type { Requirement, RequirementSheet } from './requirement'
import { stepShape } from './step-shape'
import { heldIn } from './word-length'

export type RequirementUnit = 'dB' | '°' | 's' | '%' | 'multiplies'

/** Which plot a line belongs to. */
export type RequirementCurve = 'magnitude' | 'phase' | 'group-delay' | 'departure' | 'step'

export interface RequirementResult {
  readonly requirement: Requirement
  /** What the design comes to, in the line's unit; ±Infinity for nothing left at all, or for what never settles. */
  readonly value: number
  readonly limit: number
  readonly unit: RequirementUnit
  /** Room left, in the same unit: 0 or more when the line is met. */
  readonly margin: number
  readonly met: boolean
  /** Where it is nearest to its limit, or furthest beyond. */
  readonly worstHz: number | null
  readonly curve?: RequirementCurve
  /** Why the line can't be judged, or by what it was. */
  readonly reason?: string
}

/** A line met exactly by design is off by rounding alone: this part of its limit (or of one unit) is forgiven, and shown as no room. */
const ROUNDING = 1e-9

interface Frame {
  readonly limit: number
  readonly unit: RequirementUnit
  readonly curve?: RequirementCurve
}

/** Unit, limit and plot of a line. */
function frameOf(line: Requirement): Frame {
  switch (line.kind) {
    case 'pass':
    case 'keep-tone':
      return { limit: line.withinDb, unit: 'dB', curve: 'magnitude' }
    case 'stop':
    case 'lose-tone':
      return { limit: line.attenuationDb, unit: 'dB', curve: 'magnitude' }
    case 'magnitude-departure':
      return { limit: line.withinDb, unit: 'dB', curve: 'departure' }
    case 'phase-departure':
      return { limit: line.withinDegrees, unit: '°', curve: 'departure' }
    case 'delay':
    case 'delay-spread':
      return { limit: line.atMostSeconds, unit: 's', curve: 'group-delay' }
    case 'overshoot':
      return { limit: line.atMostPercent, unit: '%', curve: 'step' }
    case 'settling':
      return { limit: line.atMostSeconds, unit: 's', curve: 'step' }
    case 'cost':
      return { limit: line.atMostMultiplies, unit: 'multiplies' }
    case 'word-length':
      return { limit: line.withinDb, unit: 'dB', curve: 'magnitude' }
  }
}

/** Lines that ask for at least their limit. */
const asksForMore = (line: Requirement): boolean => line.kind === 'stop' || line.kind === 'lose-tone'

function result(line: Requirement, value: number, worstHz: number | null, reason?: string): RequirementResult {
  const frame = frameOf(line)
  const room = asksForMore(line) ? value - frame.limit : frame.limit - value
  const slack = ROUNDING * (frame.unit === 's' ? frame.limit : Math.max(frame.limit, 1))
  const met = room >= -slack
  return {
    requirement: line,
    value,
    ...frame,
    margin: met ? Math.max(room, 0) : room,
    met,
    worstHz,
    ...(reason === undefined ? {} : { reason }),
  }
}

/** A line that nothing can be said to meet: as far off as a line can be. */
function unmet(line: Requirement, reason: string, worstHz: number | null = null): RequirementResult {
  const value = asksForMore(line) ? -Infinity : Infinity
  return { requirement: line, value, ...frameOf(line), margin: -Infinity, met: false, worstHz, reason }
}

const levels =
  (digital: AnyDigital): Curve =>
  (at) =>
    magnitudeDb(digital, at)

const sizes = (values: Float64Array): Float64Array => values.map(Math.abs)

function judgeLevel(line: Requirement, digital: AnyDigital, fromHz: number, toHz: number): RequirementResult {
  const grid = fromHz === toHz ? Float64Array.of(fromHz) : bandGrid(digital, fromHz, toHz)
  const curve = levels(digital)
  if (asksForMore(line)) {
    const { value, hz } = largest(curve, grid)
    return result(line, 0 - value, hz)
  }
  const { value, hz } = largest((at) => sizes(curve(at)), grid)
  return result(line, value, hz)
}

function judgeDelay(line: Requirement, digital: AnyDigital, fromHz: number, toHz: number): RequirementResult {
  const grid = fromHz === toHz ? Float64Array.of(fromHz) : bandGrid(digital, fromHz, toHz)
  const curve: Curve = (at) => groupDelay(digital, at)
  const most = largest(curve, grid)
  return line.kind === 'delay-spread'
    ? result(line, most.value - least(curve, grid).value, most.hz)
    : result(line, most.value, most.hz)
}

function judgeStep(
  line: Extract<Requirement, { kind: 'overshoot' | 'settling' }>,
  digital: AnyDigital,
): RequirementResult {
  const shape = stepShape(digital, line.kind === 'settling' ? line.withinPercent / 100 : 0.02)
  if (shape === null) return unmet(line, 'The step response is still moving after two million samples.')
  return line.kind === 'overshoot'
    ? result(line, shape.overshoot * 100, null)
    : result(line, shape.settlingSeconds, null)
}

/** Bands over which a rounded filter is held against the exact one: the sheet's pass bands, else 0 Hz … half the rate. */
function passBands(sheet: RequirementSheet, foldHz: number): (readonly [number, number])[] {
  const bands = sheet.flatMap((line): (readonly [number, number])[] => {
    if (line.kind === 'keep-tone' && line.hz <= foldHz) return [[line.hz, line.hz]]
    return line.kind === 'pass' && line.toHz <= foldHz && line.fromHz <= line.toHz ? [[line.fromHz, line.toHz]] : []
  })
  return bands
}

/** Half the power. */
const PASS_DEPTH_DB = 10 * Math.log10(2)

function judgeWords(
  line: Extract<Requirement, { kind: 'word-length' }>,
  digital: AnyDigital,
  sheet: RequirementSheet,
): RequirementResult {
  const held = heldIn(line.bits, digital)
  if (held === null) return unmet(line, `Held in ${line.bits} bits the filter is unstable.`)
  const foldHz = digital.sampleRateHz / 2
  const stated = passBands(sheet, foldHz)
  const exact = levels(digital)
  const rounded = levels(held)
  const whole = (fromHz: number, toHz: number): Float64Array => {
    if (fromHz === toHz) return Float64Array.of(fromHz)
    return Float64Array.from(
      new Set([...bandGrid(digital, fromHz, toHz), ...(isFir(held) ? [] : bandGrid(held, fromHz, toHz))]),
    ).sort()
  }
  const floorDb = stated.length > 0 ? -Infinity : largest(exact, bandGrid(digital, 0, foldHz)).value - PASS_DEPTH_DB
  const change: Curve = (at) => {
    const before = exact(at)
    const after = rounded(at)
    return before.map((level, n) => (level >= floorDb && level !== after[n] ? Math.abs(after[n]! - level) : 0))
  }
  const bands = stated.length > 0 ? stated : [[0, foldHz] as const]
  const worst = bands
    .map(([fromHz, toHz]) => largest(change, whole(fromHz, toHz)))
    .reduce((most, each) => (each.value > most.value ? each : most))
  const reason =
    stated.length > 0 ? undefined : 'No pass line is stated: judged where the gain is within 3 dB of its peak.'
  return result(line, worst.value, worst.hz, reason)
}

/** Why a line can't be met at this rate or as it stands; null when there is nothing against it. */
function refusal(line: Requirement, foldHz: number): string | null {
  if ('fromHz' in line && line.toHz !== undefined) {
    if (line.fromHz > line.toHz) return `${hertz(line.fromHz)} lies above ${hertz(line.toHz)}.`
    if (line.kind !== 'delay' && line.fromHz === line.toHz)
      return `A band needs two ends; both are ${hertz(line.toHz)}.`
  }
  const top = highestHz(line)
  if (top === null) return null
  if (line.kind === 'stop' && line.toHz === undefined && top >= foldHz) {
    return `${hertz(top)} isn’t below half the rate, ${hertz(foldHz)}.`
  }
  return top > foldHz ? `${hertz(top)} lies above half the rate, ${hertz(foldHz)}.` : null
}

/**
 * One line of a sheet, judged on the digital filter of a design.
 *
 * Masks are followed between grid points: the grid crowds at every root, and each hump of importance is closed in on, so that `value` is the
 * worst over the whole band to rounding and `worstHz` where it stands. Departures are held against the design's reference. The step
 * response is measured by its final value, or by the step itself where the gain at 0 Hz is 20 dB below the strongest (a
 * filter that blocks 0 Hz). Words are rounded to nearest, with one power-of-two scale each for the b and the a of a section (see word-length.ts).
 *
 * @param design what is judged: its reference and its digital filter
 * @param sheet the whole sheet, whose pass bands a word-length line is judged over
 * @returns the result; a line that can't be judged, such as one above half the rate, is not met and says why
 */
export function checkRequirement(
  design: Judged,
  requirement: Requirement,
  sheet: RequirementSheet = [requirement],
): RequirementResult {
  const { digital } = design
  const foldHz = digital.sampleRateHz / 2
  const against = refusal(requirement, foldHz)
  if (against !== null) return unmet(requirement, against, highestHz(requirement))
  switch (requirement.kind) {
    case 'pass':
    case 'stop':
      return judgeLevel(requirement, digital, requirement.fromHz, requirement.toHz ?? foldHz)
    case 'keep-tone':
    case 'lose-tone':
      return judgeLevel(requirement, digital, requirement.hz, requirement.hz)
    case 'magnitude-departure':
    case 'phase-departure': {
      const worst = departureExtreme(design, requirement)
      return typeof worst === 'string'
        ? unmet(requirement, worst)
        : result(requirement, worst.value, worst.hz, worst.note)
    }
    case 'delay':
    case 'delay-spread':
      return judgeDelay(requirement, digital, requirement.fromHz, requirement.toHz)
    case 'overshoot':
    case 'settling':
      return judgeStep(requirement, digital)
    case 'cost':
      return result(requirement, multipliesPerSample(digital), null)
    case 'word-length':
      return judgeWords(requirement, digital, sheet)
  }
}

/** Every line of a sheet judged on a design, in the sheet's order. @see checkRequirement */
export function checkSheet(design: Judged, sheet: RequirementSheet): readonly RequirementResult[] {
  return sheet.map((line) => checkRequirement(design, line, sheet))
}
