import { formatFixed, formatHz, formatNumber } from '@/lib/format/quantity'
import type { Scale, Span } from './scale'

/* Ticks at the multiples that each quantity is read in, as close together as their labels allow. */

export interface Tick {
  readonly value: number
  /** null: a grid line without words. */
  readonly label: string | null
  readonly strong: boolean
}

const decade = (steps: readonly number[], from: number, to: number): number[] => {
  const out: number[] = []
  for (let power = from; power <= to; power++) for (const step of steps) out.push(step * 10 ** power)
  return out
}

/** Decibels are read in slopes (6, 12 dB an octave; 20 dB a decade), degrees in parts of a turn. */
const stepsBy = {
  decibels: [...decade([1, 2, 5], -4, -1), 1, 2, 3, 6, 12, 20, 40, 60, 100, 200, 400, 1000, 2000],
  degrees: [...decade([1, 2, 5], -4, 0), 10, 15, 30, 45, 90, 180, 360, 720, 1440, 3600, 7200, 14400, 36000],
  plain: decade([1, 2, 5], -15, 12),
} as const

export type Quantity = keyof typeof stepsBy

/** The smallest step of that quantity which keeps ticks `gapPixels` apart. */
function tickStep(quantity: Quantity, scale: Scale, gapPixels: number): number {
  const perPixel = Math.abs(scale.domain[1] - scale.domain[0]) / Math.abs(scale.range[1] - scale.range[0])
  const steps = stepsBy[quantity]
  return steps.find((step) => step / perPixel >= gapPixels) ?? steps[steps.length - 1] ?? 1
}

const MOST_TICKS = 1000

/** Multiples of `step` inside the span, ends included. */
export function multiples(step: number, [a, b]: Span): number[] {
  const low = Math.min(a, b)
  const high = Math.max(a, b)
  const slack = step * 1e-9
  const values: number[] = []
  const last = Math.floor((high + slack) / step)
  // Whatever the span: an axis never needs more, and memory has an end.
  if (last - low / step > MOST_TICKS) return []
  // toPrecision: 3 × 0.1 is 0.3, not 0.30000000000000004.
  for (let k = Math.ceil((low - slack) / step); k <= last; k++)
    values.push(k === 0 ? 0 : Number((k * step).toPrecision(12)))
  return values
}

/** Ticks of a value axis; `perUnit` divides before writing (0.001 for milliseconds on an axis in seconds). */
export function valueTicks(quantity: Quantity, scale: Scale, gapPixels: number, perUnit = 1): Tick[] {
  const inUnit: Scale =
    perUnit === 1 ? scale : { ...scale, domain: [scale.domain[0] / perUnit, scale.domain[1] / perUnit] }
  const step = tickStep(quantity, inUnit, gapPixels)
  const decimals = decimalsOf(step)
  return multiples(step, inUnit.domain).map((value) => ({
    value: value * perUnit,
    label: value === 0 ? '0' : formatFixed(value, decimals),
    strong: value === 0,
  }))
}

/** Decimals that show a step exactly: 0.25 → 2, 20 → 0. */
export function decimalsOf(step: number): number {
  const text = Number(step.toPrecision(6)).toExponential()
  const [mantissa = '1', exponent = '0'] = text.split('e')
  const digits = mantissa.replace('-', '').replace('.', '').length - 1
  return Math.max(0, digits - Number(exponent))
}

export interface FrequencyAxis {
  /** In the unit that is written: hertz, or parts of the sampling rate. */
  readonly scale: Scale
  readonly normalised: boolean
}

const frequencyLabel = (value: number, normalised: boolean): string =>
  normalised ? `${formatNumber(value, 3)}\u2009fs` : formatHz(value, 4)

/** Lines and labels of the frequency axis; values in the unit of `axis.scale`. */
export function frequencyTicks({ scale, normalised }: FrequencyAxis, labelPixels = 58): Tick[] {
  const [from, to] = scale.domain
  if (scale.kind === 'log' && to / from > 3.5) return decadeTicks(scale, normalised, labelPixels)
  const span: Scale = { ...scale, kind: 'linear' }
  const step = tickStep('plain', span, labelPixels)
  const strong = step * 5
  // Under a logarithmic axis the lower ticks stand further apart, so the linear estimate is a safe one only for the upper end.
  const ticks = multiples(step, scale.domain)
  let lastLabel = Number.NEGATIVE_INFINITY
  return ticks.map((value) => {
    const fits = scale.toPixel(value) - lastLabel >= labelPixels * 0.95
    if (fits) lastLabel = scale.toPixel(value)
    const isStrong = Math.abs(value / strong - Math.round(value / strong)) < 1e-9
    return { value, label: fits ? frequencyLabel(value, normalised) : null, strong: isStrong }
  })
}

function decadeTicks(scale: Scale, normalised: boolean, labelPixels: number): Tick[] {
  const [from, to] = scale.domain
  const pixelsPerDecade = Math.abs(scale.range[1] - scale.range[0]) / Math.log10(to / from)
  // Room that the tightest pair of each set needs, in decades.
  const sets: readonly { digits: readonly number[]; tightest: number }[] = [
    { digits: [1, 2, 3, 4, 5, 6, 7, 8], tightest: Math.log10(8 / 7) },
    { digits: [1, 2, 3, 5, 7], tightest: Math.log10(7 / 5) },
    { digits: [1, 2, 5], tightest: Math.log10(2) },
    { digits: [1, 3], tightest: Math.log10(3) },
  ]
  const digits = sets.find((set) => set.tightest * pixelsPerDecade >= labelPixels)?.digits ?? [1]
  const everyNthDecade = Math.max(1, Math.ceil(labelPixels / pixelsPerDecade))
  const drawMinor = pixelsPerDecade > 40
  const ticks: Tick[] = []
  for (let power = Math.floor(Math.log10(from)); power <= Math.ceil(Math.log10(to)); power++) {
    for (let digit = 1; digit <= 9; digit++) {
      const value = Number((digit * 10 ** power).toPrecision(12))
      if (value < from * (1 - 1e-9) || value > to * (1 + 1e-9)) continue
      if (digit > 1 && !drawMinor) continue
      const labelled = digits.includes(digit) && (digit > 1 || power % everyNthDecade === 0)
      ticks.push({ value, label: labelled ? frequencyLabel(value, normalised) : null, strong: digit === 1 })
    }
  }
  return ticks
}

/** The next larger of 1, 1.2, 1.5, 2, 3, 4, 5, 6, 8, 10 × 10ᵏ: rounds the end of an axis up without wasting half of it. */
export function roundedUp(value: number): number {
  if (!(value > 0) || !Number.isFinite(value)) return 1
  const power = 10 ** Math.floor(Math.log10(value))
  const digit = [1, 1.2, 1.5, 2, 3, 4, 5, 6, 8, 10].find((candidate) => candidate * power >= value * (1 - 1e-9)) ?? 10
  return Number((digit * power).toPrecision(12))
}

/** The largest of 1, 2, 5 × 10ᵏ that is no more than `value`: what a drag is rounded to. */
export function roundedStep(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value))
  const digit = [5, 2, 1].find((candidate) => candidate * power <= value * (1 + 1e-9)) ?? 1
  return Number((digit * power).toPrecision(12))
}

export const roundedTo = (value: number, step: number): number =>
  Number((Math.round(value / step) * step).toPrecision(12))
