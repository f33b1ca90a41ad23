import { DesignError } from '../errors'
import { isFir, type DigitalFilter, type Filter, type FirFilter } from '../forms/filter'
import { createRunner } from '../signal/run'
import type { AnyFilter, RootFilter } from './factors'
import { frequencyResponse } from './frequency'
import { stepResponse } from './time'

export interface StepFigures {
  /** Where the step response ends: the gain at 0 Hz. */
  readonly finalValue: number
  /** What deviations are measured by: |finalValue|, or the largest |response| where the final value is less than a twentieth of that. */
  readonly reference: number
  /** How far the response passes its final value, as a part of the reference; 0 when it never does. */
  readonly overshoot: number
  /** Time after which it stays within a hundredth, a fiftieth and a twentieth of the reference, in seconds; Infinity if not in reach. */
  readonly settlingSeconds: { readonly within1: number; readonly within2: number; readonly within5: number }
}

/** Values looked at in one pass over the response of an analog filter, and at most of a digital one. */
const ANALOG_POINTS = 16_384
const DIGITAL_MOST = 2 ** 22
const BLOCK = 8192
const BANDS = [0.01, 0.02, 0.05] as const

/** Slowest decay of a filter: 1/s, or per sample. */
function slowestDecay(filter: RootFilter): number {
  const rates = filter.poles.map(({ re, im }) => (filter.domain === 's' ? -re : -Math.log(Math.hypot(re, im))))
  const slowest = Math.min(...rates)
  if (!(slowest > 0)) {
    throw new DesignError('unstable', 'poles', 'The filter is not stable, so its step response doesn’t settle.')
  }
  return slowest
}

/** A response goes on for a few time constants of its slowest pole, and longer for each pole that repeats it. */
const horizonOf = (filter: RootFilter, decay: number): number => (16 + 2 * filter.poles.length) / decay

interface Scan {
  readonly largest: number
  readonly beyond: number
  /** Index of the last value outside each band, −1 for none. */
  readonly last: readonly [number, number, number]
}

/** Looks through values for the last that lie outside bands of `reference` about `end`, and for the largest overshoot. */
function scan(values: Float64Array, end: number, reference: number, from: number, before: Scan): Scan {
  const last: [number, number, number] = [...before.last]
  let { largest, beyond } = before
  for (let n = 0; n < values.length; n++) {
    const off = values[n]! - end
    const size = Math.abs(values[n]!)
    if (size > largest) largest = size
    const past = end >= 0 ? off : -off
    if (past > beyond) beyond = past
    const deviation = Math.abs(off)
    for (let band = 0; band < 3; band++) if (deviation > BANDS[band]! * reference) last[band] = from + n
  }
  return { largest, beyond, last }
}

const nothing: Scan = { largest: 0, beyond: 0, last: [-1, -1, -1] }

/** A filter that blocks 0 Hz, or nearly, is measured by the largest value of its step response. */
const referenceOf = (end: number, largest: number): number =>
  Math.abs(end) >= 0.05 * largest ? Math.abs(end) : largest

function figures(end: number, seen: Scan, within: readonly [number, number, number]): StepFigures {
  const reference = referenceOf(end, seen.largest)
  return {
    finalValue: end,
    reference,
    overshoot: reference > 0 && reference === Math.abs(end) ? Math.max(0, seen.beyond / reference) : 0,
    settlingSeconds: { within1: within[0], within2: within[1], within5: within[2] },
  }
}

/** The crossing into a band after time `start`, found on a finer grid of one coarse step and linearly between its points. */
function crossing(filter: Filter<'s'>, start: number, step: number, end: number, band: number): number {
  const count = 129
  const stepSeconds = step / (count - 1)
  const { values } = stepResponse(filter, { count, stepSeconds, startSeconds: start })
  let last = 0
  for (let n = 0; n < count; n++) if (Math.abs(values[n]! - end) > band) last = n
  if (last === count - 1) return start + step
  const outside = Math.abs(values[last]! - end)
  const inside = Math.abs(values[last + 1]! - end)
  const part = outside > inside ? (outside - band) / (outside - inside) : 0
  return start + (last + Math.min(Math.max(part, 0), 1)) * stepSeconds
}

