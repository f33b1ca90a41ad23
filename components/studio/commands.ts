import { draftingCommands, type SheetCommand } from '@/components/drafting/commands'
import type { StudioStore } from './store'
import type { DrawerTab } from './view'

export const drawerNames: Record<DrawerTab, string> = {
  candidates: 'Candidates',
  rates: 'Rates',
  time: 'Time response',
  sections: 'Sections',
  trial: 'Signal trial',
  original: 'Original',
  history: 'History',
}

/** What can be done in the studio, as data. */
export function studioCommands(
  store: StudioStore,
  options: { readonly mayEdit: boolean; readonly openSave: () => void },
): readonly SheetCommand[] {
  const state = store.getState
  return [
    ...draftingCommands(store, options),
    { id: 'reset-view', name: 'Show the whole band', keys: 'Mod+0', when: () => true, run: () => state().resetView() },
    {
      id: 'toggle-delay',
      name: 'Remove or keep the best constant delay',
      keys: 'Mod+Shift+D',
      when: () => options.mayEdit,
      run: () => state().removeDelay(!state().spec.budget.removeDelay),
    },
  ]
}
