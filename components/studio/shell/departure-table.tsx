'use client'

import { useMemo, useState } from 'react'
import { DesignError, isFir, isFirDesign, residual, worstDeparture, type DepartureBudget, type DesignSpec } from '@/dsp'
import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'
import { formatFixed, formatHz, formatNumber } from '@/lib/format/quantity'
import { versionLabels, type VersionId } from '@/lib/designs/words'
import { parseDecibels, parseDegrees, parseFrequency } from '@/lib/units/parse'
import { passBandOf } from '@/lib/designs/outline'
import { methodAsShown, type Trust, type Versions } from '../derive'
import { orRefusal } from '../or-refusal'
import type { StudioStore } from '../store'
import { trustText } from './figures-line'
import { FitAdvantage } from '../original/fit-advantage'
import { InlineQuantity } from './inline-quantity'
import { TraceSample } from '../stack/trace-sample'

/**
 * Which digital version stays closest to the analog one, up to which frequency: the budget, how far each version keeps it, and its
 * worst departure up to a chosen frequency.
 */
export function DepartureTable({
  store,
  spec,
  versions,
  trust,
  readOnly,
}: {
  store: StudioStore
  spec: DesignSpec
  versions: Versions
  trust: readonly Trust[]
  readOnly: boolean
}) {
  const [fromHz, edge] = passBandOf(spec)
  const [chosenHz, setChosenHz] = useState<number | null>(null)
  const fold = spec.sampleRateHz / 2
  // Just below the fold line; for a band that begins up there, half-way to it.
  const upToHz = Math.min(chosenHz ?? edge, Math.max(fold * 0.999, (fromHz + fold) / 2))
  const { budget } = spec

  const rows = useMemo(
    () => rowsOf(versions, trust, [fromHz, upToHz], budget.removeDelay),
    [trust, versions, fromHz, upToHz, budget.removeDelay],
  )

  const setBudget = (change: Partial<DepartureBudget>) => {
    const next = { ...spec.budget, ...change }
    if (!(next.magnitudeDb >= 1e-6 && next.magnitudeDb <= 300))
      return 'A magnitude budget lies between 0.000001 and 300 dB.'
    if (!(next.phaseDegrees >= 1e-6 && next.phaseDegrees <= 36_000))
      return 'A phase budget lies between 0.000001 and 36 000°.'
    store.getState().propose({ ...store.getState().spec, budget: next })
    return null
  }

  return (
    <section aria-labelledby="departure-heading">
      <h2 id="departure-heading" className="font-text text-[13px] font-semibold text-pencil">
        Departure from {versions.analog ? 'the analog original' : 'what was measured'}
      </h2>
      <div className="mt-1 flex flex-wrap items-baseline gap-x-1.5 gap-y-1 border-t border-graph-strong pt-1.5 text-[14px]">
        <span>Within</span>
        <InlineQuantity
          label="Departure budget, magnitude"
          text={`${formatNumber(budget.magnitudeDb)}\u2009dB`}
          parse={parseDecibels}
          onValue={(magnitudeDb) => setBudget({ magnitudeDb })}
          disabled={readOnly}
        />
        <span>and</span>
        <InlineQuantity
          label="Departure budget, phase"
          text={`${formatNumber(budget.phaseDegrees)}°`}
          parse={parseDegrees}
          onValue={(phaseDegrees) => setBudget({ phaseDegrees })}
          disabled={readOnly}
        />
        <label className="inline-flex min-h-6 items-baseline gap-1.5">
          <input
            type="checkbox"
            className="size-4 accent-spruce"
            checked={budget.removeDelay}
            disabled={readOnly}
            onChange={(event) => setBudget({ removeDelay: event.currentTarget.checked })}
          />
          best delay removed
        </label>
      </div>
      <div className="overflow-x-auto">
        <table className="mt-1 w-full text-[13px]">
          <caption className="pb-1 text-left text-pencil">
            Worst {fromHz > 0 ? `from ${formatHz(fromHz)} ` : ''}up to{' '}
            <InlineQuantity
              label="Worst departure up to"
              text={formatHz(upToHz)}
              parse={(text) => parseFrequency(text, { nyquistHz: fold })}
              onValue={(hertz) => {
                if (!(hertz > 0 && hertz < fold)) return `0 < frequency < ${formatHz(fold)} (half the rate)`
                setChosenHz(hertz)
                return null
              }}
            />
          </caption>
          <thead>
            <tr className="text-left text-pencil [&>th]:py-1 [&>th]:font-normal">
              <th scope="col">Version</th>
              <th scope="col" className="text-right">
                dB
              </th>
              <th scope="col" className="text-right">
                °
              </th>
              <th scope="col" className="text-right">
                <abbr title="microseconds of phase delay" className="no-underline">
                  µs
                </abbr>
              </th>
              <th scope="col" className="pl-2 text-right">
                trusted to
              </th>
            </tr>
          </thead>
          <tbody className="border-t border-graph-strong">
            {rows.map((row) => (
              <tr key={row.id} className="border-b border-graph [&>td]:py-1">
                <th scope="row" className="py-0.5 text-left font-normal">
                  <span className="flex items-center gap-1.5">
                    <TraceSample id={row.id} />
                    {row.stated || readOnly ? (
                      <span className={classNames(row.stated && 'font-semibold')}>{versionLabels[row.id]}</span>
                    ) : (
                      <Button
                        kind="quiet"
                        small
                        className="-mx-2"
                        title={`Run the statement by the ${versionLabels[row.id]} version`}
                        onClick={() => {
                          const now = store.getState().spec
                          if (isFirDesign(now) || row.id === 'fir') return
                          store.getState().propose({ ...now, how: methodAsShown(now, row.id) }, 'how.method')
                        }}
                      >
                        {versionLabels[row.id]}
                      </Button>
                    )}
                  </span>
                </th>
                <td className={cell(row.worst.db <= budget.magnitudeDb)}>{formatFixed(row.worst.db, 2)}</td>
                <td className={cell(row.worst.degrees <= budget.phaseDegrees)}>{formatFixed(row.worst.degrees, 2)}</td>
                <td className="numeric pl-2 text-right">
                  {row.worst.microseconds < 0.001 ? '<\u20090.001' : formatNumber(row.worst.microseconds, 3)}
                </td>
                <td className="numeric pl-2 text-right whitespace-nowrap">
                  {row.trust ? trustText(row.trust).replace(/^to /, '') : '—'}
                  {row.closest ? (
                    <span className="block font-text text-[12px] leading-4 text-moss">farthest</span>
                  ) : null}
                </td>
              </tr>
            ))}
            {versions.refused.map((refusal) => (
              <tr key={refusal.id} className="border-b border-graph">
                <th scope="row" className="py-1 pr-2 text-left align-top font-normal text-pencil">
                  <span className="flex items-center gap-2">
                    <TraceSample id={refusal.id} />
                    {versionLabels[refusal.id]}
                  </span>
                </th>
                <td colSpan={4} className="py-1 text-pencil">
                  {refusal.message}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <FitAdvantage spec={spec} />
    </section>
  )
}

interface Row {
  readonly id: VersionId
  readonly stated: boolean
  readonly closest: boolean
  readonly worst: { readonly db: number; readonly degrees: number; readonly microseconds: number }
  /** Null where nothing can be said of how far it may be trusted. */
  readonly trust: Trust | null
}

function rowsOf(
  { analog, reference, digital }: Versions,
  trust: readonly Trust[],
  [fromHz, upToHz]: readonly [number, number],
  removeDelay: boolean,
): readonly Row[] {
  if (!analog) {
    return digital.flatMap(({ id, filter, stated }) => {
      const found = orRefusal(() => residual(reference, filter, fromHz, upToHz, { removeDelay }))
      if (found instanceof DesignError) return []
      const { db, degrees, atHz } = found
      const microseconds = atHz.degrees > 0 ? (degrees / 360 / atHz.degrees) * 1e6 : 0
      return [{ id, stated, closest: false, worst: { db, degrees, microseconds }, trust: null }]
    })
  }
  return trust.flatMap((entry, rank) => {
    const version = digital.find(({ id }) => id === entry.id)
    if (!version || isFir(version.filter)) return []
    const { filter, stated } = version
    const worst = orRefusal(() =>
      worstDeparture(analog, filter, upToHz, { ...(fromHz > 0 && fromHz < upToHz ? { fromHz } : {}), removeDelay }),
    )
    if (worst instanceof DesignError) return []
    return [{ id: entry.id, stated, closest: rank === 0, worst, trust: entry }]
  })
}

const cell = (met: boolean) => classNames('numeric pl-2 text-right', met ? 'text-moss' : 'text-vermilion')
