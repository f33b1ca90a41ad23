import { TitleBlock } from '@/components/ui/title-block'
import type { DesignRecord, VersionSummary, Viewer } from '@/lib/designs/types'
import { formatInstant } from '@/lib/format/quantity'
import type { DesignSpec } from '@/dsp'
import { sameSpec } from '../store'

/** The signature ornament: what this sheet is, which version of it one sees, and who stands for it. */
export function DesignTitleBlock({
  design,
  latest,
  spec,
  viewer,
}: {
  design: DesignRecord
  latest: VersionSummary | undefined
  spec: DesignSpec
  viewer: Viewer
}) {
  const isSaved = latest !== undefined && sameSpec(latest.spec, spec)
  const version = isSaved ? String(latest.number) : `${(latest?.number ?? 0) + 1} (draft)`
  return (
    <TitleBlock
      label="Title block"
      cells={[
        { label: 'Drawing', value: design.drawingNumber, span: 3 },
        { label: 'Version', value: version, span: 3 },
        {
          label: 'Drawn',
          value: isSaved ? `${latest.savedBy}, ${formatInstant(latest.savedAt).slice(0, 11)}` : viewer.label,
          span: 3,
        },
        { label: 'State', value: 'not reviewed', tone: 'caution', span: 3 },
        { label: 'Checked', value: '—' },
        { label: 'Released', value: '—' },
        {
          label: 'Coefficients',
          value: isSaved ? `${latest.checksum.slice(0, 4)}…${latest.checksum.slice(-4)}` : 'not saved',
        },
      ]}
    />
  )
}
