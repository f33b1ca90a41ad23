'use client'

import { DropdownMenu } from 'radix-ui'
import { useId } from 'react'
import { classNames } from '@/lib/format/class-names'
import { RefusalNote } from './refusal-note'
import { wordLook } from './word-look'

export interface PickedOption {
  readonly value: string
  readonly label: string
}

/** A word picked from a list: Enter or arrows open it, typing finds, Escape leaves all as it was. */
export function ChoiceWord<Option extends PickedOption>({
  label,
  text,
  current,
  options,
  refusal,
  readOnly,
  hint,
  onPick,
}: {
  label: string
  text: string
  current: string
  options: readonly Option[]
  refusal: { readonly message: string } | null
  readOnly: boolean
  /** What else is known of the word, for who points at it. */
  hint?: string | undefined
  onPick(option: Option): void
}) {
  const noteId = useId()
  if (readOnly)
    return (
      <strong className="font-semibold" title={hint}>
        {text}
      </strong>
    )
  return (
    <span className="inline">
      <DropdownMenu.Root modal={false}>
        <DropdownMenu.Trigger
          aria-label={`${label}: ${text}${hint ? `, ${hint}` : ''}`}
          title={hint}
          aria-describedby={refusal ? noteId : undefined}
          className={classNames('text-left', wordLook.frame, 'outline-none', refusal && wordLook.refused)}
        >
          {text}
        </DropdownMenu.Trigger>
        <DropdownMenu.Portal>
          <DropdownMenu.Content
            align="start"
            sideOffset={4}
            collisionPadding={8}
            className="z-20 min-w-44 rounded border border-ink bg-sheet py-1 text-[15px] text-ink"
          >
            <DropdownMenu.RadioGroup
              value={current}
              onValueChange={(value) => {
                const option = options.find((candidate) => candidate.value === value)
                if (option) onPick(option)
              }}
            >
              {options.map((option) => (
                <DropdownMenu.RadioItem
                  key={option.value}
                  value={option.value}
                  className="flex min-h-8 cursor-pointer items-center gap-2 px-3 outline-none data-highlighted:bg-spruce-wash"
                >
                  <span aria-hidden className="w-3 text-spruce">
                    <DropdownMenu.ItemIndicator>•</DropdownMenu.ItemIndicator>
                  </span>
                  {option.label}
                </DropdownMenu.RadioItem>
              ))}
            </DropdownMenu.RadioGroup>
          </DropdownMenu.Content>
        </DropdownMenu.Portal>
      </DropdownMenu.Root>
      {refusal ? <RefusalNote id={noteId} message={refusal.message} /> : null}
    </span>
  )
}
