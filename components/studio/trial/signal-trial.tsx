'use client'

import { useEffect } from 'react'
import { useStore } from 'zustand'
import { useShallow } from 'zustand/react/shallow'
import type { DesignSpec } from '@/dsp'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { statedId } from '../derive'
import { TraceSample } from '../stack/trace-sample'
import { DelayLine } from './delay-line'
import { DropGround, DropZone } from './drop-zone'
import { Progress } from './progress'
import { RateChoice } from './rate-choice'
import { sameRate } from './rates'
import { RecordingBar } from './recording-bar'
import { RunControls } from './run-controls'
import { SaveControls } from './save-controls'
import { sharedTrial } from './shared-trial'
import { SpectrumPlot } from './spectrum-plot'
import { viewOf, type TrialView } from './store'
import { TablePreview } from './table-preview'
import { TimePlot } from './time-plot'
import type { Trial } from './trial'

export interface SignalTrialProps {
  readonly spec: DesignSpec
  readonly mayEdit: boolean
  onRedesignAt(rateHz: number): void
  onStatus?(text: string): void
}

/** The design tried on a recording: before and after in time and as spectra, delays, the result as a file. */
export function SignalTrial({ spec, mayEdit, onRedesignAt, onStatus }: SignalTrialProps) {
  const trial = sharedTrial()
  const state = useStore(trial.store, useShallow(viewOf))
  useEffect(() => trial.follow(spec), [trial, spec])
  const status = statusOf(state)
  useEffect(() => onStatus?.(status), [onStatus, status])
  const takeFile = (file: File) => void trial.open(file, file.name)
  const openDemo = () => void trial.openDemo()

  return (
    <DropGround onFile={takeFile}>
      <div className="flex min-w-0 flex-col gap-4">
        {state.problem ? <Notice kind="caution">{state.problem.message}</Notice> : null}
        <TaskProgress trial={trial} of="task" />
        {state.recording ? (
          <Tried
            trial={trial}
            state={state}
            spec={spec}
            mayEdit={mayEdit}
            onRedesignAt={onRedesignAt}
            takeFile={takeFile}
            openDemo={openDemo}
          />
        ) : state.preview ? (
          <TablePreview
            preview={state.preview}
            busy={state.busyWith !== null}
            onChange={(change) => void trial.changePlan(change)}
            onRead={() => void trial.readTable()}
            onForget={() => trial.forget()}
          />
        ) : state.busyWith !== null ? null : (
          <DropZone onFile={takeFile} onDemo={openDemo} />
        )}
        <p role="status" className="sr-only">
          {status}
        </p>
      </div>
    </DropGround>
  )
}

function Tried({
  trial,
  state,
  spec,
  mayEdit,
  onRedesignAt,
  takeFile,
  openDemo,
}: {
  trial: Trial
  state: TrialView
  spec: DesignSpec
  mayEdit: boolean
  onRedesignAt(rateHz: number): void
  takeFile(file: File): void
  openDemo(): void
}) {
  const { recording, settings, runProblem, busyWith } = state
  if (!recording) return null
  const traceId = statedId(spec)
  return (
    <>
      <RecordingBar
        recording={recording}
        onFile={takeFile}
        onDemo={openDemo}
        onReplan={recording.kind === 'table' && state.preview ? () => trial.replan() : null}
        onResample={() => void trial.resample()}
        onForget={() => trial.forget()}
      />
      {sameRate(recording.sampleRateHz, spec.sampleRateHz) ? null : (
        <RateChoice
          recordingHz={recording.sampleRateHz}
          designHz={spec.sampleRateHz}
          mayEdit={mayEdit}
          atRecordingRate={settings.atRecordingRate}
          onRedesign={() => onRedesignAt(recording.sampleRateHz)}
          onTrialOnly={(atRecordingRate) => trial.set({ atRecordingRate })}
        />
      )}
      <RunControls spec={spec} recording={recording} settings={settings} onChange={(change) => trial.set(change)} />
      {runProblem ? (
        <Notice kind="caution">
          {runProblem.message}{' '}
          {runProblem.code === 'not-finite' && !settings.fillGaps ? (
            <Button small className="ml-1" onClick={() => trial.set({ fillGaps: true })}>
              Fill the gaps by straight lines
            </Button>
          ) : null}
        </Notice>
      ) : null}
      {settings.fillGaps ? (
        <Notice kind="note">
          Samples without a value lie on straight lines between their neighbours.{' '}
          <Button small className="ml-1" onClick={() => trial.set({ fillGaps: false })}>
            Don’t fill
          </Button>
        </Notice>
      ) : null}
      <div className="flex min-h-7 flex-wrap items-center gap-x-5 gap-y-1 text-[13px]">
        <span className="inline-flex items-center gap-2">
          <svg width="30" height="12" aria-hidden="true">
            <path d="M0 6H30" stroke="var(--pencil)" strokeWidth="1.25" />
          </svg>
          before
        </span>
        <span className="inline-flex items-center gap-2">
          <TraceSample id={traceId} />
          after
        </span>
        {busyWith === null ? <TaskProgress trial={trial} of="running" /> : null}
      </div>
      <div className="grid grid-cols-1 gap-6 xl:grid-cols-[3fr_2fr]">
        <TimePlot trial={trial} state={state} traceId={traceId} />
        <SpectrumPlot trial={trial} state={state} traceId={traceId} />
      </div>
      <DelayLine state={state} />
      <SaveControls trial={trial} state={state} />
    </>
  )
}

/** One sentence for readers who don't see the page change. */
function statusOf({ busyWith, recording, run, runningWords, preview }: TrialView): string {
  if (busyWith !== null) return `${busyWith}…`
  if (runningWords !== null) return `${runningWords}…`
  if (run) return 'The recording was run; before and after are shown.'
  if (recording) return `${recording.name} was read.`
  return preview ? `${preview.fileName} is ready to be read; check how.` : ''
}

/** The one part that follows each step of a task. */
function TaskProgress({ trial, of }: { trial: Trial; of: 'task' | 'running' }) {
  const task = useStore(trial.store, (state) => state[of])
  return task ? <Progress slim={of === 'running'} task={task} onCancel={() => trial.cancel()} /> : null
}
