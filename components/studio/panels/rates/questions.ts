import {
  DesignError,
  lowestRate,
  rateSweep,
  type AnalogSpec,
  type DepartureBudget,
  type Method,
  type FamilyDesign,
  type MethodName,
} from '@/dsp'
import { methodNames } from '@/lib/designs/words'
import { methodAsShown } from '../../derive'
import { statedRate } from './stated-rate'

/*
 * What the panel asks of the numbers. The answers don't depend on the rate that the design runs at: pulling that line asks nothing.
 */

/** One analog prototype by every method, judged up to one frequency. */
export interface Subject {
  readonly analog: AnalogSpec
  readonly methods: readonly Method[]
  readonly upToHz: number
}

export interface SweepQuestion extends Subject {
  readonly removeDelay: boolean
  readonly ratesHz: Float64Array
}

export interface LowestQuestion extends Subject {
  readonly budget: DepartureBudget
  readonly searchHz: readonly [number, number]
}

export const departureUnits = ['db', 'degrees', 'microseconds'] as const
export type DepartureUnit = (typeof departureUnits)[number]

/** The worst departure at each rate; NaN where the method refuses the rate. */
export type RateCurve = { readonly id: MethodName; readonly ratesHz: Float64Array } & Readonly<
  Record<DepartureUnit, Float64Array>
>

export type LowestRate =
  { readonly id: MethodName; readonly sampleRateHz: number } | { readonly id: MethodName; readonly refused: string }

export const subjectOf = (spec: FamilyDesign, upToHz: number): Subject => ({
  analog: spec.analog,
  // Fitted to just where it is judged, unless the statement says otherwise: that doesn't change with the rate.
  methods: methodNames.map((id) =>
    id === 'fitted' && spec.how.method !== id ? { method: id, upToHz } : methodAsShown(spec, id),
  ),
  upToHz,
})

export const highestEdge = (analog: AnalogSpec): number => Math.max(...analog.edgesHz)

/** Just above twice the highest frequency that matters: no rate below it can be judged. */
const leastRate = ({ analog, upToHz }: Pick<Subject, 'analog' | 'upToHz'>) => 2 * Math.max(highestEdge(analog), upToHz)

const SEARCHED_MULTIPLE = 1000
const DRAWN_MULTIPLE = 100

/** The rates among which the lowest is looked for. */
export const searchSpan = (subject: Pick<Subject, 'analog' | 'upToHz'>): readonly [number, number] => [
  leastRate(subject) * 1.0005,
  Math.max(SEARCHED_MULTIPLE * highestEdge(subject.analog), 2 * leastRate(subject)),
]

/** The rates that are drawn: wide enough for the rate the design runs at. */
export function drawnSpan(
  subject: Pick<Subject, 'analog' | 'upToHz'>,
  sampleRateHz: number,
): readonly [number, number] {
  const least = leastRate(subject)
  const usual = Math.max(DRAWN_MULTIPLE * highestEdge(subject.analog), 4 * least)
  return [least * 1.03, Math.max(usual, widened(sampleRateHz * 1.2))]
}

/** Grown in octaves, so that a rate being pulled doesn't shift the axis all the time. */
const widened = (hertz: number): number => 2 ** Math.ceil(Math.log2(hertz))

const SWEEP_POINTS = 121

/** Evenly spaced on the logarithmic axis. */
export function sweepRates([from, to]: readonly [number, number]): Float64Array {
  return Float64Array.from({ length: SWEEP_POINTS }, (_, k) => from * (to / from) ** (k / (SWEEP_POINTS - 1)))
}

/** NaN where the method refuses the rate. */
export function askSweep({ ratesHz, ...question }: SweepQuestion): readonly RateCurve[] {
  const { methods } = rateSweep({ ...question, ratesHz: [...ratesHz] })
  const filled = (values: readonly (number | null)[]) => Float64Array.from(values, (value) => value ?? Number.NaN)
  return methods.flatMap(({ db, degrees, microseconds }, index) => {
    const how = question.methods[index]
    if (!how) return []
    return { id: how.method, ratesHz, db: filled(db), degrees: filled(degrees), microseconds: filled(microseconds) }
  })
}

/** The lowest rate as one would state it: rounded up, which dsp vouches for, since its answer holds for higher rates too. */
export function askLowest({ analog, upToHz, budget, searchHz }: LowestQuestion, how: Method): LowestRate {
  const found = lowestRate({ analog, how, upToHz, budget, searchHz })
  if ('refused' in found)
    return { id: how.method, refused: refusalAt(searchHz[1], analog, upToHz, how) ?? found.refused }
  return { id: how.method, sampleRateHz: statedRate(found.sampleRateHz) }
}

/** Why a method refuses even the highest rate, in its own words; null when it doesn't, and only the budget is broken. */
function refusalAt(rateHz: number, analog: AnalogSpec, upToHz: number, how: Method): string | null {
  const { methods } = rateSweep({ analog, methods: [how], ratesHz: [rateHz], upToHz, removeDelay: false })
  return methods[0]?.refused[0] ?? null
}

/** Why a departure can't be judged up to a frequency, or null when it can. */
export function reasonAgainst(analog: AnalogSpec, upToHz: number): string | null {
  try {
    rateSweep({ analog, methods: [], ratesHz: [], upToHz, removeDelay: false })
    return null
  } catch (error) {
    if (error instanceof DesignError) return error.message
    throw error
  }
}

/** Octaves above its edge up to which a high-pass filter is judged at first: it is in use from the edge upwards only. */
const HIGHPASS_OCTAVES = 2

/** Up to where a prototype is judged at first: its highest edge, or two octaves of pass band above the edge of a high-pass. */
export function usualUpTo(analog: AnalogSpec): number {
  let hertz = highestEdge(analog) * (analog.response === 'highpass' ? 2 ** HIGHPASS_OCTAVES : 1)
  // The stop edge of a steep high-pass may lie more octaves below its band.
  for (let octave = 0; octave < 12 && reasonAgainst(analog, hertz) !== null; octave++) hertz *= 2
  return hertz
}
