'use client'

import { useMutation } from '@tanstack/react-query'
import { useCallback, useEffect, useRef, useState } from 'react'
import type { DesignSpec } from '@/dsp'
import type { AutosaveOutcome, DraftRecord } from '@/lib/designs/types'
import { sameSpec, type StudioStore } from '../store'

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
  readonly enabled: boolean
}

const keptKey = (designId: string) => `polewright-draft-${designId}`

/**
 * Saves the draft once the hand rests. What could not reach the server is kept in this browser until it does, so that a closed tab
 * or a lost connection costs nothing.
 */
export function useAutosave({ designId, store, draft, parentNumber, enabled }: AutosaveOptions) {
  const [state, setState] = useState<AutosaveState>({ kind: 'idle', savedAt: draft?.updatedAt ?? null })
  const revision = useRef(draft?.revision ?? 0)
  const parent = useRef(parentNumber)
  const saved = useRef<DesignSpec>(store.getState().spec)
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined)

  const { mutateAsync } = useMutation({
    mutationFn: async (spec: DesignSpec): Promise<AutosaveOutcome> => {
      const response = await fetch(`/api/designs/${designId}/draft`, {
        method: 'PUT',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify({ spec, parentNumber: parent.current, revision: revision.current }),
        keepalive: true,
      })
      if (response.ok || response.status === 409) return (await response.json()) as AutosaveOutcome
      if (response.status === 401) throw new Error('you were signed out; sign in again in another tab')
      throw new Error(`the server answered ${response.status}`)
    },
  })

  const save = useCallback(async () => {
    clearTimeout(timer.current)
    const { spec, gestureMark } = store.getState()
    if (!enabled || gestureMark !== null || sameSpec(spec, saved.current)) return
    setState({ kind: 'saving' })
    localStorage.setItem(keptKey(designId), JSON.stringify({ spec, revision: revision.current }))
    try {
      const outcome = await mutateAsync(spec)
      if (outcome.outcome === 'stale') {
        setState({ kind: 'stale', current: outcome.current })
        return
      }
      revision.current = outcome.revision
      saved.current = spec
      localStorage.removeItem(keptKey(designId))
      setState({ kind: 'idle', savedAt: outcome.updatedAt })
      if (!sameSpec(store.getState().spec, spec)) timer.current = setTimeout(() => void save(), QUIET_MS)
    } catch (error) {
      const reason =
        error instanceof TypeError
          ? 'the server can’t be reached'
          : error instanceof Error
            ? error.message
            : String(error)
      setState({ kind: 'failed', reason })
      timer.current = setTimeout(() => void save(), RETRY_MS)
    }
  }, [designId, enabled, mutateAsync, store])

  useEffect(() => {
    if (!enabled) return undefined
    const unsubscribe = store.subscribe((now, before) => {
      if (now.spec === before.spec && now.gestureMark === before.gestureMark) return
      if (now.gestureMark !== null || sameSpec(now.spec, saved.current)) return
      clearTimeout(timer.current)
      timer.current = setTimeout(() => void save(), QUIET_MS)
    })
    const onHide = () => void save()
    addEventListener('pagehide', onHide)
    return () => {
      unsubscribe()
      removeEventListener('pagehide', onHide)
      clearTimeout(timer.current)
    }
  }, [enabled, save, store])

  /** After the other tab's draft was taken or overruled: go on from its revision. */
  const resolveStale = useCallback(
    (current: DraftRecord, take: 'theirs' | 'mine') => {
      revision.current = current.revision
      if (take === 'theirs') {
        saved.current = current.spec
        store.getState().propose(current.spec)
        setState({ kind: 'idle', savedAt: current.updatedAt })
      } else {
        saved.current = current.spec
        void save()
      }
    },
    [save, store],
  )

  /** After a version was saved: the draft now starts from it. */
  const startFrom = useCallback((number: number) => {
    parent.current = number
  }, [])

  return { state, save, resolveStale, startFrom }
}

/** A draft that this browser kept because it never reached the server; null when there is none. */
export function keptDraft(designId: string): unknown {
  try {
    const text = localStorage.getItem(keptKey(designId))
    return text === null ? null : (JSON.parse(text) as { spec: unknown }).spec
  } catch {
    // Storage may be switched off, or hold something that isn't ours.
    return null
  }
}

export function forgetKeptDraft(designId: string): void {
  try {
    localStorage.removeItem(keptKey(designId))
  } catch {
    // Storage may be switched off; then there was nothing to forget.
  }
}
