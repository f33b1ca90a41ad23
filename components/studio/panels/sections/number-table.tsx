import { ScrollRegion } from '../chart/data-table'
import { fullDigits } from './written'

/** Numbers with every digit, a named row each. */
export function NumberTable({
  label,
  columns,
  rows,
}: {
  label: string
  columns: readonly string[]
  rows: readonly { readonly name: string; readonly values: readonly number[] }[]
}) {
  return (
    <ScrollRegion label={label} className="max-h-80 max-w-fit border-y border-graph-strong">
      <table className="numeric text-[12.5px]">
        <thead className="sticky top-0 bg-paper">
          <tr className="text-pencil [&>th]:py-1 [&>th]:pr-4 [&>th]:text-left [&>th]:font-normal">
            <th scope="col">
              <span className="sr-only">Place</span>
            </th>
            {columns.map((column) => (
              <th key={column} scope="col">
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ name, values }) => (
            <tr key={name} className="border-t border-graph [&>td]:py-0.5 [&>td]:pr-4 [&>td]:whitespace-nowrap">
              <th scope="row" className="py-0.5 pr-4 text-left font-normal whitespace-nowrap text-pencil">
                {name}
              </th>
              {values.map((value, column) => (
                <td key={column}>{fullDigits(value)}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}
