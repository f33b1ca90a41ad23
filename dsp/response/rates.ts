import { checkDiscretization } from '../check'
import { designAnalog } from '../design-analog'
import { discretize } from '../discretise/discretize'
import { DesignError } from '../errors'
import type { Filter } from '../forms/filter'
import type { AnalogSpec, DepartureBudget, Method } from '../spec'
import { worstDeparture, worstOnGrid } from './departure'
import type { WorstDeparture } from './departure'
import type { AnalogCurve, Version } from './departure-curve'
import { analogCurve } from './departure-curve'
import { departureGrid } from './departure-grid'
import { frequencyResponse } from './frequency'
import { sampledResponse, sampledSystem } from './sampled'
import { useBandOf } from './use-band'

/** Worst departures of one method against the rate; null where the method refuses the rate, with the reason. */
export interface MethodSweep {
  readonly how: Method
  readonly db: readonly (number | null)[]
  readonly degrees: readonly (number | null)[]
  readonly microseconds: readonly (number | null)[]
  readonly refused: readonly (string | null)[]
}

export interface RateSweep {
  readonly ratesHz: readonly number[]
  readonly fromHz: number
  readonly upToHz: number
  readonly methods: readonly MethodSweep[]
}

export interface RateSweepOptions {
  readonly analog: AnalogSpec
  readonly methods: readonly Method[]
  readonly ratesHz: readonly number[]
  /** Upper end of the band over which a departure is judged, in Hz. */
  readonly upToHz: number
  readonly removeDelay: boolean
}

/** The analog side of a comparison, the same for every rate. */
interface Bench {
  readonly spec: AnalogSpec
  readonly analog: Filter<'s'>
  readonly fromHz: number
  readonly upToHz: number
  readonly curve: AnalogCurve
}

function bench(spec: AnalogSpec, upToHz: number): Bench {
  const analog = designAnalog(spec)
  const { fromHz } = useBandOf(analog)
  if (!(upToHz > fromHz) || !Number.isFinite(upToHz)) {
    throw new DesignError(
      'range',
      'upToHz',
      `The departure must be judged up to a frequency above ${fromHz} Hz, where the filter comes into use.`,
      Math.max(...spec.edgesHz),
    )
  }
  return { spec, analog, fromHz, upToHz, curve: analogCurve(analog, departureGrid(fromHz, upToHz, analog, null, 48)) }
}

/** Where restoreGain makes digital and analog gain equal: DC, or the geometric centre of a band. */
function restoreHz(spec: AnalogSpec): number {
  const [low = 0, high = 0] = spec.edgesHz
  return spec.response === 'bandpass' ? Math.sqrt(low) * Math.sqrt(high) : 0
}

/** The version at one rate: from its state space where its zeros are slow to find, else as designed. */
function versionAt({ spec, analog }: Bench, sampleRateHz: number, how: Method): Version {
  if (how.method === 'step-invariant') {
    checkDiscretization(spec, sampleRateHz, how)
    return { by: 'samples', system: sampledSystem(analog, sampleRateHz, 'step'), gain: 1 }
  }
  if (how.method === 'impulse-invariant') {
    checkDiscretization(spec, sampleRateHz, how)
    const system = sampledSystem(analog, sampleRateHz, 'impulse', how.halfFirstSample === true ? 0.5 : 1)
    if (how.restoreGain !== true) return { by: 'samples', system, gain: 1 }
    const at = [restoreHz(spec)]
    const wanted = frequencyResponse(analog, at)
    const given = sampledResponse(system, at)
    return {
      by: 'samples',
      system,
      gain: Math.hypot(wanted.re[0]!, wanted.im[0]!) / Math.hypot(given.re[0]!, given.im[0]!),
    }
  }
  return { by: 'roots', filter: discretize(spec, sampleRateHz, how) }
}

/** Worst departures at one rate, or the sentence that refuses it. */
function worstAt(side: Bench, sampleRateHz: number, how: Method, removeDelay: boolean): WorstDeparture | string {
  if (side.upToHz >= sampleRateHz / 2) return `${side.upToHz} Hz is not below half of this rate.`
  try {
    const version = versionAt(side, sampleRateHz, how)
    // The departure of a fit ripples in peaks too narrow for a grid that all rates share.
    if (how.method === 'fitted' && version.by === 'roots')
      return worstDeparture(side.analog, version.filter, side.upToHz, { fromHz: side.fromHz, removeDelay })
    return worstOnGrid(side.analog, version, side.curve, removeDelay)
  } catch (error) {
    if (error instanceof DesignError) return error.message
    throw error
  }
}

