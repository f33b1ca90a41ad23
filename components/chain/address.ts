'use client'

import { useEffect } from 'react'
import type { ChainStore } from './store'
import { type ChainDrawerTab, chainDrawerTabs } from './view'

/* The address bar holds how the chain is looked at: which drawer, and what is traced on the fold chart. A link opens as its sender saw it. */

export function chainViewToSearch(drawer: ChainDrawerTab, traceHz: number | null): string {
  const search = new URLSearchParams({ drawer })
  if (traceHz !== null) search.set('at', String(Number(traceHz.toPrecision(5))))
  return search.toString()
}

export function chainViewFromSearch(search: URLSearchParams): { drawer?: ChainDrawerTab; traceHz: number | null } {
  const drawer = chainDrawerTabs.find((tab) => tab === search.get('drawer'))
  const at = Number(search.get('at') ?? Number.NaN)
  const traceHz = at >= 0 && Number.isFinite(at) ? at : null
  return drawer ? { drawer, traceHz } : { traceHz }
}

const SETTLE_MS = 300

/** Keeps the address in step with the view, once it rests. */
export function useChainAddress(store: ChainStore): void {
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout>
    const unsubscribe = store.subscribe((now, before) => {
      if (now.drawer === before.drawer && now.traceHz === before.traceHz) return
      clearTimeout(timer)
      timer = setTimeout(() => {
        const { drawer, traceHz } = store.getState()
        history.replaceState(history.state, '', `${location.pathname}?${chainViewToSearch(drawer, traceHz)}`)
      }, SETTLE_MS)
    })
    return () => {
      unsubscribe()
      clearTimeout(timer)
    }
  }, [store])
}
