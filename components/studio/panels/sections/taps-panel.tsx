'use client'

import { useMemo } from 'react'
import type { FirFilter } from '@/dsp'
import { classNames } from '@/lib/format/class-names'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { typesetEquation } from '@/lib/exports/equation'
import { DataTable } from '../chart/data-table'
import { useQuiet } from '../chart/use-quiet'
import { CopyButton } from './copy-button'
import { CostTable } from './cost-table'
import { Part, ToKnow } from './part'
import { delayWords, symmetryWords, tapsAsText, tapsCosts, tapsSums, zeroRows } from './taps-facts'
import { TapsPlot } from './taps-plot'
import { fullDigits } from './written'

/** An FIR filter as it is run: its taps drawn and with every digit, what a sample costs, where it lets nothing through. */
export function TapsPanel({ filter: latest }: { filter: FirFilter }) {
  const filter = useQuiet(latest)
  const { taps, symmetry, sampleRateHz, diagnostics } = filter
  const sums = useMemo(() => tapsSums(filter), [filter])
  return (
    <div className={classNames('flex flex-col gap-7', filter !== latest && 'opacity-50')}>
      <Part
        title={`${taps.length} taps at ${formatHz(sampleRateHz)}, ${symmetryWords[symmetry]}`}
        controls={<CopyButton text={() => tapsAsText(taps)}>Copy taps</CopyButton>}
      >
        <p className="numeric text-[12.5px] text-pencil">
          {typesetEquation('taps', 'subtract', taps.length - 1)}; {delayWords(filter)}
        </p>
        <TapsPlot filter={filter} />
        <DataTable
          summary="Every tap"
          columns={['k', 'h(k)']}
          rows={() => Array.from(taps, (tap, k) => [String(k), fullDigits(tap)])}
        />
      </Part>
      <div className="grid gap-x-10 gap-y-7 lg:grid-cols-2">
        <Part title="Cost">
          <CostTable costs={tapsCosts(filter)} />
          {symmetry === 'none' ? null : (
            <p className="max-w-prose text-[13px] text-pencil">
              Folded: the two samples that meet {symmetry === 'odd' ? 'opposite' : 'equal'} taps are{' '}
              {symmetry === 'odd' ? 'subtracted' : 'added'} before the one multiplication. The last bits of the result
              then differ from those of the direct form.
            </p>
          )}
          <p className="max-w-prose text-[13px] text-pencil">
            Taps add up to <span className="numeric text-ink">{formatNumber(sums.plain, 6)}</span>, the gain at 0 Hz;
            their magnitudes to <span className="numeric text-ink">{formatNumber(sums.ofMagnitudes, 6)}</span>, the most
            that an input within ±1 can make.
          </p>
        </Part>
        <div className="flex min-w-0 flex-col gap-7">
          <Zeros filter={filter} />
          <ToKnow diagnostics={diagnostics} />
        </div>
      </div>
    </div>
  )
}

function Zeros({ filter }: { filter: FirFilter }) {
  const rows = useMemo(() => zeroRows(filter), [filter])
  if (typeof rows === 'string')
    return (
      <Part title="Zeros">
        <p className="max-w-prose text-[13px] text-pencil">{rows}</p>
      </Part>
    )
  return (
    <Part title="Zeros">
      <p className="max-w-prose text-[13px] text-pencil">
        A zero on the circle stops its frequency altogether. All poles are at the origin.
      </p>
      <DataTable
        summary="Zeros by frequency, a conjugate pair in one row"
        columns={['frequency', 'radius', 'times']}
        rows={() => rows.map(({ where, radius, times }) => [where, radius, String(times)])}
      />
    </Part>
  )
}
