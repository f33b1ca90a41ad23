import {
  chainUnits,
  type ChainSpec,
  type ChainUnit,
  type ComputedChain,
  type ComputedStage,
  type DesignLink,
} from '@/dsp'
import { coefficientsOf, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { linksOf } from './links'

/*
 * The numbers of a chain as they are kept and handed over: everything that runs between the converter's samples and the stored ones, in
 * signal order. Format 1, which versions were kept in before, held the decimation stages alone.
 */

/** One part of a decimation stage; its rate is the one that it runs at. */
export type StoredChainPart =
  /** Hogenauer 1981; without scaling it gains (factor · combDelay)^order, so that its output is divided by that. */
  | {
      readonly kind: 'cic'
      readonly order: number
      readonly combDelay: number
      readonly factor: number
      readonly sampleRateHz: number
    }
  | { readonly kind: 'filter'; readonly coefficients: StoredCoefficients }

/** The design version that a stage's filter is. */
export interface StoredDesignName {
  readonly designId: string
  readonly version: number
  readonly drawing: string
  readonly title: string
}

export interface StoredDecimation {
  readonly stageId: string
  readonly factor: number
  readonly inRateHz: number
  readonly outRateHz: number
  /** In the middle of the kept band. */
  readonly delaySeconds: number
  /** In signal order. */
  readonly parts: readonly StoredChainPart[]
}

export interface StoredIntegration {
  readonly kind: 'integrate'
  readonly stageId: string
  readonly rateHz: number
  readonly delaySeconds: number
  readonly times: 1 | 2
  /** y[n] = y[n−1] + (x[n] + x[n−1]) / (2 · rateHz), so many times over, behind the high-pass. */
  readonly rule: 'trapezoidal'
  readonly highPass: StoredCoefficients
  readonly fromUnit: ChainUnit
  readonly toUnit: ChainUnit
  /** What the integral, in the unit ahead times seconds, is multiplied by: g·s → mm/s is 9806.65. */
  readonly scale: number
}

export interface StoredShaping {
  readonly kind: 'shape'
  readonly stageId: string
  readonly rateHz: number
  readonly delaySeconds: number
  readonly design: StoredDesignName
  readonly coefficients: StoredCoefficients
}

export type StoredDigitalStage =
  | (StoredDecimation & { readonly kind: 'decimate'; readonly design: StoredDesignName | null })
  | StoredIntegration
  | StoredShaping

interface StoredDecimations {
  readonly format: 1
  /** In signal order; a bypassed stage isn't among them. */
  readonly decimations: readonly StoredDecimation[]
}

interface StoredDigitalPart {
  readonly format: 2
  /** In signal order; a bypassed stage isn't among them. */
  readonly stages: readonly StoredDigitalStage[]
}

export type StoredChainNumbers = StoredDecimations | StoredDigitalPart

/** The digital stages of a version, in signal order; of one that was kept in format 1, its decimations alone. */
export const digitalStagesOf = (numbers: StoredChainNumbers): readonly StoredDigitalStage[] =>
  numbers.format === 2
    ? numbers.stages
    : numbers.decimations.map((stage) => ({ kind: 'decimate', design: null, ...stage }))

export function chainNumbersOf(chain: ComputedChain): StoredDigitalPart {
  return {
    format: 2,
    stages: chain.stages.flatMap((stage, index) => storedStage(stage, chain.stages[index - 1]) ?? []),
  }
}

function storedStage(computed: ComputedStage, before: ComputedStage | undefined): StoredDigitalStage | null {
  const { stage, factor, inRateHz, outRateHz, delaySeconds, parts } = computed
  if (stage.bypassed || inRateHz === null || outRateHz === null) return null
  const stageId = stage.id
  if (stage.kind === 'decimate') {
    const design = stage.filter.type === 'design' ? nameOf(stage.filter.link) : null
    return { kind: 'decimate', stageId, factor, inRateHz, outRateHz, delaySeconds, design, parts: storedParts(parts) }
  }
  if (stage.kind !== 'shape' || !before) return null
  const [filter] = storedParts(parts)
  if (filter?.kind !== 'filter') throw new Error('A shaping stage has a filter.')
  const shared = { stageId, rateHz: inRateHz, delaySeconds }
  if (stage.filter.type === 'design') {
    return { kind: 'shape', ...shared, design: nameOf(stage.filter.link), coefficients: filter.coefficients }
  }
  return {
    kind: 'integrate',
    ...shared,
    times: stage.filter.times,
    rule: 'trapezoidal',
    highPass: filter.coefficients,
    fromUnit: before.unit,
    toUnit: computed.unit,
    scale: chainUnits[before.unit].si / chainUnits[computed.unit].si,
  }
}

/** The same numbers with the names of the designs as a checked spec has them: a browser may send others. */
export function withNamesOf(numbers: StoredChainNumbers, spec: ChainSpec): StoredChainNumbers {
  if (numbers.format !== 2) return numbers
  const links = new Map(linksOf(spec).map(({ stageId, link }) => [stageId, link]))
  return {
    ...numbers,
    stages: numbers.stages.map((stage): StoredDigitalStage => {
      const link = links.get(stage.stageId)
      return link && stage.kind !== 'integrate' ? { ...stage, design: nameOf(link) } : stage
    }),
  }
}

const nameOf = ({ designId, version, drawing, title }: DesignLink): StoredDesignName => ({
  designId,
  version,
  drawing,
  title,
})

const storedParts = (parts: ComputedStage['parts']): StoredChainPart[] =>
  parts.flatMap((part): StoredChainPart[] => {
    if (part.kind === 'cic') {
      const { order, combDelay, factor, sampleRateHz } = part
      return [{ kind: 'cic', order, combDelay, factor, sampleRateHz }]
    }
    if (part.kind !== 'digital') return []
    return [{ kind: 'filter', coefficients: coefficientsOf({ analog: null, digital: part.filter }) }]
  })
