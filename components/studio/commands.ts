import type { StudioStore } from './store'
import type { DrawerTab } from './view'

/** What can be done in the studio, as data: buttons, key presses and the list of keys are all made from it. */
export interface StudioCommand {
  readonly id: string
  readonly name: string
  /** Written as "Mod+Shift+Z"; Mod is Ctrl, or ⌘ where that is the custom. */
  readonly keys?: string
  readonly when: () => boolean
  readonly run: () => void
}

export const drawerNames: Record<DrawerTab, string> = {
  candidates: 'Candidates',
  rates: 'Rates',
  time: 'Time response',
  sections: 'Sections',
  trial: 'Signal trial',
  original: 'Original',
  history: 'History',
}

export function studioCommands(
  store: StudioStore,
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

interface KeyPress {
  readonly key: string
  readonly ctrlKey: boolean
  readonly metaKey: boolean
  readonly shiftKey: boolean
  readonly altKey: boolean
}

export function matches(keys: string, press: KeyPress): boolean {
  const parts = keys.toLowerCase().split('+')
  const key = parts.at(-1)
  return (
    press.key.toLowerCase() === key &&
    parts.includes('mod') === (press.ctrlKey || press.metaKey) &&
    parts.includes('shift') === press.shiftKey &&
    parts.includes('alt') === press.altKey
  )
}
