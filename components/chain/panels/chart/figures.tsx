import type { ReactNode } from 'react'
import { ScrollRegion } from '@/components/studio/panels/chart/data-table'
import { classNames } from '@/lib/format/class-names'

export interface FigureRow {
  readonly key: string
  readonly cells: readonly ReactNode[]
  /** Set apart: the best, the current, a total. */
  readonly strong?: boolean
}

/** A small ruled table of the drawer: the first cell names the row, the rest are figures. */
export function FiguresRuled({
  label,
  columns,
  rows,
  wordColumns = [],
}: {
  label: string
  columns: readonly string[]
  rows: readonly FigureRow[]
  /** Columns of words, which stand to the left. */
  wordColumns?: readonly number[]
}) {
  const side = (column: number) => (column === 0 || wordColumns.includes(column) ? 'text-left' : 'text-right')
  return (
    <ScrollRegion label={label} className="border-y border-graph-strong">
      <table className="w-full text-[13px]">
        <thead>
          <tr className="border-b border-graph-strong text-pencil">
            {columns.map((column, index) => (
              <th
                key={column}
                scope="col"
                className={classNames('py-1 pr-3 font-normal whitespace-nowrap last:pr-1', side(index))}
              >
                {column === '' ? <span className="sr-only">Actions</span> : column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ key, cells: [first, ...rest], strong = false }) => (
            <tr key={key} className={classNames('border-b border-graph last:border-b-0', strong && 'bg-spruce-wash')}>
              <th
                scope="row"
                className={classNames(
                  'py-1 pr-3 text-left align-top whitespace-nowrap',
                  strong ? 'font-semibold' : 'font-normal',
                )}
              >
                {first}
              </th>
              {rest.map((cell, index) => (
                <td
                  key={index}
                  className={classNames(
                    'py-1 pr-3 align-top last:pr-1',
                    side(index + 1),
                    wordColumns.includes(index + 1) ? 'min-w-36' : 'numeric whitespace-nowrap',
                  )}
                >
                  {cell}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

/** Named figures side by side, ruled like the title block. */
export function FigureLine({ figures }: { figures: readonly { readonly name: string; readonly value: ReactNode }[] }) {
  return (
    <dl className="flex w-fit max-w-full flex-wrap border-t border-l border-graph-strong">
      {figures.map(({ name, value }) => (
        <div key={name} className="min-w-32 border-r border-b border-graph-strong px-2 py-1">
          <dt className="text-[11px] leading-4 tracking-wide text-pencil">{name}</dt>
          <dd className="numeric text-[13px] leading-5">{value}</dd>
        </div>
      ))}
    </dl>
  )
}
