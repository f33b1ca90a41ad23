import type { ReactNode } from 'react'
import { classNames } from '@/lib/format/class-names'

/** A ruled table that scrolls by itself on a narrow page; the first cell of a row names it. */
export function ChainTable({
  label,
  columns,
  numeric = [],
  className,
  children,
}: {
  label: string
  columns: readonly string[]
  /** Columns of numbers, which stand to the right. */
  numeric?: readonly number[]
  className?: string
  children: readonly (readonly ReactNode[])[]
}) {
  const look = (column: number) => (numeric.includes(column) ? 'numeric text-right' : 'text-left')
  return (
    <div
      role="region"
      tabIndex={0}
      aria-label={label}
      className={classNames('relative min-w-0 overflow-auto border-t border-graph-strong -outline-offset-2', className)}
    >
      <table className="w-full text-[14px]">
        <thead className="sticky top-0 bg-paper">
          <tr className="text-[13px] text-pencil">
            {columns.map((column, at) => (
              <th key={at} scope="col" className={classNames('py-1.5 pr-4 font-normal', look(at))}>
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {children.map(([first, ...rest], row) => (
            <tr key={row} className="border-t border-graph align-top">
              <th scope="row" className={classNames('py-1 pr-4 font-normal', look(0))}>
                {first}
              </th>
              {rest.map((cell, at) => (
                <td key={at} className={classNames('py-1 pr-4', look(at + 1))}>
                  {cell}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
