'use client'

import { useId, useRef, useState, type KeyboardEvent } from 'react'
import { classNames } from '@/lib/format/class-names'
import type { Parsed } from '@/lib/units/parse'
import { RefusalNote } from '../statement/refusal-note'

/** Why a value can't be used, with the nearest one that can where there is one. */
export interface Refused {
  readonly message: string
  readonly nearest?: number
  readonly nearestText?: string
}

/**
 * A small number typed in place beside its words; refused with a sentence, Escape brings the old one back. What is typed belongs to the
 * value that it was typed over: when another value comes in, it is let go.
 */
export function InlineQuantity({
  label,
  text,
  parse,
  onValue,
  onStep,
  onStepped,
  disabled = false,
}: {
  label: string
  text: string
  parse(text: string): Parsed | Promise<Parsed>
  /** Answers with the reason when the value can't be used. */
  onValue(value: number): string | Refused | null
  onStep?(direction: 1 | -1): void
  /** A run of steps has ended: the key is up, or the focus gone. */
  onStepped?(): void
  disabled?: boolean
}) {
  const [entry, setEntry] = useState<{ over: string; words: string; problem: Refused | null } | null>(null)
  const id = useId()
  const input = useRef<HTMLInputElement>(null)
  const { words: typed = null, problem = null } = entry?.over === text ? entry : {}
  const shown = typed ?? text
  const letGo = () => setEntry(null)

  async function finish() {
    if (typed === null || typed === text) {
      letGo()
      return
    }
    const parsed = await parse(typed)
    const reason = parsed.ok ? onValue(parsed.value) : parsed.message
    if (reason === null) letGo()
    else setEntry({ over: text, words: typed, problem: typeof reason === 'string' ? { message: reason } : reason })
  }

  function takeNearest(nearest: number) {
    if (onValue(nearest) === null) letGo()
    input.current?.focus()
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.key === 'Enter') {
      event.preventDefault()
      void finish()
    } else if (event.key === 'Escape') {
      event.preventDefault()
      letGo()
    } else if (onStep && typed === null && (event.key === 'ArrowUp' || event.key === 'ArrowDown')) {
      event.preventDefault()
      onStep(event.key === 'ArrowUp' ? 1 : -1)
    }
  }

  return (
    <>
      <span
        className={classNames(
          'numeric inline-grid items-center border-b border-dotted border-pencil text-[13px] text-ink focus-within:border-solid focus-within:border-spruce focus-within:bg-spruce-wash hover:bg-spruce-wash',
          problem && 'border-solid border-vermilion',
        )}
      >
        <span aria-hidden className="invisible col-start-1 row-start-1 whitespace-pre">
          {shown || ' '}
        </span>
        <input
          ref={input}
          aria-label={label}
          aria-invalid={problem ? true : undefined}
          aria-describedby={problem ? id : undefined}
          size={1}
          autoComplete="off"
          spellCheck={false}
          disabled={disabled}
          value={shown}
          className="col-start-1 row-start-1 min-h-6 w-0 min-w-full bg-transparent outline-offset-1"
          onFocus={(event) => event.currentTarget.select()}
          onChange={(event) => setEntry({ over: text, words: event.currentTarget.value, problem })}
          onKeyDown={onKeyDown}
          onKeyUp={(event) => {
            if (event.key === 'ArrowUp' || event.key === 'ArrowDown') onStepped?.()
          }}
          onBlur={() => {
            onStepped?.()
            void finish()
          }}
        />
      </span>
      {problem ? (
        <RefusalNote
          id={id}
          message={problem.message}
          nearestText={problem.nearest === undefined ? undefined : (problem.nearestText ?? String(problem.nearest))}
          onUseNearest={problem.nearest === undefined ? undefined : () => takeNearest(problem.nearest ?? 0)}
        />
      ) : null}
    </>
  )
}
