import { describe, expect, it, vi } from 'vitest'
import { segmentLengths, specForRun, usualSegmentLength } from '@/components/studio/trial/rates'
import { timeTable, valueIn } from '@/components/studio/trial/reading'
import { createSession } from '@/components/studio/trial/session'
import { nearestLine, spectrumScene, wholeSpan } from '@/components/studio/trial/spectrum-scene'
import { timeScene, type TimeSceneInput } from '@/components/studio/trial/time-scene'
import { createTrial } from '@/components/studio/trial/trial'
import { parseChannels, unevenWords, writeChannels } from '@/components/studio/trial/words'
import type { Mark } from '@/components/plot/scene'
import type { FamilyDesign } from '@/dsp'
import { statedTiming } from '@/lib/recordings/table/timing'
import { firDesign } from '../helpers/export-sources'
import { makeTable, makeWav } from '../helpers/recordings'

const spec: FamilyDesign = {
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [60] },
  sampleRateHz: 600,
  how: { method: 'bilinear', hold: 'edges' },
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
}

const wav = (sampleRateHz: number, channels = 1, frames = 3000) =>
  makeWav({
    frames: Array.from({ length: frames }, (_, i) =>
      Array.from({ length: channels }, (_, k) => Math.sin(i / (3 + k)) / 2),
    ),
    encoding: 'float',
    bits: 32,
    sampleRateHz,
  })

const ready = (trial: ReturnType<typeof createTrial>) =>
  vi.waitFor(() => expect(trial.store.getState().run).not.toBeNull(), { timeout: 20_000 })

describe('from a file to a run', () => {
  it('a recording at the design’s rate runs by itself, and again when the statement changes', async () => {
    const trial = createTrial(createSession())
    trial.follow(spec)
    await trial.open(wav(600, 2), 'deck.wav')
    expect(trial.store.getState().recording).toMatchObject({ name: 'deck.wav', frames: 3000 })
    await ready(trial)
    expect(trial.store.getState().run?.request.channels).toEqual([0, 1])
    await vi.waitFor(() => {
      const { windows, spectrum, delay } = trial.store.getState()
      expect([windows.before, windows.after, spectrum?.after, delay]).not.toContain(null)
    })
    trial.follow({ ...spec, analog: { ...spec.analog, edgesHz: [90] } })
    await vi.waitFor(() =>
      expect(trial.store.getState().run?.request.spec).toMatchObject({ analog: { edgesHz: [90] } }),
    )
    trial.set({ mode: 'zero-phase' })
    await vi.waitFor(() => expect(trial.store.getState().run?.request.mode).toBe('zero-phase'))
  })

  it('at another rate nothing runs until the reader has chosen', async () => {
    const trial = createTrial(createSession())
    trial.follow(spec)
    await trial.open(wav(2000), 'deck.wav')
    await vi.waitFor(() => expect(trial.store.getState().windows.before).not.toBeNull())
    await new Promise((resolve) => setTimeout(resolve, 50))
    expect(trial.store.getState().run).toBeNull()
    trial.set({ atRecordingRate: true })
    await ready(trial)
    expect(trial.store.getState().run?.request.spec.sampleRateHz).toBe(2000)
    trial.set({ atRecordingRate: false })
    await vi.waitFor(() => expect(trial.store.getState()).toMatchObject({ run: null, windows: { after: null } }))
    // redesigning at the recording's rate is the other way
    trial.follow({ ...spec, sampleRateHz: 2000 })
    await ready(trial)
  })

  it('a statement that can’t be made at that rate is refused with its reason', async () => {
    const trial = createTrial(createSession())
    trial.follow({ ...spec, sampleRateHz: 4000, analog: { ...spec.analog, edgesHz: [1500] } })
    await trial.open(wav(2000), 'deck.wav')
    trial.set({ atRecordingRate: true })
    await vi.waitFor(() => expect(trial.store.getState().runProblem?.code).toBe('design-refused'))
  })

  it('a table waits for its plan to be accepted, and can be planned again', async () => {
    const trial = createTrial(createSession())
    trial.follow(spec)
    await trial.open(
      makeTable([['t [s]', 'a [g]'], ...Array.from({ length: 900 }, (_, i) => [(i / 600).toFixed(6), Math.sin(i)])]),
      'log.csv',
    )
    expect(trial.store.getState()).toMatchObject({ recording: null, preview: { plan: { delimiter: ',' } } })
    await trial.readTable()
    await ready(trial)
    expect(trial.store.getState().recording?.channels[0]).toMatchObject({ name: 'a', unit: 'g' })
    trial.replan()
    expect(trial.store.getState()).toMatchObject({ recording: null, run: null, preview: { fileName: 'log.csv' } })
  })

  it('a refused file leaves its reason; a good one clears it', async () => {
    const trial = createTrial(createSession())
    await trial.open(new Blob(['fLaC....']), 'x.flac')
    expect(trial.store.getState().problem).toMatchObject({
      code: 'unknown-type',
      message: expect.stringMatching(/FLAC/),
    })
    trial.follow(spec)
    await trial.openDemo()
    expect(trial.store.getState()).toMatchObject({ problem: null, recording: { kind: 'demo', sampleRateHz: 600 } })
    trial.forget()
    expect(trial.store.getState()).toMatchObject({ recording: null, run: null, spectrum: null })
  })

  it('the view stays inside the record and never narrower than a few samples', async () => {
    const trial = createTrial(createSession())
    trial.follow(spec)
    await trial.open(wav(600), 'deck.wav')
    trial.look(-500, 100)
    expect(trial.store.getState().view).toEqual({ from: 0, to: 600 })
    trial.look(2900, 3500)
    expect(trial.store.getState().view).toEqual({ from: 2400, to: 3000 })
    trial.look(100, 101)
    expect(trial.store.getState().view).toEqual({ from: 100, to: 116 })
    trial.look(-1e9, 1e9)
    expect(trial.store.getState().view).toEqual({ from: 0, to: 3000 })
  })

  it('saves what was run, and says why it can not', async () => {
    const trial = createTrial(createSession())
    trial.follow(spec)
    await trial.openDemo()
    await ready(trial)
    const file = await trial.save({ format: 'csv', beyondFullScale: 'refuse' })
    expect(file?.name).toBe('Footbridge deck_ vertical-filtered.csv')
    expect((await file?.blob.text())?.split('\r\n')).toHaveLength(1 + 36_000 + 1)
    trial.follow({ ...spec, sampleRateHz: 333.25 })
    await trial.openDemo()
    await vi.waitFor(() => expect(trial.store.getState().run?.request.spec.sampleRateHz).toBe(333.25))
    expect(await trial.save({ format: 'float32', beyondFullScale: 'refuse' })).toBeNull()
    expect(trial.store.getState().saveProblem?.message).toMatch(/whole hertz/)
  })
})

