'use client'

import { useId, useState, type ReactNode } from 'react'

/** The values of a plot for readers who can't use a picture; made only when opened. */
export function DataTable({
  summary,
  columns,
  rows,
}: {
  summary: string
  columns: readonly string[]
  /** Called when the table is opened; the first cell of a row names it. */
  rows(): readonly (readonly ReactNode[])[]
}) {
  const [open, setOpen] = useState(false)
  const id = useId()
  return (
    <details className="text-[13px]" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary id={id} className="w-fit min-h-[24px] cursor-pointer leading-[24px] text-pencil hover:text-ink">
        {summary}
      </summary>
      {open ? (
        <ScrollRegion labelledBy={id} className="mt-1 max-h-72 max-w-fit border border-graph-strong">
          <table className="numeric text-[12px]">
            <thead className="sticky top-0 bg-sheet">
              <tr>
                {columns.map((column) => (
                  <th
                    key={column}
                    scope="col"
                    className="px-2 py-1 text-right font-normal whitespace-nowrap text-pencil"
                  >
                    {column}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {rows().map(([first, ...rest], index) => (
                <tr key={index} className="border-t border-graph">
                  <th scope="row" className="px-2 py-0.5 text-right font-normal whitespace-nowrap">
                    {first}
                  </th>
                  {rest.map((cell, column) => (
                    <td key={column} className="px-2 py-0.5 text-right whitespace-nowrap">
                      {cell}
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollRegion>
      ) : null}
    </details>
  )
}

/** A part of the page that scrolls by itself, by the keyboard too. */
export function ScrollRegion({
  labelledBy,
  label,
  className = '',
  children,
}: {
  labelledBy?: string
  label?: string
  className?: string
  children: ReactNode
}) {
  return (
    <div
      role="region"
      tabIndex={0}
      {...(label ? { 'aria-label': label } : {})}
      {...(labelledBy ? { 'aria-labelledby': labelledBy } : {})}
      // Positioned, so that words for readers alone scroll along instead of widening the page.
      className={`relative min-w-0 overflow-auto -outline-offset-2 ${className}`}
    >
      {children}
    </div>
  )
}
