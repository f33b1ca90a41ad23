import { formatNumber } from '@/lib/format/quantity'
import type { SpectrumReading, WindowReading } from './shapes'

/* Values of the plots in words, for the crosshair and the tables. */

const THIN = '\u2009'
const withUnit = (text: string, unit: string): string => (unit === '' ? text : `${text}${THIN}${unit}`)

/** Least and greatest of a window around a frame: the column or the sample that is drawn there. */
function rangeAt(reading: WindowReading | null, frame: number): { low: number; high: number } | null {
  if (!reading) return null
  if (reading.kind === 'samples') {
    const value = reading.values[Math.round(frame) - reading.from]
    return value === undefined ? null : { low: value, high: value }
  }
  const column = Math.floor(((frame - reading.from) / (reading.to - reading.from)) * reading.low.length)
  const low = reading.low[Math.min(reading.low.length - 1, column)]
  const high = reading.high[Math.min(reading.high.length - 1, column)]
  return low === undefined || high === undefined ? null : { low, high }
}

export function valueIn(reading: WindowReading | null, frame: number, unit: string): string {
  const range = rangeAt(reading, frame)
  if (!range || Number.isNaN(range.low)) return 'no value'
  if (range.low === range.high) return withUnit(formatNumber(range.low), unit)
  return withUnit(`${formatNumber(range.low, 3)} to ${formatNumber(range.high, 3)}`, unit)
}

const TABLE_ROWS = 60

export const timeTable = {
  columns: (unit: string, wasRun: boolean): string[] => {
    const of = (words: string) => (unit === '' ? words : `${words}, ${unit}`)
    return ['time, s', of('before, least'), of('greatest'), ...(wasRun ? [of('after, least'), of('greatest')] : [])]
  },
  /** The view in equal parts, each with what the plot shows of it. */
  rows(
    view: { readonly from: number; readonly to: number },
    windows: { readonly before: WindowReading | null; readonly after: WindowReading | null },
    sampleRateHz: number,
    wasRun: boolean,
  ): string[][] {
    const count = Math.min(TABLE_ROWS, view.to - view.from)
    return Array.from({ length: count }, (_, k) => {
      const from = view.from + ((view.to - view.from) * k) / count
      const to = view.from + ((view.to - view.from) * (k + 1)) / count
      const series = wasRun ? [windows.before, windows.after] : [windows.before]
      const cells = series.flatMap((reading) => {
        const range = rangeOver(reading, from, to)
        return range ? [formatNumber(range.low, 5), formatNumber(range.high, 5)] : ['—', '—']
      })
      return [formatNumber(Math.round(from) / sampleRateHz, 9), ...cells]
    })
  },
}

function rangeOver(reading: WindowReading | null, from: number, to: number): { low: number; high: number } | null {
  if (!reading) return null
  const [lows, highs, start, perItem] =
    reading.kind === 'samples'
      ? [reading.values, reading.values, reading.from, 1]
      : [reading.low, reading.high, reading.from, (reading.to - reading.from) / reading.low.length]
  let low = Infinity
  let high = -Infinity
  const last = Math.min(lows.length, Math.ceil((to - start) / perItem))
  for (let i = Math.max(0, Math.floor((from - start) / perItem)); i < last; i += 1) {
    low = Math.min(low, lows[i] ?? NaN)
    high = Math.max(high, highs[i] ?? NaN)
  }
  return low <= high ? { low, high } : null
}

/** Change of level from before to after, in dB; nothing where there was no power. */
export function changeDb(reading: SpectrumReading, line: number): number | null {
  const before = reading.before[line] ?? 0
  const after = reading.after?.[line] ?? 0
  return reading.after && before > 0 && after > 0 ? 10 * Math.log10(after / before) : null
}

/** Lines of a spectrum spread evenly over the logarithmic axis. */
export function tableLines(reading: SpectrumReading, [fromHz, toHz]: readonly [number, number]): number[] {
  const step = reading.frequenciesHz[1] ?? 1
  const lines = Array.from({ length: TABLE_ROWS }, (_, k) =>
    Math.round((fromHz * (toHz / fromHz) ** (k / (TABLE_ROWS - 1))) / step),
  )
  return [...new Set(lines)].filter((line) => line >= 1 && line < reading.frequenciesHz.length)
}
