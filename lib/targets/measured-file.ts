import { MOST_MEASURED_ROWS, type OwnTarget } from '@/dsp'
import { RecordingError } from '@/lib/recordings/errors'
import { splitCells } from '@/lib/recordings/table/cells'
import { guessTable, type GuessedColumn, type TableGuess } from '@/lib/recordings/table/guess'
import { readCell } from '@/lib/recordings/table/number'
import { isComment } from '@/lib/recordings/table/plan'

/*
 * A measured frequency response from a text file: frequency, level or gain, phase. How it is written – delimiter, decimal mark, header – is
 * found as for recordings.
 */

type MeasuredRow = Extract<OwnTarget, { given: 'measured' }>['rows'][number]

export interface MeasuredOptions {
  /** Without these the header tells, and where it doesn't: dB and degrees. */
  readonly magnitude?: 'dB' | 'gain'
  readonly phase?: 'degrees' | 'radians'
}

export interface FileProblem {
  /** Line of the file, counted from 1; null where it concerns the whole file. */
  readonly row: number | null
  /** Column, counted from 1; null where it concerns the whole row. */
  readonly column: number | null
  readonly reason: string
}

export interface MeasuredColumns {
  readonly frequency: { readonly column: number; readonly unit: 'Hz' | 'kHz' | 'rad/s' }
  readonly magnitude: { readonly column: number; readonly unit: 'dB' | 'gain' }
  readonly phase: { readonly column: number; readonly unit: 'degrees' | 'radians' }
}

export type MeasuredFile =
  | { readonly ok: true; readonly rows: readonly MeasuredRow[]; readonly columns: MeasuredColumns }
  | { readonly ok: false; readonly problems: readonly FileProblem[] }

const LEAST_ROWS = 4
/** So many problems are named; then they are only counted. */
const MOST_PROBLEMS = 20

const FREQUENCY = /^(?:f|freq\w*|fr[eé]qu\w*|hz|khz|hertz|omega|ω)\b/i
const MAGNITUDE = /\b(?:mag\w*|gain|level|ampl\w*|db|ratio|factor|betrag|pegel|verst\w*|abs)\b|\|h\|/i
const PHASE = /\b(?:phase\w*|phi|arg\w*|angle|winkel|deg\w*|rad\w*)\b|φ|°/i
const IN_DB = /\bdb\b|\blevel\b|\bpegel\b/i
const IN_GAIN = /\b(?:gain|ratio|factor|ampl\w*|betrag|verst\w*|abs|lin\w*)\b|\|h\|/i
const IN_RADIANS = /\brad\b|\bradians?\b/i

const written = ({ name, unit }: GuessedColumn): string => `${name.replaceAll('_', ' ')} ${unit}`.trim()

/** The columns by their names, and by their order where names don't tell. */
function columnsOf(columns: readonly GuessedColumn[], options: MeasuredOptions): MeasuredColumns | null {
  if (columns.length < 3) return null
  const free = new Set(columns.map(({ column }) => column))
  const take = (pattern: RegExp): number | undefined => {
    const found = columns.find((one) => free.has(one.column) && pattern.test(written(one)))
    if (found) free.delete(found.column)
    return found?.column
  }
  const named = { frequency: take(FREQUENCY), magnitude: take(MAGNITUDE), phase: take(PHASE) }
  const next = (): number => {
    const [first = 0] = free
    free.delete(first)
    return first
  }
  const frequency = named.frequency ?? next()
  const magnitude = named.magnitude ?? next()
  const phase = named.phase ?? next()
  const words = (column: number): string => {
    const found = columns[column]
    return found === undefined ? '' : written(found)
  }
  const [f, m] = [words(frequency), words(magnitude)]
  const hertz = /\bkhz\b/i.test(f) ? 'kHz' : /\brad\/s\b|^(?:omega|ω)\b/i.test(f) ? 'rad/s' : 'Hz'
  return {
    frequency: { column: frequency, unit: hertz },
    magnitude: { column: magnitude, unit: options.magnitude ?? (!IN_DB.test(m) && IN_GAIN.test(m) ? 'gain' : 'dB') },
    phase: { column: phase, unit: options.phase ?? (IN_RADIANS.test(words(phase)) ? 'radians' : 'degrees') },
  }
}

