import { useStore } from 'zustand'
import type { ChainCommands, ChainState, ChainStore } from './store'

/** One part of the chain page's state; the component repaints only when that part changes. */
export function useChain<Part>(store: ChainStore, select: (state: ChainState & ChainCommands) => Part): Part {
  return useStore(store, select)
}
