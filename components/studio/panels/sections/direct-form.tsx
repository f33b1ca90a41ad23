'use client'

import { Notice } from '@/components/ui/notice'
import type { Section } from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'
import { CopyButton } from './copy-button'
import { NumberTable } from './number-table'
import type { Ratio } from './structures'
import { directEquation, ratioAsText, sectionsAsText } from './written'

/** The ratio b/a, which is only as good as its conditioning; beyond the limit it is refused and the cascade offered. */
export function DirectForm({ ratio, sections }: { ratio: Ratio; sections: readonly Section[] }) {
  if (!ratio.kept) {
    return (
      <div className="flex flex-col gap-2">
        <Notice kind="note">b/a is refused. {ratio.reason} The cascade above holds the design to rounding.</Notice>
        <CopyButton text={() => sectionsAsText(sections)}>Copy the cascade instead</CopyButton>
      </div>
    )
  }
  const { b, a, worstDeviationDb } = ratio.polynomials
  return (
    <div className="flex flex-col gap-2">
      <p className="text-[13px] text-pencil">
        Rounded to doubles it strays from the design by at most{' '}
        <span className="numeric text-ink">{formatNumber(worstDeviationDb, 3)}&#8201;dB</span>; it is stable.{' '}
        <span className="numeric block">{directEquation}</span>
      </p>
      <NumberTable
        label="Coefficients of b/a"
        columns={['b', 'a']}
        rows={Array.from(a, (feedback, k) => ({ name: `[${k}]`, values: [b[k] ?? 0, feedback] }))}
      />
      <CopyButton text={() => ratioAsText(b, a)}>Copy b/a</CopyButton>
    </div>
  )
}
