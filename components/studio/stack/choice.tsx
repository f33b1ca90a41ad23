import type { ReactNode } from 'react'
import { classNames } from '@/lib/format/class-names'

const word =
  'inline-flex min-h-[24px] min-w-[24px] items-center justify-center rounded px-1 font-mono text-[11px] whitespace-nowrap'

/** A few quiet words of which one holds; the way plots are asked for another unit or axis. */
export function Choice<Value extends string | number | boolean>({
  label,
  options,
  value,
  onChange,
}: {
  label: string
  options: readonly { readonly value: Value; readonly word: string; readonly name?: string }[]
  value: Value
  onChange(value: Value): void
}) {
  return (
    <span role="group" aria-label={label} className="inline-flex">
      {options.map((option) => {
        const isOn = option.value === value
        return (
          <button
            key={option.word}
            type="button"
            aria-pressed={isOn}
            aria-label={option.name}
            title={option.name}
            onClick={() => onChange(option.value)}
            className={classNames(word, isOn ? 'text-ink' : 'text-pencil hover:text-ink')}
          >
            <span className={isOn ? 'border-b border-pencil' : 'border-b border-transparent'}>{option.word}</span>
          </button>
        )
      })}
    </span>
  )
}

/** One quiet word that is on or off. */
export function Toggle({
  pressed,
  onChange,
  children,
}: {
  pressed: boolean
  onChange(pressed: boolean): void
  children: ReactNode
}) {
  return (
    <button
      type="button"
      aria-pressed={pressed}
      onClick={() => onChange(!pressed)}
      className={classNames(word, pressed ? 'text-ink' : 'text-pencil hover:text-ink')}
    >
      <span className={pressed ? 'border-b border-pencil' : 'border-b border-transparent'}>{children}</span>
    </button>
  )
}

/** A quiet word that does something. */
export function Act({ label, onPress, children }: { label?: string; onPress(): void; children: ReactNode }) {
  return (
    <button
      type="button"
      aria-label={label}
      title={label}
      onClick={onPress}
      className={classNames(word, 'text-pencil hover:text-ink')}
    >
      {children}
    </button>
  )
}
