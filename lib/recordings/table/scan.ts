import { RecordingError } from '../errors'
import type { Flaw } from '../types'
import { cellEnd, CR, endOfLines, joined, LF, lineEndAfter, SPACE, TAB } from './bytes'
import { EXACT_MANTISSA, POWERS_OF_TEN, readCell, unquote } from './number'
import type { TablePlan } from './plan'
import { RowNumbers } from './row-numbers'
import { readStamp, StampClock } from './stamp'

/*
 * The byte-level reader: one pass over the bytes, no string for a plain number. A decimal of mantissa < 2^53 and |exponent| ≤ 22 is
 * one exact multiplication or division away from its double (Clinger, "How to read floating point numbers accurately", 1990); all
 * other cells go the slow way, through Number. Both give the nearest double.
 */

/** Rows handed over at once. */
const BLOCK_ROWS = 16_384
/** A line longer than this is no row of samples. */
const MAX_LINE_BYTES = 1 << 20
/** Flaws that are kept to be shown; all are counted. */
const KEPT_FLAWS = 100
/** Cells after which a file with hardly a number among them is given up. */
const PATIENCE_CELLS = 1_000_000

const HASH = 35
const PERCENT = 37
const PLUS = 43
const MINUS = 45
const SLASH = 47
const ZERO = 48

const UTF8 = new TextDecoder()

/** Takes rows: one array for each wanted column, the time column last when there is one. The arrays are used again afterwards. */
export type RowSink = (columns: readonly Float64Array[]) => void

export class TableScanner {
  readonly flaws: Flaw[] = []
  flawCount = 0
  /** Rows taken so far. */
  frames = 0
  /** Lines before the first and after the last number that hold none: remarks, not samples; they are left out. */
  leftOutLines = 0
  /** Finite numbers found in each wanted column. */
  readonly numbersFound: Float64Array
  readonly rows = new RowNumbers()
  private line = 1
  private rowsInBlock = 0
  /** Rows without a number that wait for the next row with one. */
  private heldRows = 0
  private heldFromLine = 0
  private heldFlawCount = 0
  private readonly block: readonly Float64Array[]
  /** Where the cell of a column goes; −1: nowhere. */
  private readonly slotOf: Int32Array
  private readonly delimiter: number
  private readonly decimal: number
  private readonly stampSlot: number
  private readonly clock = new StampClock()
  private carry = new Uint8Array(0)

  constructor(
    private readonly plan: TablePlan,
    private readonly sink: RowSink,
  ) {
    const wanted = plan.channels.map((c) => c.column)
    if (plan.time) wanted.push(plan.time.column)
    this.slotOf = new Int32Array(Math.max(-1, ...wanted) + 1).fill(-1)
    wanted.forEach((column, slot) => (this.slotOf[column] = slot))
    this.block = wanted.map(() => new Float64Array(BLOCK_ROWS))
    this.numbersFound = new Float64Array(wanted.length)
    this.delimiter = plan.delimiter.charCodeAt(0)
    this.decimal = plan.decimal.charCodeAt(0)
    this.stampSlot = plan.time?.unit === 'stamp' ? wanted.length - 1 : -1
  }

  /** Takes the next bytes of the file, UTF-8; the array is the scanner's from then on. */
  push(bytes: Uint8Array): void {
    if (this.delimiter === SPACE) for (let i = 0; i < bytes.length; i += 1) if (bytes[i] === TAB) bytes[i] = SPACE
    const end = endOfLines(bytes)
    if (end > 0) {
      this.scan(this.carry.length > 0 ? joined(this.carry, bytes.subarray(0, end)) : bytes.subarray(0, end))
      this.carry = bytes.slice(end)
    } else this.carry = joined(this.carry, bytes)
    if (this.carry.length > MAX_LINE_BYTES) {
      throw new RecordingError(
        'line-too-long',
        `Line ${this.line} is longer than ${MAX_LINE_BYTES / 1024} kB; this is no table of samples.`,
        {
          row: this.line,
        },
      )
    }
  }

