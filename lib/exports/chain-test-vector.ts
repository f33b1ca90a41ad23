import type { ChainSpec, ChainUnit } from '@/dsp'
import { digitalStagesOf } from '@/lib/chains/stored-numbers'
import { unitAfter } from '@/lib/chains/outline'
import { reachOf, runDigitalPart } from './chain-run'
import type { ChainSource } from './chain-source'
import { testInput } from './test-vector'

/* Samples for the whole digital part of a chain: what the converter reads, and what must then be stored. */

export interface ChainTestVector {
  /** Each value stands for so many samples in a row: a long decimation takes more of them than a file should list. */
  readonly hold: number
  /** At the converter's rate, once held. */
  readonly inputVolts: readonly number[]
  /** In the unit of the stored samples; the first belongs to the first input. */
  readonly stored: readonly number[]
  /** Largest difference, in that unit, of a run in double precision. */
  readonly tolerance: number
}

/** Samples stored after the finite responses are filled. */
const FULL_STORED = 8
const MOST_STORED = 256
const LEAST_INPUTS = 64
const MOST_INPUTS = 512
/** Of the largest stored sample: room for another order of additions, and for sections whose poles lie close to 1. */
const TOLERANCE = 1e-6

export const chainInput = ({ stages }: ChainSpec) => {
  const [sensor] = stages
  const converter = stages.find((stage) => stage.kind === 'converter')
  if (sensor?.kind !== 'sensor' || !converter) throw new Error('A chain that was saved has its sensor and a converter.')
  return {
    rateHz: converter.sampleRateHz,
    fullScaleVolts: converter.fullScaleVolts,
    voltsPerUnit: sensor.sensitivity,
    unit: sensor.unit,
  }
}

/** Of the stored samples. */
export const storedUnit = (spec: ChainSpec): ChainUnit => unitAfter(spec)

/** A version that was kept before integration and shaping were, and has some: its numbers don't make the stored sample. */
export const lacksStages = ({ spec, numbers }: ChainSource['version']): boolean =>
  numbers.format === 1 && spec.stages.some((stage) => stage.kind === 'shape' && !stage.bypassed)

/** Null where the kept numbers are not the whole digital part. */
export function chainTestVector(version: ChainSource['version']): ChainTestVector | null {
  if (lacksStages(version)) return null
  const stages = digitalStagesOf(version.numbers)
  const { fullScaleVolts, voltsPerUnit } = chainInput(version.spec)
  const factor = stages.reduce((product, stage) => (stage.kind === 'decimate' ? product * stage.factor : product), 1)
  const wanted = Math.max(
    Math.min(FULL_STORED + Math.ceil(reachOf(stages) / factor), MOST_STORED),
    Math.ceil(LEAST_INPUTS / factor),
  )
  const hold = Math.ceil((wanted * factor) / MOST_INPUTS)
  // Values of the usual test lie within ± 4.
  const inputVolts = Array.from(testInput(Math.ceil((wanted * factor) / hold)), (value) => (value / 4) * fullScaleVolts)
  const volts = Float64Array.from({ length: inputVolts.length * hold }, (_, n) => inputVolts[Math.floor(n / hold)] ?? 0)
  const stored = Array.from(runDigitalPart(stages, volts, voltsPerUnit))
  const largest = stored.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  return { hold, inputVolts, stored, tolerance: TOLERANCE * largest }
}
