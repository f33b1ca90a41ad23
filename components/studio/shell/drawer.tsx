'use client'

import dynamic from 'next/dynamic'
import { isFirDesign, type DepartureBudget, type DesignSpec, type Method } from '@/dsp'
import { withRate } from '@/lib/designs/edits'
import { Fence } from '@/components/ui/fence'
import { Tabs } from '@/components/ui/tabs'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { drawerNames } from '../commands'
import { compareAddress } from '../compare/sides'
import type { StudioStore } from '../store'
import { coreOf } from '../core-spec'
import { useStudio } from '../use-studio'
import { drawerTabs } from '../view'
import type { Settled } from './use-derived'

const Opening = () => <p className="py-6 text-[14px] text-pencil">Opening…</p>
const CandidatesPanel = dynamic(
  () => import('../candidates/candidates-panel').then((module) => module.CandidatesPanel),
  { ssr: false, loading: Opening },
)
const OriginalPanel = dynamic(() => import('../original/original-panel').then((module) => module.OriginalPanel), {
  ssr: false,
  loading: Opening,
})
const RatesPanel = dynamic(() => import('../panels/rates/rates-panel').then((module) => module.RatesPanel), {
  ssr: false,
  loading: Opening,
})
const TimePanel = dynamic(() => import('../panels/time/time-panel').then((module) => module.TimePanel), {
  ssr: false,
  loading: Opening,
})
const SectionsPanel = dynamic(
  () => import('../panels/sections/sections-panel').then((module) => module.SectionsPanel),
  { ssr: false, loading: Opening },
)
const SignalTrial = dynamic(() => import('../trial/signal-trial').then((module) => module.SignalTrial), {
  ssr: false,
  loading: Opening,
})
const History = dynamic(() => import('../panels/history').then((module) => module.History), {
  ssr: false,
  loading: Opening,
})

/** The drawer under the sheet: one panel at a time, loaded when first opened. */
export function Drawer({
  store,
  design,
  spec,
  settled,
  saved,
  mayEdit,
}: {
  store: StudioStore
  design: DesignRecord
  /** The design as the panels see it: it may follow a drag a moment later. */
  spec: DesignSpec
  settled: Settled | null
  saved: readonly VersionSummary[]
  mayEdit: boolean
}) {
  const tab = useStudio(store, (state) => state.drawer)
  const { open, propose } = store.getState()
  const runAt = (sampleRateHz: number, how?: Method) => {
    const now = store.getState().spec
    const moved = withRate(now, sampleRateHz)
    propose(how && !isFirDesign(moved) ? { ...moved, how } : moved, 'sampleRateHz')
  }

  return (
    <section aria-label="Drawer" className="mt-8 border-t border-ink pt-1">
      <Tabs
        label="Drawer"
        panelId="drawer-panel"
        tabs={drawerTabs.map((id) => ({ id, label: drawerNames[id] }))}
        active={tab}
        onChange={open}
      />
      <div id="drawer-panel" role="tabpanel" aria-labelledby={`drawer-panel-${tab}`} className="min-h-64 pt-3 pb-10">
        <Fence what="This panel" retryOn={tab}>
          {tab === 'history' ? (
            <History
              versions={saved}
              current={spec}
              mayEdit={mayEdit}
              compareHref={(sides) => compareAddress(design.id, sides)}
              handOverHref={(number) => `/designs/${design.id}/versions/${number}`}
              onRestore={(older) => propose(older)}
            />
          ) : null}
          {tab === 'trial' ? <SignalTrial spec={spec} mayEdit={mayEdit} onRedesignAt={runAt} /> : null}
          {tab === 'candidates' ? (
            <CandidatesPanel store={store} designId={design.id} spec={spec} mayEdit={mayEdit} />
          ) : null}
          {tab === 'original' ? (
            <OriginalPanel store={store} spec={spec} settled={settled} readOnly={!mayEdit} />
          ) : null}
          {settled && tab === 'rates' ? (
            <RatesPanel
              spec={coreOf(settled.spec)}
              mayEdit={mayEdit}
              onRate={runAt}
              {...(mayEdit && { onBudget: (budget: DepartureBudget) => propose({ ...store.getState().spec, budget }) })}
            />
          ) : null}
          {settled && tab === 'time' ? <TimePanel spec={settled.spec} versions={settled.versions} /> : null}
          {settled && tab === 'sections' ? <SectionsPanel spec={settled.spec} versions={settled.versions} /> : null}
        </Fence>
      </div>
    </section>
  )
}
