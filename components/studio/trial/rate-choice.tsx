import { Button } from '@/components/ui/button'
import { formatRate } from './words'

/** The recording's rate and the design's differ: nothing runs until the reader has chosen. */
export function RateChoice({
  recordingHz,
  designHz,
  mayEdit,
  atRecordingRate,
  onRedesign,
  onTrialOnly,
}: {
  recordingHz: number
  designHz: number
  mayEdit: boolean
  atRecordingRate: boolean
  onRedesign(): void
  onTrialOnly(on: boolean): void
}) {
  return (
    <div
      role="alert"
      className="flex flex-wrap items-center gap-x-4 gap-y-2 border-l-2 border-vermilion py-1 pl-3 text-[14px]"
    >
      <p className="min-w-0 flex-1 basis-72">
        The recording was taken at <span className="numeric">{formatRate(recordingHz)}</span>; the design runs at{' '}
        <span className="numeric">{formatRate(designHz)}</span>.
        {atRecordingRate
          ? ' For this trial the same statement is designed at the recording’s rate; the design itself is unchanged.'
          : ' It is not run at a rate it was not designed for.'}
      </p>
      <div className="flex flex-wrap gap-2">
        <Button
          kind={atRecordingRate ? 'plain' : 'primary'}
          disabled={!mayEdit}
          title={mayEdit ? undefined : 'Your role may not change the design.'}
          onClick={onRedesign}
        >
          Redesign at {formatRate(recordingHz)}
        </Button>
        <Button aria-pressed={atRecordingRate} onClick={() => onTrialOnly(!atRecordingRate)}>
          {atRecordingRate
            ? 'Don’t run at another rate'
            : `Run the same statement at ${formatRate(recordingHz)} for this trial only`}
        </Button>
      </div>
    </div>
  )
}
