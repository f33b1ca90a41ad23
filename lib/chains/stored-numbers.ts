import type { ComputedChain, ComputedStage } from '@/dsp'
import { coefficientsOf, type StoredCoefficients } from '@/lib/designs/stored-coefficients'

/*
 * The numbers of a chain as they are kept and handed over: what its decimation stages run. Shaping stages are designs, which are handed over
 * by themselves, or an integration.
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

export interface StoredChainNumbers {
  readonly format: 1
  /** In signal order; a bypassed stage isn't among them. */
  readonly decimations: readonly StoredDecimation[]
}

export function chainNumbersOf(chain: ComputedChain): StoredChainNumbers {
  return { format: 1, decimations: chain.stages.flatMap((stage) => decimationOf(stage) ?? []) }
}

function decimationOf({
  stage,
  factor,
  inRateHz,
  outRateHz,
  delaySeconds,
  parts,
}: ComputedStage): StoredDecimation | null {
  if (stage.kind !== 'decimate' || stage.bypassed || inRateHz === null || outRateHz === null) return null
  return {
    stageId: stage.id,
    factor,
    inRateHz,
    outRateHz,
    delaySeconds,
    parts: parts.flatMap((part): StoredChainPart[] => {
      if (part.kind === 'cic') {
        const { order, combDelay, sampleRateHz } = part
        return [{ kind: 'cic', order, combDelay, factor: part.factor, sampleRateHz }]
      }
      if (part.kind !== 'digital') return []
      return [{ kind: 'filter', coefficients: coefficientsOf({ analog: null, digital: part.filter }) }]
    }),
  }
}
