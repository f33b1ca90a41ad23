'use client'

import type { FirFilter } from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import { DataTable } from '../chart/data-table'
import { CopyButton } from './copy-button'
import { fullDigits } from './written'

const symmetryWords: Record<FirFilter['symmetry'], string> = {
  even: 'symmetric: linear phase',
  odd: 'antisymmetric: linear phase and a quarter turn',
  none: 'not symmetric',
}

/** An FIR filter as it is run: its taps, with every digit. */
export function TapsPanel({ filter }: { filter: FirFilter }) {
  const { taps, symmetry, sampleRateHz } = filter
  return (
    <section aria-label="Taps" className="flex min-w-0 flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-5 gap-y-1">
        <h3 className="font-text text-[14px] font-semibold">
          {taps.length} taps at {formatHz(sampleRateHz)}, {symmetryWords[symmetry]}
        </h3>
        <CopyButton text={() => Array.from(taps, fullDigits).join('\n')}>Copy taps</CopyButton>
      </div>
      <p className="numeric text-[12.5px] text-pencil">
        y = h₀·x + h₁·x₁ + … + h{taps.length - 1}·x{taps.length - 1}
      </p>
      <DataTable
        summary="Every tap"
        columns={['k', 'h(k)']}
        rows={() => Array.from(taps, (tap, k) => [String(k), fullDigits(tap)])}
      />
    </section>
  )
}
