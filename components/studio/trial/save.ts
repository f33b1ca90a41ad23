import { RecordingError } from '@/lib/recordings/errors'
import { writeTable, type WrittenColumn } from '@/lib/recordings/table/write'
import type { ChannelInfo, FrameSource, TaskControl } from '@/lib/recordings/types'
import { writeWav } from '@/lib/recordings/wav/write'
import type { SavedFile, SaveRequest } from './shapes'

/** The largest sample that 24 bits hold, as a fraction of full scale. */
const LARGEST_24_BIT = 8_388_607 / 8_388_608

export interface Savable {
  readonly name: string
  readonly sampleRateHz: number
  readonly channels: readonly ChannelInfo[]
  readonly before: FrameSource
  readonly after: FrameSource
  /** Channels that were run, in the order of `after`. */
  readonly run: readonly number[]
  /** Greatest magnitude over all channels as they will be written. */
  readonly least: number
  readonly greatest: number
  readonly missing: number
}

/** Writes the result: every channel, those that were run as they came out, the others as they were. */
export async function saveResult(result: Savable, request: SaveRequest, control: TaskControl): Promise<SavedFile> {
  const stem = result.name.replace(/\.[^.]{1,5}$/, '').replace(/[^\p{L}\p{N} ._-]+/gu, '_') || 'recording'
  if (request.format === 'csv') {
    const blob = await writeTable(tableColumns(result), result.before.frames, result.sampleRateHz, control)
    return {
      blob,
      name: `${stem}-filtered.csv`,
      note: 'Comma, decimal point, one row a sample; every number reads back exactly.',
    }
  }
  const { scale, note } = scaleFor(result, request)
  const blob = await writeWav(mixed(result), result.sampleRateHz, { format: request.format, scale }, control)
  return { blob, name: `${stem}-filtered.wav`, note: [unrunNote(result), note].filter(Boolean).join(' ') }
}

const titled = (channel: ChannelInfo, word: string): string =>
  [channel.name, word, channel.unit === '' ? '' : `[${channel.unit}]`].filter(Boolean).join(' ')

function tableColumns(result: Savable): WrittenColumn[] {
  return result.channels.flatMap((info, channel) => {
    const at = result.run.indexOf(channel)
    if (at < 0) return [{ title: titled(info, ''), source: result.before, channel }]
    return [
      { title: titled(info, 'before'), source: result.before, channel },
      { title: titled(info, 'after'), source: result.after, channel: at },
    ]
  })
}

/** All channels in their order, those that were run replaced by what came out. */
function mixed(result: Savable): FrameSource {
  return {
    frames: result.before.frames,
    channelCount: result.channels.length,
    async read(startFrame, channels, outs) {
      const untouched = channels.flatMap((channel, k) => (result.run.includes(channel) ? [] : [k]))
      const run = channels.flatMap((channel, k) => (result.run.includes(channel) ? [k] : []))
      if (untouched.length > 0) await result.before.read(startFrame, pick(channels, untouched), pick(outs, untouched))
      if (run.length > 0) {
        const positions = pick(channels, run).map((channel) => result.run.indexOf(channel))
        await result.after.read(startFrame, positions, pick(outs, run))
      }
    },
  }
}

const pick = <Item>(items: readonly Item[], at: readonly number[]): Item[] =>
  at.flatMap((k) => (k < items.length ? [items[k]!] : []))

function scaleFor(result: Savable, request: SaveRequest): { scale: number; note: string } {
  if (request.format !== 'int24')
    return {
      scale: 1,
      note: request.format === 'float64' ? 'Samples in full double precision.' : 'Samples rounded to 32-bit floats.',
    }
  if (result.missing > 0) {
    throw new RecordingError(
      'cannot-save',
      `${result.missing} samples have no value, and 24-bit integers can't say so. Save as float or CSV, or fill the gaps.`,
    )
  }
  if (result.greatest <= LARGEST_24_BIT && result.least >= -1)
    return { scale: 1, note: 'Samples rounded to 24 bits, full scale ±1.' }
  const peak = Math.max(result.greatest / LARGEST_24_BIT, -result.least)
  const shown = Number(peak.toPrecision(4))
  if (request.beyondFullScale === 'refuse') {
    throw new RecordingError(
      'cannot-save',
      `The samples reach ${shown} times the full scale of 24 bits, so they would be clipped. Save as float, or let them be scaled to fit.`,
    )
  }
  return { scale: 1 / peak, note: `Scaled to fit: every sample was divided by ${peak}.` }
}

const unrunNote = (result: Savable): string => {
  const count = result.channels.length - result.run.length
  return count === 0
    ? ''
    : `${count === 1 ? 'One channel was' : `${count} channels were`} not run and stand as they were.`
}
