import {
  MOST_REQUIREMENTS,
  type DesignSpec,
  type Requirement,
  type RequirementKind,
  type RequirementSheet,
} from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import { highestEdgeHz, lowestEdgeHz, passBandOf, responseOf } from './outline'
import { lineQuantity, type LineChoice, type LineField, type LineUnit } from './requirement-words'

/*
 * What can be done to a requirement sheet. A line always stays one that can be judged at the design's own rate when it is typed; that a
 * later rate leaves it behind is for the judgement to say.
 */

export interface LineRefusal {
  readonly message: string
  /** The nearest value that works. */
  readonly nearest?: number
  readonly nearestText?: string
}

/** A line after an edit, or why it can't be so. */
export type LineEdit = { readonly ok: true; readonly line: Requirement } | ({ readonly ok: false } & LineRefusal)

const made = (line: Requirement): LineEdit => ({ ok: true, line })

export const sheetOf = (spec: DesignSpec): RequirementSheet => spec.sheet ?? []

/** The design with another sheet; an empty sheet is none. */
export function withSheet<Spec extends DesignSpec>(spec: Spec, lines: RequirementSheet): Spec {
  const next = { ...spec, sheet: lines }
  if (lines.length === 0) delete (next as DesignSpec).sheet
  return next
}

export function withLine<Spec extends DesignSpec>(spec: Spec, index: number, line: Requirement): Spec {
  return withSheet(
    spec,
    sheetOf(spec).map((old, at) => (at === index ? line : old)),
  )
}

export function withoutLine<Spec extends DesignSpec>(spec: Spec, index: number): Spec {
  return withSheet(
    spec,
    sheetOf(spec).filter((_, at) => at !== index),
  )
}

/** One place up (−1) or down (1); as it was where there is no such place. */
export function withLineMoved<Spec extends DesignSpec>(spec: Spec, index: number, by: 1 | -1): Spec {
  const lines = [...sheetOf(spec)]
  const [line, other] = [lines[index], lines[index + by]]
  if (!line || !other) return spec
  lines[index] = other
  lines[index + by] = line
  return withSheet(spec, lines)
}

export const hasRoomForLine = (sheet: RequirementSheet): boolean => sheet.length < MOST_REQUIREMENTS

export function withLineAdded<Spec extends DesignSpec>(spec: Spec, kind: RequirementKind): Spec {
  return hasRoomForLine(sheetOf(spec)) ? withSheet(spec, [...sheetOf(spec), usualLine(kind, spec)]) : spec
}

const short = (value: number): number => Number(value.toPrecision(3))

/** A line of a kind, filled with values that suit the design; it lies below half the rate whatever the design is. */
export function usualLine(kind: RequirementKind, spec: DesignSpec): Requirement {
  const fold = spec.sampleRateHz / 2
  const [passFrom, passEnd] = passBandOf(spec)
  const passTo = short(Math.min(passEnd, 0.9 * fold))
  const fromHz = short(passFrom < passTo ? passFrom : 0)
  const stop = usualStop(spec, fold)
  // Where a delay is read: inside what the filter keeps.
  const keptHz = fromHz === 0 ? short(passTo / 2) : short(Math.sqrt(fromHz * passTo))
  const rise = 1 / Math.max(passTo, fold * 1e-3)
  switch (kind) {
    case 'pass':
      return { kind, fromHz, toHz: passTo, withinDb: 3.1 }
    case 'stop':
      return { kind, ...stop, attenuationDb: 40 }
    case 'keep-tone':
      return { kind, hz: keptHz, withinDb: 0.1 }
    case 'lose-tone':
      return { kind, hz: stop.fromHz === 0 ? short((stop.toHz ?? fold) / 2) : stop.fromHz, attenuationDb: 40 }
    case 'magnitude-departure':
      return { kind, upToHz: passTo, withinDb: spec.budget.magnitudeDb }
    case 'phase-departure':
      return { kind, upToHz: passTo, withinDegrees: spec.budget.phaseDegrees, removeDelay: spec.budget.removeDelay }
    case 'delay-spread':
      return { kind, fromHz, toHz: keptHz, atMostSeconds: short(rise / 10) }
    case 'delay':
      return { kind, fromHz: keptHz, toHz: keptHz, atMostSeconds: short(rise) }
    case 'overshoot':
      return { kind, atMostPercent: 10 }
    case 'settling':
      return { kind, atMostSeconds: short(5 * rise), withinPercent: 2 }
    case 'cost':
      return { kind, atMostMultiplies: 20 }
    case 'word-length':
      return { kind, bits: 16, withinDb: 0.1 }
  }
}

