import type { ReactNode } from 'react'
import { ScrollRegion } from '../panels/chart/data-table'
import type { Side } from './figures'
import { SideSwatch } from './side-swatch'

/** A table with a column for each side, told by its swatch and its name; on a narrow page it scrolls by itself. */
export function SideTable({
  label,
  first,
  sides,
  children,
}: {
  label: string
  /** Heading of the column that names the rows. */
  first: string
  sides: readonly Side[]
  children: ReactNode
}) {
  return (
    <ScrollRegion label={label}>
      <table className="w-full border-t border-graph-strong text-[14px]">
        <thead>
          <tr className="text-[13px] text-pencil">
            <th scope="col" className="min-w-36 py-1.5 pr-3 text-left font-normal">
              {first}
            </th>
            {sides.map(({ label: name, place }) => (
              <th key={name} scope="col" className="min-w-32 px-3 py-1.5 text-right font-normal">
                <span className="inline-flex items-center gap-2">
                  <SideSwatch place={place} />
                  {name}
                </span>
              </th>
            ))}
          </tr>
        </thead>
        {children}
      </table>
    </ScrollRegion>
  )
}
