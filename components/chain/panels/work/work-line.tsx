import type { ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { formatFixed } from '@/lib/format/quantity'
import type { WorkState } from './use-work'

/** Starts and stops a job, and says how far it is. */
export function WorkLine<Question, Value>({
  work,
  startWords,
  againWords,
  stopWords,
  what,
  onStart,
  onStop,
  doneWords,
  children,
}: {
  work: WorkState<Question, Value>
  startWords: string
  againWords: string
  stopWords: string
  /** What is under way, to begin a sentence with: The search. */
  what: string
  onStart(): void
  onStop(): void
  doneWords?(value: Value): string
  children?: ReactNode
}) {
  const { state, value, progress, refusal, seconds } = work
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        {state === 'working' ? (
          <Button onClick={onStop}>{stopWords}</Button>
        ) : (
          <Button kind="primary" onClick={onStart}>
            {state === 'idle' ? startWords : againWords}
          </Button>
        )}
        {children}
        {state === 'working' ? (
          <progress
            className="h-1.5 w-40 accent-spruce"
            aria-label={`${what}, done so far`}
            max={100}
            value={Math.round(progress * 100)}
          />
        ) : null}
        <p role="status" className="text-[13px] text-pencil">
          {state === 'working' ? 'Under way…' : ''}
          {state === 'stopped' ? 'Stopped; nothing was kept.' : ''}
          {state === 'done' && value !== null
            ? `${doneWords ? `${doneWords(value)}; ` : ''}${formatFixed(seconds, 1)}\u2009s`
            : ''}
        </p>
      </div>
      {state === 'refused' && refusal !== null ? <Notice kind="caution">{refusal}</Notice> : null}
      {state === 'failed' ? (
        <Notice kind="caution">{what} broke off in this browser; reload the page to try again.</Notice>
      ) : null}
    </>
  )
}
