import { formatDb, formatHz, formatNumber } from '@/lib/format/quantity'
import { ScrollRegion } from '../chart/data-table'
import type { SectionFacts } from './section-facts'
import { fullDigits, zeroText } from './written'

const coefficients = ['b0', 'b1', 'b2', 'a1', 'a2'] as const

/** A cascade section by section: coefficients with every digit, poles, zeros and the peak at each node. */
export function CascadeTable({ facts }: { facts: readonly SectionFacts[] }) {
  return (
    <ScrollRegion label="Sections of the cascade" className="border-y border-graph-strong">
      <table className="w-full text-[12.5px]">
        <thead>
          <tr className="border-b border-graph-strong text-pencil [&>th]:py-1 [&>th]:pl-4 [&>th]:text-right [&>th]:font-normal [&>th]:whitespace-nowrap">
            <th scope="col">
              <span className="sr-only">Section</span>
            </th>
            {coefficients.map((name) => (
              <th key={name} scope="col" className="numeric">
                {name}
              </th>
            ))}
            <th scope="col">pole f₀</th>
            <th scope="col">Q</th>
            <th scope="col">radius</th>
            <th scope="col">zeros</th>
            <th scope="col">peak at node</th>
          </tr>
        </thead>
        <tbody>
          {facts.map(({ section, poleHz, q, radius, zeros, nodePeakDb }, index) => (
            <tr
              key={index}
              className="border-b border-graph last:border-b-0 [&>td]:py-1 [&>td]:pl-4 [&>td]:text-right [&>td]:whitespace-nowrap"
            >
              <th scope="row" className="numeric py-1 text-left font-normal text-pencil">
                {index + 1}
              </th>
              {coefficients.map((name) => (
                <td key={name} className="numeric">
                  {fullDigits(section[name])}
                </td>
              ))}
              <td className="numeric">{Number.isFinite(poleHz) ? formatHz(poleHz, 5) : 'origin'}</td>
              <td className="numeric">{q === null ? '—' : formatNumber(q, 4)}</td>
              <td className="numeric">{formatNumber(radius, 6)}</td>
              <td className="numeric">{zeros.length === 0 ? 'none' : zeros.map(zeroText).join('; ')}</td>
              <td className="numeric">{formatDb(nodePeakDb)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollRegion>
  )
}
