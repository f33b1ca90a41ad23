'use client'

import { useId, type ReactNode } from 'react'
import { classNames } from '@/lib/format/class-names'

export interface GroupChoice<Value extends string> {
  readonly value: Value
  readonly label: string
}

/** One of a few, side by side: radio buttons, so that arrows move between them. What is said of the choice stands under it. */
export function ChoiceGroup<Value extends string>({
  legend,
  inline = false,
  choices,
  value,
  onChange,
  children,
}: {
  legend: string
  /** Legend and choices in one line, for a small switch beside a plot. */
  inline?: boolean
  choices: readonly GroupChoice<Value>[]
  value: Value
  onChange(value: Value): void
  children?: ReactNode
}) {
  const name = useId()
  const said = useId()
  return (
    <fieldset
      className={classNames('min-w-0', inline && 'flex items-center gap-2')}
      aria-describedby={children ? said : undefined}
    >
      <legend
        className={classNames('text-[13px]', inline ? 'float-left pr-2 text-pencil' : 'mb-1 font-medium text-ink')}
      >
        {legend}
      </legend>
      <span className="inline-flex max-w-full flex-wrap rounded border border-graph-strong">
        {choices.map((choice) => (
          <label
            key={choice.value}
            className={classNames(
              'relative cursor-pointer px-2.5 text-[13px] has-focus-visible:outline-2 has-focus-visible:outline-spruce',
              inline ? 'min-h-6 leading-6' : 'min-h-8 leading-8',
              choice.value === value ? 'bg-spruce-wash font-semibold text-ink' : 'text-pencil hover:text-ink',
            )}
          >
            <input
              type="radio"
              name={name}
              value={choice.value}
              className="absolute inset-0 cursor-pointer appearance-none opacity-0"
              checked={choice.value === value}
              onChange={() => onChange(choice.value)}
            />
            {choice.label}
          </label>
        ))}
      </span>
      {children ? (
        <div id={said} className="mt-1 text-[13px] text-pencil">
          {children}
        </div>
      ) : null}
    </fieldset>
  )
}
