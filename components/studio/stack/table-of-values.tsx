import { useState } from 'react'
import { formatFixed, formatHz } from '@/lib/format/quantity'
import type { StackView, Trace } from '../view'
import type { StackFrame } from './frame'
import { tableFrequencies, valueColumns } from './value-table'

/** The plots in numbers, for readers who can't use a picture. Filled only while it is open. */
export function TableOfValues({
  traces,
  view,
  frame,
}: {
  traces: readonly Trace[]
  view: StackView
  frame: StackFrame
}) {
  const [open, setOpen] = useState(false)
  return (
    <details className="text-[12px]" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary className="w-fit min-h-[24px] cursor-pointer font-mono text-[11px] leading-[24px] text-pencil hover:text-ink">
        table of values
      </summary>
      {open ? <Table traces={traces} view={view} frame={frame} /> : null}
    </details>
  )
}

function Table({ traces, view, frame }: { traces: readonly Trace[]; view: StackView; frame: StackFrame }) {
  const columns = valueColumns(traces, view)
  const groups = traces.map((trace) => ({
    label: trace.label,
    span: columns.filter((column) => column.trace === trace.label).length,
  }))
  return (
    <div
      role="region"
      aria-label="Plotted values"
      tabIndex={0}
      className="mt-1 max-h-96 overflow-auto border border-graph-strong bg-sheet"
    >
      <table className="border-collapse font-mono text-[11px] tabular-nums">
        <caption className="sr-only">Values of every shown trace over the frequencies in view</caption>
        <thead className="sticky top-0 bg-sheet">
          <tr>
            <th
              scope="col"
              rowSpan={2}
              className="border-b border-graph-strong px-2 py-1 text-left align-bottom font-medium"
            >
              Frequency
            </th>
            {groups.map(({ label, span }) => (
              <th
                key={label}
                scope="colgroup"
                colSpan={span}
                className="border-l border-graph-strong px-2 pt-1 text-left font-semibold"
              >
                {label}
              </th>
            ))}
          </tr>
          <tr>
            {columns.map((column) => (
              <th
                key={column.key}
                scope="col"
                className="border-b border-graph-strong px-2 pb-1 text-right font-medium whitespace-nowrap text-pencil"
              >
                {column.heading}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {tableFrequencies(frame).map((hz) => (
            <tr key={hz} className="border-b border-graph last:border-0">
              <th scope="row" className="px-2 py-0.5 text-left font-normal whitespace-nowrap">
                {formatHz(hz)}
              </th>
              {columns.map((column) => (
                <td key={column.key} className="px-2 py-0.5 text-right whitespace-nowrap">
                  {formatFixed(column.at(hz), column.decimals)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
