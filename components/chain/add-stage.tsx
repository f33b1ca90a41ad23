import { MOST_CHAIN_STAGES, type ChainSpec, type ChainStageKind } from '@/dsp'
import { ActionMenu } from '@/components/ui/action-menu'
import { buttonClass } from '@/components/ui/button'
import { placesFor } from '@/lib/chains/edits'
import { stageKindWords } from '@/lib/chains/words'

const kinds = Object.entries(stageKindWords) as [ChainStageKind, string][]

/** A menu of the kinds of stage that may still be put in. */
export function AddStage({ spec, onAdd }: { spec: ChainSpec; onAdd(kind: ChainStageKind): void }) {
  const isFull = spec.stages.length >= MOST_CHAIN_STAGES
  return (
    <ActionMenu
      align="end"
      className={buttonClass('plain', true)}
      disabled={isFull}
      title={isFull ? `A chain has ${MOST_CHAIN_STAGES} stages at most` : undefined}
      actions={kinds
        .filter(([kind]) => placesFor(spec, kind).length > 0)
        .map(([kind, label]) => ({ id: kind, label, run: () => onAdd(kind) }))}
    >
      Add a stage
    </ActionMenu>
  )
}
