import { MutationObserver, QueryClient } from '@tanstack/react-query'
import { createStore } from 'zustand/vanilla'
import type { AutosaveOutcome } from '@/lib/designs/types'
import { sameValue } from '@/lib/designs/same-value'
import { forgetKeptDraft, keepDraft } from './kept-draft'

const QUIET_MS = 700
const RETRY_MS = 4000
/** Browsers refuse more than 64 kB of what outlives its page, all together. */
const MOST_KEEPALIVE_BYTES = 60_000

/** A draft as the server keeps it, of whatever kind of sheet. */
export interface StoredDraft<Spec> {
  readonly spec: Spec
  readonly parentNumber: number | null
  readonly revision: number
  readonly updatedAt: string
}

type Outcome<Spec> = AutosaveOutcome<StoredDraft<Spec>>

export type AutosaveState<Spec> =
  | { readonly kind: 'idle'; readonly savedAt: string | null }
  | { readonly kind: 'saving' }
  | { readonly kind: 'failed'; readonly reason: string }
  /** The server won't have it as it is: sending it again would not help, the next edit may. */
  | { readonly kind: 'refused'; readonly message: string }
  | { readonly kind: 'stale'; readonly current: StoredDraft<Spec> }

/** What autosave needs of a store. */
export interface DraftedState<Spec> {
  readonly spec: Spec
  readonly gestureMark: Spec | null
  propose(spec: Spec): boolean
}
export interface DraftedStore<Spec> {
  getState(): DraftedState<Spec>
  subscribe(listener: (now: DraftedState<Spec>, before: DraftedState<Spec>) => void): () => void
}

interface AutosaveOptions<Spec> {
  /** Where drafts of this kind are sent, and whose it is. */
  readonly kind: 'designs' | 'chains'
  readonly id: string
  readonly store: DraftedStore<Spec>
  readonly draft: StoredDraft<Spec> | null
  readonly parentNumber: number | null
  /** Told of each draft that reached the server. */
  onSaved(draft: StoredDraft<Spec>): void
}

/**
 * Saves the draft once the hand rests. What could not reach the server is kept in this browser until it does, so that a closed tab
 * or a lost connection costs nothing.
 */
export function createAutosave<Spec>({ kind, id, store, draft, parentNumber, onSaved }: AutosaveOptions<Spec>) {
  const state = createStore<AutosaveState<Spec>>()(() => ({ kind: 'idle', savedAt: draft?.updatedAt ?? null }))
  let revision = draft?.revision ?? 0
  let parent = parentNumber
  let saved: Spec = store.getState().spec
  let refused: Spec | null = null
  let timer: ReturnType<typeof setTimeout> | undefined
  let underWay = false

  const sender = new MutationObserver(new QueryClient(), {
    // A browser that believes itself offline must hear of the failure too, and not wait in silence.
    networkMode: 'always',
    mutationFn: (spec: Spec) => send(`/api/${kind}/${id}/draft`, { spec, parentNumber: parent, revision }),
  })

  function later(delayMs: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void save(), delayMs)
  }

  async function save(): Promise<void> {
    clearTimeout(timer)
    const { spec, gestureMark } = store.getState()
    if (gestureMark !== null || sameValue(spec, saved) || spec === refused) return
    keepDraft(id, spec)
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
      refused = null
      if (sameValue(store.getState().spec, spec)) forgetKeptDraft(id)
      onSaved({ spec, parentNumber: parent, revision, updatedAt: outcome.updatedAt })
      state.setState({ kind: 'idle', savedAt: outcome.updatedAt }, true)
      if (!sameValue(store.getState().spec, spec)) later(QUIET_MS)
    } catch (error) {
      if (error instanceof Refused) {
        refused = spec
        state.setState({ kind: 'refused', message: error.message }, true)
        if (store.getState().spec !== spec) later(QUIET_MS)
        return
      }
      state.setState({ kind: 'failed', reason: reasonOf(error) }, true)
      later(RETRY_MS)
    } finally {
      underWay = false
    }
  }

  return {
    state,

    /** Follows the store; the answer ends it. */
    start(): () => void {
      const unsubscribe = store.subscribe((now, before) => {
        if (now.spec === before.spec && now.gestureMark === before.gestureMark) return
        if (now.gestureMark === null && !sameValue(now.spec, saved)) later(QUIET_MS)
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
    resolveStale(current: StoredDraft<Spec>, take: 'theirs' | 'mine') {
      revision = current.revision
      saved = current.spec
      state.setState({ kind: 'idle', savedAt: current.updatedAt }, true)
      if (take === 'theirs') {
        forgetKeptDraft(id)
        store.getState().propose(current.spec)
      } else void save()
    },

    /** After a version was saved: the draft now starts from it. */
    startFrom(versionNumber: number) {
      parent = versionNumber
    },
  }
}

type DraftBody<Spec> = Pick<StoredDraft<Spec>, 'spec' | 'parentNumber' | 'revision'>

class Refused extends Error {}

async function send<Spec>(address: string, draft: DraftBody<Spec>): Promise<Outcome<Spec>> {
  const body = JSON.stringify(draft)
  const response = await fetch(address, {
    method: 'PUT',
    headers: { 'content-type': 'application/json' },
    body,
    keepalive: new Blob([body]).size <= MOST_KEEPALIVE_BYTES,
  })
  if (response.ok || response.status === 409) return (await response.json()) as Outcome<Spec>
  if (response.status === 422 || response.status === 413) throw new Refused(await sentenceOf(response))
  if (response.status === 401) throw new Error('you were signed out; sign in again in another tab')
  throw new Error(`the server answered ${response.status}`)
}

/** What the server says of a refusal, in its own words (RFC 9457). */
async function sentenceOf(response: Response): Promise<string> {
  const problem = (await response.json().catch(() => null)) as { readonly detail?: unknown } | null
  return typeof problem?.detail === 'string' ? problem.detail : `the server answered ${response.status}`
}

/** fetch throws a TypeError when no answer came at all. */
function reasonOf(error: unknown): string {
  if (error instanceof TypeError) return 'the server can’t be reached'
  return error instanceof Error ? error.message : String(error)
}