/** What the design loses: below a high-pass or in the middle of a band-stop, else from an octave above it. */
function usualStop(spec: DesignSpec, fold: number): { fromHz: number; toHz?: number } {
  const [low, high] = [lowestEdgeHz(spec), Math.min(highestEdgeHz(spec), fold)]
  switch (responseOf(spec)) {
    case 'highpass':
      return { fromHz: 0, toHz: short(Math.min(low / 2, 0.9 * fold)) }
    case 'bandstop': {
      const [from, to] = [short(low + (high - low) * 0.4), short(low + (high - low) * 0.6)]
      return from < to ? { fromHz: from, toHz: to } : { fromHz: low, toHz: high }
    }
    default: {
      const from = Math.min(2 * high, (high + fold) / 2)
      return { fromHz: short(from < 0.99 * fold ? from : 0.9 * fold) }
    }
  }
}

/** Digits a frequency beside a bound is given with. */
const BESIDE = 1e-3

const below = (hz: number): number => Number((hz * (1 - BESIDE)).toPrecision(4))
const above = (hz: number): number => Number((hz * (1 + BESIDE)).toPrecision(4))

const bounds: Readonly<Record<Exclude<LineUnit, 'Hz'>, { least: number; most: number; words: string }>> = {
  dB: { least: 1e-6, most: 300, words: 'A level lies between 0.000001 and 300\u2009dB.' },
  '°': { least: 1e-6, most: 36_000, words: 'A phase lies between 0.000001 and 36\u2009000°.' },
  s: { least: 1e-9, most: 1e6, words: 'A time lies between 1\u2009ns and a million seconds.' },
  '%': { least: 0, most: 1000, words: 'An overshoot lies between 0 and 1000\u2009%.' },
  multiplies: { least: 1, most: 1_000_000, words: 'A cost lies between 1 and a million multiplies.' },
  bits: { least: 4, most: 53, words: 'A word has between 4 and 53 bits.' },
}
const settledBounds = { least: 0.001, most: 50, words: 'A settling band lies between 0.001 and 50\u2009%.' }

/** A line's number by its name; null where the line has none of that name. */
export function numberOf(line: Requirement, field: LineField): number | null {
  const value: unknown = Object.entries(line).find(([name]) => name === field)?.[1]
  return typeof value === 'number' ? value : null
}

/** The line with one of its numbers set; refused where it couldn't be judged, with the nearest number that could. */
export function withField(line: Requirement, field: LineField, value: number, foldHz: number): LineEdit {
  const unit = fieldUnits[field]
  if (unit === 'Hz') return withFrequency(line, field, value, foldHz)
  const { least, most, words } = field === 'withinPercent' ? settledBounds : bounds[unit]
  if (!(value >= least && value <= most)) {
    return refused(words, value > most ? most : least, unit)
  }
  if ((unit === 'bits' || unit === 'multiplies') && !Number.isInteger(value)) {
    return refused('This is a whole number.', Math.round(value), unit)
  }
  return made({ ...line, [field]: value } as Requirement)
}

const fieldUnits: Readonly<Record<LineField, LineUnit>> = {
  fromHz: 'Hz',
  toHz: 'Hz',
  hz: 'Hz',
  upToHz: 'Hz',
  withinDb: 'dB',
  attenuationDb: 'dB',
  withinDegrees: '°',
  atMostSeconds: 's',
  atMostPercent: '%',
  withinPercent: '%',
  atMostMultiplies: 'multiplies',
  bits: 'bits',
}

function refused(message: string, nearest: number, unit: LineUnit): LineEdit {
  return { ok: false, message, nearest, nearestText: lineQuantity(nearest, unit) }
}

/** How far a line's frequency can go: from, to (both included) and the words that say so. */
export interface FrequencyBounds {
  readonly least: number
  readonly most: number
  readonly words: string
}

