/** Field delimiters that are detected and offered; a space stands for any run of spaces. */
export const DELIMITERS = [',', ';', '\t', '|', ' '] as const
export type Delimiter = (typeof DELIMITERS)[number]
export type DecimalMark = '.' | ','
export type TextEncoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252'

export const TIME_UNITS = ['s', 'ms', 'µs', 'ns', 'min', 'stamp'] as const
/** 'stamp': ISO 8601 date and time, or a time of day. */
export type TimeUnit = (typeof TIME_UNITS)[number]

export interface PlannedColumn {
  readonly column: number
  readonly name: string
  readonly unit: string
}

/** How a text file is to be read: what was detected, with the reader's corrections. */
export interface TablePlan {
  readonly encoding: TextEncoding
  readonly delimiter: Delimiter
  readonly decimal: DecimalMark
  /** Line the names come from, counted from 1; null when there are none. */
  readonly headerLine: number | null
  /** Line of the first sample, counted from 1. */
  readonly firstLine: number
  readonly channels: readonly PlannedColumn[]
  readonly time: { readonly column: number; readonly unit: TimeUnit } | null
  /** Spacing of the time stamps as they are written, in seconds; 0 when unknown. */
  readonly timeResolutionSeconds: number
  /** A rate typed by the reader; it wins over the time column. */
  readonly statedRateHz: number | null
}

export const DELIMITER_NAMES: Readonly<Record<Delimiter, string>> = {
  ',': 'comma',
  ';': 'semicolon',
  '\t': 'tab',
  '|': 'vertical bar',
  ' ': 'space',
}

/** A table of more columns than this is no recording. */
export const MAX_COLUMNS = 1024

/** What stands before a line that isn't data. */
export const isComment = (line: string): boolean => /^\s*(?:[#%]|\/\/)/.test(line)
