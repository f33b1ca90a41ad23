'use client'

import dynamic from 'next/dynamic'
import { useSearchParams } from 'next/navigation'
import { useMemo } from 'react'
import { DesignError, type ChainSpec, type ChainStageKind } from '@/dsp'
import { useOnPage } from '@/components/ui/use-on-page'
import { caution } from '@/lib/caution'
import { useCommandKeys } from '@/components/drafting/commands'
import { KeptNotice } from '@/components/drafting/kept-notice'
import { SaveVersion } from '@/components/drafting/save-version'
import { SheetHeader } from '@/components/drafting/sheet-header'
import { useDrafting } from '@/components/drafting/use-drafting'
import { usePacedSpec, type Pace } from '@/components/drafting/use-paced-spec'
import { Fence } from '@/components/ui/fence'
import { withStageAdded } from '@/lib/chains/edits'
import { indexOfStage } from '@/lib/chains/outline'
import { chainText } from '@/lib/chains/statement'
import type { ChainPageProps } from '@/lib/chains/types'
import { notAdded } from '@/lib/chains/words'
import { sameValue } from '@/lib/designs/same-value'
import { AddStage } from './add-stage'
import { chainViewFromSearch, useChainAddress } from './address'
import { Cautions } from './cautions'
import { chainDesk } from './chain-desk'
import { ChainDrawer } from './chain-drawer'
import { ChainTitleBlock } from './chain-title-block'
import { chainCommands } from './commands'
import { computedChain } from './computed-chain'
import { savedTolerance, useChainJudgements, withOlderRun } from './judge'
import { LiveDesk } from './stage-desk'
import { ChainStatement } from './statement'
import { createChainStore, toleranceFor } from './store'
import { Strip } from './strip'
import { useChain } from './use-chain'
import { useSaid } from './use-said'

/** The chart, the sheet and the drawer come after what is said in words: the first page stays light. */
const FoldChart = dynamic(() => import('./fold-chart/fold-chart').then((module) => module.FoldChart), {
  ssr: false,
  loading: () => <p className="min-h-[28rem] text-[13px] text-pencil">Opening the fold chart…</p>,
})
const ChainSheet = dynamic(() => import('./sheet').then((module) => module.ChainSheet), {
  ssr: false,
  loading: () => <p className="text-[13px] text-pencil">Opening the requirement sheet…</p>,
})
const Interferers = dynamic(() => import('./interferers').then((module) => module.Interferers), { ssr: false })

/** Figures and tables follow a gesture once it pauses. */
const PAUSE: Pace = { afterMs: 60 }

