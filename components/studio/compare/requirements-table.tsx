import { useDeferredValue, useMemo } from 'react'
import { classNames } from '@/lib/format/class-names'
import type { Side } from './figures'
import { countsMet, linesOf, requirementRows, type RequirementCell } from './requirement-rows'
import { SideTable } from './side-table'

/** Every line that any side's sheet has, and how each side's design stands to it. Worked out after the rest of the page is drawn. */
export function RequirementsTable({ sides }: { sides: readonly Side[] }) {
  const judged = useDeferredValue<readonly Side[] | null>(sides, null)
  const rows = useMemo(() => (judged ? requirementRows(judged) : null), [judged])
  if (linesOf(sides).length === 0)
    return (
      <p className="text-[14px] text-pencil">
        No side has a requirement sheet. Add lines to it in the studio, and every side is judged by them here.
      </p>
    )
  if (!rows || !judged) return <p className="text-[14px] text-pencil">Judging every line…</p>
  return <JudgedTable sides={judged} rows={rows} />
}

/** The table as judged. */
export function JudgedTable({ sides, rows }: { sides: readonly Side[]; rows: ReturnType<typeof requirementRows> }) {
  return (
    <SideTable label="Requirements of all sides" first="Requirement" sides={sides}>
      <tbody>
        {rows.map((row, index) => (
          <tr key={index} className="border-t border-graph align-top">
            <th scope="row" className="min-w-44 py-1.5 pr-3 text-left font-normal">
              {row.text}
              {row.whose ? <span className="block text-[12px] text-pencil">{row.whose}</span> : null}
            </th>
            {row.cells.map((cell, at) => (
              <td key={sides[at]?.label ?? at} className="px-3 py-1.5 text-right text-[13px]">
                <Cell cell={cell} />
              </td>
            ))}
          </tr>
        ))}
      </tbody>
      <tfoot>
        <tr className="border-t border-graph-strong">
          <th scope="row" className="py-1.5 pr-3 text-left font-normal text-pencil">
            Together
          </th>
          {countsMet(rows, sides).map((count, at) => (
            <td key={sides[at]?.label ?? at} className="numeric px-3 py-1.5 text-right text-[13px]">
              {count}
            </td>
          ))}
        </tr>
      </tfoot>
    </SideTable>
  )
}

function Cell({ cell: { met, value, margin, worst, reason } }: { cell: RequirementCell }) {
  return (
    <>
      <span className="numeric block">{value}</span>
      <span className={classNames('numeric block text-[12px]', met ? 'text-moss' : 'text-vermilion')}>{margin}</span>
      {worst ? <span className="numeric block text-[12px] text-pencil">{worst}</span> : null}
      {reason ? <span className="ml-auto block max-w-56 text-[12px] text-pencil">{reason}</span> : null}
    </>
  )
}
