'use client'

import { useEffect, useRef, useState, useTransition, type FormEvent, type ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import type { Problem } from '@/lib/designs/types'

/** What is said of a version that somebody else saved meanwhile. */
interface Saved {
  readonly number: number
  readonly note: string
  readonly savedBy: string
}

type Outcome<Version> =
  | { readonly outcome: 'saved'; readonly version: Version }
  | { readonly outcome: 'conflict'; readonly theirs: Version }
  | { readonly outcome: 'refused'; readonly problem: Problem }

const SILENT = 'The server didn’t answer. Nothing is lost: the draft stands here; try again in a moment.'

/**
 * Saving a version on purpose, with a note. When somebody else saved on the same parent in the meantime, both are shown and the user
 * chooses; the draft stays as it is until then.
 */
export function SaveVersion<Version extends Saved>({
  what,
  nextNumber,
  parentNumber,
  save,
  compare,
  draftSavedAt,
  foot,
  onSaved,
  onTakeTheirs,
  onClose,
}: {
  what: 'design' | 'chain'
  nextNumber: number
  parentNumber: number | null
  /** Saves what stands on the sheet now; `onTopOf` when the user has seen the other version. */
  save(note: string, onTopOf?: number): Promise<Outcome<Version>>
  /** The other version and what stands here, side by side. */
  compare(theirs: Version): ReactNode
  /** When the draft last reached the server from this page: what was said of a silent server is over then. */
  draftSavedAt: string | null
  /** What saving does beside. */
  foot?: string
  onSaved(version: Version): void
  onTakeTheirs(version: Version): void
  onClose(): void
}) {
  const [note, setNote] = useState('')
  const [problem, setProblem] = useState<string | null>(null)
  const [silentSince, setSilentSince] = useState<string | null>(null)
  if (problem === SILENT && silentSince !== draftSavedAt) setProblem(null)
  const [theirs, setTheirs] = useState<Version | null>(null)
  const [pending, startTransition] = useTransition()
  const noteField = useRef<HTMLInputElement>(null)
  const savedAt = useRef(draftSavedAt)
  useEffect(() => {
    savedAt.current = draftSavedAt
  }, [draftSavedAt])
  useEffect(() => noteField.current?.focus(), [])

  function submit(onTopOf?: number) {
    if (note.trim() === '') {
      setProblem('Say in a few words what changed; it stands in the history.')
      noteField.current?.focus()
      return
    }
    startTransition(async () => {
      try {
        const outcome = await save(note.trim(), onTopOf)
        if (outcome.outcome === 'saved') onSaved(outcome.version)
        else if (outcome.outcome === 'conflict') setTheirs(outcome.theirs)
        else setProblem(outcome.problem.message)
      } catch {
        // A server action that fails to answer says nothing of why; the draft is still here, so say that.
        setSilentSince(savedAt.current)
        setProblem(SILENT)
      }
    })
  }

  function onSubmit(event: FormEvent) {
    event.preventDefault()
    submit()
  }

  return (
    <section aria-label="Save a version" className="border-b border-graph-strong bg-sheet">
      <div className="mx-auto max-w-[1680px] px-4 py-3 sm:px-6">
        <form onSubmit={onSubmit} className="flex flex-wrap items-end gap-3">
          <div className="grow basis-64">
            <label htmlFor="version-note" className="text-[13px] font-medium">
              What changed in version {nextNumber}?
            </label>
            <input
              id="version-note"
              ref={noteField}
              value={note}
              maxLength={500}
              disabled={pending}
              aria-invalid={problem ? true : undefined}
              aria-describedby={problem ? 'version-note-problem' : undefined}
              onChange={(event) => {
                setNote(event.currentTarget.value)
                setProblem(null)
              }}
              onKeyDown={(event) => {
                if (event.key === 'Escape') onClose()
              }}
              className="mt-1 min-h-9 w-full rounded border border-graph-strong bg-paper px-2.5"
            />
          </div>
          <div className="flex gap-2 pb-0.5">
            <Button type="submit" kind="primary" disabled={pending}>
              {pending ? 'Saving…' : `Save version ${nextNumber}`}
            </Button>
            <Button onClick={onClose}>Not now</Button>
          </div>
        </form>
        {foot ? <p className="mt-1 text-[13px] text-pencil">{foot}</p> : null}
        {problem ? (
          <p id="version-note-problem" role="alert" className="mt-2 text-[14px] text-vermilion">
            {problem}
          </p>
        ) : null}
        {theirs ? (
          <Conflict
            theirs={theirs}
            parentNumber={parentNumber}
            what={what}
            disabled={pending}
            onKeepMine={() => submit(theirs.number)}
            onTakeTheirs={() => onTakeTheirs(theirs)}
          >
            {compare(theirs)}
          </Conflict>
        ) : null}
      </div>
    </section>
  )
}

function Conflict({
  theirs,
  parentNumber,
  what,
  disabled,
  onKeepMine,
  onTakeTheirs,
  children,
}: {
  theirs: Saved
  parentNumber: number | null
  what: 'design' | 'chain'
  disabled: boolean
  onKeepMine(): void
  onTakeTheirs(): void
  children: ReactNode
}) {
  return (
    <div role="alert" className="mt-3 border-l-2 border-vermilion pl-3">
      <p className="text-[14px]">
        <strong>Version {theirs.number} was saved meanwhile</strong> by {theirs.savedBy} (“{theirs.note}”)
        {parentNumber === null
          ? ', when there was none yet.'
          : `, on the same version ${parentNumber} as this draft.`}{' '}
        Nothing is lost: here are both. Choose which the {what} goes on with.
      </p>
      <div className="my-3">{children}</div>
      <div className="flex flex-wrap gap-2">
        <Button kind="primary" disabled={disabled} onClick={onKeepMine}>
          Save mine as version {theirs.number + 1}
        </Button>
        <Button disabled={disabled} onClick={onTakeTheirs}>
          Go on from version {theirs.number}
        </Button>
      </div>
    </div>
  )
}