  /** The file has ended: reads the last line and hands over what is left. */
  finish(): void {
    if (this.carry.length > 0) this.scan(joined(this.carry, Uint8Array.of(LF)))
    this.carry = new Uint8Array(0)
    this.leftOutLines += this.heldRows
    this.flawCount -= this.heldFlawCount
    while ((this.flaws[this.flaws.length - 1]?.frame ?? -1) >= this.frames) this.flaws.pop()
    this.heldRows = 0
    this.flush()
  }

  /** Reads whole lines. The hot loop: locals, no closures, no strings. Indices stay inside because the last byte ends a line. */
  private scan(b: Uint8Array): void {
    const { delimiter, decimal, slotOf, block, stampSlot, numbersFound } = this
    const columns = slotOf.length
    const spaced = delimiter === SPACE
    const length = b.length
    let i = 0
    while (i < length) {
      let c = b[i]!
      while (c === SPACE || (c === TAB && delimiter !== TAB)) c = b[++i]!
      const skipped =
        c === HASH || c === PERCENT || (c === SLASH && b[i + 1] === SLASH) || this.line < this.plan.firstLine
      if (skipped || c === LF || c === CR) {
        while (c !== LF && c !== CR) c = b[++i]!
        i = lineEndAfter(b, i)
        this.line += 1
        continue
      }
      const row = this.rowsInBlock
      const flawsBefore = this.flawCount
      let good = 0
      let column = 0
      for (;;) {
        const slot = column < columns ? slotOf[column]! : -1
        const cellStart = i
        let read = false
        if (slot >= 0 && slot !== stampSlot) {
          c = b[i]!
          while (c === SPACE) c = b[++i]!
          const sign = c
          if (c === MINUS || c === PLUS) c = b[++i]!
          let mantissa = 0
          let exponent = 0
          let digits = -i
          let d = c - ZERO
          while (d >= 0 && d <= 9) {
            mantissa = mantissa * 10 + d
            c = b[++i]!
            d = c - ZERO
          }
          digits += i
          if (c === decimal) {
            c = b[++i]!
            d = c - ZERO
            const fractionFrom = i
            while (d >= 0 && d <= 9) {
              mantissa = mantissa * 10 + d
              c = b[++i]!
              d = c - ZERO
            }
            exponent = fractionFrom - i
            digits -= exponent
          }
          if ((c === 101 || c === 69) && digits > 0) {
            const signed = b[i + 1] === MINUS || b[i + 1] === PLUS
            const from = signed ? i + 2 : i + 1
            let at = from
            let value = 0
            for (d = b[at]! - ZERO; d >= 0 && d <= 9 && at - from < 4; d = b[++at]! - ZERO) value = value * 10 + d
            if (at > from) {
              exponent += b[i + 1] === MINUS ? -value : value
              i = at
              c = b[i]!
            }
          }
          if (!spaced) while (c === SPACE) c = b[++i]!
          if (
            digits > 0 &&
            mantissa < EXACT_MANTISSA &&
            exponent >= -22 &&
            exponent <= 22 &&
            (c === delimiter || c === LF || c === CR)
          ) {
            const value = exponent < 0 ? mantissa / POWERS_OF_TEN[-exponent]! : mantissa * POWERS_OF_TEN[exponent]!
            block[slot]![row] = sign === MINUS ? -value : value
            numbersFound[slot]! += 1
            good += 1
            read = true
          }
        }
        if (!read) {
          i = cellEnd(b, cellStart, delimiter)
          if (slot >= 0 && this.slowCell(b.subarray(cellStart, i), slot, row)) good += 1
        }
        if (b[i] !== delimiter) break
        i += 1
        if (spaced) {
          while (b[i] === SPACE) i += 1
          if (b[i] === LF || b[i] === CR) break
        }
        column += 1
      }
      if (column + 1 < columns) this.shortRow(column + 1, row)
      i = lineEndAfter(b, i)
      this.endRow(good, flawsBefore)
      this.line += 1
    }
  }

