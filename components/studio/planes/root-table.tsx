import { useState } from 'react'
import type { Complex } from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'
import { rootRows } from './describe'

interface RootsOfOne {
  readonly label: string
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
}

/** The planes in numbers; a conjugate pair is one row. Filled only while it is open. */
export function RootTable({ groups }: { groups: readonly RootsOfOne[] }) {
  const [open, setOpen] = useState(false)
  return (
    <details className="mt-1" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary className="w-fit min-h-[24px] cursor-pointer font-mono text-[11px] leading-[24px] text-pencil hover:text-ink">
        table of poles and zeros
      </summary>
      {open ? (
        <div
          role="region"
          aria-label="Poles and zeros in numbers"
          tabIndex={0}
          className="max-h-72 overflow-auto border border-graph-strong bg-sheet"
        >
          <table className="w-full border-collapse font-mono text-[11px] tabular-nums">
            <thead>
              <tr className="text-left text-pencil">
                <th scope="col" className="px-2 py-1 font-medium">
                  Root
                </th>
                <th scope="col" className="px-2 py-1 font-medium">
                  Value
                </th>
                <th scope="col" className="px-2 py-1 text-right font-medium">
                  Modulus
                </th>
                <th scope="col" className="px-2 py-1 text-right font-medium">
                  Times
                </th>
              </tr>
            </thead>
            {groups.map((group) => (
              <tbody key={group.label}>
                <tr className="border-t border-graph-strong">
                  <th scope="rowgroup" colSpan={4} className="px-2 py-1 text-left font-semibold">
                    {group.label}
                  </th>
                </tr>
                {rootRows(group).map((row) => (
                  <tr key={`${row.kind} ${row.text}`}>
                    <td className="px-2 py-0.5">{row.kind === 'pole' ? '× pole' : '○ zero'}</td>
                    <td className="px-2 py-0.5 whitespace-nowrap">{row.text}</td>
                    <td className="px-2 py-0.5 text-right">{formatNumber(row.modulus, 4)}</td>
                    <td className="px-2 py-0.5 text-right">{row.multiplicity}</td>
                  </tr>
                ))}
              </tbody>
            ))}
          </table>
        </div>
      ) : null}
    </details>
  )
}
