import { DesignError, isFir, magnitudeDb, type AnyDigital, type Design, type DesignSpec } from '@/dsp'
import { multipliesPerSample } from '@/lib/designs/cost'
import { edgesHzOf } from '@/lib/designs/outline'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { deriveFigures, deriveTrust, statedId } from '../derive'
import { trustText } from '../shell/figures-line'
import { statedDesign } from '../stated-design'

export interface ComparedSpec {
  /** "Version 3"; short, and no two the same. */
  readonly label: string
  /** More about it, where the label doesn't say it. */
  readonly detail?: string
  readonly spec: DesignSpec
}

/** One of those that are compared, computed. Its place gives it its trace. */
export interface Side extends ComparedSpec {
  readonly place: number
  readonly design: Design
}

/** @throws DesignError when the spec makes no filter */
export function sideOf(compared: ComparedSpec, place: number): Side {
  const design = statedDesign(compared.spec)
  if (design instanceof DesignError) throw design
  return { ...compared, place, design }
}

export interface FigureCell {
  readonly text: string
  readonly differs: boolean
  /** This side minus the base where that is a number with a meaning, otherwise empty. */
  readonly change: string
}

export interface FigureRow {
  readonly name: string
  /** In the order of the sides; the base first. */
  readonly cells: readonly FigureCell[]
}

/** The figures of all sides beside each other. */
export function figureRows(sides: readonly Side[]): readonly FigureRow[] {
  const figures = sides.map(figuresOf)
  const [base] = figures
  if (!base) return []
  const row = (name: string, text: (of: Figures) => string, change?: (base: Figures, other: Figures) => string) => ({
    name,
    cells: figures.map((of) => {
      const differs = text(of) !== text(base)
      return { text: text(of), differs, change: differs && change ? change(base, of) : '' }
    }),
  })
  const hertz = (of: (figures: Figures) => number) => (one: Figures, other: Figures) => hertzChange(of(one), of(other))
  const count = (of: (figures: Figures) => number) => (one: Figures, other: Figures) =>
    plus(of(other) - of(one), formatNumber)
  const points = Math.max(...figures.map(({ halfPowerHz }) => halfPowerHz.length))
  const isAtDc = figures.every(({ delayAtHz }) => delayAtHz === 0)
  return [
    row(
      'Sampling rate',
      (f) => formatHz(f.sampleRateHz, 6),
      hertz((f) => f.sampleRateHz),
    ),
    row(
      'Trusted band',
      (f) => f.trusted,
      hertz((f) => f.trustedHz),
    ),
    row(
      isAtDc ? 'Delay at DC' : 'Delay in the pass band',
      (f) => (isAtDc ? formatSeconds(f.delaySeconds) : `${formatSeconds(f.delaySeconds)} at ${placeText(f.delayAtHz)}`),
      (one, other) =>
        one.delayAtHz === other.delayAtHz ? plus(other.delaySeconds - one.delaySeconds, formatSeconds) : '',
    ),
    ...Array.from({ length: points }, (_, k) =>
      row(
        points === 1 ? '−3 dB point' : `−3 dB point ${k + 1}`,
        (f) => (f.halfPowerHz[k] === undefined ? 'none' : formatHz(f.halfPowerHz[k], 5)),
        hertz((f) => f.halfPowerHz[k] ?? Number.NaN),
      ),
    ),
    row(
      'Cost, multiplies a sample',
      (f) => formatNumber(f.multiplies, 7),
      count((f) => f.multiplies),
    ),
    row(
      'Sections',
      (f) => countText(f.sections),
      count((f) => f.sections),
    ),
    ...(figures.some(({ taps }) => Number.isFinite(taps))
      ? [
          row(
            'Taps',
            (f) => countText(f.taps),
            count((f) => f.taps),
          ),
        ]
      : []),
    row('Departure budget', (f) => f.budget),
  ]
}

const placeText = (hertz: number): string => (hertz === 0 ? 'DC' : formatHz(hertz))
const countText = (count: number): string => (Number.isFinite(count) ? formatNumber(count) : 'none')

interface Figures {
  readonly sampleRateHz: number
  readonly trusted: string
  /** Not finite where there is nothing to trust it against. */
  readonly trustedHz: number
  readonly delayAtHz: number
  readonly delaySeconds: number
  readonly halfPowerHz: readonly number[]
  readonly multiplies: number
  /** Not finite for an FIR filter, as its taps aren't for the others. */
  readonly sections: number
  readonly taps: number
  readonly budget: string
}

function figuresOf({ spec, design }: Side): Figures {
  const { reference, analog, digital } = design
  const versions = {
    reference,
    analog,
    digital: [{ id: statedId(spec), filter: digital, stated: true }],
    refused: [],
  }
  const { delayAtHz, delaySeconds } = deriveFigures(spec, versions)
  const [trust] = deriveTrust(spec, versions)
  const { magnitudeDb: decibels, phaseDegrees, removeDelay } = spec.budget
  return {
    sampleRateHz: spec.sampleRateHz,
    trusted: trust ? trustText(trust) : analog ? 'nowhere' : 'no analog original',
    trustedHz: trust ? trust.upToHz : analog ? 0 : Number.NaN,
    delayAtHz,
    delaySeconds,
    halfPowerHz: halfPowerPoints(digital, edgesHzOf(spec)),
    multiplies: multipliesPerSample(digital),
    sections: isFir(digital) ? Number.NaN : digital.sections.length,
    taps: isFir(digital) ? digital.taps.length : Number.NaN,
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
export function halfPowerPoints(filter: AnyDigital, edgesHz: readonly number[]): number[] {
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
  // Designs of many bands, and FIR filters of many taps, turn between any two edges.
  const stops = [0, ...edgesHz, fold].sort((one, other) => one - other)
  for (const [at, from] of stops.entries())
    for (let k = 1; k < 100; k++) grid.push(from + (((stops[at + 1] ?? from) - from) * k) / 100)
  return Float64Array.from(grid.filter((hertz) => hertz >= 0 && hertz <= fold)).sort()
}
