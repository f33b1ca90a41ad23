import { useCallback, useEffect, useRef, useState } from 'react'
import type { CandidateOutcome, CandidateRequest, CandidateRow } from '@/dsp'
import { startSearch, type Search } from './search-client'

export interface SearchState {
  readonly request: CandidateRequest | null
  readonly rows: readonly CandidateRow[]
  readonly state: 'idle' | 'searching' | 'done' | 'stopped' | 'failed'
  readonly outcome: CandidateOutcome | null
  readonly seconds: number
}

const nothing: SearchState = { request: null, rows: [], state: 'idle', outcome: null, seconds: 0 }

/** One search at a time: rows as they come, stopped when asked, when another begins and when the panel closes. */
export function useSearch() {
  const [found, setFound] = useState<SearchState>(nothing)
  const running = useRef<Search | null>(null)
  useEffect(() => () => running.current?.stop(), [])

  const stop = useCallback(() => {
    running.current?.stop()
    running.current = null
    setFound((before) => (before.state === 'searching' ? { ...before, state: 'stopped' } : before))
  }, [])

  const start = useCallback((request: CandidateRequest) => {
    running.current?.stop()
    const began = performance.now()
    setFound({ ...nothing, request, state: 'searching' })
    const search = startSearch(request, (row) => {
      if (running.current === search) setFound((before) => ({ ...before, rows: [...before.rows, row] }))
    })
    running.current = search
    const end = (state: 'done' | 'failed', outcome: CandidateOutcome | null) => {
      if (running.current !== search) return
      running.current = null
      setFound((before) => ({ ...before, state, outcome, seconds: (performance.now() - began) / 1000 }))
    }
    search.outcome.then(
      (outcome) => end('done', outcome),
      // The worker can only fail whole; the panel says so in place of rows.
      () => end('failed', null),
    )
  }, [])

  return { ...found, start, stop }
}