function analogFigures(filter: Filter<'s'>): StepFigures {
  const end = frequencyResponse(filter, [0]).re[0]!
  if (filter.poles.length === 0) return figures(end, nothing, [0, 0, 0])
  const count = ANALOG_POINTS
  let stepSeconds = horizonOf(filter, slowestDecay(filter)) / (count - 1)
  let { values } = stepResponse(filter, { count, stepSeconds })
  const look = (): Scan => {
    const largest = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
    return scan(values, end, referenceOf(end, largest), 0, nothing)
  }
  let seen = look()
  // Most of the horizon may lie long after the 1 % point: look again, closer.
  const needed = Math.max(64, 2 * (seen.last[0] + 1))
  if (needed < count / 2) {
    stepSeconds *= needed / count
    values = stepResponse(filter, { count, stepSeconds }).values
    seen = look()
  }
  const reference = referenceOf(end, seen.largest)
  const within = BANDS.map((band, i) => {
    const last = seen.last[i]!
    if (last < 0) return 0
    return crossing(filter, last * stepSeconds, stepSeconds, end, band * reference)
  })
  return figures(end, seen, [within[0]!, within[1]!, within[2]!])
}

function digitalFigures(filter: DigitalFilter): StepFigures {
  const end = frequencyResponse(filter, [0]).re[0]!
  if (filter.poles.length === 0) return figures(end, nothing, [0, 0, 0])
  const horizon = Math.min(Math.ceil(horizonOf(filter, slowestDecay(filter))) + filter.poles.length + 1, DIGITAL_MOST)
  const input = new Float64Array(BLOCK).fill(1)
  const output = new Float64Array(BLOCK)
  const pass = (reference: number): Scan => {
    const runner = createRunner(filter.sections)
    let seen = nothing
    for (let from = 0; from < horizon; from += BLOCK) {
      runner.process(input, output)
      seen = scan(output, end, reference, from, seen)
    }
    return seen
  }
  const first = pass(Math.abs(end))
  const reference = referenceOf(end, first.largest)
  const seen = reference === Math.abs(end) ? first : pass(reference)
  const within = seen.last.map((last) => (last >= horizon - 1 ? Infinity : (last + 1) / filter.sampleRateHz))
  return figures(end, seen, [within[0]!, within[1]!, within[2]!])
}

/** After as many samples as there are taps the response stands still. */
function finiteFigures(filter: FirFilter): StepFigures {
  const { values } = stepResponse(filter, { count: filter.taps.length + 1 })
  const end = values.at(-1)!
  const first = scan(values, end, Math.abs(end), 0, nothing)
  const seen = scan(values, end, referenceOf(end, first.largest), 0, nothing)
  const within = seen.last.map((last) => (last + 1) / filter.sampleRateHz)
  return figures(end, seen, [within[0]!, within[1]!, within[2]!])
}

/**
 * Figures of the step response: final value, overshoot, and the times after which it stays within 1, 2 and 5 % for good.
 *
 * Analog: from the exact step response at 16,384 instants, with the crossing sought between two of them; a filter that rings for more than
 * a thousand cycles is good to about a cycle. Digital: counted on the cascade as it runs, in whole samples, up to four million of them.
 *
 * @throws DesignError `unstable` for a pole on or beyond the axis or circle, `improper`
 */
export function stepFigures(filter: AnyFilter): StepFigures {
  if (isFir(filter)) return finiteFigures(filter)
  return filter.domain === 's' ? analogFigures(filter) : digitalFigures(filter)
}

/**
 * Time in seconds after which the step response stays within a part of its final value (of its peak, where it ends at 0).
 * @param within 0.01, 0.02 or 0.05
 * @throws DesignError as {@link stepFigures}
 */
export function settlingTime(filter: AnyFilter, within: 0.01 | 0.02 | 0.05 = 0.01): number {
  const { settlingSeconds } = stepFigures(filter)
  if (within === 0.05) return settlingSeconds.within5
  return within === 0.02 ? settlingSeconds.within2 : settlingSeconds.within1
}
