import { show } from '../check'
import { DesignError } from '../errors'
import { cubicAt, monotoneCubic, type MonotoneCubic } from '../numeric/monotone-cubic'
import type { OwnTarget } from '../spec'
import { MOST_MEASURED_ROWS } from '../limits'

/** A measured response, ready to be asked between its rows. */
export interface MeasuredTable {
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  /** Unwrapped. */
  readonly phaseRadians: Float64Array
}

type MeasuredTarget = Extract<OwnTarget, { given: 'measured' }>

const LEAST_ROWS = 4
/** Levels a fit can weigh against each other in double precision; no measurement reaches further. */
const LEVEL_RANGE_DB = [-400, 400] as const
/** Beyond this many degrees a phase has lost the digits that count. */
const MOST_DEGREES = 1e6
const DEGREES = 180 / Math.PI

/**
 * The table of a measured response: rows checked, phase made continuous by taking each step between rows the short way round.
 *
 * @param rows [Hz, dB, degrees], frequencies rising
 * @throws DesignError `too-few-rows`, `too-many-rows`, `not-finite`, `level-out-of-range`, `phase-out-of-range` or `not-rising` with the field of the row, counted from 0
 */
export function measuredTable({ rows }: Pick<MeasuredTarget, 'rows'>): MeasuredTable {
  if (rows.length < LEAST_ROWS) {
    throw new DesignError(
      'too-few-rows',
      'own.rows',
      `A measured response takes at least ${LEAST_ROWS} rows; ${rows.length} were given.`,
      LEAST_ROWS,
    )
  }
  if (rows.length > MOST_MEASURED_ROWS) {
    throw new DesignError(
      'too-many-rows',
      'own.rows',
      `A measured response has at most ${MOST_MEASURED_ROWS} rows; ${rows.length} were given.`,
      MOST_MEASURED_ROWS,
    )
  }
  let before = -1
  rows.forEach((row, index) => {
    row.forEach((value, column) => {
      if (Number.isFinite(value)) return
      throw new DesignError(
        'not-finite',
        `own.rows.${index}.${column}`,
        `Row ${index + 1} holds a value that is not a finite number.`,
        0,
      )
    })
    const [hertz, db, degrees] = row
    if (hertz < 0 || hertz <= before) {
      throw new DesignError(
        'not-rising',
        `own.rows.${index}.0`,
        `Frequencies must rise from row to row; row ${index + 1} has ${show(hertz)} Hz${index > 0 ? ` after ${show(before)} Hz` : ''}.`,
        index > 0 ? before * (1 + 1e-9) || 1e-6 : 0,
      )
    }
    if (db < LEVEL_RANGE_DB[0] || db > LEVEL_RANGE_DB[1]) {
      throw new DesignError(
        'level-out-of-range',
        `own.rows.${index}.1`,
        `A level between ${LEVEL_RANGE_DB[0]} and ${LEVEL_RANGE_DB[1]} dB can be used; row ${index + 1} has ${show(db)} dB.`.replaceAll(
          '-',
          '−',
        ),
        db < 0 ? LEVEL_RANGE_DB[0] : LEVEL_RANGE_DB[1],
      )
    }
    if (Math.abs(degrees) > MOST_DEGREES) {
      throw new DesignError(
        'phase-out-of-range',
        `own.rows.${index}.2`,
        `A phase between −1000000° and 1000000° can be used; row ${index + 1} has ${show(degrees).replace('-', '−')}°.`,
        Math.sign(degrees) * MOST_DEGREES,
      )
    }
    before = hertz
  })
  const degrees = rows.map((row) => row[2])
  let turns = 0
  const phase = degrees.map((value, index) => {
    if (index > 0) turns -= Math.round((value - (degrees[index - 1] ?? value)) / 360)
    return (value + 360 * turns) / DEGREES
  })
  return {
    frequenciesHz: Float64Array.from(rows, (row) => row[0]),
    magnitudeDb: Float64Array.from(rows, (row) => row[1]),
    phaseRadians: Float64Array.from(phase),
  }
}

interface Curves {
  readonly overLog: boolean
  readonly db: MonotoneCubic
  readonly phase: MonotoneCubic
}

const curves = new WeakMap<MeasuredTable, Curves>()

/** Over the logarithm of frequency, unless the table begins at 0 Hz. */
function curvesOf(table: MeasuredTable): Curves {
  const known = curves.get(table)
  if (known !== undefined) return known
  const overLog = table.frequenciesHz[0]! > 0
  const x = overLog ? table.frequenciesHz.map(Math.log) : table.frequenciesHz
  const fresh = { overLog, db: monotoneCubic(x, table.magnitudeDb), phase: monotoneCubic(x, table.phaseRadians) }
  curves.set(table, fresh)
  return fresh
}

/** Level, phase and group delay of a measured response at one frequency. */
export interface MeasuredPoint {
  readonly db: number
  readonly phaseRadians: number
  /** −dφ/dω of the interpolated phase: only as good as the rows are close. */
  readonly delaySeconds: number
}

/**
 * A measured response between its rows: level and phase by cubics that don't overshoot, over the logarithm of frequency, or over frequency
 * where the table begins at 0 Hz.
 *
 * @returns null outside the rows, where nothing is known
 */
export function measuredAt(table: MeasuredTable, frequencyHz: number): MeasuredPoint | null {
  const { frequenciesHz } = table
  const last = frequenciesHz[frequenciesHz.length - 1]!
  if (!(frequencyHz >= frequenciesHz[0]! && frequencyHz <= last)) return null
  const { overLog, db, phase } = curvesOf(table)
  // The logarithm may round past either end.
  const x = overLog ? Math.min(Math.max(Math.log(frequencyHz), db.x[0]!), db.x[db.x.length - 1]!) : frequencyHz
  const level = cubicAt(db, x)
  const angle = cubicAt(phase, x)
  if (level === null || angle === null) return null
  const perHertz = overLog ? angle.slope / frequencyHz : angle.slope
  return { db: level.value, phaseRadians: angle.value, delaySeconds: -perHertz / (2 * Math.PI) }
}
