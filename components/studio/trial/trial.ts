import type { DesignSpec } from '@/dsp'
import type { RecordingProblem } from '@/lib/recordings/errors'
import type { TrialApi } from './api'
import { specForRun, usualSegmentLength } from './rates'
import { offeredWay } from './zero-phase'
import type { Answer, Opened, PlanChange, RecordingSummary, SaveRequest, TablePreview, WindowReading } from './shapes'
import {
  createTrialStore,
  emptyTrial,
  shiftFrames,
  usualSettings,
  type Task,
  type TrialSettings,
  type TrialStore,
} from './store'

/** Edits of the statement are waited out for this long before the recording is run again. */
const PAUSE_MS = 120

export interface Trial {
  readonly store: TrialStore
  open(file: Blob, name: string): Promise<void>
  openDemo(): Promise<void>
  changePlan(change: PlanChange): Promise<void>
  readTable(): Promise<void>
  resample(): Promise<void>
  /** Back to how the table is read. */
  replan(): void
  cancel(): void
  /** Forgets the recording. */
  forget(): void
  /** The statement as it stands now; runs again when that matters. */
  follow(spec: DesignSpec): void
  set(change: Partial<TrialSettings>): void
  look(from: number, to: number): void
  /** Columns that the time plot has room for. */
  setColumns(columns: number): void
  /** The file that was made, for the page to offer; null when it was refused. */
  save(request: SaveRequest): Promise<{ blob: Blob; name: string } | null>
  fail(message: string): void
}

/**
 * What happens between the page and the worker: which run is due, which answers are stale. Holds no samples; `api` has them.
 */
