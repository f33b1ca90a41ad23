'use client'

import dynamic from 'next/dynamic'
import type { ChainSpec, ComputedChain } from '@/dsp'
import { Fence } from '@/components/ui/fence'
import { Tabs } from '@/components/ui/tabs'
import type { ChainVersionSummary } from '@/lib/chains/types'
import { chainDrawerNames } from './commands'
import type { ChainStore } from './store'
import { useChain } from './use-chain'
import { chainDrawerTabs } from './view'

const Opening = () => <p className="py-6 text-[14px] text-pencil">Opening…</p>
const TradeOffsPanel = dynamic(() => import('./panels/trade-offs-panel').then((module) => module.TradeOffsPanel), {
  ssr: false,
  loading: Opening,
})
const ResponsePanel = dynamic(() => import('./panels/response-panel').then((module) => module.ResponsePanel), {
  ssr: false,
  loading: Opening,
})
const DelayPanel = dynamic(() => import('./panels/delay-panel').then((module) => module.DelayPanel), {
  ssr: false,
  loading: Opening,
})
const NoisePanel = dynamic(() => import('./panels/noise-panel').then((module) => module.NoisePanel), {
  ssr: false,
  loading: Opening,
})
const TolerancePanel = dynamic(() => import('./panels/tolerance-panel').then((module) => module.TolerancePanel), {
  ssr: false,
  loading: Opening,
})
const BuildSheetPanel = dynamic(() => import('./panels/build-sheet-panel').then((module) => module.BuildSheetPanel), {
  ssr: false,
  loading: Opening,
})
const ProofPanel = dynamic(() => import('./panels/proof-panel').then((module) => module.ProofPanel), {
  ssr: false,
  loading: Opening,
})
const HistoryPanel = dynamic(() => import('./panels/history-panel').then((module) => module.HistoryPanel), {
  ssr: false,
  loading: Opening,
})

/** The drawer under the chain: one panel at a time, loaded when first opened. */
export function ChainDrawer({
  store,
  chainId,
  spec,
  chain,
  saved,
  readOnly,
}: {
  store: ChainStore
  chainId: string
  spec: ChainSpec
  /** Null where the spec makes no chain. */
  chain: ComputedChain | null
  saved: readonly ChainVersionSummary[]
  readOnly: boolean
}) {
  const tab = useChain(store, (state) => state.drawer)
  const tolerance = useChain(store, (state) => state.tolerance)
  const { open, propose, keepTolerance } = store.getState()
  const given = { spec, propose: (next: ChainSpec) => propose(next), readOnly }
  return (
    <section aria-label="Drawer" className="mt-6 border-t border-ink pt-1">
      <Tabs
        label="Drawer"
        panelId="drawer-panel"
        tabs={chainDrawerTabs.map((id) => ({ id, label: chainDrawerNames[id] }))}
        active={tab}
        onChange={open}
      />
      <div id="drawer-panel" role="tabpanel" aria-labelledby={`drawer-panel-${tab}`} className="min-h-64 pt-3 pb-10">
        <Fence what="This panel" retryOn={tab}>
          {tab === 'history' ? <HistoryPanel {...given} chainId={chainId} versions={saved} /> : null}
          {chain && tab === 'trade-offs' ? <TradeOffsPanel {...given} chain={chain} /> : null}
          {chain && tab === 'response' ? <ResponsePanel {...given} chain={chain} /> : null}
          {chain && tab === 'delay' ? <DelayPanel {...given} chain={chain} /> : null}
          {chain && tab === 'noise' ? <NoisePanel {...given} chain={chain} /> : null}
          {chain && tab === 'tolerance' ? (
            <TolerancePanel
              {...given}
              chain={chain}
              held={tolerance}
              onResult={(result, of) => keepTolerance(of, result)}
            />
          ) : null}
          {chain && tab === 'build-sheet' ? <BuildSheetPanel {...given} chain={chain} /> : null}
          {chain && tab === 'proof' ? <ProofPanel {...given} chain={chain} /> : null}
        </Fence>
      </div>
    </section>
  )
}
