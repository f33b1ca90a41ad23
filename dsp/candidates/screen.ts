import type { AnyDigital, Filter } from '../forms/filter'
import { magnitudeDb } from '../response/frequency'
import type { RequirementSheet } from '../requirements/requirement'

/*
 * A quick look at pass and stop lines: the ends of each band and a few points between. It never refuses what would pass in earnest, so
 * that it may narrow a search, and what it lets through is judged in full afterwards.
 */

export interface Screen {
  readonly pass: Probe
  readonly stop: Probe
}

interface Probe {
  readonly hz: Float64Array
  readonly limitsDb: Float64Array
}

const BETWEEN = 14

function probes(sheet: RequirementSheet, foldHz: number, isKept: boolean): Probe {
  const hz: number[] = []
  const limits: number[] = []
  const add = (at: number, db: number) => {
    hz.push(at)
    limits.push(db)
  }
  for (const line of sheet) {
    if (line.kind === 'keep-tone' && isKept) add(line.hz, line.withinDb)
    if (line.kind === 'lose-tone' && !isKept) add(line.hz, line.attenuationDb)
    if (line.kind !== (isKept ? 'pass' : 'stop')) continue
    const db = line.kind === 'pass' ? line.withinDb : line.attenuationDb
    const toHz = line.toHz ?? foldHz
    // Crowding at both ends, where a mask is met or missed: Chebyshev points.
    for (let k = 0; k <= BETWEEN; k++) {
      const part = (1 - Math.cos((Math.PI * k) / BETWEEN)) / 2
      add(k === BETWEEN ? toHz : line.fromHz + (toHz - line.fromHz) * part, db)
    }
  }
  return { hz: Float64Array.from(hz), limitsDb: Float64Array.from(limits) }
}

export function screenOf(sheet: RequirementSheet, sampleRateHz: number): Screen {
  return { pass: probes(sheet, sampleRateHz / 2, true), stop: probes(sheet, sampleRateHz / 2, false) }
}

/** Least room in dB over the points of the pass lines; negative where one is missed. */
export function passRoom({ pass }: Screen, filter: AnyDigital | Filter<'s'>): number {
  return magnitudeDb(filter, pass.hz).reduce(
    (least, db, n) => Math.min(least, pass.limitsDb[n]! - Math.abs(db)),
    Infinity,
  )
}

/** Least room in dB over the points of the stop lines. */
export function stopRoom({ stop }: Screen, filter: AnyDigital | Filter<'s'>): number {
  return magnitudeDb(filter, stop.hz).reduce((least, db, n) => Math.min(least, -db - stop.limitsDb[n]!), Infinity)
}
