'use client'

import { DropdownMenu } from 'radix-ui'
import { MOST_CHAIN_STAGES, type ChainSpec, type ChainStageKind } from '@/dsp'
import { buttonClass } from '@/components/ui/button'
import { placesFor } from '@/lib/chains/edits'
import { stageKindWords } from '@/lib/chains/words'

const kinds = Object.entries(stageKindWords) as [ChainStageKind, string][]

/** A menu of the kinds of stage that may still be put in. */
export function AddStage({ spec, onAdd }: { spec: ChainSpec; onAdd(kind: ChainStageKind): void }) {
  const isFull = spec.stages.length >= MOST_CHAIN_STAGES
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger
        className={buttonClass('plain', true)}
        disabled={isFull}
        title={isFull ? `A chain has ${MOST_CHAIN_STAGES} stages at most` : undefined}
      >
        Add a stage
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align="end"
          sideOffset={4}
          collisionPadding={8}
          className="z-20 min-w-44 rounded border border-ink bg-sheet py-1 text-[15px] text-ink"
        >
          {kinds
            .filter(([kind]) => placesFor(spec, kind).length > 0)
            .map(([kind, label]) => (
              <DropdownMenu.Item
                key={kind}
                className="flex min-h-8 cursor-pointer items-center px-3 outline-none data-highlighted:bg-spruce-wash"
                onSelect={() => onAdd(kind)}
              >
                {label}
              </DropdownMenu.Item>
            ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  )
}
