'use client'

import { DataTable } from '../panels/chart/data-table'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { formatNumber } from '@/lib/format/quantity'
import { ChooseFile } from './drop-zone'
import type { RecordingSummary } from './shapes'
import { formatCount, formatDuration, formatRate, jitterWords, rateWords, unevenWords } from './words'

/** What the recording is, and what its reader should know of it. */
export function RecordingBar({
  recording,
  onFile,
  onDemo,
  onReplan,
  onResample,
  onForget,
}: {
  recording: RecordingSummary
  onFile(file: File): void
  onDemo(): void
  /** Back to how a table is read; null where there is nothing to settle. */
  onReplan: (() => void) | null
  onResample(): void
  onForget(): void
}) {
  const uneven = unevenWords(recording)
  const facts = [
    recording.storage,
    formatCount(recording.channels.length, 'channel', 'channels'),
    recording.kind === 'demo' ? formatRate(recording.sampleRateHz) : rateWords(recording.timing),
    jitterWords(recording.timing),
    formatCount(recording.frames, 'sample', 'samples'),
    formatDuration(recording.frames / recording.sampleRateHz),
  ].filter(Boolean)
  return (
    <div className="flex flex-col gap-2">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <p className="min-w-0 flex-1 basis-72 text-[14px]">
          <strong className="font-semibold break-words">{recording.name}</strong>{' '}
          <span className="text-pencil">{facts.join(' · ')}</span>
        </p>
        <div className="flex flex-wrap gap-2">
          {onReplan ? (
            <Button small onClick={onReplan}>
              Change how it is read
            </Button>
          ) : null}
          <ChooseFile small onFile={onFile}>
            Another file
          </ChooseFile>
          {recording.kind === 'demo' ? null : (
            <Button small onClick={onDemo}>
              Demo recording
            </Button>
          )}
          <Button small kind="quiet" onClick={onForget}>
            Close
          </Button>
        </div>
      </div>
      {recording.notes.map((note) => (
        <Notice key={note} kind="note">
          {note}
        </Notice>
      ))}
      {uneven ? (
        <Notice kind="caution">
          {uneven}{' '}
          {recording.mayResample ? (
            <Button small className="ml-1" onClick={onResample}>
              Resample evenly by straight lines
            </Button>
          ) : null}
        </Notice>
      ) : null}
      {recording.flawCount > 0 ? (
        <DataTable
          summary={`${formatCount(recording.flawCount, 'cell holds', 'cells hold')} no number${recording.flawCount > recording.flaws.length ? ` (the first ${recording.flaws.length} are listed)` : ''}`}
          columns={['line', 'sample', 'column', 'reason']}
          rows={() =>
            recording.flaws.map((flaw) => [
              flaw.row ?? '—',
              formatNumber(flaw.frame, 12),
              recording.channels[flaw.channel]?.name ?? 'time',
              flaw.reason,
            ])
          }
        />
      ) : null}
    </div>
  )
}
