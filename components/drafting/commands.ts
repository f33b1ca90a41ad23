import { useEffect } from 'react'
import type { SheetStore } from './use-drafting'

/** What can be done on a sheet, as data: buttons, key presses and the list of keys are all made from it. */
export interface SheetCommand {
  readonly id: string
  readonly name: string
  /** Written as "Mod+Shift+Z"; Mod is Ctrl, or ⌘ where that is the custom. */
  readonly keys?: string
  readonly when: () => boolean
  readonly run: () => void
}

/** What can be done on every kind of sheet. */
export function draftingCommands<Spec>(
  store: SheetStore<Spec>,
  { mayEdit, openSave }: { readonly mayEdit: boolean; readonly openSave: () => void },
): readonly SheetCommand[] {
  const state = store.getState
  return [
    {
      id: 'undo',
      name: 'Undo',
      keys: 'Mod+Z',
      when: () => mayEdit && state().past.length > 0,
      run: () => state().undo(),
    },
    {
      id: 'redo',
      name: 'Redo',
      keys: 'Mod+Shift+Z',
      when: () => mayEdit && state().future.length > 0,
      run: () => state().redo(),
    },
    { id: 'save-version', name: 'Save version', keys: 'Mod+S', when: () => mayEdit, run: openSave },
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

/** Listens for the keys of commands while the sheet is open. */
export function useCommandKeys(commands: readonly SheetCommand[]): void {
  useEffect(() => {
    function onKeyDown(event: KeyboardEvent) {
      const command = commands.find(({ keys }) => keys !== undefined && matches(keys, event))
      if (!command) return
      event.preventDefault()
      if (command.when()) command.run()
    }
    addEventListener('keydown', onKeyDown)
    return () => removeEventListener('keydown', onKeyDown)
  }, [commands])
}
