import { useEffect, useState } from 'react'
import { useStore, type StoreApi } from 'zustand'
import { sameValue } from '@/lib/designs/same-value'
import { createAutosave, type DraftedState, type StoredDraft } from './autosave'
import { freshest, remember } from './desk'
import { forgetKeptDraft, keptDraft } from './kept-draft'

/*
 * What every kind of sheet has that is drafted, undone, saved by itself and saved on purpose as versions: a design as much as a chain.
 */

export interface SheetState<Spec> extends DraftedState<Spec> {
  readonly past: readonly Spec[]
  readonly future: readonly Spec[]
  undo(): void
  redo(): void
  dismissRefusal(): void
}
export type SheetStore<Spec> = Pick<StoreApi<SheetState<Spec>>, 'getState' | 'getInitialState' | 'subscribe'>

interface SavedVersion<Spec> {
  readonly number: number
  readonly note: string
  readonly savedBy: string
  readonly spec: Spec
}

interface DraftingOptions<Spec, Version extends SavedVersion<Spec>, Store extends SheetStore<Spec>> {
  /** Where drafts of this kind are sent, and whose it is. */
  readonly kind: 'designs' | 'chains'
  readonly id: string
  readonly accountId: string
  readonly mayEdit: boolean
  /** As the page brought them; versions newest first. */
  readonly draft: StoredDraft<Spec> | null
  readonly versions: readonly Version[]
  /** What a sheet opens with that has neither draft nor version. */
  readonly startingSpec: Spec
  makeStore(opening: Spec): Store
  /** Reads a draft that this browser kept; loaded only when there is one. */
  loadCheck(): Promise<(text: string) => Spec | null>
}

/** The life of a sheet on its page: its store, its autosave, its versions, and what this browser kept of it. */
export function useDrafting<Spec, Version extends SavedVersion<Spec>, Store extends SheetStore<Spec>>({
  kind,
  id,
  accountId,
  mayEdit,
  startingSpec,
  makeStore,
  loadCheck,
  ...brought
}: DraftingOptions<Spec, Version, Store>) {
  const [{ draft, versions }] = useState(() =>
    freshest(accountId, id, { draft: brought.draft, versions: brought.versions }),
  )
  const [saved, setSaved] = useState(versions)
  const latest = saved[0]
  const [store] = useState(() => makeStore(draft?.spec ?? versions[0]?.spec ?? startingSpec))
  // What was opened may make nothing; it is computed on the page alone, never while the server renders.
  useEffect(() => store.getState().dismissRefusal(), [store])
  const [parentNumber, setParentNumber] = useState(draft?.parentNumber ?? latest?.number ?? null)
  useEffect(() => remember(accountId, id, { versions: saved }), [accountId, id, saved])
  const [isSaving, setIsSaving] = useState(false)
  const [kept, setKept] = useState<Spec | null>(null)
  const [draftSavedAt, setDraftSavedAt] = useState<string | null>(null)

  const [autosave] = useState(() =>
    createAutosave<Spec>({
      kind,
      id,
      store,
      draft,
      parentNumber,
      onSaved: (stored) => {
        remember(accountId, id, { draft: stored })
        setDraftSavedAt(stored.updatedAt)
        // What this browser kept is of before: this draft has taken its place.
        setKept(null)
      },
    }),
  )
  const autosaveState = useStore(autosave.state)
  useEffect(() => (mayEdit ? autosave.start() : undefined), [autosave, mayEdit])

  const [check] = useState(() => loadCheck)
  useEffect(() => {
    // A draft that never reached the server waits in this browser; it is offered, not forced.
    void keptDraft(id, check).then((found) => {
      if (found && !sameValue(found, store.getState().spec)) setKept(() => found)
    })
  }, [id, check, store])

  function goOnFrom(version: Version) {
    setSaved((list) => (list.some(({ number }) => number === version.number) ? list : [version, ...list]))
    setParentNumber(version.number)
    autosave.startFrom(version.number)
    setIsSaving(false)
  }

  return {
    store,
    saved,
    latest,
    isSaving,
    setIsSaving,
    draftStatus: { state: autosaveState, onResolve: autosave.resolveStale },
    nextNumber: (latest?.number ?? 0) + 1,
    /** What this browser kept and the server never saw; null for whoever may not edit. */
    kept: kept !== null && mayEdit ? kept : null,
    bringBack(spec: Spec) {
      store.getState().propose(spec)
      setKept(null)
    },
    letGo() {
      forgetKeptDraft(id)
      setKept(null)
    },
    /** What is sent when a version is saved. */
    stated: (note: string, onTopOf?: number) => ({
      spec: store.getState().spec,
      note,
      parentNumber,
      ...(onTopOf === undefined ? {} : { onTopOf }),
    }),
    /** For SaveVersion, whatever the kind of sheet. */
    savePart: {
      nextNumber: (latest?.number ?? 0) + 1,
      parentNumber,
      draftSavedAt,
      onSaved: goOnFrom,
      onTakeTheirs: (version: Version) => {
        store.getState().propose(version.spec)
        goOnFrom(version)
      },
      onClose: () => setIsSaving(false),
    },
  }
}
