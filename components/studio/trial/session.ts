import { designFromSpec, footbridgeDemo, magnitudeDb, settlingTime, zeroPhaseMagnitudeDb, type AnyDigital } from '@/dsp'
import { edgesHzOf } from '@/lib/designs/outline'
import { createBreath } from '@/lib/recordings/breathe'
import { RecordingError } from '@/lib/recordings/errors'
import { identify, openWav } from '@/lib/recordings/open'
import { arraysAsSource, MemoryBudget } from '@/lib/recordings/sample-store'
import { readTable } from '@/lib/recordings/table/read'
import { resampleEvenly } from '@/lib/recordings/table/resample'
import { statedTiming } from '@/lib/recordings/table/timing'
import type { FrameSource, Recording, TaskControl } from '@/lib/recordings/types'
import { answered, problemOf } from './answers'
import type { Progress, TrialApi } from './api'
import { readDelay } from './delays'
import { fillGaps } from './fill-gaps'
import { CELL, envelopeOf, Overview } from './overview'
import { sameRate } from './rates'
import { eachBlock, runOver, type RunOutput } from './run'
import { saveResult } from './save'
import type {
  Answer,
  EdgeLevel,
  RunRequest,
  RunSummary,
  SpectrumReading,
  SpectrumRequest,
  WindowReading,
  WindowRequest,
} from './shapes'
import { densityOf, spectrumSpan } from './spectrum'
import { refuseGaps, refuseHopelessGaps, summaryOf } from './summary'
import { TableDesk } from './table-desk'
import { extensionOf, zeroPhaseWay } from './zero-phase'

/** Samples that all stores together keep in memory; what is more the browser may page to disk. */
const MEMORY_BYTES = 512e6
const DEMO_SECONDS = 60
const DEMO_FRAMES = 3_000_000

interface Held {
  readonly recording: Recording
  readonly overviews: readonly Overview[]
}

interface Ran {
  readonly summary: RunSummary
  readonly filter: AnyDigital
  /** What went in: the recording, its gaps filled where that was asked for. */
  readonly input: FrameSource
  readonly output: RunOutput
}

/**
 * The worker's side of a trial: has the recording and what came out of it, answers questions about them. One long task at a time; a
 * new one stops the one before.
 */
