import type { ComponentProps } from 'react'
import { useStore } from 'zustand'
import { Header } from '@/components/frame/header'
import { Button, buttonClass } from '@/components/ui/button'
import { DraftStatus } from './draft-status'
import type { SheetStore } from './use-drafting'

/** The head of a sheet: where it belongs, whether its draft is safe, undo, hand-over and saving. */
export function SheetHeader<Spec>({
  crumbs,
  address,
  store,
  draftStatus,
  latest,
  nextNumber,
  unchanged,
  mayEdit,
  isSaving,
  onSaving,
}: {
  crumbs: ComponentProps<typeof Header>['crumbs']
  /** Of the sheet, e.g. `/designs/…`. */
  address: string
  store: SheetStore<Spec>
  draftStatus: ComponentProps<typeof DraftStatus<Spec>>
  latest: { readonly number: number } | undefined
  nextNumber: number
  /** The draft equals the latest version. */
  unchanged: boolean
  mayEdit: boolean
  isSaving: boolean
  onSaving(open: boolean): void
}) {
  const canUndo = useStore(store, (state) => state.past.length > 0)
  const canRedo = useStore(store, (state) => state.future.length > 0)
  return (
    <Header crumbs={crumbs}>
      {mayEdit ? (
        <>
          <DraftStatus {...draftStatus} />
          <Button disabled={!canUndo} onClick={() => store.getState().undo()} title="Undo (Ctrl+Z)">
            Undo
          </Button>
          <Button disabled={!canRedo} onClick={() => store.getState().redo()} title="Redo (Ctrl+Shift+Z)">
            Redo
          </Button>
        </>
      ) : null}
      {latest ? (
        <a className={buttonClass()} href={`${address}/versions/${latest.number}`}>
          Hand over version {latest.number}…
        </a>
      ) : null}
      {mayEdit ? (
        <Button
          kind="primary"
          aria-expanded={isSaving}
          disabled={unchanged}
          title={unchanged ? `The draft equals version ${latest?.number}` : 'Save a version (Ctrl+S)'}
          onClick={() => onSaving(!isSaving)}
        >
          {unchanged ? `Version ${latest?.number} saved` : `Save version ${nextNumber}`}
        </Button>
      ) : null}
    </Header>
  )
}