describe('rates and segments', () => {
  it('equal rates run the statement itself, others only when chosen', () => {
    expect(specForRun(spec, 600, false)).toBe(spec)
    expect(specForRun(spec, 600 * (1 + 1e-12), false)).toBe(spec)
    expect(specForRun(spec, 601, false)).toBeNull()
    expect(specForRun(spec, 601, true)).toEqual({ ...spec, sampleRateHz: 601 })
    // Of an FIR filter, bands that reach up to half the rate go on doing so.
    expect(specForRun(firDesign(), 2400, true)).toMatchObject({ fir: { bands: [{ toHz: 120 }, { toHz: 1200 }] } })
  })

  it('segment lengths fit the record', () => {
    expect(segmentLengths(1000)).toEqual([64, 128, 256, 512])
    expect(usualSegmentLength(1e6)).toBe(4096)
    expect(usualSegmentLength(2000)).toBe(256)
    expect(usualSegmentLength(20)).toBe(64)
  })

  it('channel lists read back', () => {
    expect(parseChannels('1–3, 7', 8)).toEqual([0, 1, 2, 6])
    expect(writeChannels([0, 1, 2, 6])).toBe('1–3, 7')
    for (const wrong of ['', '0', '9', '3-1', 'a', '1..3']) expect(parseChannels(wrong, 8)).toBeNull()
  })

  it('time stamps get a word only above 1 % jitter', () => {
    const timing = { ...statedTiming(600, 'stated'), basis: 'median step' as const }
    expect(unevenWords({ timing: { ...timing, jitterPercent: 0.9, jitterSeconds: 1.5e-5 }, worstRow: 7 })).toBeNull()
    expect(unevenWords({ timing: { ...timing, jitterPercent: 25, jitterSeconds: 4.2e-4 }, worstRow: 7 })).toMatch(
      /up to 25\u2009% \(420\u2009µs\), most at line 7/,
    )
    expect(unevenWords({ timing: { ...timing, meanRateHz: 590 }, worstRow: null })).toMatch(/mean rate is 590\u2009Hz/)
  })
})

const flat = (marks: readonly Mark[]): Mark[] =>
  marks.flatMap((mark) => (mark.kind === 'clip' ? flat(mark.marks) : [mark]))

