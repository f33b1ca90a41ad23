import { show } from '../check'
import { lineName } from '../requirements/line-words'
import type { RequirementSheet } from '../requirements/requirement'

/*
 * A quick look at pass and stop lines: the ends of each band and a few points between. On the filter itself it never refuses what would
 * pass in earnest, so that it may narrow a search; what it lets through is judged in full afterwards.
 */

/** Levels in dB at frequencies in Hz. */
export type Levels = (frequenciesHz: Float64Array) => Float64Array

export interface Screen {
  readonly pass: Probe
  readonly stop: Probe
}

interface Probe {
  readonly hz: Float64Array
  readonly limitsDb: Float64Array
  /** Which line of the sheet each point belongs to. */
  readonly lines: Uint8Array
}

const BETWEEN = 14

function probes(sheet: RequirementSheet, foldHz: number, isKept: boolean): Probe {
  const hz: number[] = []
  const limits: number[] = []
  const lines: number[] = []
  sheet.forEach((line, index) => {
    const add = (at: number, db: number) => {
      hz.push(at)
      limits.push(db)
      lines.push(index)
    }
    if (line.kind === 'keep-tone' && isKept) add(line.hz, line.withinDb)
    if (line.kind === 'lose-tone' && !isKept) add(line.hz, line.attenuationDb)
    if (line.kind !== (isKept ? 'pass' : 'stop')) return
    const db = line.kind === 'pass' ? line.withinDb : line.attenuationDb
    const toHz = line.toHz ?? foldHz
    // Crowding at both ends, where a mask is met or missed: Chebyshev points.
    for (let k = 0; k <= BETWEEN; k++) {
      const part = (1 - Math.cos((Math.PI * k) / BETWEEN)) / 2
      add(k === BETWEEN ? toHz : line.fromHz + (toHz - line.fromHz) * part, db)
    }
  })
  return { hz: Float64Array.from(hz), limitsDb: Float64Array.from(limits), lines: Uint8Array.from(lines) }
}

export function screenOf(sheet: RequirementSheet, sampleRateHz: number): Screen {
  return { pass: probes(sheet, sampleRateHz / 2, true), stop: probes(sheet, sampleRateHz / 2, false) }
}

/** Least room in dB over the points of the pass lines; negative where one is missed. */
export function passRoom({ pass }: Screen, levels: Levels): number {
  return levels(pass.hz).reduce((least, db, n) => Math.min(least, pass.limitsDb[n]! - Math.abs(db)), Infinity)
}

/** Least room in dB over the points of the stop lines. */
export function stopRoom({ stop }: Screen, levels: Levels): number {
  return levels(stop.hz).reduce((least, db, n) => Math.min(least, -db - stop.limitsDb[n]!), Infinity)
}

/** A line missed, and by what part of its limit. */
export interface Miss {
  readonly index: number
  readonly parts: number
  /** “misses line 3 (…) by 2.1 dB” */
  readonly words: string
  /** Missed by a design that holds pass and stop lines; such a miss says more than one of those lines itself. */
  readonly isLate: boolean
}

export const isNearer = (miss: Miss, than: Miss): boolean =>
  miss.isLate === than.isLate ? miss.parts < than.parts * (1 - 1e-9) : miss.isLate

/** The line missed furthest at the points of the quick look; null when it sees none missed. */
export function quickMiss({ pass, stop }: Screen, levels: Levels, sheet: RequirementSheet): Miss | null {
  let worst: { readonly index: number; readonly parts: number; readonly db: number } | null = null
  const look = ({ hz, limitsDb, lines }: Probe, room: (db: number, limit: number) => number) => {
    levels(hz).forEach((db, n) => {
      const short = -room(db, limitsDb[n]!)
      const parts = short / limitsDb[n]!
      if (short > 0 && (worst === null || parts > worst.parts)) worst = { index: lines[n]!, parts, db: short }
    })
  }
  look(pass, (db, limit) => limit - Math.abs(db))
  look(stop, (db, limit) => -db - limit)
  if (worst === null) return null
  const { index, parts, db } = worst as { index: number; parts: number; db: number }
  const line = sheet[index]
  if (line === undefined) return null
  return {
    index,
    parts,
    words: `misses ${lineName(index, line)} by ${show(Number(db.toPrecision(3)))} dB`,
    isLate: false,
  }
}
