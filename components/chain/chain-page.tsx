'use client'

import dynamic from 'next/dynamic'
import { useSearchParams } from 'next/navigation'
import { useEffect, useMemo, useState } from 'react'
import { useStore } from 'zustand'
import { DesignError, type ChainSpec, type ChainStageKind } from '@/dsp'
import { Header } from '@/components/frame/header'
import { matches } from '@/components/studio/commands'
import { useOnPage } from '@/components/studio/panels/chart/use-on-page'
import { createAutosave } from '@/components/studio/shell/autosave'
import { freshest, remember } from '@/components/studio/shell/desk'
import { DraftStatus } from '@/components/studio/shell/draft-status'
import { forgetKeptDraft, keptDraft } from '@/components/studio/shell/kept-draft'
import { SaveVersion } from '@/components/studio/shell/save-version'
import { usePacedSpec, type Pace } from '@/components/studio/shell/use-paced-spec'
import { Button, buttonClass } from '@/components/ui/button'
import { Fence } from '@/components/ui/fence'
import { Notice } from '@/components/ui/notice'
import { withStageAdded } from '@/lib/chains/edits'
import { indexOfStage } from '@/lib/chains/outline'
import { chainText } from '@/lib/chains/statement'
import type { ChainPageProps, ChainVersionSummary } from '@/lib/chains/types'
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
export function ChainPage({
  chain,
  viewer,
  versions: broughtVersions,
  draft: broughtDraft,
  startingSpec,
  linkable,
  actions,
}: ChainPageProps) {
  const search = useSearchParams()
  const { accountId, mayEdit } = viewer
  const [{ draft, versions: savedAtOpening }] = useState(() =>
    freshest(accountId, chain.id, { draft: broughtDraft, versions: broughtVersions }),
  )
  const [saved, setSaved] = useState(savedAtOpening)
  const latest = saved[0]
  const [store] = useState(() =>
    createChainStore(
      draft?.spec ?? savedAtOpening[0]?.spec ?? startingSpec,
      chainViewFromSearch(new URLSearchParams(search.toString())),
    ),
  )
  // What was opened may make no chain; it is computed on the page alone, never while the server renders.
  useEffect(() => store.getState().dismissRefusal(), [store])
  const [parentNumber, setParentNumber] = useState(draft?.parentNumber ?? latest?.number ?? null)
  useEffect(() => remember(accountId, chain.id, { versions: saved }), [accountId, chain.id, saved])
  const [saving, setSaving] = useState(false)
  const [kept, setKept] = useState<ChainSpec | null>(null)
  const [draftSavedAt, setDraftSavedAt] = useState<string | null>(null)

  const spec = usePacedSpec(store, PAUSE)
  const [autosave] = useState(() =>
    createAutosave({
      kind: 'chains',
      id: chain.id,
      store,
      draft,
      parentNumber,
      onSaved: (stored) => {
        remember(accountId, chain.id, { draft: stored })
        setDraftSavedAt(stored.updatedAt)
        // What this browser kept is of before: this draft has taken its place.
        setKept(null)
      },
    }),
  )
  const autosaveState = useStore(autosave.state)
  useEffect(() => (mayEdit ? autosave.start() : undefined), [autosave, mayEdit])
  useChainAddress(store)
  // Computed figures may differ in their last digit between the server's engine and this browser's: they are shown here alone.
  const onPage = useOnPage()
  const computed = useMemo(() => (onPage ? computedChain(spec) : null), [onPage, spec])
  const made = computed instanceof DesignError ? null : computed

  const commands = useMemo(() => chainCommands(store, { mayEdit, openSave: () => setSaving(true) }), [store, mayEdit])
  useEffect(() => {
    function onKeyDown(event: KeyboardEvent) {
      const command = commands.find(({ keys }) => keys !== undefined && matches(keys, event))
      if (!command) return
      event.preventDefault()
      if (command.when()) command.run()
    }
    addEventListener('keydown', onKeyDown)
    return () => removeEventListener('keydown', onKeyDown)
  }, [commands])

  useEffect(() => {
    // A draft that never reached the server waits in this browser; it is offered, not forced.
    void keptDraft(chain.id, () => import('@/lib/chains/spec-from').then((module) => module.chainSpecFrom)).then(
      (found) => {
        if (found && !sameValue(found, store.getState().spec)) setKept(found)
      },
    )
  }, [chain.id, store])

  function goOnFrom(version: ChainVersionSummary) {
    setSaved((list) => (list.some(({ number }) => number === version.number) ? list : [version, ...list]))
    setParentNumber(version.number)
    autosave.startFrom(version.number)
    setSaving(false)
  }

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

  const canUndo = useChain(store, (state) => state.past.length > 0)
  const canRedo = useChain(store, (state) => state.future.length > 0)
  const nextNumber = (latest?.number ?? 0) + 1
  const unchanged = latest !== undefined && sameValue(latest.spec, spec)

  return (
    <>
      <Header crumbs={[{ label: chain.projectName, href: `/projects/${chain.projectId}` }, { label: chain.title }]}>
        {mayEdit ? (
          <>
            <DraftStatus state={autosaveState} onResolve={autosave.resolveStale} />
            <Button disabled={!canUndo} onClick={() => store.getState().undo()} title="Undo (Ctrl+Z)">
              Undo
            </Button>
            <Button disabled={!canRedo} onClick={() => store.getState().redo()} title="Redo (Ctrl+Shift+Z)">
              Redo
            </Button>
          </>
        ) : null}
        {latest ? (
          <a className={buttonClass()} href={`/chains/${chain.id}/versions/${latest.number}`}>
            Hand over version {latest.number}…
          </a>
        ) : null}
        {mayEdit ? (
          <Button
            kind="primary"
            aria-expanded={saving}
            disabled={unchanged}
            title={unchanged ? `The draft equals version ${latest.number}` : 'Save a version (Ctrl+S)'}
            onClick={() => setSaving((open) => !open)}
          >
            {unchanged ? `Version ${latest.number} saved` : `Save version ${nextNumber}`}
          </Button>
        ) : null}
      </Header>

      {saving ? (
        <SaveVersion
          what="chain"
          nextNumber={nextNumber}
          parentNumber={parentNumber}
          save={(note, onTopOf) =>
            actions.saveVersion({
              chainId: chain.id,
              spec: store.getState().spec,
              note,
              parentNumber,
              ...(onTopOf === undefined ? {} : { onTopOf }),
            })
          }
          compare={(theirs) => (
            <dl className="grid gap-3 text-[14px] sm:grid-cols-2">
              <Side label={`Version ${theirs.number}`} spec={theirs.spec} />
              <Side label="Your draft" spec={spec} />
            </dl>
          )}
          draftSavedAt={draftSavedAt}
          foot="Saving runs the channels, and judges every line of the sheet."
          onSaved={goOnFrom}
          onTakeTheirs={(version) => {
            store.getState().propose(version.spec)
            goOnFrom(version)
          }}
          onClose={() => setSaving(false)}
        />
      ) : null}

      <main className="mx-auto max-w-[1680px] px-4 pt-4 sm:px-6">
        {kept && mayEdit ? (
          <Notice kind="note">
            This browser kept a draft that never reached the server.{' '}
            <Button
              small
              onClick={() => {
                store.getState().propose(kept)
                setKept(null)
              }}
            >
              Bring it back
            </Button>{' '}
            <Button
              small
              onClick={() => {
                forgetKeptDraft(chain.id)
                setKept(null)
              }}
            >
              Let it go
            </Button>
          </Notice>
        ) : null}
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
        <footer className="border-t border-graph py-4 text-[13px] text-pencil">
          A design aid; confirm on the target hardware. Where people or structures depend on the measurement, the
          applicable local codes and a licensed practitioner decide.
        </footer>
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