  /** A cell the fast way left over: a stamp, a quoted or very long number, or no number at all. True when it held one. */
  private slowCell(bytes: Uint8Array, slot: number, row: number): boolean {
    const text = UTF8.decode(bytes)
    const out = this.block[slot]!
    if (slot === this.stampSlot) {
      const stamp = readStamp(unquote(text.trim()))
      if (stamp) {
        out[row] = this.clock.seconds(stamp)
        this.numbersFound[slot]! += 1
        return true
      }
      out[row] = NaN
      this.flaw(slot, text.trim() === '' ? 'blank cell' : `“${text.trim().slice(0, 24)}” is no date and time`)
      return false
    }
    const cell = readCell(text, this.plan.decimal)
    if ('value' in cell) {
      out[row] = cell.value
      this.numbersFound[slot]! += 1
      return true
    }
    out[row] = NaN
    this.flaw(slot, cell.reason)
    return false
  }

  private shortRow(cells: number, row: number): void {
    for (let column = cells; column < this.slotOf.length; column += 1) {
      const slot = this.slotOf[column]!
      if (slot < 0) continue
      this.block[slot]![row] = NaN
      this.flaw(slot, `the row has ${cells} ${cells === 1 ? 'cell' : 'cells'}; this column is number ${column + 1}`)
    }
  }

  private flaw(channel: number, reason: string): void {
    this.flawCount += 1
    if (this.flaws.length < KEPT_FLAWS)
      this.flaws.push({ row: this.line, frame: this.frames + this.heldRows, channel, reason })
  }

  private endRow(good: number, flawsBefore: number): void {
    if (good > 0) {
      if (this.heldRows > 0) this.releaseHeld()
      this.takeRow(this.line)
    } else if (this.frames === 0) {
      const dropped = this.flawCount - flawsBefore
      this.flaws.length = Math.max(0, this.flaws.length - dropped)
      this.flawCount = flawsBefore
      this.leftOutLines += 1
      if (this.leftOutLines * this.block.length > PATIENCE_CELLS) throw this.hopeless()
    } else {
      if (this.heldRows === 0) this.heldFromLine = this.line
      this.heldRows += 1
      this.heldFlawCount += this.flawCount - flawsBefore
      if (this.heldRows * this.block.length > PATIENCE_CELLS && this.heldRows > 20 * this.frames) throw this.hopeless()
    }
  }

  private takeRow(line: number): void {
    this.rows.note(this.frames, line)
    this.frames += 1
    this.rowsInBlock += 1
    if (this.rowsInBlock === BLOCK_ROWS) this.flush()
  }

  /** Rows without a number stood between samples: they are samples that are missing, and keep their place in time as NaN. */
  private releaseHeld(): void {
    const current = this.block.map((column) => column[this.rowsInBlock]!)
    for (let k = 0; k < this.heldRows; k += 1) {
      for (const column of this.block) column[this.rowsInBlock] = NaN
      this.takeRow(this.heldFromLine + k)
    }
    this.block.forEach((column, slot) => (column[this.rowsInBlock] = current[slot]!))
    this.heldRows = 0
    this.heldFlawCount = 0
  }

  private flush(): void {
    if (this.rowsInBlock > 0) this.sink(this.block.map((column) => column.subarray(0, this.rowsInBlock)))
    this.rowsInBlock = 0
    const cells = this.frames * this.block.length
    const numbers = this.numbersFound.reduce((sum, count) => sum + count, 0)
    if (cells > PATIENCE_CELLS && numbers < cells / 20) throw this.hopeless()
  }

  private hopeless(): RecordingError {
    const first = this.flaws[0]
    const example = first?.row === undefined ? '' : ` Line ${first.row}: ${first.reason}.`
    return new RecordingError(
      'no-numbers',
      `Hardly any of the chosen cells holds a number.${example} Check the delimiter, the decimal mark and the columns.`,
      {
        row: first?.row ?? this.line,
      },
    )
  }
}
