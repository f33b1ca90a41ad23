import { useStore } from 'zustand'
import type { StudioCommands, StudioState, StudioStore } from './store'

/** One part of the studio's state; the component repaints only when that part changes. */
export function useStudio<Part>(store: StudioStore, select: (state: StudioState & StudioCommands) => Part): Part {
  return useStore(store, select)
}
