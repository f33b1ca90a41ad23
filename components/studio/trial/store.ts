import type { WindowName } from '@/dsp'
import { createStore } from 'zustand/vanilla'
import type { RecordingProblem } from '@/lib/recordings/errors'
import type { RunMode, RunStart } from './run'
import type { DelayReading, RecordingSummary, RunSummary, SpectrumReading, TablePreview, WindowReading } from './shapes'

/** A long task under way: what it does, in words, and how far it is. */
export interface Task {
  readonly words: string
  readonly done: number
  readonly total: number
  /** In what `done` is counted. */
  readonly unit: 'bytes' | 'samples'
}

export interface TrialSettings {
  readonly mode: RunMode
  readonly start: RunStart
  /** Channels to run. */
  readonly channels: readonly number[]
  /** The channel that is plotted. */
  readonly shown: number
  readonly fillGaps: boolean
  /** The reader chose to run the statement at the recording's rate although the design's is another. */
  readonly atRecordingRate: boolean
  readonly sameScale: boolean
  /** The result is moved back by its predicted delay, in whole samples. */
  readonly aligned: boolean
  readonly segmentLength: number
  readonly window: WindowName
}

export interface TrialState {
  readonly task: Task | null
  /** Why the last thing asked for was refused. */
  readonly problem: RecordingProblem | null
  readonly preview: TablePreview | null
  readonly recording: RecordingSummary | null
  readonly settings: TrialSettings
  readonly running: Task | null
  readonly run: RunSummary | null
  readonly runProblem: RecordingProblem | null
  /** Frames in view, [from, to). */
  readonly view: { readonly from: number; readonly to: number }
  readonly windows: { readonly before: WindowReading | null; readonly after: WindowReading | null }
  readonly spectrum: SpectrumReading | null
  readonly delay: DelayReading | null
  readonly saved: { readonly name: string; readonly note: string } | null
  readonly saveProblem: RecordingProblem | null
}

export const usualSettings: TrialSettings = {
  mode: 'causal',
  start: 'zero',
  channels: [],
  shown: 0,
  fillGaps: false,
  atRecordingRate: false,
  sameScale: true,
  aligned: false,
  segmentLength: 4096,
  window: 'hann',
}

export const emptyTrial: TrialState = {
  task: null,
  problem: null,
  preview: null,
  recording: null,
  settings: usualSettings,
  running: null,
  run: null,
  runProblem: null,
  view: { from: 0, to: 1 },
  windows: { before: null, after: null },
  spectrum: null,
  delay: null,
  saved: null,
  saveProblem: null,
}

export const createTrialStore = () => createStore<TrialState>()(() => emptyTrial)
export type TrialStore = ReturnType<typeof createTrialStore>

/** Samples by which the result is moved back in the picture, when that was asked for. */
export const shiftFrames = ({
  settings,
  delay,
  recording,
}: Pick<TrialState, 'settings' | 'delay' | 'recording'>): number =>
  settings.aligned && recording ? Math.round((delay?.predictedSeconds ?? 0) * recording.sampleRateHz) : 0

/** The state as the panel shows it: what a task does but not how far it is, so that progress alone doesn't draw the plots again. */
export type TrialView = Omit<TrialState, 'task' | 'running'> & {
  readonly busyWith: string | null
  readonly runningWords: string | null
}

export function viewOf({ task, running, ...rest }: TrialState): TrialView {
  return { ...rest, busyWith: task?.words ?? null, runningWords: running?.words ?? null }
}
