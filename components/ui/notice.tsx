import type { ReactNode } from 'react'
import { classNames } from '@/lib/format/class-names'

/** A short message in the page: a rule at its left says its kind, the words say it too. */
export function Notice({ kind, children }: { kind: 'note' | 'caution' | 'met'; children: ReactNode }) {
  const rule = { note: 'border-slate', caution: 'border-vermilion', met: 'border-moss' }[kind]
  return (
    <div
      role={kind === 'caution' ? 'alert' : 'status'}
      className={classNames('border-l-2 py-1 pl-3 text-[14px]', rule)}
    >
      {children}
    </div>
  )
}