const HERTZ_PER = { Hz: 1, kHz: 1000, 'rad/s': 1 / (2 * Math.PI) } as const
const DEGREES_PER = { degrees: 1, radians: 180 / Math.PI } as const

type ReadLine = { readonly row: MeasuredRow } | { readonly problem: Omit<FileProblem, 'row'> }

function readLine(cells: readonly string[], guess: TableGuess, columns: MeasuredColumns): ReadLine {
  const values: number[] = []
  for (const { column } of [columns.frequency, columns.magnitude, columns.phase]) {
    const raw = cells[column]
    if (raw === undefined) {
      const reason = `the row has ${cells.length} cells; ${guess.columns.length} are needed`
      return { problem: { column: null, reason } }
    }
    const cell = readCell(raw, guess.plan.decimal)
    if ('reason' in cell) return { problem: { column: column + 1, reason: cell.reason } }
    values.push(cell.value)
  }
  const [frequency = 0, magnitude = 0, phase = 0] = values
  if (frequency < 0) {
    return { problem: { column: columns.frequency.column + 1, reason: 'a frequency can’t be negative' } }
  }
  if (columns.magnitude.unit === 'gain' && !(magnitude > 0)) {
    const reason = 'a gain must lie above 0; nothing passing at all has no level'
    return { problem: { column: columns.magnitude.column + 1, reason } }
  }
  const db = columns.magnitude.unit === 'gain' ? 20 * Math.log10(magnitude) : magnitude
  return { row: [frequency * HERTZ_PER[columns.frequency.unit], db, phase * DEGREES_PER[columns.phase.unit]] }
}

const refused = (...problems: FileProblem[]): MeasuredFile => ({ ok: false, problems })
const whole = (reason: string): MeasuredFile => refused({ row: null, column: null, reason })

/**
 * Reads a measured response from the text of a file: three columns, frequency (Hz, kHz or rad/s), level in dB or gain factor, phase in degrees or
 * radians, with or without a header, separated by commas, semicolons, tabs, bars or spaces, with decimal points or commas. Columns may
 * stand in any order when a header names them. Frequencies must rise.
 *
 * @returns the rows in Hz, dB and degrees, and how the columns were taken; or every problem with its row, column and reason
 */
export function parseMeasured(text: string, options: MeasuredOptions = {}): MeasuredFile {
  const lines = text.replace(/^\ufeff/, '').split(/\r\n|\r|\n/)
  let guess: TableGuess
  try {
    guess = guessTable(lines, 'utf-8')
  } catch (error) {
    if (error instanceof RecordingError) return whole(error.message)
    throw error
  }
  const columns = columnsOf(guess.columns, options)
  if (columns === null) {
    return whole(
      `Three columns are needed: frequency, level or gain, phase; this file has ${guess.columns.length === 1 ? 'one' : 'two'}.`,
    )
  }
  const rows: MeasuredRow[] = []
  const problems: FileProblem[] = []
  let before = -Infinity
  lines.forEach((line, index) => {
    if (index + 1 < guess.plan.firstLine || line.trim() === '' || isComment(line)) return
    const read = readLine(splitCells(line, guess.plan.delimiter), guess, columns)
    if ('problem' in read) {
      problems.push({ row: index + 1, ...read.problem })
      return
    }
    const [hertz] = read.row
    if (hertz <= before) {
      const reason =
        hertz === before ? 'the frequency is that of the row before' : 'frequencies must rise from row to row'
      problems.push({ row: index + 1, column: columns.frequency.column + 1, reason })
      return
    }
    before = hertz
    rows.push(read.row)
  })
  if (problems.length > MOST_PROBLEMS) {
    const left = problems.length - MOST_PROBLEMS
    return refused(...problems.slice(0, MOST_PROBLEMS), {
      row: null,
      column: null,
      reason: `${left} more rows can’t be used.`,
    })
  }
  if (problems.length > 0) return refused(...problems)
  if (rows.length < LEAST_ROWS) return whole(`At least ${LEAST_ROWS} rows are needed; this file has ${rows.length}.`)
  if (rows.length > MOST_MEASURED_ROWS) {
    return whole(`At most ${MOST_MEASURED_ROWS} rows can be used; this file has ${rows.length}. Thin them out first.`)
  }
  return { ok: true, rows, columns }
}
