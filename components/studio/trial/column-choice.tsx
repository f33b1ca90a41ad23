'use client'

import { useState } from 'react'
import type { PlannedColumn } from '@/lib/recordings/table/plan'
import { ScrollRegion } from '../panels/chart/data-table'
import type { PlanChange, TablePreview } from './shapes'

const input = 'min-h-7 w-full min-w-20 border border-graph-strong rounded bg-sheet px-1.5 text-[13px]'

/** Which columns are channels, and what they are called. */
export function ColumnChoice({ preview, onChange }: { preview: TablePreview; onChange(change: PlanChange): void }) {
  const { plan, columns } = preview
  const chosen = new Map(plan.channels.map((channel) => [channel.column, channel]))
  const settle = (channels: readonly PlannedColumn[]) =>
    onChange({ plan: { ...plan, channels: [...channels].sort((a, b) => a.column - b.column) } })
  return (
    <ScrollRegion label="Columns" className="max-h-80 border border-graph-strong">
      <table className="w-full text-[13px]">
        <thead className="sticky top-0 bg-sheet text-left text-pencil">
          <tr>
            <th scope="col" className="px-2 py-1 font-normal">
              channel
            </th>
            <th scope="col" className="px-2 py-1 font-normal">
              name
            </th>
            <th scope="col" className="px-2 py-1 font-normal">
              unit
            </th>
            <th scope="col" className="px-2 py-1 font-normal">
              first cells
            </th>
          </tr>
        </thead>
        <tbody>
          {columns.map((column) => {
            const channel = chosen.get(column.column)
            const isTime = plan.time?.column === column.column
            const rename = (change: Partial<PlannedColumn>) =>
              settle(plan.channels.map((each) => (each.column === column.column ? { ...each, ...change } : each)))
            return (
              <tr key={column.column} className="border-t border-graph">
                <td className="px-2 py-1 whitespace-nowrap">
                  {isTime ? (
                    <span className="inline-flex min-h-[24px] items-center">time</span>
                  ) : (
                    <label className="inline-flex min-h-[24px] min-w-[24px] cursor-pointer items-center gap-2">
                      <input
                        type="checkbox"
                        className="size-4 accent-spruce"
                        checked={channel !== undefined}
                        disabled={column.holds !== 'numbers'}
                        onChange={() =>
                          settle(
                            channel
                              ? plan.channels.filter((each) => each !== channel)
                              : [...plan.channels, { column: column.column, name: column.name, unit: column.unit }],
                          )
                        }
                      />
                      <span className={column.holds === 'numbers' ? '' : 'text-pencil'}>
                        {column.column + 1}
                        <span className="sr-only"> {column.name}</span>
                        {column.holds === 'numbers' ? null : ' holds no numbers'}
                      </span>
                    </label>
                  )}
                </td>
                <td className="px-2 py-1">
                  {channel ? (
                    <DraftInput
                      key={channel.name}
                      label={`Name of column ${column.column + 1}`}
                      value={channel.name}
                      onSettle={(name) => rename({ name: name || column.name })}
                    />
                  ) : (
                    <span className="text-pencil">{column.name}</span>
                  )}
                </td>
                <td className="px-2 py-1">
                  {channel ? (
                    <DraftInput
                      key={channel.unit}
                      label={`Unit of column ${column.column + 1}`}
                      value={channel.unit}
                      onSettle={(unit) => rename({ unit })}
                    />
                  ) : (
                    <span className="text-pencil">{column.unit}</span>
                  )}
                </td>
                <td className="numeric px-2 py-1 text-[12px] whitespace-nowrap text-pencil">
                  {column.examples.join(' · ')}
                </td>
              </tr>
            )
          })}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

/** A text that is settled when it is left or by Enter, and brought back by Escape. */
function DraftInput({ label, value, onSettle }: { label: string; value: string; onSettle(text: string): void }) {
  const [text, setText] = useState(value)
  const settle = () => {
    if (text.trim() !== value) onSettle(text.trim())
  }
  return (
    <input
      aria-label={label}
      className={input}
      maxLength={40}
      value={text}
      onChange={(event) => setText(event.target.value)}
      onBlur={settle}
      onKeyDown={(event) => {
        if (event.key === 'Enter') settle()
        if (event.key === 'Escape') setText(value)
      }}
    />
  )
}
