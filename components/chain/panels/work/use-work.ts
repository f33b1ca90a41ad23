'use client'

import { useCallback, useEffect, useRef, useState } from 'react'
import type { OnProgress } from './chain-work'
import type { Job } from './work-client'

export interface WorkState<Question, Value> {
  /** What the value, or the refusal, is the answer to. */
  readonly question: Question | null
  readonly state: 'idle' | 'working' | 'done' | 'stopped' | 'refused' | 'failed'
  /** 0 to 1. */
  readonly progress: number
  readonly value: Value | null
  readonly refusal: string | null
  readonly seconds: number
}

/** One job at a time: stopped when asked, when another begins and when the panel closes. */
export function useWork<Question, Value>(start: (question: Question) => (onProgress: OnProgress) => Job<Value>) {
  const [found, setFound] = useState<WorkState<Question, Value>>({
    question: null,
    state: 'idle',
    progress: 0,
    value: null,
    refusal: null,
    seconds: 0,
  })
  const running = useRef<Job<Value> | null>(null)
  useEffect(() => () => running.current?.stop(), [])

  const stop = useCallback(() => {
    running.current?.stop()
    running.current = null
    setFound((before) => (before.state === 'working' ? { ...before, state: 'stopped' } : before))
  }, [])

  const run = useCallback(
    (question: Question, onValue?: (value: Value) => void) => {
      running.current?.stop()
      const began = performance.now()
      setFound({ question, state: 'working', progress: 0, value: null, refusal: null, seconds: 0 })
      const job = start(question)((progress) => {
        if (running.current === job) setFound((before) => ({ ...before, progress }))
      })
      running.current = job
      const end = (change: Partial<WorkState<Question, Value>>): boolean => {
        if (running.current !== job) return false
        running.current = null
        setFound((before) => ({ ...before, ...change, seconds: (performance.now() - began) / 1000 }))
        return true
      }
      job.answer.then(
        (answer) => {
          if ('refused' in answer) end({ state: 'refused', refusal: answer.refused })
          else if (end({ state: 'done', progress: 1, value: answer.value })) onValue?.(answer.value)
        },
        // The worker can only fail whole; the panel says so in place of an answer.
        () => end({ state: 'failed' }),
      )
    },
    [start],
  )

  return { ...found, run, stop }
}
