'use client'

import { useId, useState, type KeyboardEvent } from 'react'
import { classNames } from '@/lib/format/class-names'
import type { Parsed } from '@/lib/units/parse'

/** A small number typed in place beside its words; refused with a sentence, Escape brings the old one back. */
export function InlineQuantity({
  label,
  text,
  parse,
  onValue,
  onStep,
  disabled = false,
}: {
  label: string
  text: string
  parse(text: string): Parsed | Promise<Parsed>
  /** Answers with the reason when the value can't be used. */
  onValue(value: number): string | null
  onStep?(direction: 1 | -1): void
  disabled?: boolean
}) {
  const [typed, setTyped] = useState<string | null>(null)
  const [problem, setProblem] = useState<string | null>(null)
  const id = useId()
  const shown = typed ?? text

  async function finish() {
    if (typed === null || typed === text) {
      setTyped(null)
      setProblem(null)
      return
    }
    const parsed = await parse(typed)
    const reason = parsed.ok ? onValue(parsed.value) : parsed.message
    setProblem(reason)
    if (reason === null) setTyped(null)
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.key === 'Enter') {
      event.preventDefault()
      void finish()
    } else if (event.key === 'Escape') {
      event.preventDefault()
      setTyped(null)
      setProblem(null)
    } else if (onStep && typed === null && (event.key === 'ArrowUp' || event.key === 'ArrowDown')) {
      event.preventDefault()
      onStep(event.key === 'ArrowUp' ? 1 : -1)
    }
  }

  return (
    <>
      <span
        className={classNames(
          'numeric inline-grid border-b border-dotted border-pencil text-[13px] text-ink focus-within:border-solid focus-within:border-spruce focus-within:bg-spruce-wash hover:bg-spruce-wash',
          problem && 'border-solid border-vermilion',
        )}
      >
        <span aria-hidden className="invisible col-start-1 row-start-1 whitespace-pre">
          {shown || ' '}
        </span>
        <input
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
          onChange={(event) => setTyped(event.currentTarget.value)}
          onKeyDown={onKeyDown}
          onBlur={() => void finish()}
        />
      </span>
      {problem ? (
        <span id={id} role="alert" className="text-[13px] text-vermilion">
          {problem}
        </span>
      ) : null}
    </>
  )
}
