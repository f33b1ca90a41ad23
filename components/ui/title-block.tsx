import type { ReactNode } from 'react'
import { classNames } from '@/lib/format/class-names'

export interface TitleCell {
  readonly label: string
  readonly value: ReactNode
  readonly tone?: 'plain' | 'caution' | 'met'
  /** Columns of six that the cell takes. */
  readonly span?: 2 | 3 | 4 | 6
}

const spans = { 2: 'col-span-2', 3: 'col-span-3', 4: 'col-span-4', 6: 'col-span-6' } as const
const tones = { plain: 'text-ink', caution: 'text-ochre', met: 'text-moss' } as const

/** The ruled cells in the lower right corner of a drawing: what it is, which version, who drew, checked and released it. */
export function TitleBlock({ cells, label }: { cells: readonly TitleCell[]; label: string }) {
  return (
    <dl aria-label={label} className="grid grid-cols-6 border-t border-l border-ink">
      {cells.map((cell) => (
        <div
          key={cell.label}
          className={classNames('min-w-0 border-r border-b border-ink px-2 py-1.5', spans[cell.span ?? 2])}
        >
          <dt className="text-[11px] leading-4 tracking-wide text-pencil">{cell.label}</dt>
          <dd className={classNames('numeric truncate text-[13px] leading-5', tones[cell.tone ?? 'plain'])}>
            {cell.value}
          </dd>
        </div>
      ))}
    </dl>
  )
}
