import { MutationObserver, QueryClient } from '@tanstack/react-query'
import { createStore } from 'zustand/vanilla'
import type { DesignSpec } from '@/dsp'
import type { AutosaveOutcome, DraftRecord } from '@/lib/designs/types'
import { sameSpec, type StudioStore } from '../store'
import { forgetKeptDraft, keepDraft } from './kept-draft'

const QUIET_MS = 700
const RETRY_MS = 4000

export type AutosaveState =
  | { readonly kind: 'idle'; readonly savedAt: string | null }
  | { readonly kind: 'saving' }
  | { readonly kind: 'failed'; readonly reason: string }
  | { readonly kind: 'stale'; readonly current: DraftRecord }

interface AutosaveOptions {
  readonly designId: string
  readonly store: StudioStore
  readonly draft: DraftRecord | null
  readonly parentNumber: number | null
  /** Told of each draft that reached the server. */
  onSaved(draft: DraftRecord): void
}

/**
 * Saves the draft once the hand rests. What could not reach the server is kept in this browser until it does, so that a closed tab
 * or a lost connection costs nothing.
 */
export function createAutosave({ designId, store, draft, parentNumber, onSaved }: AutosaveOptions) {
  const state = createStore<AutosaveState>()(() => ({ kind: 'idle', savedAt: draft?.updatedAt ?? null }))
  let revision = draft?.revision ?? 0
  let parent = parentNumber
  let saved: DesignSpec = store.getState().spec
  let timer: ReturnType<typeof setTimeout> | undefined
  let underWay = false

  const sender = new MutationObserver(new QueryClient(), {
    // A browser that believes itself offline must hear of the failure too, and not wait in silence.
    networkMode: 'always',
    mutationFn: (spec: DesignSpec) => send(designId, { spec, parentNumber: parent, revision }),
  })

  function later(delayMs: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void save(), delayMs)
  }

  async function save(): Promise<void> {
    clearTimeout(timer)
    const { spec, gestureMark } = store.getState()
    if (gestureMark !== null || sameSpec(spec, saved)) return
    keepDraft(designId, spec)
    // Two at once would come from the same revision, and the second be taken for another window's: the answer to the first sends it.
    if (underWay) return
    state.setState({ kind: 'saving' }, true)
    underWay = true
    try {
      const outcome = await sender.mutate(spec)
      if (outcome.outcome === 'stale') {
        state.setState({ kind: 'stale', current: outcome.current }, true)
        return
      }
      revision = outcome.revision
      saved = spec
      if (sameSpec(store.getState().spec, spec)) forgetKeptDraft(designId)
      onSaved({ spec, parentNumber: parent, revision, updatedAt: outcome.updatedAt })
      state.setState({ kind: 'idle', savedAt: outcome.updatedAt }, true)
      if (!sameSpec(store.getState().spec, spec)) later(QUIET_MS)
    } catch (error) {
      state.setState({ kind: 'failed', reason: reasonOf(error) }, true)
      later(RETRY_MS)
    } finally {
      underWay = false
    }
  }

  return {
    state,

    /** Follows the studio; the answer ends it. */
    start(): () => void {
      const unsubscribe = store.subscribe((now, before) => {
        if (now.spec === before.spec && now.gestureMark === before.gestureMark) return
        if (now.gestureMark === null && !sameSpec(now.spec, saved)) later(QUIET_MS)
      })
      const onHide = () => void save()
      addEventListener('pagehide', onHide)
      return () => {
        unsubscribe()
        removeEventListener('pagehide', onHide)
        // Leaving for another page doesn't wait for the hand to rest.
        void save()
      }
    },

    /** After the other window's draft was taken or overruled: goes on from its revision. */
    resolveStale(current: DraftRecord, take: 'theirs' | 'mine') {
      revision = current.revision
      saved = current.spec
      state.setState({ kind: 'idle', savedAt: current.updatedAt }, true)
      if (take === 'theirs') {
        forgetKeptDraft(designId)
        store.getState().propose(current.spec)
      } else void save()
    },

    /** After a version was saved: the draft now starts from it. */
    startFrom(versionNumber: number) {
      parent = versionNumber
    },
  }
}

interface DraftBody {
  readonly spec: DesignSpec
  readonly parentNumber: number | null
  readonly revision: number
}

async function send(designId: string, body: DraftBody): Promise<AutosaveOutcome> {
  const response = await fetch(`/api/designs/${designId}/draft`, {
    method: 'PUT',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
    keepalive: true,
  })
  if (response.ok || response.status === 409) return (await response.json()) as AutosaveOutcome
  if (response.status === 401) throw new Error('you were signed out; sign in again in another tab')
  throw new Error(`the server answered ${response.status}`)
}

/** fetch throws a TypeError when no answer came at all. */
function reasonOf(error: unknown): string {
  if (error instanceof TypeError) return 'the server can’t be reached'
  return error instanceof Error ? error.message : String(error)
}