export function createSession(memoryBytes = MEMORY_BYTES): TrialApi {
  const budget = new MemoryBudget(memoryBytes)
  const desk = new TableDesk(budget)
  let serial = 0
  let held: Held | null = null
  let ran: Ran | null = null
  let task: { cancelled: boolean; ended: Promise<void> } | null = null

  async function exclusively<Value>(
    progress: Progress,
    work: (control: TaskControl) => Promise<Value>,
  ): Promise<Answer<Value>> {
    const before = task
    if (before) before.cancelled = true
    let end = (): void => undefined
    const own = { cancelled: false, ended: new Promise<void>((resolve) => (end = resolve)) }
    task = own
    try {
      await before?.ended
      if (own.cancelled) throw new RecordingError('cancelled', 'Stopped before it began.')
      return { ok: true, value: await work({ progress, cancelled: () => own.cancelled }) }
    } catch (cause) {
      return { ok: false, problem: problemOf(cause) }
    } finally {
      end()
      if (task === own) task = null
    }
  }

  function forgetRun(): void {
    ran?.output.release()
    ran = null
  }

  function forgetRecording(): void {
    forgetRun()
    held?.recording.release()
    held = null
  }

  /** Looks through all samples once; the recording takes the place of the one before only when that went well. */
  async function take(recording: Recording, control: TaskControl, bytesPerFrame: number) {
    const overviews = recording.channels.map(() => new Overview())
    const breath = createBreath(control)
    const { frames } = recording.source
    try {
      await eachBlock(recording.source, [...overviews.keys()], async (blocks, start) => {
        blocks.forEach((block, channel) => overviews[channel]!.take(block))
        await breath((start + blocks[0]!.length) * bytesPerFrame, frames * bytesPerFrame)
      })
    } catch (cause) {
      recording.release()
      throw cause
    }
    forgetRecording()
    held = { recording, overviews }
    serial += 1
    return summaryOf(recording, overviews, serial)
  }

  const needed = (): Held => {
    if (!held) throw new RecordingError('unexpected', 'There is no recording. Choose one first.')
    return held
  }

  async function run(request: RunRequest, control: TaskControl): Promise<RunSummary> {
    const { recording, overviews } = needed()
    if (!sameRate(request.spec.sampleRateHz, recording.sampleRateHz)) {
      throw new RecordingError(
        'rate-differs',
        `The recording was taken at ${recording.sampleRateHz} Hz; the design runs at ${request.spec.sampleRateHz} Hz.`,
      )
    }
    if (request.fillGaps) refuseHopelessGaps(recording, overviews, request.channels)
    else refuseGaps(recording, overviews, request.channels)
    const filter = designFromSpec(request.spec).digital
    const input = request.fillGaps
      ? fillGaps(recording.source, (channel) => overviews[channel]?.gaps ?? [])
      : recording.source
    const output = await runOver(input, { ...request, filter }, budget, control)
    forgetRun()
    const extension = extensionOf(filter)
    const summary: RunSummary = {
      serial,
      request,
      channels: request.channels.map((channel, k) => {
        const { min, max, rms } = output.overviews[k]!
        return { channel, min, max, rms }
      }),
      settlingFrames: Math.min(recording.source.frames, Math.round(settlingTime(filter) * filter.sampleRateHz)),
      extensionFrames: extension,
      leastFrames: extension + 1,
      zeroPhase: request.mode === 'zero-phase' ? zeroPhaseWay(filter) : null,
      edges: edgeLevels(filter, edgesHzOf(request.spec)),
    }
    ran = { summary, filter, input, output }
    return summary
  }

  /** The output of a channel that was run. */
  function outputOf(channel: number): {
    readonly source: FrameSource
    readonly at: number
    readonly overview: Overview
    readonly ran: Ran
  } {
    const at = ran ? ran.summary.request.channels.indexOf(channel) : -1
    const overview = ran?.output.overviews[at]
    if (!ran || !overview) throw new RecordingError('unexpected', 'This channel was not run.')
    return { source: ran.output.source, at, overview, ran }
  }

  async function window({ series, channel, from, to, columns, shift }: WindowRequest): Promise<WindowReading> {
    const { recording, overviews } = needed()
    const output = series === 'after' ? outputOf(channel) : null
    const source = output?.source ?? recording.source
    const overview = output?.overview ?? overviews[channel]!
    const first = Math.max(0, Math.min(source.frames, from + shift))
    const last = Math.max(first, Math.min(source.frames, to + shift))
    const span = last - first
    // a moved series may cover less than the view; columns keep their width
    const own = Math.max(1, Math.round((columns * span) / Math.max(1, to - from)))
    if (span > 2 * own && span / own >= CELL)
      return { kind: 'envelope', from: first - shift, to: last - shift, ...overview.envelope(first, last, own) }
    const values = new Float64Array(span)
    await source.read(first, [output?.at ?? channel], [values])
    if (span <= 2 * own) return { kind: 'samples', from: first - shift, values }
    return { kind: 'envelope', from: first - shift, to: last - shift, ...envelopeOf(values, own) }
  }

  async function spectrum({ channel, segmentLength, window: name }: SpectrumRequest): Promise<SpectrumReading> {
    const { recording, overviews } = needed()
    const output = ran?.summary.request.channels.includes(channel) ? outputOf(channel) : null
    if (!output && overviews[channel]!.gapFrames > 0) refuseGaps(recording, overviews, [channel])
    const { frames } = recording.source
    const { from, to, leftOut, isPart } = spectrumSpan(frames, segmentLength, output?.ran.summary ?? null)
    const options = { sampleRateHz: recording.sampleRateHz, segmentLength, window: name }
    const before = await densityOf(output?.ran.input ?? recording.source, channel, from, to, options)
    const after = output ? await densityOf(output.source, output.at, from, to, options) : null
    return {
      channel,
      segmentLength,
      window: name,
      segments: before.segments,
      leftOut,
      partFrames: isPart ? to - from : null,
      frequenciesHz: before.frequenciesHz,
      before: before.density,
      after: after?.density ?? null,
    }
  }

  return {
    open: (file, name, progress) =>
      exclusively(progress, async (control) => {
        if ((await identify(file)) === 'table') {
          const preview = await desk.lay(file, name)
          forgetRecording()
          return { kind: 'table', preview }
        }
        const recording = await openWav(file, name)
        return { kind: 'recording', summary: await take(recording, control, file.size / recording.source.frames) }
      }),
    openDemo: (sampleRateHz, progress) =>
      exclusively(progress, (control) => {
        const demo = footbridgeDemo({
          sampleRateHz,
          durationSeconds: Math.min(DEMO_SECONDS, DEMO_FRAMES / sampleRateHz),
        })
        return take(demoRecording(demo), control, 1)
      }),
    changePlan: (change) =>
      exclusively(
        () => undefined,
        () => desk.change(change),
      ),
    readTable: (progress) =>
      exclusively(progress, async (control) => {
        const { file, name, plan } = desk.settled()
        const recording = await readTable(file, name, plan, budget, control)
        return take(recording, { ...control, progress: () => undefined }, 1)
      }),
    resample: (progress) =>
      exclusively(progress, async (control) =>
        take(await resampleEvenly(needed().recording, budget, control), { ...control, progress: () => undefined }, 1),
      ),
    run: (request, progress) => exclusively(progress, (control) => run(request, control)),
    window: (request) => answered(() => window(request)),
    delay: (channel) =>
      answered(() => {
        const { source, at, ran: done } = outputOf(channel)
        return readDelay(done.input, channel, source, at, {
          filter: done.filter,
          mode: done.summary.request.mode,
          settlingFrames: done.summary.settlingFrames,
        })
      }),
    spectrum: (request) => answered(() => spectrum(request)),
    save: (request, progress) =>
      exclusively(progress, (control) => {
        const { recording, overviews } = needed()
        if (!ran) throw new RecordingError('cannot-save', 'Nothing has been run yet.')
        const { output, summary } = ran
        const { channels } = summary.request
        const written = overviews.map((overview, channel) => output.overviews[channels.indexOf(channel)] ?? overview)
        return saveResult(
          {
            name: recording.name,
            sampleRateHz: recording.sampleRateHz,
            channels: recording.channels,
            before: recording.source,
            after: output.source,
            run: channels,
            least: Math.min(...written.map((overview) => overview.min)),
            greatest: Math.max(...written.map((overview) => overview.max)),
            missing: written.reduce((sum, overview) => sum + overview.gapFrames, 0),
          },
          request,
          control,
        )
      }),
    async cancel() {
      if (task) task.cancelled = true
    },
    async close() {
      if (task) task.cancelled = true
      await task?.ended
      forgetRecording()
      desk.clear()
    },
  }
}

/** An original of the user's own may say something of frequencies that no sample can hold. */
function edgeLevels(filter: AnyDigital, edgesHz: readonly number[]): EdgeLevel[] {
  const inside = edgesHz.filter((hz) => hz <= filter.sampleRateHz / 2)
  const once = magnitudeDb(filter, inside)
  const offline = zeroPhaseWay(filter) === 'forward-backward' ? zeroPhaseMagnitudeDb(filter, inside) : once
  return inside.map((hz, k) => ({ hz, onceDb: once[k]!, zeroPhaseDb: offline[k]! }))
}

const demoRecording = (demo: ReturnType<typeof footbridgeDemo>): Recording => ({
  kind: 'demo',
  name: demo.title,
  sampleRateHz: demo.sampleRateHz,
  channels: [{ name: 'acceleration', unit: demo.unit }],
  source: arraysAsSource([demo.samples]),
  storage: 'made up for trying filters on',
  notes: [],
  flaws: [],
  flawCount: 0,
  timing: statedTiming(demo.sampleRateHz, 'stated'),
  rowOf: () => undefined,
  release: () => undefined,
})
