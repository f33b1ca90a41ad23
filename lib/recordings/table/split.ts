import { RecordingError } from '../errors'
import { splitCells } from './cells'
import { readCell, unquote } from './number'
import { DELIMITERS, isComment, type DecimalMark, type Delimiter } from './plan'
import { readStamp } from './stamp'

/** Lines that detection weighs. */
export const WEIGHED_LINES = 400

export type CellKind = 'number' | 'stamp' | 'blank' | 'text'

export interface Split {
  readonly delimiter: Delimiter
  readonly decimal: DecimalMark
  readonly columnCount: number
  readonly score: number
}

export function kindOf(cell: string, decimal: DecimalMark): CellKind {
  const text = unquote(cell)
  if (text === '') return 'blank'
  const read = readCell(text, decimal)
  // a mark without digits after it ("1,") is a delimiter in disguise, not a number
  if ('value' in read && !/[.,]$/.test(text)) return 'number'
  if ('reason' in read && read.reason.endsWith('no value')) return 'blank'
  return readStamp(text) ? 'stamp' : 'text'
}

/**
 * Delimiter and decimal mark under which the lines make the best table.
 *
 * @throws RecordingError 'no-numbers' | 'bad-plan'
 */
export function chooseSplit(
  lines: readonly string[],
  settled: { delimiter?: Delimiter; decimal?: DecimalMark; firstLine?: number },
): Split {
  const from = settled.firstLine ? settled.firstLine - 1 : 0
  const useful = lines
    .slice(from)
    .filter((line) => line.trim() !== '' && !isComment(line))
    .slice(0, WEIGHED_LINES)
  // names and remarks stand at the top: the later half speaks for the data
  const weighed = useful.slice(Math.min(useful.length - 1, Math.floor(useful.length / 2)))
  let best: Split | null = null
  for (const delimiter of settled.delimiter ? [settled.delimiter] : DELIMITERS) {
    for (const decimal of settled.decimal ? [settled.decimal] : (['.', ','] as const)) {
      if (delimiter === ',' && decimal === ',') continue
      const split = weigh(weighed, delimiter, decimal)
      if (!best || split.score > best.score + 1e-9) best = split
    }
  }
  if (!best) {
    throw new RecordingError(
      'bad-plan',
      'The comma can’t be the delimiter and the decimal mark at once. Choose another delimiter, or the decimal point.',
    )
  }
  if (best.score === 0 && !settled.delimiter && !settled.decimal) {
    const row = lines.findIndex((line) => line.trim() !== '' && !isComment(line)) + 1
    throw new RecordingError('no-numbers', 'No column of numbers was found in the first lines of this file.', {
      row: Math.max(1, row),
    })
  }
  return best
}

/** Share of number cells in lines of the commonest length; more columns win between equals. */
function weigh(lines: readonly string[], delimiter: Delimiter, decimal: DecimalMark): Split {
  const rows = lines.map((line) => splitCells(line, delimiter))
  const counts = new Map<number, number>()
  for (const row of rows) counts.set(row.length, (counts.get(row.length) ?? 0) + 1)
  let columnCount = 1
  let commonest = 0
  for (const [cells, times] of counts) if (times > commonest) [columnCount, commonest] = [cells, times]
  let good = 0
  let numbers = 0
  let cells = 0
  for (const row of rows) {
    if (row.length !== columnCount) continue
    for (const cell of row) {
      const kind = kindOf(cell, decimal)
      cells += 1
      if (kind === 'number') numbers += 1
      if (kind !== 'text') good += 1
    }
  }
  if (numbers === 0) return { delimiter, decimal, columnCount, score: 0 }
  const consistent = commonest / rows.length
  let score = (consistent * good) / cells + 0.001 * Math.min(columnCount, 50)
  if (delimiter === ',' && isDecimalInDisguise(rows)) score *= 0.5
  return { delimiter, decimal, columnCount, score }
}

/** "0,0125" split at its comma leaves "0" and "0125", and whole numbers aren't written with leading zeros. */
const isDecimalInDisguise = (rows: readonly string[][]): boolean =>
  rows.every((row) => row.length === 2 && row.every((cell) => /^[+-]?\d+$/.test(cell))) &&
  rows.some((row) => /^0\d/.test(row[1] ?? ''))