/** Between which frequencies one number of a line can lie; null for a number that is none. */
export function frequencyBounds(line: Requirement, field: LineField, foldHz: number): FrequencyBounds {
  const half = formatHz(foldHz, 6)
  const least = Number((foldHz * 1e-6).toPrecision(1))
  if (line.kind === 'delay' && line.fromHz === line.toHz) {
    return { least: 0, most: foldHz, words: `0\u2009Hz ≤ frequency ≤ ${half} (half the rate)` }
  }
  if (field === 'fromHz' && 'fromHz' in line) {
    const end = line.toHz ?? foldHz
    return line.toHz === undefined || line.toHz > foldHz
      ? { least: 0, most: below(foldHz), words: `0\u2009Hz ≤ lower edge < ${half} (half the rate)` }
      : { least: 0, most: below(end), words: `0\u2009Hz ≤ lower edge < ${formatHz(end, 6)}, the upper edge` }
  }
  if (field === 'toHz' && 'fromHz' in line) {
    return {
      least: line.fromHz === 0 ? least : Math.min(above(line.fromHz), foldHz),
      most: foldHz,
      words: `${formatHz(line.fromHz, 6)} < upper edge ≤ ${half} (half the rate)`,
    }
  }
  return { least, most: foldHz, words: `0 < frequency ≤ ${half} (half the rate)` }
}

function withFrequency(line: Requirement, field: LineField, value: number, foldHz: number): LineEdit {
  const range = frequencyBounds(line, field, foldHz)
  const isInside = fitsBand(line, field, value, foldHz)
  if (!isInside) return refused(range.words, Math.min(range.most, Math.max(range.least, value)), 'Hz')
  // A delay at one frequency keeps both its ends there.
  if (line.kind === 'delay' && line.fromHz === line.toHz) return made({ ...line, fromHz: value, toHz: value })
  return made({ ...line, [field]: value } as Requirement)
}

/** The true bound, which lies a little beyond the nearest value that is offered. */
function fitsBand(line: Requirement, field: LineField, value: number, foldHz: number): boolean {
  if (!Number.isFinite(value) || value > foldHz) return false
  if (line.kind === 'delay' && line.fromHz === line.toHz) return value >= 0
  if (field === 'fromHz' && 'fromHz' in line) return value >= 0 && value < Math.min(line.toHz ?? foldHz, foldHz)
  if (field === 'toHz' && 'fromHz' in line) return value > line.fromHz
  return value > 0
}

export interface LineOption {
  readonly value: string
  readonly label: string
  readonly line: Requirement
}

/** What a picked word of a line can become. */
export function lineOptions(
  line: Requirement,
  choice: LineChoice,
  foldHz: number,
): { readonly current: string; readonly options: readonly LineOption[] } {
  if (choice === 'reach' && line.kind === 'stop') {
    const { kind, fromHz, attenuationDb } = line
    const open = { kind, fromHz, attenuationDb }
    const toHz = line.toHz ?? Number(Math.min(2 * line.fromHz || foldHz / 2, foldHz).toPrecision(4))
    return {
      current: line.toHz === undefined ? 'above' : 'to',
      options: [
        { value: 'above', label: 'and above', line: open },
        { value: 'to', label: 'up to a frequency', line: { ...open, toHz: toHz > line.fromHz ? toHz : foldHz } },
      ],
    }
  }
  if (choice === 'span' && line.kind === 'delay') {
    const isOne = line.fromHz === line.toHz
    const at = isOne ? line.fromHz : Number(((line.fromHz + line.toHz) / 2).toPrecision(3))
    const [fromHz, toHz] = isOne ? (line.toHz > 0 ? [0, line.toHz] : [0, foldHz / 10]) : [line.fromHz, line.toHz]
    return {
      current: isOne ? 'at' : 'band',
      options: [
        { value: 'at', label: 'at one frequency', line: { ...line, fromHz: at, toHz: at } },
        { value: 'band', label: 'from one frequency to another', line: { ...line, fromHz, toHz } },
      ],
    }
  }
  if (choice === 'removeDelay' && line.kind === 'phase-departure') {
    return {
      current: line.removeDelay ? 'yes' : 'no',
      options: [
        { value: 'yes', label: 'best delay removed', line: { ...line, removeDelay: true } },
        { value: 'no', label: 'delay kept in', line: { ...line, removeDelay: false } },
      ],
    }
  }
  return { current: '', options: [] }
}
