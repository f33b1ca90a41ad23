'use client'

import { ArrowLeft, ArrowRight, X } from 'lucide-react'
import type { ChainSpec, ChainStage } from '@/dsp'
import { Button } from '@/components/ui/button'
import {
  withBypass,
  withLink,
  withStageDuplicated,
  withStageMoved,
  withoutStage,
  type StagesEdit,
} from '@/lib/chains/edits'
import { linksOf } from '@/lib/chains/links'
import { indexOfStage } from '@/lib/chains/outline'
import { linkText } from '@/lib/chains/statement'
import type { LinkableDesign } from '@/lib/chains/types'
import { stageKindWords, wasnt } from '@/lib/chains/words'
import { classNames } from '@/lib/format/class-names'
import type { ChainDesk } from './chain-desk'
import type { ChainStore } from './store'
import { useChain } from './use-chain'
import { useSaid } from './use-said'
import { AnalogFields, ConverterFields, DecimateFields, SensorFields, ShapeFields } from './stage-fields'

/** The desk at the pace of the hand: a box that is ticked is ticked at once. */
export function LiveDesk({
  store,
  ...rest
}: { store: ChainStore } & Omit<Parameters<typeof StageDesk>[0], 'spec' | 'index'>) {
  const spec = useChain(store, (state) => state.spec)
  const stageId = useChain(store, (state) => state.stageId)
  const index = indexOfStage(spec, stageId)
  return index < 0 ? null : <StageDesk key={stageId} spec={spec} index={index} {...rest} />
}

/** The chosen stage, all of it, to be edited under the strip. */
export function StageDesk({
  spec,
  index,
  desk,
  linkable,
  readOnly,
  onClose,
}: {
  spec: ChainSpec
  index: number
  desk: ChainDesk
  linkable: readonly LinkableDesign[]
  readOnly: boolean
  onClose(): void
}) {
  const [problem, setProblem] = useSaid<string>(desk)
  const stage = spec.stages[index]
  if (!stage) return null
  const edit = (done: string, change: (spec: ChainSpec) => StagesEdit) => {
    const reason = desk.editStages(change)
    setProblem(reason === null ? null : wasnt(`The stage wasn’t ${done}`, reason))
  }
  const isFixed = stage.kind === 'sensor' || stage.kind === 'converter'
  return (
    <section
      aria-labelledby="desk-heading"
      className="border-x border-b border-graph-strong bg-sheet px-3 pt-1.5 pb-2"
      onKeyDown={(event) => {
        // A field that is being typed in takes its own Escape.
        if (event.key === 'Escape' && !event.defaultPrevented) onClose()
      }}
    >
      <div className="flex flex-wrap items-center gap-x-2 gap-y-1">
        <h2 id="desk-heading" className="mr-2 font-text text-[13px] font-semibold">
          Stage {index + 1}: {stageKindWords[stage.kind].toLowerCase()}
        </h2>
        {readOnly ? null : (
          <>
            <Tool
              label="Move earlier"
              isInert={isFixed}
              onPress={() => edit('moved', (now) => withStageMoved(now, index, index - 1))}
            >
              <ArrowLeft aria-hidden size={14} />
            </Tool>
            <Tool
              label="Move later"
              isInert={isFixed}
              onPress={() => edit('moved', (now) => withStageMoved(now, index, index + 1))}
            >
              <ArrowRight aria-hidden size={14} />
            </Tool>
            {isFixed ? null : (
              <label className="inline-flex min-h-6 items-center gap-1.5 px-1 text-[13px]">
                <input
                  type="checkbox"
                  className="size-4 accent-spruce"
                  checked={stage.bypassed}
                  onChange={(event) => {
                    const { checked } = event.currentTarget
                    edit(checked ? 'bypassed' : 'put back', (now) => withBypass(now, index, checked))
                  }}
                />
                Bypassed
              </label>
            )}
            {isFixed ? null : (
              <>
                <Button small onClick={() => edit('duplicated', (now) => withStageDuplicated(now, index))}>
                  Duplicate
                </Button>
                <Button small onClick={() => edit('removed', (now) => withoutStage(now, index))}>
                  Remove
                </Button>
              </>
            )}
          </>
        )}
        <Tool label="Put the stage away" className="ml-auto" onPress={onClose}>
          <X aria-hidden size={14} />
        </Tool>
      </div>
      {problem ? (
        <p role="alert" className="my-1 border-l-2 border-vermilion pl-2 text-[13px] text-vermilion">
          {problem}
        </p>
      ) : null}
      <div className="mt-1 flex flex-wrap items-baseline gap-x-6 gap-y-0.5">
        <Fields stage={stage} index={index} spec={spec} desk={desk} linkable={linkable} readOnly={readOnly} />
      </div>
      <LinkNote spec={spec} stage={stage} index={index} desk={desk} linkable={linkable} readOnly={readOnly} />
    </section>
  )
}

interface FieldsProps<Stage extends ChainStage = ChainStage> {
  readonly stage: Stage
  readonly index: number
  readonly spec: ChainSpec
  readonly desk: ChainDesk
  readonly linkable: readonly LinkableDesign[]
  readonly readOnly: boolean
}

function Fields({ stage, ...rest }: FieldsProps) {
  // Fields keep what was typed; another stage's must not come in for it.
  switch (stage.kind) {
    case 'sensor':
      return <SensorFields key={stage.id} stage={stage} {...rest} />
    case 'analog':
      return <AnalogFields key={stage.id} stage={stage} {...rest} />
    case 'converter':
      return <ConverterFields key={stage.id} stage={stage} {...rest} />
    case 'decimate':
      return <DecimateFields key={stage.id} stage={stage} {...rest} />
    case 'shape':
      return <ShapeFields key={stage.id} stage={stage} {...rest} />
  }
}

/** Which version is pinned, and whether there is a newer one to move to. */
function LinkNote({ spec, stage, index, desk, linkable, readOnly }: FieldsProps) {
  const [problem, setProblem] = useSaid<string>(desk)
  const pinned = linksOf(spec).find(({ stageId }) => stageId === stage.id)?.link
  if (!pinned) return null
  const newest = linkable.find(({ link }) => link.designId === pinned.designId)?.link
  const isNewer = newest !== undefined && newest.version > pinned.version
  return (
    <div className="mt-1 flex flex-wrap items-center gap-x-3 gap-y-1 text-[13px]">
      <p>
        Pinned to{' '}
        <a className="underline hover:text-spruce" href={`/designs/${pinned.designId}/versions/${pinned.version}`}>
          {linkText(pinned)}
        </a>
        , {pinned.title}: it stays as it is when the design goes on.
      </p>
      {isNewer ? (
        <p className="flex flex-wrap items-center gap-2 border-l-2 border-ochre pl-2">
          Version {newest.version} is newer.
          {readOnly ? null : (
            <Button small onClick={() => setProblem(desk.edit((now) => withLink(now, index, newest)))}>
              Move to version {newest.version}
            </Button>
          )}
        </p>
      ) : null}
      {problem ? (
        <p role="alert" className="border-l-2 border-vermilion pl-2 text-vermilion">
          {problem}
        </p>
      ) : null}
    </div>
  )
}

function Tool({
  label,
  isInert = false,
  className,
  onPress,
  children,
}: {
  label: string
  isInert?: boolean
  className?: string
  onPress(): void
  children: React.ReactNode
}) {
  return (
    <Button
      kind="quiet"
      small
      className={classNames('min-w-6 px-1', isInert && 'opacity-40', className)}
      aria-label={label}
      title={label}
      onClick={onPress}
    >
      {children}
    </Button>
  )
}
