import { draftingCommands, type SheetCommand } from '@/components/drafting/commands'
import type { ChainStore } from './store'
import type { ChainDrawerTab } from './view'

export const chainDrawerNames: Record<ChainDrawerTab, string> = {
  'trade-offs': 'Trade-offs',
  response: 'Response',
  delay: 'Delay',
  noise: 'Noise',
  tolerance: 'Tolerance',
  'build-sheet': 'Build sheet',
  proof: 'Proof',
  history: 'History',
}

/** What can be done on the chain page, as data. */
export function chainCommands(
  store: ChainStore,
  options: { readonly mayEdit: boolean; readonly openSave: () => void },
): readonly SheetCommand[] {
  const state = store.getState
  return [
    ...draftingCommands(store, options),
    {
      id: 'lift-trace',
      name: 'Lift the trace from the fold chart',
      keys: 'Mod+0',
      when: () => state().traceHz !== null,
      run: () => state().trace(null),
    },
  ]
}
