import type { ChainStage } from '@/dsp'
import { stageLabel, stageName } from '@/lib/chains/words'

/** A stage in a table of the drawer: what it does, by what, and whether it is bypassed. */
export const chainStageLabel = (stage: ChainStage): string =>
  `${stageLabel(stage)}, ${stageName(stage)}${stage.bypassed ? ', bypassed' : ''}`