describe('pictures', () => {
  const input: TimeSceneInput = {
    width: 800,
    sampleRateHz: 100,
    frames: 1000,
    view: { from: 0, to: 1000 },
    before: { kind: 'envelope', from: 0, to: 1000, low: Float64Array.of(-1, -2), high: Float64Array.of(1, 2) },
    after: { kind: 'samples', from: 0, values: Float64Array.of(0, 0.5, NaN, 0.25) },
    unit: 'g',
    trace: 'bilinear',
    afterWords: 'After, causal',
    startUpFrames: 120,
    shiftFrames: 0,
    extensionFrames: 0,
    sameScale: true,
  }

  it('both lanes share a scale when asked, and hold all that is drawn', () => {
    const shared = timeScene(input)
    expect(shared.before.y.domain).toEqual(shared.after.y.domain)
    expect(shared.before.y.domain[0]).toBeLessThan(-2)
    const own = timeScene({ ...input, sameScale: false })
    expect(own.after.y.domain[1]).toBeLessThan(0.6)
    for (const mark of flat(shared.scene.marks)) {
      if (mark.kind === 'text') expect(mark.x).toBeLessThanOrEqual(800)
    }
  })

  it('start-up and the two ends are hatched for as long as they last', () => {
    const hatches = (change: Partial<TimeSceneInput>) =>
      flat(timeScene({ ...input, ...change }).scene.marks).flatMap((mark) =>
        mark.kind === 'hatch' ? [[mark.outline[0], mark.outline[2]]] : [],
      )
    const { x } = timeScene(input)
    expect(hatches({})).toEqual([[x.toPixel(0), x.toPixel(1.2)]])
    // moved earlier, less of it is in view; its words still say how long it is
    expect(hatches({ shiftFrames: 40 })).toEqual([[x.toPixel(0), x.toPixel(0.8)]])
    const words = flat(timeScene({ ...input, shiftFrames: 40 }).scene.marks).map((mark) =>
      mark.kind === 'text' ? mark.text : '',
    )
    expect(words).toContain('start-up, 1.2\u2009s')
    const ends = hatches({ startUpFrames: 0, extensionFrames: 100 })
    expect(ends).toEqual([
      [x.toPixel(0), x.toPixel(1)],
      [x.toPixel(9), x.range[1]],
    ])
    expect(hatches({ view: { from: 500, to: 900 } })).toEqual([])
  })

  it('an envelope is one upright stroke a column, meeting its neighbour', () => {
    const { scene, x, before } = timeScene({
      ...input,
      before: { kind: 'envelope', from: 0, to: 1000, low: Float64Array.of(0, 5), high: Float64Array.of(1, 6) },
    })
    const path = flat(scene.marks).find((mark) => mark.kind === 'path' && mark.stroke.ink === 'pencil')
    if (path?.kind !== 'path') throw new Error('no envelope')
    expect(path.points[0]).toBeCloseTo(x.toPixel(2.5), 9)
    // the second column reaches down to where the first ended
    expect(path.points[9]).toBeCloseTo(before.y.toPixel(1), 9)
  })

  it('the crosshair reads the column or the sample that is drawn there', () => {
    expect(valueIn(input.before, 200, 'g')).toBe('−1 to 1\u2009g')
    expect(valueIn(input.before, 900, 'g')).toBe('−2 to 2\u2009g')
    expect(valueIn(input.after, 1.2, '')).toBe('0.5')
    expect(valueIn(input.after, 2, 'g')).toBe('no value')
    expect(valueIn(input.after, 40, 'g')).toBe('no value')
    const rows = timeTable.rows({ from: 0, to: 1000 }, { before: input.before, after: null }, 100, false)
    expect(rows).toHaveLength(60)
    expect(rows[59]?.slice(1)).toEqual(['−2', '2'])
  })

  it('spectra: logarithmic both ways, decades marked, the line under the crosshair found', () => {
    const reading = {
      channel: 0,
      segmentLength: 8,
      window: 'hann' as const,
      segments: 3,
      leftOut: 'nothing' as const,
      partFrames: null,
      frequenciesHz: Float64Array.of(0, 10, 20, 30, 40),
      before: Float64Array.of(1, 1e-3, 1e-2, 1e-4, 1e-5),
      after: Float64Array.of(1, 1e-3, 1e-3, 1e-6, 0),
    }
    const { x, y, scene } = spectrumScene(reading, wholeSpan(reading), 'g', 'bilinear', 600)
    expect(x.domain).toEqual([10, 40])
    expect(y.domain[0]).toBeLessThanOrEqual(1e-6)
    expect(y.domain[1]).toBeGreaterThanOrEqual(1e-2)
    expect(flat(scene.marks).some((mark) => mark.kind === 'text' && mark.text === 'Density, (g)²/Hz')).toBe(true)
    expect([nearestLine(reading, 3), nearestLine(reading, 24), nearestLine(reading, 99)]).toEqual([1, 2, 4])
  })
})
