'use client'

import dynamic from 'next/dynamic'
import { useSearchParams } from 'next/navigation'
import { useEffect, useMemo, useState } from 'react'
import { useStore } from 'zustand'
import { isFirDesign, type DesignSpec } from '@/dsp'
import { Header } from '@/components/frame/header'
import { Button, buttonClass } from '@/components/ui/button'
import { Fence } from '@/components/ui/fence'
import { Notice } from '@/components/ui/notice'
import { defaultSpec } from '@/lib/designs/edits'
import type { StudioProps, VersionSummary } from '@/lib/designs/types'
import { formatNumber } from '@/lib/format/quantity'
import { studioCommands, matches } from './commands'
import { useOnPage } from './panels/chart/use-on-page'
import { useAddress, viewFromSearch } from './shell/address'
import { createAutosave } from './shell/autosave'
import { freshest, remember } from './shell/desk'
import { DraftStatus } from './shell/draft-status'
import { Drawer } from './shell/drawer'
import { FiguresLine } from './shell/figures-line'
import { forgetKeptDraft, keptDraft } from './shell/kept-draft'
import { DesignTitleBlock } from './shell/design-title-block'
import { LivePlanes } from './shell/live-planes'
import { LivePlots } from './shell/live-plots'
import { SaveVersion } from './shell/save-version'
import { useSettled } from './shell/use-derived'
import { Statement } from './statement/statement'
import { createStudioStore, sameSpec } from './store'
import { useStudio } from './use-studio'

/** What stands in words and tables comes after what is drawn: the first page stays light. */
const SheetPanel = dynamic(() => import('./sheet/sheet-panel').then((module) => module.SheetPanel), {
  ssr: false,
  loading: () => <p className="text-[13px] text-pencil">Opening the requirement sheet…</p>,
})
const CompareSpecs = dynamic(() => import('./compare/compare-specs').then((module) => module.CompareSpecs))
const DepartureTable = dynamic(() => import('./shell/departure-table').then((module) => module.DepartureTable), {
  ssr: false,
  loading: () => <p className="text-[13px] text-pencil">Opening the departure table…</p>,
})
const SheetFigure = dynamic(() => import('./sheet/sheet-figure').then((module) => module.SheetFigure), { ssr: false })

