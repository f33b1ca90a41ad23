import type { ChainSpec } from '@/dsp'
import { TitleBlock } from '@/components/ui/title-block'
import type { ChainRecord, ChainVersionSummary } from '@/lib/chains/types'
import { sameValue } from '@/lib/designs/same-value'
import type { Viewer } from '@/lib/designs/types'
import { stateWords } from '@/lib/designs/words'
import { formatInstant } from '@/lib/format/quantity'

/** What this sheet is, which version of it one sees, and who stands for it. */
export function ChainTitleBlock({
  chain,
  latest,
  spec,
  viewer,
}: {
  chain: ChainRecord
  latest: ChainVersionSummary | undefined
  spec: ChainSpec
  viewer: Viewer
}) {
  const isSaved = latest !== undefined && sameValue(latest.spec, spec)
  const state = isSaved ? latest.state : 'draft'
  return (
    <TitleBlock
      label="Title block"
      cells={[
        { label: 'Drawing', value: chain.drawingNumber, span: 3 },
        { label: 'Version', value: isSaved ? String(latest.number) : `${(latest?.number ?? 0) + 1} (draft)`, span: 3 },
        {
          label: 'Drawn',
          value: isSaved ? `${latest.savedBy}, ${formatInstant(latest.savedAt).slice(0, 11)}` : viewer.label,
          span: 6,
        },
        {
          label: 'State',
          value: stateWords[state],
          tone: state === 'released' || state === 'approved' ? 'met' : 'caution',
        },
        { label: 'Checked', value: '—' },
        { label: 'Released', value: '—' },
      ]}
    />
  )
}
