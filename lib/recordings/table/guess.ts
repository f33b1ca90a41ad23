import { RecordingError } from '../errors'
import { namesCounter, namesTime, splitCells, splitName } from './cells'
import { readCell, unquote } from './number'
import {
  isComment,
  MAX_COLUMNS,
  type DecimalMark,
  type Delimiter,
  type TablePlan,
  type TextEncoding,
  type TimeUnit,
} from './plan'
import { chooseSplit, kindOf, WEIGHED_LINES, type CellKind, type Split } from './split'
import { readStamp } from './stamp'

export interface GuessedColumn {
  readonly column: number
  readonly name: string
  readonly unit: string
  readonly holds: 'numbers' | 'stamps' | 'text'
  /** The first few cells, as written. */
  readonly examples: readonly string[]
}

export interface TableGuess {
  readonly plan: TablePlan
  readonly columns: readonly GuessedColumn[]
  /** The first lines of the file as they are, to look at. */
  readonly firstLines: readonly string[]
}

/** What the reader has settled; the rest is detected around it. */
export interface Settled {
  readonly delimiter?: Delimiter
  readonly decimal?: DecimalMark
  readonly headerLine?: number | null
  readonly firstLine?: number
  readonly time?: TablePlan['time']
  readonly statedRateHz?: number | null
}

/**
 * Detects how a text file is written from its first lines.
 *
 * @throws RecordingError 'empty' | 'no-numbers' | 'bad-plan'
 */
export function guessTable(lines: readonly string[], encoding: TextEncoding, settled: Settled = {}): TableGuess {
  if (!lines.some((line) => line.trim() !== '')) throw new RecordingError('empty', 'The file holds no lines.')
  const split = chooseSplit(lines, settled)
  if (split.columnCount > MAX_COLUMNS) {
    throw new RecordingError(
      'bad-plan',
      `The lines have ${split.columnCount} cells; a recording of ${MAX_COLUMNS} columns at most can be read.`,
    )
  }
  const firstLine = settled.firstLine ?? findFirstLine(lines, split)
  const header = findHeader(lines, split, firstLine, settled.headerLine)
  const rows = dataRows(lines, split, firstLine)
  const columns = Array.from({ length: split.columnCount }, (_, column) =>
    describeColumn(column, rows, header.cells, split.decimal),
  )
  const time = settled.time === undefined ? findTime(columns, rows, split.decimal) : settled.time
  const channels = columns
    .filter((c) => c.holds === 'numbers' && c.column !== time?.column && !isCounter(c, rows, split.decimal))
    .map(({ column, name, unit }) => ({ column, name, unit }))
  return {
    plan: {
      encoding,
      delimiter: split.delimiter,
      decimal: split.decimal,
      headerLine: header.line,
      firstLine,
      channels,
      time,
      timeResolutionSeconds: time ? resolutionOf(time, rows, split.decimal) : 0,
      statedRateHz: settled.statedRateHz ?? null,
    },
    columns,
    firstLines: lines.slice(0, 12).map((line) => line.slice(0, 400)),
  }
}

const isDataRow = (cells: readonly string[], split: Split): boolean => {
  if (cells.length !== split.columnCount) return false
  const kinds = cells.map((cell) => kindOf(cell, split.decimal))
  const texts = kinds.filter((kind) => kind === 'text').length
  return kinds.some((kind) => kind === 'number') && texts <= cells.length / 2
}

function findFirstLine(lines: readonly string[], split: Split): number {
  const found = lines.findIndex((line) => !isComment(line) && isDataRow(splitCells(line, split.delimiter), split))
  return found < 0 ? 1 : found + 1
}

interface Header {
  readonly line: number | null
  readonly cells: readonly { readonly name: string; readonly unit: string }[]
}

