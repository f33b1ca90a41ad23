import type { ChainSpec, ChainUnit, ConverterStage } from '@/dsp'

/* What follows from a chain as it is written, without computing it: the rates and the unit at every stage. */

export interface StageRates {
  /** Null ahead of the converter. */
  readonly inRateHz: number | null
  readonly outRateHz: number | null
}

/** The rate into and out of every stage, in order; a bypassed stage leaves it as it is. */
export function ratesOf(spec: ChainSpec): readonly StageRates[] {
  let rateHz: number | null = null
  return spec.stages.map((stage) => {
    const inRateHz = rateHz
    if (stage.kind === 'converter') rateHz = stage.sampleRateHz
    else if (stage.kind === 'decimate' && !stage.bypassed && rateHz !== null) rateHz /= stage.factor
    return { inRateHz, outRateHz: rateHz }
  })
}

export const converterOf = (spec: ChainSpec): ConverterStage | null =>
  spec.stages.find((stage) => stage.kind === 'converter') ?? null

/** Rate of the stored samples; 0 where there is no converter. */
export const outputRateOf = (spec: ChainSpec): number => ratesOf(spec).at(-1)?.outRateHz ?? 0

/** What the signal is measured in after the stage at `index`, volts being counted in the sensor's unit. */
export function unitAfter(spec: ChainSpec, index = spec.stages.length - 1): ChainUnit {
  let unit: ChainUnit = 'V'
  for (const stage of spec.stages.slice(0, index + 1)) {
    if (stage.kind === 'sensor') unit = stage.unit
    else if (stage.kind === 'shape' && !stage.bypassed && stage.filter.type === 'integrate') unit = stage.filter.unit
  }
  return unit
}

export const indexOfStage = (spec: ChainSpec, stageId: string | null): number =>
  spec.stages.findIndex(({ id }) => id === stageId)
