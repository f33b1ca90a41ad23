import type { StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { decimalText } from '@/lib/exports/numbers'

const names = ['b0', 'b1', 'b2', 'a1', 'a2'] as const

/** Every kept digit of every section: what is read here is what is signed. */
export function CoefficientsTable({ kept }: { kept: StoredCoefficients }) {
  return (
    <div
      role="region"
      tabIndex={0}
      aria-label="Table of the sections"
      className="min-w-0 overflow-x-auto border-t border-graph-strong -outline-offset-2"
    >
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
                <td key={name} className="numeric px-3 py-1 text-right whitespace-nowrap">
                  {decimalText(section[name], 'double').replaceAll('-', '−')}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
