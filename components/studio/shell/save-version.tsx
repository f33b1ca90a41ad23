'use client'

import { useEffect, useRef, useState, useTransition, type FormEvent } from 'react'
import dynamic from 'next/dynamic'
import { Button } from '@/components/ui/button'
import type { SaveVersionInput, StudioActions, VersionSummary } from '@/lib/designs/types'
import type { StudioStore } from '../store'

const CompareSpecs = dynamic(() => import('../compare/compare-specs').then((module) => module.CompareSpecs))

/**
 * Saving a version on purpose, with a note. When somebody else saved on the same parent in the meantime, both are shown and the user
 * chooses; the draft stays as it is until then.
 */
export function SaveVersion({
  store,
  designId,
  nextNumber,
  parentNumber,
  saveVersion,
  onSaved,
  onTakeTheirs,
  onClose,
}: {
  store: StudioStore
  designId: string
  nextNumber: number
  parentNumber: number | null
  saveVersion: StudioActions['saveVersion']
  onSaved(version: VersionSummary): void
  onTakeTheirs(version: VersionSummary): void
  onClose(): void
}) {
  const [note, setNote] = useState('')
  const [problem, setProblem] = useState<string | null>(null)
  const [theirs, setTheirs] = useState<VersionSummary | null>(null)
  const [pending, startTransition] = useTransition()
  const noteField = useRef<HTMLInputElement>(null)
  useEffect(() => noteField.current?.focus(), [])

  function submit(onTopOf?: number) {
    if (note.trim() === '') {
      setProblem('Say in a few words what changed; it stands in the history.')
      noteField.current?.focus()
      return
    }
    startTransition(async () => {
      const input: SaveVersionInput = { designId, spec: store.getState().spec, note: note.trim(), parentNumber }
      try {
        const outcome = await saveVersion(onTopOf === undefined ? input : { ...input, onTopOf })
        if (outcome.outcome === 'saved') onSaved(outcome.version)
        else if (outcome.outcome === 'conflict') setTheirs(outcome.theirs)
        else setProblem(outcome.problem.message)
      } catch {
        // A server action that fails to answer says nothing of why; the draft is still here, so say that.
        setProblem('The server didn’t answer. Nothing is lost: the draft stands here; try again in a moment.')
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
        {problem ? (
          <p id="version-note-problem" role="alert" className="mt-2 text-[14px] text-vermilion">
            {problem}
          </p>
        ) : null}
        {theirs ? (
          <Conflict
            theirs={theirs}
            parentNumber={parentNumber}
            mine={store.getState().spec}
            disabled={pending}
            onKeepMine={() => submit(theirs.number)}
            onTakeTheirs={() => onTakeTheirs(theirs)}
          />
        ) : null}
      </div>
    </section>
  )
}

function Conflict({
  theirs,
  parentNumber,
  mine,
  disabled,
  onKeepMine,
  onTakeTheirs,
}: {
  theirs: VersionSummary
  parentNumber: number | null
  mine: VersionSummary['spec']
  disabled: boolean
  onKeepMine(): void
  onTakeTheirs(): void
}) {
  return (
    <div role="alert" className="mt-3 border-l-2 border-vermilion pl-3">
      <p className="text-[14px]">
        <strong>Version {theirs.number} was saved meanwhile</strong> by {theirs.savedBy} (“{theirs.note}”)
        {parentNumber === null
          ? ', when there was none yet.'
          : `, on the same version ${parentNumber} as this draft.`}{' '}
        Nothing is lost: here are both. Choose which the design goes on with.
      </p>
      <div className="my-3">
        <CompareSpecs
          left={{ label: `Version ${theirs.number}`, spec: theirs.spec }}
          right={{ label: 'Your draft', spec: mine }}
        />
      </div>
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