/** A measurement chain: one sentence, its stages in signal order, its fold chart, what it must meet, and its drawer. */
export function ChainPage({ chain, viewer, versions, draft, startingSpec, linkable, actions }: ChainPageProps) {
  const search = useSearchParams()
  const { accountId, mayEdit } = viewer
  const drafting = useDrafting({
    kind: 'chains',
    id: chain.id,
    accountId,
    mayEdit,
    draft,
    versions,
    startingSpec,
    makeStore: (opening) => createChainStore(opening, chainViewFromSearch(new URLSearchParams(search.toString()))),
    loadCheck: () => import('@/lib/chains/spec-from').then((module) => module.chainSpecFrom),
  })
  const { store, saved, latest, isSaving, setIsSaving } = drafting

  const spec = usePacedSpec(store, PAUSE)
  useChainAddress(store)
  // Computed figures may differ in their last digit between the server's engine and this browser's: they are shown here alone.
  const onPage = useOnPage()
  const computed = useMemo(() => (onPage ? computedChain(spec) : null), [onPage, spec])
  const made = computed instanceof DesignError ? null : computed

  const commands = useMemo(
    () => chainCommands(store, { mayEdit, openSave: () => setIsSaving(true) }),
    [store, mayEdit, setIsSaving],
  )
  useCommandKeys(commands)

  const stageId = useChain(store, (state) => state.stageId)
  const traceHz = useChain(store, (state) => state.traceHz)
  const tolerance = useChain(store, (state) => state.tolerance)
  const run = useMemo(() => toleranceFor(spec, tolerance), [spec, tolerance])
  // A version was judged by a run of its own when it was saved: that one speaks until another is made.
  const savedRun = useMemo(() => (latest ? savedTolerance(latest.spec, latest.figures) : null), [latest])
  const match = useMemo(() => run ?? toleranceFor(spec, savedRun), [run, spec, savedRun])
  const judged = useChainJudgements(spec, match)
  const hasOlderRun = match === null && (tolerance !== null || savedRun !== null)
  const judgements = useMemo(() => (hasOlderRun ? withOlderRun(judged) : judged), [judged, hasOlderRun])
  const desk = useMemo(() => chainDesk(store), [store])
  const { trace } = store.getState()
  const chosenIndex = indexOfStage(spec, stageId)
  const [adding, setAdding] = useSaid<string>(desk)

  function addStage(kind: ChainStageKind) {
    const behind = chosenIndex < 0 ? spec.stages.length - 1 : chosenIndex
    const links = linkable.map(({ link }) => link)
    const reason = desk.editStages((now) => withStageAdded(now, kind, behind, links))
    setAdding(reason === null ? null : notAdded(kind, reason))
  }

  /** The focus goes back to the stage that lay on the desk. */
  function putAway() {
    document.querySelector<HTMLElement>(`[data-stage="${stageId}"]`)?.focus()
    store.getState().choose(null)
  }

  return (
    <>
      <SheetHeader
        crumbs={[{ label: chain.projectName, href: `/projects/${chain.projectId}` }, { label: chain.title }]}
        address={`/chains/${chain.id}`}
        store={store}
        draftStatus={drafting.draftStatus}
        latest={latest}
        nextNumber={drafting.nextNumber}
        unchanged={latest !== undefined && sameValue(latest.spec, spec)}
        mayEdit={mayEdit}
        isSaving={isSaving}
        onSaving={setIsSaving}
      />

      {isSaving ? (
        <SaveVersion
          what="chain"
          save={(note, onTopOf) => actions.saveVersion({ chainId: chain.id, ...drafting.stated(note, onTopOf) })}
          compare={(theirs) => (
            <dl className="grid gap-3 text-[14px] sm:grid-cols-2">
              <Side label={`Version ${theirs.number}`} spec={theirs.spec} />
              <Side label="Your draft" spec={spec} />
            </dl>
          )}
          foot="Saving runs the channels, and judges every line of the sheet."
          {...drafting.savePart}
        />
      ) : null}

      <main className="mx-auto max-w-[1680px] px-4 pt-4 sm:px-6">
        <KeptNotice kept={drafting.kept} onBringBack={drafting.bringBack} onLetGo={drafting.letGo} />
        <ChainStatement store={store} linkable={linkable} readOnly={!mayEdit} />
        {made ? <Cautions chain={made} /> : null}

        <div className="mt-2 flex items-baseline justify-between gap-3 pb-1">
          <p className="text-[13px] text-pencil">
            {mayEdit
              ? 'Press a stage to edit it; pull it, or press Alt and an arrow key, to move it.'
              : 'Press a stage to see it.'}
          </p>
          {mayEdit ? <AddStage spec={spec} onAdd={addStage} /> : null}
        </div>
        <Fence what="The strip of stages" retryOn={spec}>
          <Strip
            spec={spec}
            chain={made}
            chosen={stageId}
            desk={desk}
            linkable={linkable}
            readOnly={!mayEdit}
            onChoose={store.getState().choose}
          />
          <LiveDesk store={store} desk={desk} linkable={linkable} readOnly={!mayEdit} onClose={putAway} />
        </Fence>
        {adding ? (
          <p role="alert" className="mt-1 border-l-2 border-vermilion pl-2 text-[13px] text-vermilion">
            {adding}
          </p>
        ) : null}

        <div className="mt-3 grid gap-x-8 gap-y-6 min-[1025px]:grid-cols-[minmax(0,1fr)_minmax(0,28.5rem)]">
          <div className="min-w-0">
            {made ? (
              <Fence what="The fold chart" retryOn={spec}>
                <FoldChart chain={made} spec={spec} traceHz={traceHz} onTrace={trace} />
              </Fence>
            ) : null}
          </div>
          <aside aria-label="Requirements, interferers and title block" className="flex min-w-0 flex-col gap-5">
            <Fence what="The requirement sheet" retryOn={spec}>
              <ChainSheet
                spec={spec}
                judgements={judgements}
                desk={desk}
                readOnly={!mayEdit}
                onTrace={trace}
                onRunTolerance={() => {
                  store.getState().open('tolerance')
                  document.getElementById('drawer-panel')?.scrollIntoView({ block: 'start' })
                }}
              />
            </Fence>
            <Fence what="The list of interferers" retryOn={spec}>
              <Interferers spec={spec} chain={made} desk={desk} readOnly={!mayEdit} onTrace={trace} />
            </Fence>
            <ChainTitleBlock chain={chain} latest={latest} spec={spec} viewer={viewer} />
          </aside>
        </div>

        {onPage ? (
          <ChainDrawer store={store} chainId={chain.id} spec={spec} chain={made} saved={saved} readOnly={!mayEdit} />
        ) : null}
        <footer className="border-t border-graph py-4 text-[13px] text-pencil">{caution}</footer>
      </main>
    </>
  )
}

const Side = ({ label, spec }: { label: string; spec: ChainSpec }) => (
  <div className="border-t border-graph-strong pt-1">
    <dt className="text-[13px] text-pencil">{label}</dt>
    <dd className="font-heading text-[16px] leading-snug">{chainText(spec)}</dd>
  </div>
)
