import type { ChainStage } from '@/dsp'
import { foldStageName } from '../fold-chart/words'

/** A stage in a table of the drawer: what it does, and that it is bypassed. */
export const chainStageLabel = (stage: ChainStage): string =>
  `${stage.kind === 'sensor' ? `Sensor, ${stage.name}` : foldStageName(stage)}${stage.bypassed ? ', bypassed' : ''}`
