'use client'

import { useId, useRef, useState, type KeyboardEvent } from 'react'
import { classNames } from '@/lib/format/class-names'
import type { Parsed } from '@/lib/units/parse'
import { RefusalNote } from './refusal-note'
import { wordLook } from './word-look'

export interface QuantityEdit {
  /** A finished value; false when it was refused. */
  propose(value: number): boolean
  /** Arrow keys: a live change between begin and commit. */
  begin(): void
  change(value: number): boolean
  commit(): void
  cancel(): void
}

export type StepSize = 'fine' | 'usual' | 'coarse'

interface QuantityWordProps {
  readonly label: string
  readonly text: string
  readonly value: number
  readonly refusal: { readonly message: string; readonly nearest?: number | string } | null
  readonly readOnly: boolean
  readonly edit: QuantityEdit
  parse(text: string): Parsed | Promise<Parsed>
  /** A number with its unit, as a button offers it. */
  written(value: number): string
  /** One press of an arrow key. */
  step(value: number, direction: 1 | -1, size: StepSize): number
  /** The value nearest to a refused one that works. */
  nearestTo(refused: number): number | null
  onDismiss(): void
}

/** A number inside the statement: typed in place, stepped with the arrow keys, refused with its reason beside it. */
export function QuantityWord(props: QuantityWordProps) {
  const { label, text, value, refusal, readOnly, edit } = props
  const [typed, setTyped] = useState<string | null>(null)
  const [unread, setUnread] = useState<string | null>(null)
  const [refused, setRefused] = useState<number | null>(null)
  const input = useRef<HTMLInputElement>(null)
  // What Escape returns to: the value that stood when the word got the focus, or that Enter made good since.
  const standing = useRef<{ readonly value: number; readonly isStepped: boolean } | null>(null)
  const noteId = useId()
  const note = unread ?? refusal?.message ?? null
  // A refused text stands only as long as its refusal: once another edit has taken that away, the word says what the design holds.
  const [wasRefused, setWasRefused] = useState(false)
  const isRefused = refusal !== null
  if (wasRefused !== isRefused) {
    setWasRefused(isRefused)
    if (!isRefused && refused !== null) {
      setTyped(null)
      setRefused(null)
    }
  }
  const shown = typed ?? text

  async function finish(): Promise<boolean> {
    if (typed === null || typed === text) {
      setTyped(null)
      setUnread(null)
      return true
    }
    const parsed = await props.parse(typed)
    if (!parsed.ok) {
      setUnread(parsed.message)
      return false
    }
    setUnread(null)
    const accepted = edit.propose(parsed.value)
    setRefused(accepted ? null : parsed.value)
    if (accepted) {
      standing.current = { value: parsed.value, isStepped: false }
      setTyped(null)
    }
    return accepted
  }

  function restore() {
    edit.cancel()
    // A run of arrow keys is a finished edit once its key is up.
    const { value: before, isStepped } = standing.current ?? {}
    if (before !== undefined && isStepped) {
      edit.propose(before)
      standing.current = { value: before, isStepped: false }
    }
    setTyped(null)
    setUnread(null)
    props.onDismiss()
  }

  function onKeyDown(event: KeyboardEvent<HTMLInputElement>) {
    if (event.key === 'Enter') {
      event.preventDefault()
      void finish().then((accepted) => accepted && input.current?.select())
    } else if (event.key === 'Escape') {
      event.preventDefault()
      event.stopPropagation()
      restore()
    } else if (event.key === 'ArrowUp' || event.key === 'ArrowDown') {
      event.preventDefault()
      edit.begin()
      const size = event.shiftKey ? 'coarse' : event.altKey ? 'fine' : 'usual'
      const next = props.step(value, event.key === 'ArrowUp' ? 1 : -1, size)
      const accepted = edit.change(next)
      setRefused(accepted ? null : next)
      if (accepted) {
        standing.current = { value: standing.current?.value ?? value, isStepped: true }
        setTyped(null)
        setUnread(null)
      }
    }
  }

  function takeNearest(nearest: number) {
    setUnread(null)
    if (edit.propose(nearest)) setTyped(null)
    input.current?.focus()
  }

  const nearest =
    unread === null && refusal ? (refused === null ? asNumber(refusal.nearest) : props.nearestTo(refused)) : null
  return (
    <span className="inline">
      <span className={classNames('inline-grid align-baseline', wordLook.frame, note && wordLook.refused)}>
        {/* The mirror gives the input its width, and the heading its text where it is read as text: unseen, but not hidden. */}
        <span aria-hidden className="pointer-events-none col-start-1 row-start-1 opacity-0 select-none whitespace-pre">
          {shown || ' '}
        </span>
        <input
          ref={input}
          aria-label={label}
          role="spinbutton"
          // Readers don't know 2e-7; the text says it with its unit.
          aria-valuenow={String(value).includes('e') ? undefined : value}
          aria-valuetext={text}
          aria-invalid={note ? true : undefined}
          aria-describedby={note ? noteId : undefined}
          readOnly={readOnly}
          size={1}
          autoComplete="off"
          spellCheck={false}
          value={shown}
          className="col-start-1 row-start-1 w-0 min-w-full bg-transparent text-inherit outline-none"
          onFocus={(event) => {
            standing.current = { value, isStepped: false }
            event.currentTarget.select()
          }}
          onChange={(event) => setTyped(event.currentTarget.value)}
          onKeyDown={onKeyDown}
          onKeyUp={(event) => {
            if (event.key === 'ArrowUp' || event.key === 'ArrowDown') edit.commit()
          }}
          onBlur={() => {
            edit.commit()
            void finish()
          }}
        />
      </span>
      {note ? (
        <RefusalNote
          id={noteId}
          message={note}
          nearestText={nearest === null ? undefined : props.written(nearest)}
          onUseNearest={nearest === null ? undefined : () => takeNearest(nearest)}
        />
      ) : null}
    </span>
  )
}

function asNumber(nearest: number | string | undefined): number | null {
  return typeof nearest === 'number' ? nearest : null
}
