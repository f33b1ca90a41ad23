import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import type { Timing } from '@/lib/recordings/types'
import type { RecordingSummary } from './shapes'
import type { ZeroPhaseWay } from './zero-phase'

/** How a run went, as a plot's label says it. */
export function wayWords(way: ZeroPhaseWay | null): string {
  if (way === null) return 'causal'
  return way === 'forward-backward' ? 'forward and backward' : 'delay taken off'
}

/** Jitter above this deserves a word: the filter takes the samples as even. */
const JITTER_CAUTION_PERCENT = 1

export const formatRate = (hertz: number): string => formatHz(hertz, 7)

export function formatBytes(bytes: number): string {
  const [divisor, unit] = bytes >= 1e6 ? [1e6, 'MB'] : bytes >= 1e3 ? [1e3, 'kB'] : [1, 'bytes']
  return `${formatNumber(bytes / divisor, 3)}\u2009${unit}`
}

export const formatCount = (count: number, one: string, many: string): string =>
  `${count.toLocaleString('en').replaceAll(',', '\u2009')} ${count === 1 ? one : many}`

export function formatDuration(seconds: number): string {
  if (seconds < 120) return formatSeconds(seconds)
  const minutes = Math.floor(seconds / 60)
  return minutes < 120
    ? `${minutes} min ${Math.round(seconds - 60 * minutes)} s`
    : `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}

/** A delay with its sign: positive is later. */
export const formatDelay = (seconds: number): string => formatSeconds(Math.abs(seconds) < 5e-13 ? 0 : seconds, 4)

const BASIS: Readonly<Record<Timing['basis'], string>> = {
  header: 'stated in the header',
  stated: 'stated by you',
  resampled: 'resampled evenly',
  'median step': 'from the median time step',
  'mean step': 'from the mean time step',
}

export const rateWords = (timing: Timing): string => `${formatRate(timing.sampleRateHz)}, ${BASIS[timing.basis]}`

/** Jitter in percent and in time; empty when the rate was stated and nothing was measured. */
export function jitterWords(timing: Timing): string {
  if (timing.basis === 'header' || timing.basis === 'resampled') return ''
  if (timing.basis === 'stated' && timing.jitterSeconds === 0) return ''
  if (timing.jitterPercent < 0.001) return 'jitter below 0.001\u2009%'
  const micros = timing.jitterSeconds * 1e6
  return `jitter ${formatNumber(timing.jitterPercent, 2)}\u2009% (${formatNumber(micros, 3)}\u2009µs)`
}

/** What to say of time stamps that are not even. Null when they are. */
export function unevenWords(recording: Pick<RecordingSummary, 'timing' | 'worstRow'>): string | null {
  const { timing, worstRow } = recording
  const parts: string[] = []
  if (timing.jitterPercent > JITTER_CAUTION_PERCENT) {
    const where = worstRow === null ? '' : `, most at line ${worstRow}`
    parts.push(
      `Time steps deviate from 1/${formatRate(timing.sampleRateHz)} by up to ${formatNumber(timing.jitterPercent, 3)}\u2009% (${formatNumber(timing.jitterSeconds * 1e6, 3)}\u2009µs)${where}.`,
    )
    if (timing.basis === 'mean step')
      parts.push(
        `The stamps are written to ${formatSeconds(timing.resolutionSeconds)}; the samples themselves may be even.`,
      )
    else parts.push('A filter takes them as even.')
  }
  if (timing.basis === 'median step' && Math.abs(timing.meanRateHz / timing.sampleRateHz - 1) > 1e-3) {
    parts.push(`Over the whole record the mean rate is ${formatRate(timing.meanRateHz)}.`)
  }
  if (timing.backwardSteps > 0)
    parts.push(`${formatCount(timing.backwardSteps, 'step goes', 'steps go')} backward or nowhere.`)
  if (timing.missingStamps > 0)
    parts.push(`${formatCount(timing.missingStamps, 'row has', 'rows have')} no time stamp.`)
  return parts.length === 0 ? null : parts.join(' ')
}

/** "1-3, 7" as channel indices from 0, or null when it can't be read. Channels are counted from 1. */
export function parseChannels(text: string, count: number): number[] | null {
  const chosen = new Set<number>()
  for (const part of text.split(/[,;\s]+/).filter(Boolean)) {
    const match = /^(\d+)(?:[-–](\d+))?$/.exec(part)
    const from = Number(match?.[1])
    const to = Number(match?.[2] ?? match?.[1])
    if (!match || from < 1 || to > count || from > to) return null
    for (let channel = from; channel <= to; channel += 1) chosen.add(channel - 1)
  }
  return chosen.size === 0 ? null : [...chosen].sort((a, b) => a - b)
}

/** Channel indices as text, runs drawn together: "1–3, 7". */
export function writeChannels(channels: readonly number[]): string {
  const parts: string[] = []
  for (let i = 0; i < channels.length;) {
    let end = i
    while (channels[end + 1] === (channels[end] ?? 0) + 1) end += 1
    const from = (channels[i] ?? 0) + 1
    parts.push(end === i ? String(from) : `${from}–${from + end - i}`)
    i = end + 1
  }
  return parts.join(', ')
}
