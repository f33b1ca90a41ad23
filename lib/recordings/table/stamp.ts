/*
 * Time stamps: ISO 8601 calendar date and time ("2026-03-04T10:15:00.125Z", "2026-03-04 10:15:00,125+01:00"; slashes are taken for
 * hyphens), or a time of day alone ("10:15:00.125").
 */

const STAMP =
  /^(?:(\d{4})[-/](\d{2})[-/](\d{2})[T ]+)?(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,](\d+))?)?\s*(Z|[+-]\d{2}:?(?:\d{2})?)?$/

export interface Stamp {
  /** Days since 1 January 1970, 0 for a time of day alone. */
  readonly day: number
  readonly secondsOfDay: number
  readonly dated: boolean
  readonly fractionDigits: number
}

/** Null when the text is no time stamp. Days and seconds stay apart, so that microseconds survive. */
export function readStamp(text: string): Stamp | null {
  const match = STAMP.exec(text)
  if (!match) return null
  const [, year, month, dayOfMonth, hour, minute, second = '0', fraction = '', zone] = match
  const h = Number(hour)
  const m = Number(minute)
  const s = Number(second)
  if (h > 24 || m > 59 || s > 60) return null
  let day = 0
  if (year !== undefined && month !== undefined && dayOfMonth !== undefined) {
    const date = Date.UTC(Number(year), Number(month) - 1, Number(dayOfMonth))
    if (new Date(date).getUTCMonth() !== Number(month) - 1) return null
    day = date / 86_400_000
  }
  const seconds = h * 3600 + m * 60 + Number(`${s}.${fraction || '0'}`) - zoneSeconds(zone)
  return { day, secondsOfDay: seconds, dated: year !== undefined, fractionDigits: fraction.length }
}

function zoneSeconds(zone: string | undefined): number {
  if (zone === undefined || zone === 'Z') return 0
  const digits = zone.replace(/[^\d]/g, '')
  const seconds = Number(digits.slice(0, 2)) * 3600 + Number(digits.slice(2) || '0') * 60
  return zone.startsWith('-') ? -seconds : seconds
}

/** Turns stamps into seconds from the first one. A time of day that falls back by more than half a day has passed midnight. */
export class StampClock {
  private first: Stamp | null = null
  private lastOfDay = 0
  private midnights = 0

  seconds(stamp: Stamp): number {
    this.first ??= stamp
    if (!stamp.dated) {
      if (stamp.secondsOfDay < this.lastOfDay - 43_200) this.midnights += 1
      this.lastOfDay = stamp.secondsOfDay
    }
    return (stamp.day - this.first.day + this.midnights) * 86_400 + (stamp.secondsOfDay - this.first.secondsOfDay)
  }
}
