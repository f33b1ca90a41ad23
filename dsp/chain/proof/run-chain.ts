import { isFir, type Filter } from '../../forms/filter'
import { seededNoise } from '../../numeric/random'
import type { ChainPart, ComputedChain, ComputedStage } from '../chain'
import type { ConverterStage } from '../spec'
import { chainUnits } from '../units'
import { runAnalog } from './analog-run'
import { quantise, runAveraging, type Quantised } from './convert'
import { integratePeriodic, keepEvery, runCicPeriodic, runSectionsPeriodic, runTapsPeriodic } from './digital-run'

/*
 * The stages of a chain, run on a signal: what stands here knows filters by their roots, sections and taps, and no response.
 */

/** All analog parts of a chain in one filter; null where there is none. */
export function analogOfChain(chain: ComputedChain): Filter<'s'> | null {
  const filters = chain.stages.flatMap(({ parts }) =>
    parts.flatMap((part) => (part.kind === 'analog' ? [part.filter] : [])),
  )
  if (filters.length === 0) return null
  return {
    domain: 's',
    zeros: filters.flatMap(({ zeros }) => zeros),
    poles: filters.flatMap(({ poles }) => poles),
    gain: filters.reduce((gain, filter) => gain * filter.gain, 1),
  }
}

export const sensitivityOf = ({ stages }: ComputedChain): number => {
  const stage = stages[0]?.stage
  return stage?.kind === 'sensor' ? stage.sensitivity : 1
}

export function converterOf(chain: ComputedChain): ConverterStage {
  const stage = chain.stages[chain.converterIndex]?.stage
  if (stage?.kind !== 'converter') throw new Error('A computed chain has a converter.')
  return stage
}

export const averagingOrderOf = (chain: ComputedChain): number => converterOf(chain).averaging?.order ?? 0

/**
 * Sensor's unit in, volts at the converter out, before it rounds: the analog stages in time, then the running mean of an averaging converter,
 * then every K-th instant. Yields input samples as they are done.
 *
 * @param input one period: spline coefficients where there are analog stages, else samples
 */
export function* runAhead(
  chain: ComputedChain,
  input: Float64Array,
  inputRateHz: number,
): Generator<number, Float64Array> {
  const filter = analogOfChain(chain)
  const steps = Math.round(inputRateHz / chain.converterRateHz)
  const felt = filter === null ? input : yield* runAnalog(filter, input, inputRateHz)
  const order = averagingOrderOf(chain)
  const meant = order === 0 ? felt : runAveraging(felt, steps, order)
  const sensitivity = sensitivityOf(chain)
  return keepEvery(meant, steps).map((value) => value * sensitivity)
}

/** The converter: its steps, or noise of the density that was measured, drawn from the seed. @throws DesignError `too-few-bits` */
export function runConverter(chain: ComputedChain, volts: Float64Array, seed: number): Quantised {
  const { resolution, fullScaleVolts } = converterOf(chain)
  if (resolution.by === 'bits') {
    return quantise(volts, resolution.bits, fullScaleVolts, `stages.${chain.converterIndex}.resolution.bits`)
  }
  const noise = seededNoise(seed)
  const deviation = resolution.voltsPerRootHz * Math.sqrt(chain.converterRateHz / 2)
  const added = volts.map(() => deviation * noise())
  return { samples: volts.map((value, n) => value + added[n]!), added }
}

function runPart(part: ChainPart, period: Float64Array): Float64Array {
  switch (part.kind) {
    case 'digital':
      return isFir(part.filter)
        ? runTapsPeriodic(part.filter.taps, period)
        : runSectionsPeriodic(part.filter.sections, period)
    case 'integration':
      return integratePeriodic(period, part.times, part.sampleRateHz)
    case 'cic':
      return runCicPeriodic(part, period)
    case 'analog':
    case 'averaging':
      return period
  }
}

/** SI units of what comes in over those of what goes out; 1 but for an integrating stage that changes its unit. */
const unitFactor = (before: ComputedStage, stage: ComputedStage): number =>
  stage.stage.kind === 'shape' ? chainUnits[before.unit].si / chainUnits[stage.unit].si : 1

/** Volts of the converter in, stored samples in the chain's unit out. Yields behind each stage. */
export function* runBehind(chain: ComputedChain, volts: Float64Array): Generator<void, Float64Array> {
  const sensitivity = sensitivityOf(chain)
  let signal: Float64Array = volts.map((value) => value / sensitivity)
  for (let index = chain.converterIndex + 1; index < chain.stages.length; index++) {
    const stage = chain.stages[index]!
    let isKept = false
    for (const part of stage.parts) {
      signal = runPart(part, signal)
      // A CIC filter throws samples away between its integrators and its combs; what compensates for it runs behind.
      if (part.kind === 'cic') isKept = true
    }
    if (!isKept && stage.factor > 1) signal = keepEvery(signal, stage.factor)
    const factor = unitFactor(chain.stages[index - 1]!, stage)
    if (factor !== 1) signal = signal.map((value) => value * factor)
    yield
  }
  return signal
}