/** The names stand in the last line before the data that splits like it; a row of units may stand between. */
function findHeader(
  lines: readonly string[],
  split: Split,
  firstLine: number,
  settled: number | null | undefined,
): Header {
  if (settled === null) return { line: null, cells: [] }
  const cellsOf = (line: number): string[] =>
    splitCells((lines[line - 1] ?? '').replace(/^\s*(?:[#%]+|\/\/)\s*/, ''), split.delimiter).map(unquote)
  if (settled !== undefined) return { line: settled, cells: cellsOf(settled).map(splitName) }
  const fits = (line: number): boolean => {
    const cells = cellsOf(line)
    return cells.length === split.columnCount && cells.some((cell) => kindOf(cell, split.decimal) === 'text')
  }
  let line = firstLine - 1
  while (line >= 1 && (lines[line - 1] ?? '').trim() === '') line -= 1
  if (line < 1 || !fits(line)) return { line: null, cells: [] }
  const own = cellsOf(line)
  if (
    line > 1 &&
    fits(line - 1) &&
    own.every((cell) => cell.length <= 12) &&
    !own.some((cell) => /[[(]/.test(cell) && !/^[[(].*[\])]$/.test(cell))
  ) {
    const units = own.map((cell) => cell.replace(/^[[(]|[\])]$/g, ''))
    const names = cellsOf(line - 1)
    if (units.some(isUnitLike))
      return { line: line - 1, cells: names.map((name, i) => ({ ...splitName(name), unit: units[i] ?? '' })) }
  }
  return { line, cells: own.map(splitName) }
}

const isUnitLike = (cell: string): boolean =>
  /^(?:s|ms|µs|us|g|V|mV|Pa|N|kN|m|mm|µm|Hz|dB|%|°C?|bar|A|m\/s(?:²|\^?2)?|mm\/s)$/.test(cell)

function dataRows(lines: readonly string[], split: Split, firstLine: number): string[][] {
  return lines
    .slice(firstLine - 1, firstLine - 1 + WEIGHED_LINES)
    .filter((line) => line.trim() !== '' && !isComment(line))
    .map((line) => splitCells(line, split.delimiter))
}

function describeColumn(
  column: number,
  rows: readonly string[][],
  header: Header['cells'],
  decimal: DecimalMark,
): GuessedColumn {
  const kinds = rows.map((row) => kindOf(row[column] ?? '', decimal))
  const count = (kind: CellKind) => kinds.filter((k) => k === kind).length
  const numbers = count('number')
  const stamps = count('stamp')
  const holds = stamps > numbers ? 'stamps' : numbers > 0 && numbers >= count('text') ? 'numbers' : 'text'
  const named = header[column]
  return {
    column,
    name: named?.name || `column ${column + 1}`,
    unit: named?.unit ?? '',
    holds,
    examples: rows.slice(0, 3).map((row) => (row[column] ?? '').slice(0, 40)),
  }
}

const numbersOf = (column: number, rows: readonly string[][], decimal: DecimalMark): number[] =>
  rows.map((row) => readCell(row[column] ?? '', decimal)).flatMap((cell) => ('value' in cell ? [cell.value] : []))

const steps = (values: readonly number[]): number[] => values.slice(1).map((value, i) => value - (values[i] ?? 0))

function isCounter(column: GuessedColumn, rows: readonly string[][], decimal: DecimalMark): boolean {
  if (namesCounter(column.name)) return true
  if (column.column !== 0 || !column.name.startsWith('column ')) return false
  const found = steps(numbersOf(0, rows, decimal))
  return found.length >= 2 && found.every((step) => step === 1)
}

function findTime(
  columns: readonly GuessedColumn[],
  rows: readonly string[][],
  decimal: DecimalMark,
): TablePlan['time'] {
  const stamped = columns.find((c) => c.holds === 'stamps')
  if (stamped) return { column: stamped.column, unit: 'stamp' }
  const named = columns.find((c) => c.holds === 'numbers' && namesTime(c.name))
  const first = columns[0]
  const rising =
    first &&
    columns.length > 1 &&
    first.holds === 'numbers' &&
    first.name.startsWith('column ') &&
    risesEvenly(rows, decimal)
  const column = named ?? (rising && !isCounter(first, rows, decimal) ? first : undefined)
  if (!column) return null
  return { column: column.column, unit: timeUnitOf(column, numbersOf(column.column, rows, decimal)) }
}

function risesEvenly(rows: readonly string[][], decimal: DecimalMark): boolean {
  const found = steps(numbersOf(0, rows, decimal)).sort((a, b) => a - b)
  const middle = found[Math.floor(found.length / 2)] ?? 0
  return found.length >= 2 && (found[0] ?? 0) > 0 && (found[found.length - 1] ?? 0) <= 3 * middle
}

function timeUnitOf(column: GuessedColumn, values: readonly number[]): TimeUnit {
  const written = (column.unit || /(?:^|[ _])(ms|us|µs|ns|min|s|sec|seconds)$/i.exec(column.name)?.[1] || '')
    .toLowerCase()
    .replace('μ', 'µ')
  if (/^(?:ms|msec|milliseconds?)$/.test(written)) return 'ms'
  if (/^(?:us|µs|usec|microseconds?)$/.test(written)) return 'µs'
  if (/^(?:ns|nsec|nanoseconds?)$/.test(written)) return 'ns'
  if (/^(?:min|minutes?)$/.test(written)) return 'min'
  if (written !== '') return 's'
  const largest = Math.abs(values[0] ?? 0) // seconds since 1970 stand near 1.7e9 in this century
  return largest > 5e17 ? 'ns' : largest > 5e14 ? 'µs' : largest > 5e11 ? 'ms' : 's'
}

/** Seconds in a unit of time. */
export const SECONDS_PER: Readonly<Record<Exclude<TimeUnit, 'stamp'>, number>> = {
  s: 1,
  ms: 1e-3,
  µs: 1e-6,
  ns: 1e-9,
  min: 60,
}

/** The last digit of the time stamps as written, in seconds. */
function resolutionOf(
  time: { column: number; unit: TimeUnit },
  rows: readonly string[][],
  decimal: DecimalMark,
): number {
  let finest = Infinity
  for (const row of rows) {
    const text = unquote(row[time.column] ?? '')
    if (time.unit === 'stamp') {
      const stamp = readStamp(text)
      if (stamp) finest = Math.min(finest, 10 ** -stamp.fractionDigits)
    } else {
      const match = /^[+-]?\d*(?:[.,](\d*))?(?:[eE]([+-]?\d+))?$/.exec(text)
      if (match && 'value' in readCell(text, decimal)) {
        finest = Math.min(finest, 10 ** (Number(match[2] ?? 0) - (match[1]?.length ?? 0)) * SECONDS_PER[time.unit])
      }
    }
  }
  return Number.isFinite(finest) ? finest : 0
}
