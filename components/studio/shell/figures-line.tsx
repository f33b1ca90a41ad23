'use client'

import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { multipliesPerSample } from '@/lib/designs/cost'
import type { deriveFigures, Trust, Versions } from '../derive'

/** The figures that follow from the statement, in one line under it. */
export function FiguresLine({
  versions,
  trust,
  figures,
  budgetText,
}: {
  versions: Versions
  trust: readonly Trust[]
  figures: NonNullable<ReturnType<typeof deriveFigures>>
  budgetText: string
}) {
  const stated = versions.digital.find((version) => version.stated)
  const statedTrust = trust.find(({ id }) => id === stated?.id)
  const cautions = stated?.filter.diagnostics.filter(({ severity }) => severity === 'caution') ?? []
  return (
    <>
      <dl className="flex flex-wrap gap-x-7 gap-y-1 text-[14px] text-pencil">
        <Figure name="Oversampling">{formatNumber(figures.oversampling, 3)}×</Figure>
        <Figure name={figures.delayAtHz === 0 ? 'Delay at DC' : `Delay at ${formatHz(figures.delayAtHz)}`}>
          {formatSeconds(figures.delaySeconds)}
        </Figure>
        {stated ? <Figure name="Cost">{multipliesPerSample(stated.filter)} multiplies / sample</Figure> : null}
        {statedTrust ? (
          <Figure name="Trusted" note={`(${budgetText})`}>
            {trustText(statedTrust)}
          </Figure>
        ) : null}
      </dl>
      {cautions.length > 0 ? (
        <ul aria-label="Cautions" className="order-last basis-full border-l-2 border-ochre pl-3 text-[13px] text-ink">
          {cautions.map((caution) => (
            <li key={caution.code}>{caution.message}</li>
          ))}
        </ul>
      ) : null}
    </>
  )
}

export function trustText({ fromHz, upToHz }: Trust): string {
  if (upToHz <= fromHz) return 'nowhere'
  return fromHz > 0 ? `${formatHz(fromHz, 3)} to ${formatHz(upToHz, 3)}` : `to ${formatHz(upToHz, 3)}`
}

function Figure({ name, note, children }: { name: string; note?: string; children: React.ReactNode }) {
  return (
    <div className="flex flex-wrap items-baseline gap-x-1.5">
      <dt>{name}</dt>
      <dd>
        <span className="numeric text-[13px] font-medium text-ink">{children}</span>
        {note ? <span> {note}</span> : null}
      </dd>
    </div>
  )
}
