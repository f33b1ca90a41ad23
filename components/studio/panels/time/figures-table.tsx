import type { TraceId } from '@/components/plot/trace-style'
import { classNames } from '@/lib/format/class-names'
import { formatFixed, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { TraceSample } from '../../stack/trace-sample'
import { ScrollRegion } from '../chart/data-table'
import type { TimeFigures } from './time-figures'

export interface VersionFigures {
  readonly id: TraceId
  readonly label: string
  readonly stated: boolean
  readonly figures: TimeFigures
}

/** Overshoot, rise, settling and final value of each version's step response. */
export function FiguresTable({
  rows,
  refused,
  tolerancePercent,
}: {
  rows: readonly VersionFigures[]
  refused: readonly { readonly id: TraceId; readonly label: string; readonly message: string }[]
  tolerancePercent: number
}) {
  const returnsToZero = rows.some(({ figures }) => figures.returnsToZero)
  return (
    <ScrollRegion label="Step response in figures">
      <table className="w-full text-[13px]">
        <caption className="pb-1 text-left text-pencil">Step response in figures</caption>
        <thead>
          <tr className="border-b border-graph-strong text-right text-pencil [&>th]:py-1 [&>th]:font-normal [&>th]:whitespace-nowrap">
            <th scope="col" className="text-left">
              Version
            </th>
            <th scope="col" className="pl-2.5">
              overshoot
            </th>
            <th scope="col" className="pl-2.5">
              rise 10–90&#8201;%
            </th>
            <th scope="col" className="pl-2.5">
              settled ±{tolerancePercent}&#8201;%
            </th>
            <th scope="col" className="pl-2.5">
              final value
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ id, label, stated, figures }) => (
            <tr key={id} className="border-b border-graph">
              <th scope="row" className="py-1 text-left font-normal whitespace-nowrap">
                <span className={classNames('flex items-center gap-2', stated && 'font-semibold')}>
                  <TraceSample id={id} />
                  {label}
                </span>
              </th>
              <td className={cell}>
                {figures.overshoot === null ? '—' : `${formatFixed(figures.overshoot * 100, 2)}\u2009%`}
              </td>
              <td className={cell}>{figures.riseSeconds === null ? '—' : formatSeconds(figures.riseSeconds, 4)}</td>
              <td className={cell}>
                {figures.settlingSeconds === null ? 'not seen' : formatSeconds(figures.settlingSeconds, 4)}
              </td>
              <td className={cell}>
                {Math.abs(figures.finalValue) < 1e-9 ? '0' : formatNumber(figures.finalValue, 5)}
              </td>
            </tr>
          ))}
          {refused.map(({ id, label, message }) => (
            <tr key={id} className="border-b border-graph text-pencil">
              <th scope="row" className="py-1 pr-2 text-left align-top font-normal whitespace-nowrap">
                <span className="flex items-center gap-2">
                  <TraceSample id={id} />
                  {label}
                </span>
              </th>
              <td colSpan={4} className="py-1 pl-2.5">
                {message}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="max-w-prose pt-1.5 text-[13px] text-pencil">
        Digital versions are judged by their samples, one every period.{' '}
        {returnsToZero
          ? `This response returns to zero or near it: it has no overshoot or rise, and ±${tolerancePercent} % is a part of its largest swing.`
          : `±${tolerancePercent} % is a part of the final value.`}
      </p>
    </ScrollRegion>
  )
}

const cell = 'numeric py-1 pl-2.5 text-right whitespace-nowrap'
