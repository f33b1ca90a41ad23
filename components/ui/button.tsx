import type { ButtonHTMLAttributes } from 'react'
import { classNames } from '@/lib/format/class-names'

export type ButtonKind = 'primary' | 'plain' | 'quiet' | 'destructive'

const looks: Record<ButtonKind, string> = {
  primary: 'border-spruce bg-spruce text-sheet hover:bg-ink hover:border-ink',
  plain: 'border-graph-strong bg-sheet text-ink hover:border-ink',
  quiet: 'border-transparent text-pencil hover:text-ink hover:border-graph-strong',
  destructive: 'border-vermilion bg-sheet text-vermilion hover:bg-vermilion hover:text-sheet',
}

/** Classes of a button, for links that act as one. */
export function buttonClass(kind: ButtonKind = 'plain', small = false): string {
  return classNames(
    'inline-flex items-center justify-center gap-2 border rounded whitespace-nowrap transition-colors duration-100',
    'disabled:opacity-50 disabled:pointer-events-none',
    small ? 'min-h-6 px-2 text-[13px]' : 'min-h-8 px-3.5 py-1 text-[14px] font-medium',
    looks[kind],
  )
}

export function Button({
  kind = 'plain',
  small = false,
  className,
  type = 'button',
  ...rest
}: ButtonHTMLAttributes<HTMLButtonElement> & { kind?: ButtonKind; small?: boolean }) {
  return <button type={type} className={classNames(buttonClass(kind, small), className)} {...rest} />
}
