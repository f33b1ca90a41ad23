import { createBreath } from '../breathe'
import { RecordingError } from '../errors'
import { SampleStore, storesAsSource, type MemoryBudget } from '../sample-store'
import type { Recording, TaskControl } from '../types'
import { SECONDS_PER } from './guess'
import { DELIMITER_NAMES, type TablePlan } from './plan'
import { TableScanner } from './scan'
import { findEncoding } from './text'
import { measureTiming, statedTiming } from './timing'

/** Bytes of the file taken at once. */
const CHUNK_BYTES = 4 << 20

/**
 * Reads a text file as planned, by streaming: bytes in, doubles out, no line kept.
 *
 * @throws RecordingError 'bad-plan' | 'bad-rate' | 'no-numbers' | 'line-too-long' | 'time-order' | 'not-text' | 'cancelled'
 */
export async function readTable(
  file: Blob,
  name: string,
  plan: TablePlan,
  budget: MemoryBudget,
  control: TaskControl,
): Promise<Recording> {
  checkPlan(plan)
  const channelStores = plan.channels.map(() => new SampleStore(budget))
  const timeStore = plan.time ? new SampleStore(budget) : null
  const release = () => {
    for (const store of channelStores) store.clear()
    timeStore?.clear()
  }
  const toSeconds = secondsFrom(plan)
  const scanner = new TableScanner(plan, (columns) => {
    columns.forEach((column, slot) => channelStores[slot]?.append(column))
    const stamps = columns[channelStores.length]
    if (timeStore && stamps) timeStore.append(toSeconds(stamps))
  })
  try {
    await feed(file, scanner, control)
    const empty = scanner.numbersFound.findIndex((count) => count === 0)
    if (scanner.frames === 0 || empty >= 0) throw nothingFound(plan, scanner, empty)
    const rowOf = (frame: number) => scanner.rows.of(frame)
    const times = timeStore ? storesAsSource([timeStore]) : undefined
    const timing = times
      ? await measureTiming(times, plan.timeResolutionSeconds, plan.statedRateHz, rowOf)
      : statedTiming(plan.statedRateHz ?? NaN, 'stated')
    return {
      kind: 'table',
      name,
      sampleRateHz: timing.sampleRateHz,
      channels: plan.channels.map((channel) => ({ name: channel.name, unit: channel.unit })),
      source: storesAsSource(channelStores),
      storage: describePlan(plan),
      notes:
        scanner.leftOutLines > 0
          ? [
              `${scanner.leftOutLines === 1 ? 'One line holds' : `${scanner.leftOutLines} lines hold`} no number before the first or after the last sample, left out.`,
            ]
          : [],
      flaws: scanner.flaws,
      flawCount: scanner.flawCount,
      timing,
      ...(times ? { times } : {}),
      rowOf,
      release,
    }
  } catch (cause) {
    release()
    throw cause
  }
}

function checkPlan(plan: TablePlan): void {
  if (plan.delimiter === ',' && plan.decimal === ',') {
    throw new RecordingError(
      'bad-plan',
      'The comma can’t be the delimiter and the decimal mark at once. Choose another delimiter, or the decimal point.',
    )
  }
  if (plan.channels.length === 0)
    throw new RecordingError('bad-plan', 'No column is chosen. Choose at least one column of numbers.')
  if (!plan.time && plan.statedRateHz === null) {
    throw new RecordingError('bad-rate', 'There is no time column. State the sampling rate, for example 600 Hz.')
  }
  if (plan.statedRateHz !== null && !(plan.statedRateHz > 0 && plan.statedRateHz <= 1e12)) {
    throw new RecordingError('bad-rate', 'The rate must be more than 0 Hz and at most 1 THz.')
  }
  if (plan.time && plan.channels.some((channel) => channel.column === plan.time?.column)) {
    throw new RecordingError(
      'bad-plan',
      'The time column can’t be a channel as well. Take it off the channels, or choose another time column.',
    )
  }
}

async function feed(file: Blob, scanner: TableScanner, control: TaskControl): Promise<void> {
  const breath = createBreath(control)
  const found = findEncoding(new Uint8Array(await file.slice(0, CHUNK_BYTES).arrayBuffer()))
  const wide = found.encoding === 'utf-16le' || found.encoding === 'utf-16be'
  const decoder = wide ? new TextDecoder(found.encoding) : null
  const encoder = new TextEncoder()
  for (let at = found.markBytes; at < file.size; at += CHUNK_BYTES) {
    const bytes = new Uint8Array(await bytesOf(file, at))
    scanner.push(decoder ? encoder.encode(decoder.decode(bytes, { stream: true })) : bytes)
    await breath(Math.min(file.size, at + CHUNK_BYTES), file.size)
  }
  if (decoder) scanner.push(encoder.encode(decoder.decode()))
  scanner.finish()
  control.progress(file.size, file.size)
}

async function bytesOf(file: Blob, at: number): Promise<ArrayBuffer> {
  try {
    return await file.slice(at, at + CHUNK_BYTES).arrayBuffer()
  } catch (cause) {
    throw new RecordingError(
      'truncated',
      'The file can no longer be read. Was it moved or changed? Choose it again.',
      { byte: at },
      cause,
    )
  }
}

/** Time as written → seconds from the first stamp; dividing, not multiplying, keeps whole milliseconds exact. */
function secondsFrom(plan: TablePlan): (stamps: Float64Array) => Float64Array {
  const unit = plan.time?.unit
  if (!unit || unit === 'stamp') return (stamps) => stamps
  const divisor = unit === 'min' ? 1 / SECONDS_PER.min : Math.round(1 / SECONDS_PER[unit])
  let first = NaN
  return (stamps) => {
    for (let i = 0; i < stamps.length; i += 1) {
      const value = stamps[i]!
      if (Number.isNaN(first)) first = value
      stamps[i] = (value - first) / divisor
    }
    return stamps
  }
}

function nothingFound(plan: TablePlan, scanner: TableScanner, slot: number): RecordingError {
  const first = scanner.flaws.find((flaw) => flaw.channel === slot) ?? scanner.flaws[0]
  const column = plan.channels[slot]?.name
  const what =
    scanner.frames === 0
      ? 'No line holds a number in the chosen columns.'
      : column
        ? `The column “${column}” holds no number.`
        : 'The time column holds no time stamp.'
  const example = first?.row === undefined ? '' : ` Line ${first.row}: ${first.reason}.`
  return new RecordingError(
    'no-numbers',
    `${what}${example} Check the delimiter, the decimal mark and the columns.`,
    first?.row === undefined ? {} : { row: first.row },
  )
}

const describePlan = (plan: TablePlan): string =>
  `${plan.channels.length} ${plan.channels.length === 1 ? 'column' : 'columns'}, ${DELIMITER_NAMES[plan.delimiter]}, decimal ${plan.decimal === ',' ? 'comma' : 'point'}`
