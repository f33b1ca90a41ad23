import type { ComputedChain } from './chain'

/** What a chain costs in all. */
export interface ChainSketch {
  /** Group delay from the sensor to the stored sample, in the middle of the kept band. */
  readonly delaySeconds: number
  readonly multipliesPerStoredSample: number
  /** Coefficients and state, in words. */
  readonly words: number
}

/** Totals over the stages. */
export function chainSketch({ stages }: ComputedChain): ChainSketch {
  const total = (read: (stage: ComputedChain['stages'][number]) => number): number =>
    stages.reduce((sum, stage) => sum + read(stage), 0)
  return {
    delaySeconds: total((stage) => stage.delaySeconds),
    multipliesPerStoredSample: total((stage) => stage.multipliesPerStoredSample),
    words: total((stage) => stage.words),
  }
}
