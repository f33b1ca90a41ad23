import type { StudioCommand } from '@/components/studio/commands'
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
): readonly StudioCommand[] {
  const state = store.getState
  return [
    {
      id: 'undo',
      name: 'Undo',
      keys: 'Mod+Z',
      when: () => options.mayEdit && state().past.length > 0,
      run: () => state().undo(),
    },
    {
      id: 'redo',
      name: 'Redo',
      keys: 'Mod+Shift+Z',
      when: () => options.mayEdit && state().future.length > 0,
      run: () => state().redo(),
    },
    { id: 'save-version', name: 'Save version', keys: 'Mod+S', when: () => options.mayEdit, run: options.openSave },
    {
      id: 'lift-trace',
      name: 'Lift the trace from the fold chart',
      keys: 'Mod+0',
      when: () => state().traceHz !== null,
      run: () => state().trace(null),
    },
  ]
}