/** The heart of the product: one design as a sentence, its curves, its planes and its drawer. */
export function Studio({
  design,
  viewer,
  versions: broughtVersions,
  draft: broughtDraft,
  difference,
  actions,
}: StudioProps) {
  const search = useSearchParams()
  const [{ draft, versions: savedAtOpening }] = useState(() =>
    freshest(viewer.accountId, design.id, { draft: broughtDraft, versions: broughtVersions }),
  )
  const [saved, setSaved] = useState(savedAtOpening)
  const latest = saved[0]
  const [store] = useState(() => {
    const opening = draft?.spec ?? savedAtOpening[0]?.spec ?? defaultSpec
    const { view, drawer } = viewFromSearch(new URLSearchParams(search.toString()))
    return createStudioStore(opening, view, drawer)
  })
  // What was opened may make no design; it is designed on the page alone, never while the server renders.
  useEffect(() => store.getState().dismissRefusal(), [store])
  const [parentNumber, setParentNumber] = useState(draft?.parentNumber ?? latest?.number ?? null)
  useEffect(() => remember(viewer.accountId, design.id, { versions: saved }), [viewer.accountId, design.id, saved])
  const [saving, setSaving] = useState(false)
  const [kept, setKept] = useState<DesignSpec | null>(null)
  const [draftSavedAt, setDraftSavedAt] = useState<string | null>(null)

  // Told at intervals of a drag: what stands here in words needn't follow the hand within the frame, the plots do.
  const { spec, made } = useSettled(store)
  const [autosave] = useState(() =>
    createAutosave({
      kind: 'designs',
      id: design.id,
      store,
      draft,
      parentNumber,
      onSaved: (stored) => {
        remember(viewer.accountId, design.id, { draft: stored })
        setDraftSavedAt(stored.updatedAt)
        // What this browser kept is of before: this draft has taken its place.
        setKept(null)
      },
    }),
  )
  const autosaveState = useStore(autosave.state)
  useEffect(() => (viewer.mayEdit ? autosave.start() : undefined), [autosave, viewer.mayEdit])
  useAddress(store)
  // Computed figures may differ in their last digit between the server's engine and this browser's: they are shown here alone.
  const onPage = useOnPage()

  const commands = useMemo(
    () => studioCommands(store, { mayEdit: viewer.mayEdit, openSave: () => setSaving(true) }),
    [store, viewer.mayEdit],
  )
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
    void keptDraft(design.id, () => import('./shell/spec-from').then(({ specFrom }) => specFrom)).then((found) => {
      if (found && !sameSpec(found, store.getState().spec)) setKept(found)
    })
  }, [design.id, store])

  function goOnFrom(version: VersionSummary) {
    setSaved((list) => (list.some(({ number }) => number === version.number) ? list : [version, ...list]))
    setParentNumber(version.number)
    autosave.startFrom(version.number)
    setSaving(false)
  }

  const canUndo = useStudio(store, (state) => state.past.length > 0)
  const canRedo = useStudio(store, (state) => state.future.length > 0)
  const nextNumber = (latest?.number ?? 0) + 1
  const unchanged = latest !== undefined && sameSpec(latest.spec, spec)

  return (
    <>
      <Header crumbs={[{ label: design.projectName, href: `/projects/${design.projectId}` }, { label: design.title }]}>
        {viewer.mayEdit ? (
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
          <a className={buttonClass()} href={`/designs/${design.id}/versions/${latest.number}`}>
            Hand over version {latest.number}…
          </a>
        ) : null}
        {viewer.mayEdit ? (
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
          what="design"
          nextNumber={nextNumber}
          parentNumber={parentNumber}
          save={(note, onTopOf) =>
            actions.saveVersion({
              designId: design.id,
              spec: store.getState().spec,
              note,
              parentNumber,
              ...(onTopOf === undefined ? {} : { onTopOf }),
            })
          }
          compare={(theirs) => (
            <CompareSpecs
              left={{ label: `Version ${theirs.number}`, spec: theirs.spec }}
              right={{ label: 'Your draft', spec: store.getState().spec }}
            />
          )}
          draftSavedAt={draftSavedAt}
          onSaved={goOnFrom}
          onTakeTheirs={(version) => {
            store.getState().propose(version.spec)
            goOnFrom(version)
          }}
          onClose={() => setSaving(false)}
        />
      ) : null}

      <main className="mx-auto max-w-[1680px] px-4 pt-4 sm:px-6">
        <div className="flex flex-col gap-2">
          {difference ? (
            <Notice kind="caution">
              Version {difference.versionNumber} was computed by engine {difference.storedEngine}; engine{' '}
              {difference.currentEngine} differs from it by {formatNumber(difference.worstRelative, 2)} (relative,
              largest coefficient). The stored coefficients stand as they were saved.
            </Notice>
          ) : null}
          {kept && viewer.mayEdit ? (
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
                  forgetKeptDraft(design.id)
                  setKept(null)
                }}
              >
                Let it go
              </Button>
            </Notice>
          ) : null}
          <Statement store={store} readOnly={!viewer.mayEdit} />
          {onPage && made ? (
            <div className="flex flex-wrap items-baseline gap-x-7">
              <FiguresLine
                versions={made.versions}
                trust={made.trust}
                figures={made.figures}
                budgetText={`${formatNumber(spec.budget.magnitudeDb)}\u2009dB and ${formatNumber(spec.budget.phaseDegrees)}°${
                  spec.budget.removeDelay ? ', best delay removed' : ''
                }`}
              />
              <SheetFigure spec={spec} />
            </div>
          ) : null}
        </div>

        {onPage && made ? (
          <div className="mt-2 grid gap-x-8 gap-y-6 min-[1025px]:grid-cols-[minmax(0,1fr)_minmax(0,25.5rem)]">
            <div className="flex min-w-0 flex-col gap-5">
              <Fence what="The plots" retryOn={spec}>
                <LivePlots store={store} trusted={made.trust} readOnly={!viewer.mayEdit} />
              </Fence>
              {isFirDesign(made.spec) ? null : (
                <Fence what="The departure table" retryOn={spec}>
                  <DepartureTable
                    store={store}
                    spec={made.spec}
                    versions={made.versions}
                    trust={made.trust}
                    readOnly={!viewer.mayEdit}
                  />
                </Fence>
              )}
            </div>
            <aside aria-label="Planes, requirements and title block" className="flex min-w-0 flex-col gap-5">
              <Fence what="The planes" retryOn={spec}>
                <LivePlanes store={store} />
              </Fence>
              <Fence what="The requirement sheet" retryOn={spec}>
                <SheetPanel store={store} spec={spec} readOnly={!viewer.mayEdit} />
              </Fence>
              <DesignTitleBlock design={design} latest={latest} spec={spec} viewer={viewer} />
            </aside>
          </div>
        ) : null}

        <Drawer store={store} design={design} spec={spec} settled={made} saved={saved} mayEdit={viewer.mayEdit} />
        <footer className="border-t border-graph py-4 text-[13px] text-pencil">
          A design aid; confirm on the target hardware. Where people or structures depend on the measurement, the
          applicable local codes and a licensed practitioner decide.
        </footer>
      </main>
    </>
  )
}
