import { designFromSpec, magnitudeDb, type Design, type DesignSpec, type DigitalFilter } from '@/dsp'
import { multipliesPerSample } from '@/lib/designs/cost'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { deriveFigures, deriveTrust } from '../derive'
import { trustText } from '../shell/figures-line'

/** One of the two that are compared, computed. */
export interface Side {
  readonly label: string
  readonly spec: DesignSpec
  readonly design: Design
}

/** @throws DesignError when the spec makes no filter */
export const sideOf = ({ label, spec }: { label: string; spec: DesignSpec }): Side => ({
  label,
  spec,
  design: designFromSpec(spec),
})

export interface FigureRow {
  readonly name: string
  readonly left: string
  readonly right: string
  /** Right minus left where that is a number with a meaning, otherwise empty. */
  readonly change: string
  readonly differs: boolean
}

/** The figures of two designs beside each other. */
export function figureRows(left: Side, right: Side): readonly FigureRow[] {
  const [one, other] = [figuresOf(left), figuresOf(right)]
  const row = (name: string, of: (figures: Figures) => string, change: string): FigureRow => ({
    name,
    left: of(one),
    right: of(other),
    change: of(one) === of(other) ? '' : change,
    differs: of(one) !== of(other),
  })
  const points = Math.max(one.halfPowerHz.length, other.halfPowerHz.length)
  const delayName = one.delayAtHz === 0 && other.delayAtHz === 0 ? 'Delay at DC' : 'Delay in the pass band'
  return [
    row('Sampling rate', (f) => formatHz(f.sampleRateHz, 6), hertzChange(one.sampleRateHz, other.sampleRateHz)),
    row('Trusted band', (f) => f.trusted, hertzChange(one.trustedHz, other.trustedHz)),
    row(
      delayName,
      (f) =>
        f.delayAtHz === 0
          ? formatSeconds(f.delaySeconds)
          : `${formatSeconds(f.delaySeconds)} at ${formatHz(f.delayAtHz)}`,
      one.delayAtHz === other.delayAtHz ? plus(other.delaySeconds - one.delaySeconds, formatSeconds) : '',
    ),
    ...Array.from({ length: points }, (_, k) =>
      row(
        points === 1 ? '−3 dB point' : `−3 dB point ${k + 1}`,
        (f) => (f.halfPowerHz[k] === undefined ? 'none' : formatHz(f.halfPowerHz[k], 5)),
        hertzChange(one.halfPowerHz[k] ?? Number.NaN, other.halfPowerHz[k] ?? Number.NaN),
      ),
    ),
    row(
      'Cost, multiplies a sample',
      (f) => formatNumber(f.multiplies),
      plus(other.multiplies - one.multiplies, formatNumber),
    ),
    row('Sections', (f) => formatNumber(f.sections), plus(other.sections - one.sections, formatNumber)),
    row('Departure budget', (f) => f.budget, ''),
  ]
}

interface Figures {
  readonly sampleRateHz: number
  readonly trusted: string
  readonly trustedHz: number
  readonly delayAtHz: number
  readonly delaySeconds: number
  readonly halfPowerHz: readonly number[]
  readonly multiplies: number
  readonly sections: number
  readonly budget: string
}

function figuresOf({ spec, design }: Side): Figures {
  const versions = {
    analog: design.analog,
    digital: [{ id: spec.how.method, filter: design.digital, stated: true }],
    refused: [],
  }
  const { delayAtHz, delaySeconds } = deriveFigures(spec, versions)
  const [trust] = deriveTrust(spec, versions)
  const { magnitudeDb: decibels, phaseDegrees, removeDelay } = spec.budget
  return {
    sampleRateHz: spec.sampleRateHz,
    trusted: trust ? trustText(trust) : 'nowhere',
    trustedHz: trust ? trust.upToHz : 0,
    delayAtHz,
    delaySeconds,
    halfPowerHz: halfPowerPoints(design.digital, spec.analog.edgesHz),
    multiplies: multipliesPerSample(design.digital),
    sections: design.digital.sections.length,
    budget: `${formatNumber(decibels)}\u2009dB, ${formatNumber(phaseDegrees)}°${removeDelay ? ', best delay removed' : ''}`,
  }
}

function plus(change: number, format: (value: number) => string): string {
  if (!Number.isFinite(change)) return ''
  return change > 0 ? `+${format(change)}` : format(change)
}

const hertzChange = (one: number, other: number) => plus(other - one, (hertz) => formatHz(hertz, 3))

const halfPowerDb = 10 * Math.log10(2)

/**
 * Frequencies in Hz at which the level crosses −3.01 dB below its peak, rising; at most four. Crossings are bracketed on a grid that is
 * dense around the edges, then bisected to the last bits.
 */
export function halfPowerPoints(filter: DigitalFilter, edgesHz: readonly number[]): number[] {
  const fold = filter.sampleRateHz / 2
  const grid = searchGrid(edgesHz, fold)
  const levels = magnitudeDb(filter, grid)
  const limit = Math.max(...levels) - halfPowerDb
  const at = (hertz: number) => magnitudeDb(filter, [hertz])[0] ?? Number.NaN
  const points: number[] = []
  for (let k = 1; k < grid.length && points.length < 4; k++) {
    const isAbove = (levels[k - 1] ?? 0) >= limit
    if (isAbove === (levels[k] ?? 0) >= limit) continue
    let [low, high] = [grid[k - 1] ?? 0, grid[k] ?? 0]
    for (let step = 0; step < 60; step++) {
      const middle = (low + high) / 2
      if (at(middle) >= limit === isAbove) low = middle
      else high = middle
    }
    points.push((low + high) / 2)
  }
  return points
}

function searchGrid(edgesHz: readonly number[], fold: number): Float64Array {
  const [first = fold / 2, second = first] = edgesHz
  const grid = [0, fold]
  const from = Math.log(Math.min(first, fold) / 1000)
  for (let k = 0; k <= 600; k++) grid.push(Math.exp(from + ((Math.log(fold) - from) * k) / 600))
  const width = second > first ? second - first : first
  for (let k = -200; k <= 400; k++) grid.push(first + (width * k) / 200)
  return Float64Array.from(grid.filter((hertz) => hertz >= 0 && hertz <= fold)).sort()
}
