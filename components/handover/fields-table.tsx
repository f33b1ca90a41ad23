import type { FieldRow } from '@/lib/exports/json-fields'

/** Every field of a JSON file, with its kind and meaning; scrolls by itself. */
export function FieldsTable({ label, fields }: { label: string; fields: readonly FieldRow[] }) {
  return (
    <div
      role="region"
      aria-label={label}
      tabIndex={0}
      className="mt-3 min-w-0 overflow-x-auto border-t border-graph-strong -outline-offset-2"
    >
      <table className="w-full text-left text-[13px]">
        <thead>
          <tr className="text-pencil">
            <th scope="col" className="py-1.5 pr-4 font-normal">
              Field
            </th>
            <th scope="col" className="py-1.5 pr-4 font-normal">
              Kind
            </th>
            <th scope="col" className="py-1.5 font-normal">
              Meaning
            </th>
          </tr>
        </thead>
        <tbody>
          {fields.map((field, index) => (
            <tr key={index} className="border-t border-graph align-top">
              <th scope="row" className="numeric py-1 pr-4 font-normal whitespace-nowrap">
                {field.path}
              </th>
              <td className="numeric py-1 pr-4 text-pencil">{field.kind}</td>
              <td className="min-w-52 py-1">{field.description}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
