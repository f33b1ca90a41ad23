'use client'

import { Button } from '@/components/ui/button'
import { useOnPage } from '@/components/ui/use-on-page'
import type { AutosaveState, StoredDraft } from './autosave'

/** One quiet line: whether the draft is safe. */
export function DraftStatus<Spec>({
  state,
  onResolve,
}: {
  state: AutosaveState<Spec>
  onResolve(current: StoredDraft<Spec>, take: 'theirs' | 'mine'): void
}) {
  switch (state.kind) {
    case 'saving':
      return <Line>Saving draft…</Line>
    case 'failed':
      return (
        <p role="alert" className="text-[13px] text-vermilion">
          Draft kept in this browser only: {state.reason}. Trying again.
        </p>
      )
    case 'refused':
      return (
        <p role="alert" className="text-[13px] text-vermilion">
          Draft not kept: {state.message}
        </p>
      )
    case 'stale':
      return (
        <div role="alert" className="flex flex-wrap items-center gap-2 text-[13px] text-vermilion">
          This draft was changed in another window.
          <Button small onClick={() => onResolve(state.current, 'theirs')}>
            Take that one
          </Button>
          <Button small onClick={() => onResolve(state.current, 'mine')}>
            Keep this one
          </Button>
        </div>
      )
    case 'idle':
      return state.savedAt === null ? <Line>No changes yet</Line> : <SavedAt iso={state.savedAt} />
  }
}

/** The reader's own clock; written after hydration, since the server doesn't know it. */
function SavedAt({ iso }: { iso: string }) {
  const clock = useOnPage() ? new Date(iso).toLocaleTimeString(undefined, { hour: '2-digit', minute: '2-digit' }) : ''
  return <Line>Draft saved {clock}</Line>
}

function Line({ children }: { children: React.ReactNode }) {
  return (
    <p role="status" className="text-[13px] whitespace-nowrap text-pencil">
      {children}
    </p>
  )
}
