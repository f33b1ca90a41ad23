import type { NamedCost } from './structures'

/** Work and memory a sample takes in each structure. */
export function CostTable({ costs }: { costs: readonly NamedCost[] }) {
  return (
    <table className="self-start text-[13px]">
      <caption className="sr-only">Cost of a sample in each structure</caption>
      <thead>
        <tr className="border-b border-graph-strong text-pencil text-right [&>th]:py-1 [&>th]:font-normal">
          <th scope="col" className="text-left">
            Each sample
          </th>
          <th scope="col" className="pl-5">
            multiplies
          </th>
          <th scope="col" className="pl-5">
            adds
          </th>
          <th scope="col" className="pl-5">
            state words
          </th>
        </tr>
      </thead>
      <tbody>
        {costs.map(({ name, cost }) => (
          <tr key={name} className="border-b border-graph [&>td]:py-1 [&>td]:pl-5 [&>td]:text-right">
            <th scope="row" className="py-1 text-left font-normal">
              {name}
            </th>
            <td className="numeric">{cost.multiplies}</td>
            <td className="numeric">{cost.adds}</td>
            <td className="numeric">{cost.stateWords}</td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}
