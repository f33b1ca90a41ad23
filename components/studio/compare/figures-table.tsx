import { useMemo } from 'react'
import { figureRows, type Side } from './figures'
import { SideTable } from './side-table'

/** The figures that follow from each design; what differs from the base is marked, with the change under it. */
export function FiguresTable({ sides }: { sides: readonly Side[] }) {
  const rows = useMemo(() => figureRows(sides), [sides])
  return (
    <SideTable label="Figures of all sides" first="Figure" sides={sides}>
      <tbody>
        {rows.map((row) => (
          <tr key={row.name} className="border-t border-graph align-top">
            <th scope="row" className="py-1 pr-3 text-left font-normal">
              {row.name}
            </th>
            {row.cells.map((cell, at) => (
              <td key={sides[at]?.label ?? at} className="numeric px-3 py-1 text-right text-[13px]">
                {cell.differs ? <mark className="bg-spruce-wash font-semibold text-ink">{cell.text}</mark> : cell.text}
                {at > 0 ? (
                  <span className="block text-[12px] text-pencil">
                    {cell.differs ? cell.change || 'differs' : 'same'}
                  </span>
                ) : null}
              </td>
            ))}
          </tr>
        ))}
      </tbody>
    </SideTable>
  )
}
