import type {
  Answer,
  DelayReading,
  Opened,
  PlanChange,
  RecordingSummary,
  RunRequest,
  RunSummary,
  SavedFile,
  SaveRequest,
  SpectrumReading,
  SpectrumRequest,
  TablePreview,
  WindowReading,
  WindowRequest,
} from './shapes'

export type Progress = (done: number, total: number) => void

/** What the worker does; the page talks to it through comlink, tests directly. One recording at a time. */
export interface TrialApi {
  /** Says what a file is; reads a WAV at once, prepares a table to be looked at. A file being read before is given up. */
  open(file: Blob, name: string, progress: Progress): Promise<Answer<Opened>>
  /** A recording made up on the spot, at the given rate. */
  openDemo(sampleRateHz: number, progress: Progress): Promise<Answer<RecordingSummary>>
  changePlan(change: PlanChange): Promise<Answer<TablePreview>>
  readTable(progress: Progress): Promise<Answer<RecordingSummary>>
  resample(progress: Progress): Promise<Answer<RecordingSummary>>
  run(request: RunRequest, progress: Progress): Promise<Answer<RunSummary>>
  window(request: WindowRequest): Promise<Answer<WindowReading>>
  /** Measured against predicted delay of a channel that was run. */
  delay(channel: number): Promise<Answer<DelayReading>>
  spectrum(request: SpectrumRequest): Promise<Answer<SpectrumReading>>
  save(request: SaveRequest, progress: Progress): Promise<Answer<SavedFile>>
  /** Stops what takes long: reading, resampling, running, saving. */
  cancel(): Promise<void>
  close(): Promise<void>
}