/**
 * Worst departure of each method from the low end of use up to a frequency, against the sampling rate.
 *
 * The band begins at 0 Hz for low-pass and band-stop filters and at the lower −3 dB point for the others. With `removeDelay` the best
 * constant delay over the band is taken off at each rate. A rate at which the method refuses the specification, or of which
 * `upToHz` isn't below the half, gives null and the reason.
 *
 * @returns for each method as many values as there are rates: |dB|, |degrees|, |microseconds| at their worst
 * @throws DesignError for an analog specification that can't be designed, or `range` for `upToHz`
 */
export function rateSweep({ analog, methods, ratesHz, upToHz, removeDelay }: RateSweepOptions): RateSweep {
  const side = bench(analog, upToHz)
  return {
    ratesHz,
    fromHz: side.fromHz,
    upToHz,
    methods: methods.map((how) => {
      const found = ratesHz.map((rate) => worstAt(side, rate, how, removeDelay))
      const pick = (name: 'db' | 'degrees' | 'microseconds') =>
        found.map((worst) => (typeof worst === 'string' ? null : worst[name]))
      return {
        how,
        db: pick('db'),
        degrees: pick('degrees'),
        microseconds: pick('microseconds'),
        refused: found.map((worst) => (typeof worst === 'string' ? worst : null)),
      }
    }),
  }
}

export interface LowestRateOptions {
  readonly analog: AnalogSpec
  readonly how: Method
  readonly upToHz: number
  readonly budget: DepartureBudget
  /** Rates to look at, lowest and highest, in Hz. */
  readonly searchHz: readonly [number, number]
}

const RATES_PER_DECADE = 40
const ROUNDS = 40

/**
 * The lowest sampling rate that keeps a departure budget up to a frequency.
 *
 * The departure needn't fall steadily as the rate rises, so the search comes down from the highest rate, 40 rates to a decade, to the
 * first that breaks the budget, and halves the step between it and the last that kept it. The answer therefore holds for the rate
 * returned and for every higher rate looked at, up to `searchHz[1]`. With `removeDelay` a rate keeps the budget with its best constant
 * delay, or without one. A rate that the method refuses doesn't keep it.
 *
 * @returns the rate in Hz, or the sentence that says why none in the range does
 * @throws DesignError as rateSweep, and `range` for search limits that are out of order
 */
export function lowestRate(options: LowestRateOptions): { sampleRateHz: number } | { refused: string } {
  const { how, budget, searchHz, upToHz } = options
  const [lowest, highest] = searchHz
  if (!(lowest > 0 && highest > lowest && Number.isFinite(highest))) {
    throw new DesignError(
      'range',
      'searchHz',
      'The rates to search must be given as a lowest and a highest one, in Hz.',
    )
  }
  const side = bench(options.analog, upToHz)
  const complaint = (rate: number): string | null => {
    const ways = budget.removeDelay ? [true, false] : [false]
    let reason = ''
    for (const removeDelay of ways) {
      const worst = worstAt(side, rate, how, removeDelay)
      if (typeof worst === 'string') return `the rate is refused. ${worst}`
      if (worst.db <= budget.magnitudeDb && worst.degrees <= budget.phaseDegrees) return null
      reason ||=
        worst.db > budget.magnitudeDb
          ? `the magnitude is off by ${worst.db.toPrecision(3)} dB at ${worst.atHz.db.toPrecision(4)} Hz`
          : `the phase is off by ${worst.degrees.toPrecision(3)}° at ${worst.atHz.degrees.toPrecision(4)} Hz`
    }
    return reason
  }
  const atTop = complaint(highest)
  if (atTop !== null) return { refused: `Even at ${highest} Hz ${atTop.replace(/\.$/, '')}.` }
  const steps = Math.max(1, Math.ceil(Math.log10(highest / lowest) * RATES_PER_DECADE))
  let kept = highest
  for (let step = 1; step <= steps; step++) {
    let next = step === steps ? lowest : highest * (lowest / highest) ** (step / steps)
    if (complaint(next) === null) {
      kept = next
      continue
    }
    for (let round = 0; round < ROUNDS && kept - next > 1e-9 * kept; round++) {
      const middle = Math.sqrt(kept * next)
      if (complaint(middle) === null) kept = middle
      else next = middle
    }
    break
  }
  return { sampleRateHz: kept }
}
