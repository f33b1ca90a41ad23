'use client'

import dynamic from 'next/dynamic'
import { useSearchParams } from 'next/navigation'
import { useMemo } from 'react'
import { isFirDesign } from '@/dsp'
import { useCommandKeys } from '@/components/drafting/commands'
import { KeptNotice } from '@/components/drafting/kept-notice'
import { SaveVersion } from '@/components/drafting/save-version'
import { SheetHeader } from '@/components/drafting/sheet-header'
import { useDrafting } from '@/components/drafting/use-drafting'
import { Fence } from '@/components/ui/fence'
import { Notice } from '@/components/ui/notice'
import { defaultSpec } from '@/lib/designs/edits'
import type { StudioProps } from '@/lib/designs/types'
import { formatNumber } from '@/lib/format/quantity'
import { studioCommands } from './commands'
import { useOnPage } from '@/components/ui/use-on-page'
import { caution } from '@/lib/caution'
import { useAddress, viewFromSearch } from './shell/address'
import { Drawer } from './shell/drawer'
import { FiguresLine } from './shell/figures-line'
import { DesignTitleBlock } from './shell/design-title-block'
import { LivePlanes } from './shell/live-planes'
import { LivePlots } from './shell/live-plots'
import { useSettled } from './shell/use-derived'
import { Statement } from './statement/statement'
import { createStudioStore, sameSpec } from './store'

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
export function Studio({ design, viewer, versions, draft, difference, actions }: StudioProps) {
  const search = useSearchParams()
  const { mayEdit } = viewer
  const drafting = useDrafting({
    kind: 'designs',
    id: design.id,
    accountId: viewer.accountId,
    mayEdit,
    draft,
    versions,
    startingSpec: defaultSpec,
    makeStore: (opening) => {
      const { view, drawer } = viewFromSearch(new URLSearchParams(search.toString()))
      return createStudioStore(opening, view, drawer)
    },
    loadCheck: () => import('./shell/spec-from').then(({ specFrom }) => specFrom),
  })
  const { store, saved, latest, isSaving, setIsSaving } = drafting

  // Told at intervals of a drag: what stands here in words needn't follow the hand within the frame, the plots do.
  const { spec, made } = useSettled(store)
  useAddress(store)
  // Computed figures may differ in their last digit between the server's engine and this browser's: they are shown here alone.
  const onPage = useOnPage()

  const commands = useMemo(
    () => studioCommands(store, { mayEdit, openSave: () => setIsSaving(true) }),
    [store, mayEdit, setIsSaving],
  )
  useCommandKeys(commands)

  return (
    <>
      <SheetHeader
        crumbs={[{ label: design.projectName, href: `/projects/${design.projectId}` }, { label: design.title }]}
        address={`/designs/${design.id}`}
        store={store}
        draftStatus={drafting.draftStatus}
        latest={latest}
        nextNumber={drafting.nextNumber}
        unchanged={latest !== undefined && sameSpec(latest.spec, spec)}
        mayEdit={mayEdit}
        isSaving={isSaving}
        onSaving={setIsSaving}
      />

      {isSaving ? (
        <SaveVersion
          what="design"
          save={(note, onTopOf) => actions.saveVersion({ designId: design.id, ...drafting.stated(note, onTopOf) })}
          compare={(theirs) => (
            <CompareSpecs
              left={{ label: `Version ${theirs.number}`, spec: theirs.spec }}
              right={{ label: 'Your draft', spec: store.getState().spec }}
            />
          )}
          {...drafting.savePart}
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
          <KeptNotice kept={drafting.kept} onBringBack={drafting.bringBack} onLetGo={drafting.letGo} />
          <Statement store={store} readOnly={!mayEdit} />
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
                <LivePlots store={store} trusted={made.trust} readOnly={!mayEdit} />
              </Fence>
              {isFirDesign(made.spec) ? null : (
                <Fence what="The departure table" retryOn={spec}>
                  <DepartureTable
                    store={store}
                    spec={made.spec}
                    versions={made.versions}
                    trust={made.trust}
                    readOnly={!mayEdit}
                  />
                </Fence>
              )}
            </div>
            <aside aria-label="Planes, requirements and title block" className="flex min-w-0 flex-col gap-5">
              <Fence what="The planes" retryOn={spec}>
                <LivePlanes store={store} />
              </Fence>
              <Fence what="The requirement sheet" retryOn={spec}>
                <SheetPanel store={store} spec={spec} readOnly={!mayEdit} />
              </Fence>
              <DesignTitleBlock design={design} latest={latest} spec={spec} viewer={viewer} />
            </aside>
          </div>
        ) : null}

        <Drawer store={store} design={design} spec={spec} settled={made} saved={saved} mayEdit={mayEdit} />
        <footer className="border-t border-graph py-4 text-[13px] text-pencil">{caution}</footer>
      </main>
    </>
  )
}
