'use client'

import { useId, useRef, useState, type KeyboardEvent } from 'react'
import { RefusalNote } from '@/components/studio/statement/refusal-note'
import { classNames } from '@/lib/format/class-names'

/** A name in a list, of the weight of what stands around it. */
export const plainWord =
  'border-b border-dotted border-pencil focus-within:border-solid focus-within:border-spruce focus-within:bg-spruce-wash hover:bg-spruce-wash'

/** A name typed where it stands, in the statement or in a list; Escape brings the old one back. */
export function NameWord({
  label,
  name,
  look,
  readOnly,
  onName,
}: {
  label: string
  name: string
  look: string
  readOnly: boolean
  /** Answers with the reason when the name can't be used. */
  onName(name: string): string | null
}) {
  const [entry, setEntry] = useState<{ over: string; words: string; problem: string | null } | null>(null)
  const id = useId()
  const input = useRef<HTMLInputElement>(null)
  const { words: typed = null, problem = null } = entry?.over === name ? entry : {}
  const shown = typed ?? name

  function finish() {
    if (typed === null || typed.trim() === name) {
      setEntry(null)
      return
    }
    const reason = onName(typed.trim())
    setEntry(reason === null ? null : { over: name, words: typed, problem: reason })
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.key === 'Enter') {
      event.preventDefault()
      finish()
      input.current?.select()
    } else if (event.key === 'Escape') {
      event.preventDefault()
      setEntry(null)
    }
  }

  if (readOnly) return <span className="wrap-anywhere">{name}</span>
  return (
    <>
      <span className={classNames('inline-grid max-w-full align-baseline', look, problem && 'text-vermilion')}>
        {/* The mirror gives the input its width, and the heading its text where it is read as text: unseen, but not hidden. */}
        <span
          aria-hidden
          className="pointer-events-none col-start-1 row-start-1 opacity-0 select-none overflow-hidden whitespace-pre"
        >
          {shown || ' '}
        </span>
        <input
          ref={input}
          aria-label={label}
          aria-invalid={problem ? true : undefined}
          aria-describedby={problem ? id : undefined}
          size={1}
          maxLength={60}
          autoComplete="off"
          spellCheck={false}
          value={shown}
          className="col-start-1 row-start-1 min-h-6 w-0 min-w-full bg-transparent text-inherit outline-offset-1"
          onFocus={(event) => event.currentTarget.select()}
          onChange={(event) => setEntry({ over: name, words: event.currentTarget.value, problem })}
          onKeyDown={onKeyDown}
          onBlur={finish}
        />
      </span>
      {problem ? <RefusalNote id={id} message={problem} /> : null}
    </>
  )
}
