import { show } from '../check'
import type { Requirement } from './requirement'

/** A frequency with six digits. */
export const hertz = (value: number): string => `${show(value)} Hz`
const decibels = (value: number): string => `${show(value)} dB`

/** A duration in the unit that reads best. */
export function duration(seconds: number): string {
  const size = Math.abs(seconds)
  if (size >= 1 || size === 0) return `${show(seconds)} s`
  return size >= 1e-3 ? `${show(seconds * 1e3)} ms` : `${show(seconds * 1e6)} µs`
}

function band(fromHz: number, toHz: number | undefined): string {
  return toHz === undefined ? `${hertz(fromHz)} … half the rate` : `${show(fromHz)} … ${hertz(toHz)}`
}

/** What a line asks for, in a few words. */
function asked(line: Requirement): string {
  switch (line.kind) {
    case 'pass':
      return `pass ${band(line.fromHz, line.toHz)} within ±${decibels(line.withinDb)}`
    case 'stop':
      return `stop ${band(line.fromHz, line.toHz)} by ${decibels(line.attenuationDb)}`
    case 'keep-tone':
      return `keep ${hertz(line.hz)} within ±${decibels(line.withinDb)}`
    case 'lose-tone':
      return `lose ${hertz(line.hz)} by ${decibels(line.attenuationDb)}`
    case 'magnitude-departure':
      return `magnitude departure within ${decibels(line.withinDb)} up to ${hertz(line.upToHz)}`
    case 'phase-departure':
      return `phase departure within ${show(line.withinDegrees)}° up to ${hertz(line.upToHz)}`
    case 'delay-spread':
      return `delay spread at most ${duration(line.atMostSeconds)} over ${band(line.fromHz, line.toHz)}`
    case 'delay':
      return line.fromHz === line.toHz
        ? `delay at most ${duration(line.atMostSeconds)} at ${hertz(line.fromHz)}`
        : `delay at most ${duration(line.atMostSeconds)} over ${band(line.fromHz, line.toHz)}`
    case 'overshoot':
      return `overshoot at most ${show(line.atMostPercent)} %`
    case 'settling':
      return `settled to ±${show(line.withinPercent)} % within ${duration(line.atMostSeconds)}`
    case 'cost':
      return `at most ${show(line.atMostMultiplies)} multiplies per sample`
    case 'word-length':
      return `${line.bits}-bit coefficients move the magnitude by at most ${decibels(line.withinDb)}`
  }
}

/** The line by its number, counted from 1, and what it asks for. */
export const lineName = (index: number, line: Requirement): string => `line ${index + 1} (${asked(line)})`

/** The highest frequency a line speaks about; null where it speaks of none. */
export function highestHz(line: Requirement): number | null {
  switch (line.kind) {
    case 'pass':
    case 'delay':
    case 'delay-spread':
      return Math.max(line.fromHz, line.toHz)
    case 'stop':
      return line.toHz ?? line.fromHz
    case 'keep-tone':
    case 'lose-tone':
      return line.hz
    case 'magnitude-departure':
    case 'phase-departure':
      return line.upToHz
    default:
      return null
  }
}
