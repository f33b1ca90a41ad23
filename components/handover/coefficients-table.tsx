import type { ReactNode } from 'react'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { classNames } from '@/lib/format/class-names'
import { decimalText } from '@/lib/exports/numbers'

const names = ['b0', 'b1', 'b2', 'a1', 'a2'] as const
/** Taps side by side, so that a long filter can be taken in. */
const TAPS_TO_A_ROW = 4

/** Every kept digit: what is read here is what is signed. */
export function CoefficientsTable({ kept }: { kept: StoredCoefficients }) {
  if (isStoredTaps(kept)) return <TapsTable taps={kept.taps} />
  return (
    <Region label="Table of the sections">
      <table className="w-full text-[13px]">
        <thead>
          <tr className="text-pencil">
            <th scope="col" className="py-1.5 pr-3 text-left font-normal">
              Section
            </th>
            {names.map((name) => (
              <th key={name} scope="col" className="numeric px-3 py-1.5 text-right font-normal">
                {name.charAt(0)}
                <sub>{name.charAt(1)}</sub>
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {kept.sections.map((section, index) => (
            <tr key={index} className="border-t border-graph">
              <th scope="row" className="numeric py-1 pr-3 text-left font-normal">
                {index + 1}
              </th>
              {names.map((name) => (
                <Value key={name} value={section[name]} />
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </Region>
  )
}

function TapsTable({ taps }: { taps: readonly number[] }) {
  const rows = Array.from({ length: Math.ceil(taps.length / TAPS_TO_A_ROW) }, (_, row) =>
    taps.slice(row * TAPS_TO_A_ROW, (row + 1) * TAPS_TO_A_ROW),
  )
  return (
    <Region label="Table of the taps" className="max-h-96">
      <table className="w-full text-[13px]">
        <thead className="sticky top-0 bg-paper">
          <tr className="text-pencil">
            <th scope="col" className="py-1.5 pr-3 text-left font-normal">
              Tap
            </th>
            {Array.from({ length: Math.min(TAPS_TO_A_ROW, taps.length) }, (_, column) => (
              <th key={column} scope="col" className="numeric px-3 py-1.5 text-right font-normal">
                {column === 0 ? 'h' : `+${column}`}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, index) => (
            <tr key={index} className="border-t border-graph">
              <th scope="row" className="numeric py-1 pr-3 text-left font-normal">
                {index * TAPS_TO_A_ROW}
              </th>
              {row.map((tap, column) => (
                <Value key={column} value={tap} />
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </Region>
  )
}

function Value({ value }: { value: number }) {
  return (
    <td className="numeric px-3 py-1 text-right whitespace-nowrap">
      {decimalText(value, 'double').replaceAll('-', '−')}
    </td>
  )
}

function Region({ label, className, children }: { label: string; className?: string; children: ReactNode }) {
  return (
    <div
      role="region"
      tabIndex={0}
      aria-label={label}
      className={classNames('min-w-0 overflow-auto border-t border-graph-strong -outline-offset-2', className)}
    >
      {children}
    </div>
  )
}
