'use client'

import dynamic from 'next/dynamic'
import { Tabs } from '@/components/ui/tabs'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { drawerNames } from '../commands'
import type { Versions } from '../derive'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import { drawerTabs } from '../view'

const Opening = () => <p className="py-6 text-[14px] text-pencil">Opening…</p>
const RatesPanel = dynamic(() => import('../panels/rates/rates-panel').then((module) => module.RatesPanel), {
  loading: Opening,
})
const TimePanel = dynamic(() => import('../panels/time/time-panel').then((module) => module.TimePanel), {
  loading: Opening,
})
const SectionsPanel = dynamic(
  () => import('../panels/sections/sections-panel').then((module) => module.SectionsPanel),
  { loading: Opening },
)
const SignalTrial = dynamic(() => import('../trial/signal-trial').then((module) => module.SignalTrial), {
  loading: Opening,
  ssr: false,
})
const History = dynamic(() => import('../panels/history').then((module) => module.History), { loading: Opening })

/** The drawer under the sheet: one panel at a time, loaded when first opened. */
export function Drawer({
  store,
  design,
  versions,
  saved,
  mayEdit,
  onRestored,
}: {
  store: StudioStore
  design: DesignRecord
  versions: Versions | null
  saved: readonly VersionSummary[]
  mayEdit: boolean
  onRestored(fromNumber: number): void
}) {
  const spec = useStudio(store, (state) => state.spec)
  const tab = useStudio(store, (state) => state.drawer)
  const { open, propose } = store.getState()
  const runAt = (sampleRateHz: number) => {
    const now = store.getState().spec
    propose({ ...now, sampleRateHz }, 'sampleRateHz')
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
        {tab === 'history' ? (
          <History
            versions={saved}
            current={spec}
            mayEdit={mayEdit}
            compareHref={(a, b) => `/designs/${design.id}/compare?a=${a}&b=${b}`}
            handOverHref={(number) => `/designs/${design.id}/versions/${number}`}
            onRestore={(older, fromNumber) => {
              if (propose(older)) onRestored(fromNumber)
            }}
          />
        ) : null}
        {tab === 'trial' ? <SignalTrial spec={spec} mayEdit={mayEdit} onRedesignAt={runAt} /> : null}
        {versions && tab === 'rates' ? <RatesPanel spec={spec} onRate={runAt} /> : null}
        {versions && tab === 'time' ? <TimePanel spec={spec} versions={versions} /> : null}
        {versions && tab === 'sections' ? <SectionsPanel spec={spec} versions={versions} /> : null}
      </div>
    </section>
  )
}
