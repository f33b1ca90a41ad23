import { createBreath } from '../breathe'
import type { FrameSource, TaskControl } from '../types'

/** Rows written at once. */
const BLOCK_ROWS = 8192

export interface WrittenColumn {
  /** User text: the only thing that is escaped. */
  readonly title: string
  readonly source: FrameSource
  readonly channel: number
}

/**
 * User text for a CSV cell: quoted where needed, and kept from being taken for a formula by a leading apostrophe. Numbers never pass
 * through here: −5.2 stays -5.2.
 */
function escapeText(text: string): string {
  const tame = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text
  return /[",;\r\n\t]/.test(tame) || tame !== tame.trim() ? `"${tame.replaceAll('"', '""')}"` : tame
}

/** The shortest text that reads back as the same double; a missing sample is an empty cell. */
const writeNumber = (value: number): string =>
  Number.isFinite(value) ? String(Object.is(value, -0) ? '-0' : value) : ''

/**
 * Time and any columns as CSV: comma, decimal point, CRLF (RFC 4180), UTF-8. Written block by block into a Blob.
 */
export async function writeTable(
  columns: readonly WrittenColumn[],
  frames: number,
  sampleRateHz: number,
  control: TaskControl,
): Promise<Blob> {
  const parts: Blob[] = [
    new Blob([['time [s]', ...columns.map((column) => escapeText(column.title))].join(',') + '\r\n']),
  ]
  const breath = createBreath(control)
  const buffers = columns.map(() => new Float64Array(BLOCK_ROWS))
  for (let start = 0; start < frames; start += BLOCK_ROWS) {
    const count = Math.min(BLOCK_ROWS, frames - start)
    for (const [position, column] of columns.entries())
      await column.source.read(start, [column.channel], [buffers[position]!.subarray(0, count)])
    const lines: string[] = []
    for (let i = 0; i < count; i += 1) {
      let line = String((start + i) / sampleRateHz)
      for (const buffer of buffers) line += `,${writeNumber(buffer[i]!)}`
      lines.push(line)
    }
    parts.push(new Blob([lines.join('\r\n'), '\r\n']))
    await breath(start + count, frames)
  }
  return new Blob(parts, { type: 'text/csv' })
}