export function createTrial(api: TrialApi): Trial {
  const store = createTrialStore()
  const { getState: get, setState: set } = store
  let spec: DesignSpec | null = null
  let columns = 600
  let runIsDue = false
  let timer: ReturnType<typeof setTimeout> | null = null
  // answers carry the number of their question; an older one than the last asked is dropped
  const asked = { run: 0, windows: 0, spectrum: 0, delay: 0 }

  const refused = (problem: RecordingProblem) =>
    set({ problem: problem.code === 'cancelled' ? null : problem, task: null })

  async function longTask(
    words: string,
    unit: Task['unit'],
    ask: (progress: (done: number, total: number) => void) => Promise<void>,
  ): Promise<void> {
    // progress travels another way than the answer and may come after it
    let ended = false
    set({ problem: null, task: { words, unit, done: 0, total: 0 } })
    await ask((done, total) => {
      if (!ended) set({ task: { words, unit, done, total } })
    })
    ended = true
    set({ task: null })
    if (runIsDue) schedule(0)
  }

  const dropAnswers = () => {
    for (const kind of ['run', 'windows', 'spectrum', 'delay'] as const) asked[kind] += 1
  }

  function take(summary: RecordingSummary): void {
    dropAnswers()
    const { settings } = get()
    const count = summary.channels.length
    set({
      ...emptyTrial,
      recording: summary,
      preview: summary.kind === 'table' ? get().preview : null,
      view: { from: 0, to: summary.frames },
      settings: {
        ...usualSettings,
        mode: settings.mode,
        start: settings.start,
        window: settings.window,
        sameScale: settings.sameScale,
        segmentLength: usualSegmentLength(summary.frames),
        channels: Array.from({ length: Math.min(count, MOST_CHANNELS_RUN) }, (_, k) => k),
      },
    })
    void readWindows()
    void readSpectrum()
    schedule(0)
  }

  function schedule(pauseMs: number): void {
    if (timer !== null) clearTimeout(timer)
    timer = setTimeout(() => void runNow(), pauseMs)
  }

  async function runNow(): Promise<void> {
    // the worker does one long task at a time: reading and writing are not stopped for a run
    runIsDue = get().task !== null
    if (runIsDue) return
    const { recording, settings } = get()
    const question = (asked.run += 1)
    if (!recording || !spec) return
    const due = specForRun(spec, recording.sampleRateHz, settings.atRecordingRate)
    if (!due || settings.channels.length === 0) {
      set({
        run: null,
        running: null,
        runProblem: null,
        windows: { ...get().windows, after: null },
        saved: null,
        saveProblem: null,
      })
      void readSpectrum()
      return
    }
    const isTwice = settings.mode === 'zero-phase' && offeredWay(due) === 'forward-backward'
    const words = isTwice ? 'Running forward and backward' : 'Running'
    set({
      running: { words, unit: 'samples', done: 0, total: recording.frames },
      runProblem: null,
      saved: null,
      saveProblem: null,
    })
    const { mode, start, channels, fillGaps } = settings
    let ended = false
    const answer = await api.run({ spec: due, mode, start, channels, fillGaps }, (done, total) => {
      if (question === asked.run && !ended) set({ running: { words, unit: 'samples', done, total } })
    })
    ended = true
    if (question !== asked.run) return
    if (answer.ok) set({ run: answer.value, running: null })
    else if (answer.problem.code === 'cancelled') set({ running: null })
    else set({ run: null, running: null, runProblem: answer.problem, windows: { ...get().windows, after: null } })
    void readWindows()
    void readSpectrum()
    void readDelay()
  }

  async function readDelay(): Promise<void> {
    const question = (asked.delay += 1)
    const { run, settings } = get()
    const channel = settings.shown
    const answer = run?.request.channels.includes(channel) ? await api.delay(channel) : null
    if (question !== asked.delay) return
    set({ delay: answer?.ok ? answer.value : null })
    if (settings.aligned) void readWindows()
  }

  async function readWindows(): Promise<void> {
    const question = (asked.windows += 1)
    const { recording, run, view, settings } = get()
    if (!recording) return
    const place = { channel: settings.shown, from: view.from, to: view.to, columns, shift: 0 }
    const before = await api.window({ series: 'before', ...place })
    const wantAfter = run !== null && run.request.channels.includes(settings.shown)
    const shift = shiftFrames(get())
    const after = wantAfter ? await api.window({ series: 'after', ...place, shift }) : null
    if (question !== asked.windows) return
    const valueOf = (answer: Answer<WindowReading> | null) => (answer?.ok ? answer.value : null)
    set({ windows: { before: valueOf(before), after: valueOf(after) } })
    if (!before.ok && before.problem.code !== 'cancelled') set({ problem: before.problem })
  }

  async function readSpectrum(): Promise<void> {
    const question = (asked.spectrum += 1)
    const { recording, settings } = get()
    if (!recording) return
    const answer = await api.spectrum({
      channel: settings.shown,
      segmentLength: settings.segmentLength,
      window: settings.window,
    })
    if (question === asked.spectrum) set({ spectrum: answer.ok ? answer.value : null })
  }

  function opened(answer: Answer<Opened>): void {
    if (!answer.ok) refused(answer.problem)
    else if (answer.value.kind === 'recording') take(answer.value.summary)
    else set({ ...emptyTrial, settings: get().settings, preview: answer.value.preview })
  }

  const received = <Value>(answer: Answer<Value>, then: (value: Value) => void): void => {
    if (answer.ok) then(answer.value)
    else refused(answer.problem)
  }

  return {
    store,
    async open(file, name) {
      await longTask(`Reading ${name}`, 'bytes', async (progress) => opened(await api.open(file, name, progress)))
    },
    async openDemo() {
      await longTask('Making the demo recording', 'samples', async (progress) =>
        received(await api.openDemo(spec?.sampleRateHz ?? DEMO_RATE_HZ, progress), take),
      )
    },
    async changePlan(change) {
      received(await api.changePlan(change), (preview: TablePreview) => set({ preview, problem: null }))
    },
    async readTable() {
      const name = get().preview?.fileName ?? 'the table'
      await longTask(`Reading ${name}`, 'bytes', async (progress) => received(await api.readTable(progress), take))
    },
    async resample() {
      await longTask('Resampling evenly', 'samples', async (progress) => received(await api.resample(progress), take))
    },
    replan() {
      dropAnswers()
      set({ ...emptyTrial, settings: get().settings, preview: get().preview })
    },
    cancel() {
      void api.cancel()
    },
    forget() {
      dropAnswers()
      set({ ...emptyTrial, settings: { ...usualSettings, mode: get().settings.mode, start: get().settings.start } })
      void api.close()
    },
    follow(next) {
      const changed = spec !== null && next !== spec
      spec = next
      if (get().recording && (changed || !get().run)) schedule(changed ? PAUSE_MS : 0)
    },
    set(change) {
      const { settings } = get()
      const next = { ...settings, ...change }
      set({ settings: next, ...(next.shown === settings.shown ? {} : { delay: null }) })
      const runMatters = (['mode', 'start', 'channels', 'fillGaps', 'atRecordingRate'] as const).some(
        (key) => next[key] !== settings[key],
      )
      if (runMatters) schedule(0)
      if (next.shown !== settings.shown || next.aligned !== settings.aligned) void readWindows()
      if (next.shown !== settings.shown) void readDelay()
      if (
        next.shown !== settings.shown ||
        next.segmentLength !== settings.segmentLength ||
        next.window !== settings.window
      )
        void readSpectrum()
    },
    look(from, to) {
      const frames = get().recording?.frames ?? 1
      const least = Math.min(frames, LEAST_FRAMES_IN_VIEW)
      const span = Math.min(frames, Math.max(least, Math.round(to - from)))
      const at = Math.max(0, Math.min(frames - span, Math.round(from)))
      set({ view: { from: at, to: at + span } })
      void readWindows()
    },
    setColumns(next) {
      if (next === columns) return
      columns = next
      void readWindows()
    },
    async save(request) {
      const { recording } = get()
      const words = request.format === 'csv' ? 'Writing CSV' : 'Writing WAV'
      set({ saved: null, saveProblem: null })
      let made: { blob: Blob; name: string } | null = null
      await longTask(words, 'samples', async (progress) => {
        const answer = await api.save(request, progress)
        if (get().recording !== recording) return
        if (answer.ok) {
          made = { blob: answer.value.blob, name: answer.value.name }
          set({ saved: { name: answer.value.name, note: answer.value.note } })
        } else if (answer.problem.code !== 'cancelled') set({ saveProblem: answer.problem })
      })
      return made
    },
    fail(message) {
      set({ ...emptyTrial, problem: { code: 'unexpected', message } })
    },
  }
}

/** Where no design is open. */
const DEMO_RATE_HZ = 600
/** Channels that are run unasked; more can be chosen. */
const MOST_CHANNELS_RUN = 16
const LEAST_FRAMES_IN_VIEW = 16
