import { useMemo } from 'react'
import { DesignError, isFirDesign, isOwnDesign, residual, type Residual } from '@/dsp'
import { Notice } from '@/components/ui/notice'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { orRefusal } from '../or-refusal'
import type { Settled } from '../shell/use-derived'
import { FitAdvantage } from './fit-advantage'

/** How well the stated digital version meets its original: the residual, and what a fit is worth. */
export function FitReport({ settled }: { settled: Settled }) {
  const { spec, versions } = settled
  const found = useMemo(() => residualOf(settled), [settled])
  if (isFirDesign(spec)) return null
  return (
    <section aria-label="How the original is met" className="flex min-w-0 flex-col gap-3">
      <h3 className="font-text text-[14px] font-semibold">How the stated version meets it</h3>
      {found instanceof DesignError ? <Notice kind="note">{found.message}</Notice> : <ResidualTable found={found} />}
      {versions.reference.kind === 'measured' ? null : <FitAdvantage spec={spec} />}
    </section>
  )
}

interface Found extends Residual {
  readonly fromHz: number
  readonly toHz: number
}

/** Over the band of the fit; where nothing is fitted, up to nine tenths of half the rate. */
function residualOf({ spec, versions }: Settled): Found | DesignError {
  const stated = versions.digital.find((version) => version.stated)?.filter
  if (!stated || isFirDesign(spec)) return new DesignError('no-version', 'how.method', 'There is no digital version.')
  const rows = isOwnDesign(spec) && spec.own.given === 'measured' ? spec.own.rows : null
  const fromHz = rows?.[0]?.[0] ?? 0
  const end = spec.how.method === 'fitted' ? spec.how.upToHz : 0.45 * spec.sampleRateHz
  const toHz = Math.min(end, rows?.at(-1)?.[0] ?? end)
  const options = { removeDelay: spec.budget.removeDelay }
  const found = orRefusal(() => residual(versions.reference, stated, fromHz, toHz, options))
  return found instanceof DesignError ? found : { ...found, fromHz, toHz }
}

function ResidualTable({ found }: { found: Found }) {
  const rows = [
    ['Largest in magnitude', `${formatNumber(found.db, 3)}\u2009dB`, formatHz(found.atHz.db, 4)],
    ['Largest in phase', `${formatNumber(found.degrees, 3)}°`, formatHz(found.atHz.degrees, 4)],
    ['Largest complex error', formatNumber(found.worst, 3), formatHz(found.atHz.worst, 4)],
    ['Root mean square of it', formatNumber(found.rms, 3), ''],
  ] as const
  return (
    <table className="w-full text-[13px]">
      <caption className="pb-1 text-left text-pencil">
        Residual from {formatHz(found.fromHz, 4)} to {formatHz(found.toHz, 4)}
        {found.delaySeconds === 0 ? '' : `, a delay of ${formatSeconds(found.delaySeconds, 3)} taken off`}
      </caption>
      <thead className="sr-only">
        <tr>
          <th scope="col">Measure</th>
          <th scope="col">Value</th>
          <th scope="col">At</th>
        </tr>
      </thead>
      <tbody className="border-t border-graph-strong">
        {rows.map(([name, value, at]) => (
          <tr key={name} className="border-b border-graph">
            <th scope="row" className="py-1 text-left font-normal">
              {name}
            </th>
            <td className="numeric py-1 text-right">{value}</td>
            <td className="numeric py-1 pl-3 text-right text-pencil">{at === '' ? '' : `at ${at}`}</td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}
