import { describe, expect, it } from 'vitest'
import type { TrialApi } from '@/components/studio/trial/api'
import { fillGaps } from '@/components/studio/trial/fill-gaps'
import { Overview } from '@/components/studio/trial/overview'
import { runOver } from '@/components/studio/trial/run'
import { createSession } from '@/components/studio/trial/session'
import type { Answer, RecordingSummary, RunRequest } from '@/components/studio/trial/shapes'
import { densityOf } from '@/components/studio/trial/spectrum'
import { extensionOf, offeredWay, zeroPhaseWay } from '@/components/studio/trial/zero-phase'
import {
  designFromSpec,
  isFir,
  magnitudeDb,
  runFilter,
  runTaps,
  seededNoise,
  welch,
  type FamilyDesign,
  type FirDesign,
} from '@/dsp'
import { RecordingError } from '@/lib/recordings/errors'
import { openWav } from '@/lib/recordings/open'
import { arraysAsSource, MemoryBudget } from '@/lib/recordings/sample-store'
import { writeWav } from '@/lib/recordings/wav/write'
import { QUIET } from '@/lib/recordings/types'
import { firDesign, firKinds, fittedLowPass, ownMeasured, ownRoots } from '../helpers/export-sources'
import { channelOf, firstDifference, makeTable, samplesOf } from '../helpers/recordings'

const spec: FamilyDesign = {
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [60] },
  sampleRateHz: 600,
  how: { method: 'bilinear', hold: 'edges' },
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
}
const { digital } = designFromSpec(spec)
const quiet = () => undefined
const greatest = (values: Float64Array): number => values.reduce((most, value) => Math.max(most, value), -Infinity)

function noise(frames: number, seed = 1): Float64Array {
  const next = seededNoise(seed)
  return Float64Array.from({ length: frames }, () => next())
}

function valueOf<Value>(answer: Answer<Value>): Value {
  if (!answer.ok) throw new Error(`${answer.problem.code}: ${answer.problem.message}`)
  return answer.value
}

async function problemOf(answer: Promise<Answer<unknown>>) {
  const found = await answer
  if (found.ok) throw new Error('expected a refusal')
  return found.problem
}

const wavOf = (channels: readonly Float64Array[], sampleRateHz = 600): Promise<Blob> =>
  writeWav(arraysAsSource(channels), sampleRateHz, { format: 'float64', scale: 1 }, QUIET)

async function opened(session: TrialApi, file: Blob): Promise<RecordingSummary> {
  const found = valueOf(await session.open(file, 'deck.wav', quiet))
  if (found.kind !== 'recording') throw new Error('expected a recording')
  return found.summary
}

const request = (change: Partial<RunRequest> = {}): RunRequest => ({
  spec,
  mode: 'causal',
  start: 'zero',
  channels: [0],
  fillGaps: false,
  ...change,
})

describe('running by blocks', () => {
  const samples = noise(200_001)
  const source = arraysAsSource([samples, samples.map((x) => -x)])
  for (const memory of [1e9, 0]) {
    const where = memory > 0 ? 'in memory' : 'with every chunk paged out'
    for (const start of ['zero', 'steady'] as const) {
      it(`causally from ${start}, ${where}: the same bits as over the whole array`, async () => {
        const plan = { filter: digital, channels: [1, 0], mode: 'causal', start } as const
        const { source: out, overviews } = await runOver(source, plan, new MemoryBudget(memory), QUIET)
        const whole = runFilter(digital.sections, samples, { mode: 'causal', start })
        expect(firstDifference(await samplesOf(out, 1), whole)).toBe(-1)
        expect(
          firstDifference(
            await samplesOf(out, 0),
            whole.map((y) => -y),
          ),
        ).toBe(-1)
        expect(overviews[1]?.max).toBe(greatest(whole))
      })
    }
    it(`forward and backward, ${where}: the same bits as over the whole array`, async () => {
      const plan = { filter: digital, channels: [0, 1], mode: 'zero-phase', start: 'zero' } as const
      const { source: out, overviews } = await runOver(source, plan, new MemoryBudget(memory), QUIET)
      const whole = runFilter(digital.sections, samples, { mode: 'zero-phase' })
      expect(firstDifference(await samplesOf(out, 0), whole)).toBe(-1)
      const part = new Float64Array(70_000)
      await out.read(100_000, [1], [part])
      expect(
        firstDifference(
          part,
          whole.slice(100_000, 170_000).map((y) => -y),
        ),
      ).toBe(-1)
      expect(overviews[0]?.frames).toBe(samples.length)
    })
  }

  it('the least length of a forward–backward run is exact', async () => {
    const least = extensionOf(digital) + 1
    const run = (frames: number) =>
      runOver(
        arraysAsSource([noise(frames)]),
        { filter: digital, channels: [0], mode: 'zero-phase', start: 'zero' },
        new MemoryBudget(1e9),
        QUIET,
      )
    expect((await run(least)).source.frames).toBe(least)
    await expect(run(least - 1)).rejects.toMatchObject({
      code: 'too-short',
      message: expect.stringContaining(`at least ${least} samples`),
    })
  })

  it('a cancelled run gives its memory back', async () => {
    const budget = new MemoryBudget(8e8)
    const plan = { filter: digital, channels: [0, 1], mode: 'causal', start: 'zero' } as const
    const long = arraysAsSource([new Float64Array(9_000_000).fill(1), new Float64Array(9_000_000)])
    await expect(runOver(long, plan, budget, { progress: quiet, cancelled: () => true })).rejects.toBeInstanceOf(
      RecordingError,
    )
    expect(budget.take(8e8)).toBe(true)
  })
})

const fir = (change: Partial<FirDesign['fir']> = {}): FirDesign => firDesign({ ...firBands, ...change }, 600)
const firBands = {
  bands: [
    { fromHz: 0, toHz: 60, gain: 1 },
    { fromHz: 100, toHz: 300, gain: 0 },
  ],
} as const
const differentiator = fir({ response: 'differentiator', taps: 31, bands: [{ fromHz: 0, toHz: 200, gain: 1 }] })

function tapsOf(design: FirDesign) {
  const made = designFromSpec(design).digital
  if (!isFir(made)) throw new Error('Taps were stated.')
  return made
}

describe('running taps by blocks', () => {
  const samples = noise(200_001)
  const source = arraysAsSource([samples, samples.map((x) => -x)])
  const kinds = [fir(), fir({ taps: 40 }), fir({ kind: 'minimum-phase', taps: 31 }), differentiator]
  const run = (design: FirDesign, mode: 'causal' | 'zero-phase', start: 'zero' | 'steady' = 'zero', from = source) =>
    runOver(from, { filter: tapsOf(design), channels: [0, 1], mode, start }, new MemoryBudget(1e9), QUIET)

  it('causally: the same bits as over the whole array', async () => {
    for (const design of kinds) {
      const { source: out, overviews } = await run(design, 'causal')
      const whole = runTaps(tapsOf(design).taps, samples, { mode: 'causal' })
      expect(firstDifference(await samplesOf(out, 0), whole)).toBe(-1)
      expect(overviews[0]?.max).toBe(greatest(whole))
    }
  })

  it('steadily: as if the first sample had been there before', async () => {
    for (const design of kinds) {
      const { taps } = tapsOf(design)
      const { source: out } = await run(design, 'causal', 'steady')
      const longer = new Float64Array(taps.length - 1 + samples.length).fill(samples[0] ?? 0)
      longer.set(samples, taps.length - 1)
      const whole = runTaps(taps, longer, { mode: 'causal' }).slice(taps.length - 1)
      expect(firstDifference(await samplesOf(out, 0), whole)).toBe(-1)
    }
  })

  it('with the delay taken off: the same bits as over the whole array, to either end', async () => {
    for (const design of [fir(), differentiator, fir({ taps: 3, kind: 'windowed', window: 'hann' })]) {
      const { source: out, overviews } = await run(design, 'zero-phase')
      const whole = runTaps(tapsOf(design).taps, samples, { mode: 'zero-phase' })
      expect(firstDifference(await samplesOf(out, 0), whole)).toBe(-1)
      expect(out.frames).toBe(samples.length)
      expect([overviews[0]?.frames, overviews[0]?.max]).toEqual([samples.length, greatest(whole)])
    }
  })

  it('needs one sample more than the delay, exactly', async () => {
    const least = 21
    const short = (frames: number) => arraysAsSource([noise(frames), noise(frames, 2)])
    expect((await run(fir(), 'zero-phase', 'zero', short(least))).source.frames).toBe(least)
    await expect(run(fir(), 'zero-phase', 'zero', short(least - 1))).rejects.toMatchObject({
      code: 'too-short',
      message: expect.stringContaining(`at least ${least} samples`),
    })
  })

  it('takes no delay off that isn’t a whole number of samples, and offers none', async () => {
    for (const design of [fir({ taps: 40 }), fir({ kind: 'minimum-phase', taps: 31 })]) {
      expect([zeroPhaseWay(tapsOf(design)), offeredWay(design)]).toEqual([null, null])
      await expect(run(design, 'zero-phase')).rejects.toMatchObject({ code: 'design-refused' })
    }
    for (const design of [fir(), differentiator, ...firKinds])
      expect(offeredWay(design)).toBe(zeroPhaseWay(tapsOf(design)))
    expect([zeroPhaseWay(digital), offeredWay(spec)]).toEqual(['forward-backward', 'forward-backward'])
  })
})

describe('what is remembered of a channel', () => {
  it('least, greatest, mean and gaps, however the samples come', () => {
    const samples = noise(10_000)
    samples.fill(NaN, 0, 3)
    samples[700] = Infinity
    samples.fill(NaN, 5000, 5300)
    samples[9999] = NaN
    const overview = new Overview()
    for (let at = 0; at < samples.length; at += 777) overview.take(samples.subarray(at, at + 777))
    const finite = samples.filter(Number.isFinite)
    expect(overview.gaps.map(({ from, to }) => [from, to])).toEqual([
      [0, 3],
      [700, 701],
      [5000, 5300],
      [9999, 10_000],
    ])
    expect(overview.gapFrames).toBe(samples.length - finite.length)
    expect([overview.min, overview.max]).toEqual([Math.min(...finite), Math.max(...finite)])
    expect(overview.rms).toBeCloseTo(Math.sqrt(finite.reduce((sum, x) => sum + x * x, 0) / finite.length), 12)
    const { low, high } = overview.envelope(0, 10_000, 10)
    for (let k = 0; k < 10; k += 1) {
      // a column takes in the whole of every cell of 256 that it touches
      const from = Math.floor((k * 1000) / 256) * 256
      const part = samples.subarray(from, Math.ceil(((k + 1) * 1000) / 256) * 256).filter(Number.isFinite)
      expect([low[k], high[k]]).toEqual([Math.min(...part), Math.max(...part)])
    }
  })

  it('gaps lie on straight lines between their neighbours, across reads', async () => {
    const samples = Float64Array.from([NaN, NaN, 1, NaN, NaN, NaN, 5, 6, NaN])
    const overview = new Overview()
    overview.take(samples)
    const filled = fillGaps(arraysAsSource([samples]), () => overview.gaps)
    expect(await channelOf(filled, 0)).toEqual([1, 1, 1, 2, 3, 4, 5, 6, 6])
    const middle = new Float64Array(2)
    await filled.read(4, [0], [middle])
    expect([...middle]).toEqual([3, 4])
  })
})

describe('a trial', () => {
  it('runs a design over the channels chosen, and reads windows of both', async () => {
    const session = createSession()
    const a = noise(50_000, 3)
    const b = noise(50_000, 4)
    const summary = await opened(session, await wavOf([a, b]))
    expect([summary.channels.length, summary.frames, summary.sampleRateHz]).toEqual([2, 50_000, 600])
    const run = valueOf(await session.run(request({ channels: [1] }), quiet))
    const whole = runFilter(digital.sections, b, { mode: 'causal' })
    expect(run.channels).toEqual([expect.objectContaining({ channel: 1, max: greatest(whole) })])
    const close = valueOf(
      await session.window({ series: 'after', channel: 1, from: 1000, to: 1100, columns: 500, shift: 0 }),
    )
    expect(close).toEqual({ kind: 'samples', from: 1000, values: whole.slice(1000, 1100) })
    const moved = valueOf(
      await session.window({ series: 'after', channel: 1, from: 1000, to: 1100, columns: 500, shift: 7 }),
    )
    expect(moved).toEqual({ kind: 'samples', from: 1000, values: whole.slice(1007, 1107) })
    const middle = valueOf(
      await session.window({ series: 'before', channel: 0, from: 0, to: 10_000, columns: 100, shift: 0 }),
    )
    if (middle.kind !== 'envelope') throw new Error('expected an envelope')
    expect([middle.low[3], middle.high[3]]).toEqual([
      Math.min(...a.subarray(300, 400)),
      Math.max(...a.subarray(300, 400)),
    ])
    const far = valueOf(
      await session.window({ series: 'before', channel: 0, from: 0, to: 50_000, columns: 100, shift: 0 }),
    )
    if (far.kind !== 'envelope') throw new Error('expected an envelope')
    expect(greatest(far.high)).toBe(greatest(a))
    expect(
      (await problemOf(session.window({ series: 'after', channel: 0, from: 0, to: 10, columns: 5, shift: 0 }))).message,
    ).toMatch(/not run/)
  })

  it('never runs at a rate the design was not made for', async () => {
    const session = createSession()
    await opened(session, await wavOf([noise(5000)], 2000))
    expect(await problemOf(session.run(request(), quiet))).toMatchObject({
      code: 'rate-differs',
      message: 'The recording was taken at 2000 Hz; the design runs at 600 Hz.',
    })
    const at2k = { ...spec, sampleRateHz: 2000 }
    valueOf(await session.run(request({ spec: at2k }), quiet))
    const impossible = { ...spec, sampleRateHz: 2000, analog: { ...spec.analog, edgesHz: [1200] } }
    expect(await problemOf(session.run(request({ spec: impossible }), quiet))).toMatchObject({ code: 'design-refused' })
  })

  it('measures the delay that it predicts; forward and backward there is none', async () => {
    const session = createSession()
    await opened(session, await wavOf([noise(60_000)]))
    valueOf(await session.run(request(), quiet))
    const causal = valueOf(await session.delay(0))
    expect(causal.measuredSeconds).toBeGreaterThan(0.004)
    expect(Math.abs((causal.measuredSeconds ?? 0) - (causal.predictedSeconds ?? 0))).toBeLessThan(1e-4)
    valueOf(await session.run(request({ mode: 'zero-phase' }), quiet))
    const still = valueOf(await session.delay(0))
    expect(still.predictedSeconds).toBe(0)
    expect(Math.abs(still.measuredSeconds ?? 1)).toBeLessThan(1e-5)
  })

  it('a constant recording has no delay, and says so by having none', async () => {
    const session = createSession()
    await opened(session, await wavOf([new Float64Array(5000).fill(2)]))
    valueOf(await session.run(request({ start: 'steady' }), quiet))
    expect(valueOf(await session.delay(0))).toMatchObject({ measuredSeconds: null, predictedSeconds: null })
  })

  it('forward–backward acts twice at the edge, and says the least length', async () => {
    const session = createSession()
    await opened(session, await wavOf([noise(5000)]))
    const run = valueOf(await session.run(request({ mode: 'zero-phase' }), quiet))
    expect(run.edges[0]?.onceDb).toBeCloseTo(-3.0103, 3)
    expect(run.edges[0]?.zeroPhaseDb).toBeCloseTo(-6.0206, 3)
    expect(run.leastFrames).toBe(run.extensionFrames + 1)
  })

  it('measures the delay that it predicts of taps, and takes it off', async () => {
    for (const design of [fir(), fir({ taps: 40 }), fir({ kind: 'minimum-phase', taps: 31 }), differentiator]) {
      const session = createSession()
      await opened(session, await wavOf([noise(60_000)]))
      const causal = valueOf(await session.run(request({ spec: design }), quiet))
      expect([causal.zeroPhase, causal.settlingFrames <= design.fir.taps]).toEqual([null, true])
      const late = valueOf(await session.delay(0))
      expect(Math.abs((late.measuredSeconds ?? 0) - (late.predictedSeconds ?? 1))).toBeLessThan(1e-4)
      if (offeredWay(design) === null) {
        const refused = await problemOf(session.run(request({ spec: design, mode: 'zero-phase' }), quiet))
        expect(refused).toMatchObject({ code: 'design-refused', message: expect.stringContaining('symmetric') })
        continue
      }
      const moved = valueOf(await session.run(request({ spec: design, mode: 'zero-phase' }), quiet))
      const delay = (design.fir.taps - 1) / 2
      expect(moved).toMatchObject({ zeroPhase: 'delay-removed', extensionFrames: delay, leastFrames: delay + 1 })
      for (const { onceDb, zeroPhaseDb } of moved.edges) expect(zeroPhaseDb).toBe(onceDb)
      const still = valueOf(await session.delay(0))
      expect(Math.abs((still.measuredSeconds ?? 0) - (still.predictedSeconds ?? 1))).toBeLessThan(1e-4)
      // A differentiator's quarter turn moves the peak to either side of no delay; symmetric taps leave it there.
      if (design !== differentiator) expect(Math.abs(still.predictedSeconds ?? 1)).toBeLessThan(1e-9)
    }
  })

  it('runs originals of one’s own, measured ones as well', async () => {
    for (const design of [ownRoots, ownMeasured, fittedLowPass]) {
      const session = createSession()
      const samples = noise(30_000)
      await opened(session, await wavOf([samples], 1200))
      const run = valueOf(await session.run(request({ spec: design }), quiet))
      for (const { hz, onceDb } of run.edges) {
        expect(hz).toBeLessThanOrEqual(600)
        expect(Number.isFinite(onceDb)).toBe(true)
      }
      const { digital: made } = designFromSpec(design)
      if (isFir(made)) throw new Error('This has feedback.')
      const out = valueOf(
        await session.window({ series: 'after', channel: 0, from: 0, to: 200, columns: 500, shift: 0 }),
      )
      const whole = runFilter(made.sections, samples, { mode: 'causal' })
      expect(out).toEqual({ kind: 'samples', from: 0, values: whole.slice(0, 200) })
      const delay = valueOf(await session.delay(0))
      expect(Math.abs((delay.measuredSeconds ?? 0) - (delay.predictedSeconds ?? 1))).toBeLessThan(1e-4)
    }
  })

  it('spectra taken block by block are those of the whole record', async () => {
    const samples = noise(700_000, 9)
    const options = { sampleRateHz: 600, segmentLength: 4096, window: 'hann' } as const
    const whole = welch(samples.subarray(5), { ...options, overlap: 0.5, detrend: 'constant' })
    const blocks = await densityOf(arraysAsSource([samples]), 0, 5, samples.length, options)
    expect(blocks.segments).toBe(whole.segments)
    const worst = whole.density.reduce(
      (most, value, k) => Math.max(most, Math.abs((blocks.density[k] ?? 0) / value - 1)),
      0,
    )
    expect(worst).toBeLessThan(1e-12)
  })

  it('the change of the spectrum is the response of the design', async () => {
    const session = createSession()
    await opened(session, await wavOf([noise(150_000, 5)]))
    valueOf(await session.run(request(), quiet))
    const spectrum = valueOf(await session.spectrum({ channel: 0, segmentLength: 1024, window: 'hann' }))
    expect(spectrum.leftOut).toBe('start-up')
    const line = Math.round((60 / 600) * 1024)
    const change = 10 * Math.log10((spectrum.after?.[line] ?? 0) / (spectrum.before[line] ?? 1))
    const expected = magnitudeDb(digital, [spectrum.frequenciesHz[line] ?? 0])[0]
    expect(Math.abs(change - (expected ?? 0))).toBeLessThan(0.05)
  })

  it('missing samples are named, and filled only when asked', async () => {
    const session = createSession()
    const samples = noise(3000)
    samples[1204] = NaN
    samples[1205] = Infinity
    const summary = await opened(session, await wavOf([samples]))
    expect(summary.channels[0]).toMatchObject({ missing: 2, gaps: 1, firstMissing: 1204 })
    const problem = await problemOf(session.run(request(), quiet))
    expect(problem).toMatchObject({
      code: 'not-finite',
      message: expect.stringMatching(
        /^channel 1 has 2 samples without a value, the first at sample 1204: NaN or infinite/,
      ),
    })
    expect((await problemOf(session.spectrum({ channel: 0, segmentLength: 256, window: 'hann' }))).code).toBe(
      'not-finite',
    )
    const run = valueOf(await session.run(request({ fillGaps: true }), quiet))
    expect(Number.isFinite(run.channels[0]?.max)).toBe(true)
    const nothing = createSession()
    await opened(nothing, await wavOf([new Float64Array(500).fill(NaN)]))
    expect((await problemOf(nothing.run(request({ fillGaps: true }), quiet))).message).toMatch(
      /no finite sample at all/,
    )
  })

  it('a later run stops the one before', async () => {
    const session = createSession()
    await opened(session, await wavOf([noise(1_500_000)]))
    const first = session.run(request(), quiet)
    const second = session.run(request({ start: 'steady' }), quiet)
    expect(await problemOf(first)).toMatchObject({ code: 'cancelled' })
    expect(valueOf(await second).request.start).toBe('steady')
    const third = session.run(request(), quiet)
    await session.cancel()
    expect(await problemOf(third)).toMatchObject({ code: 'cancelled' })
    // what was there before still is
    expect((await session.window({ series: 'after', channel: 0, from: 0, to: 9, columns: 9, shift: 0 })).ok).toBe(true)
  })

  it('the demo recording runs at any rate', async () => {
    for (const rate of [100, 600, 51_200]) {
      const session = createSession()
      const summary = valueOf(await session.openDemo(rate, quiet))
      expect(summary.sampleRateHz).toBe(rate)
      expect(summary.channels[0]?.unit).toBe('m/s²')
      const atRate = { ...spec, sampleRateHz: rate, analog: { ...spec.analog, edgesHz: [20] } }
      expect((await session.run(request({ spec: atRate }), quiet)).ok).toBe(true)
    }
  })
})

describe('a table on the desk', () => {
  const rows = Array.from({ length: 500 }, (_, i) => [
    (i / 600).toFixed(6).replace('.', ','),
    (Math.sin(i / 9) - 5.2).toFixed(4).replace('.', ','),
    'ok',
  ])
  const file = makeTable([['Zeit [s]', 'acc [m/s²]', '=state'], ...rows], ';', '\r\n')

  it('is detected, corrected and read as corrected', async () => {
    const session = createSession()
    const found = valueOf(await session.open(file, 'log.txt', quiet))
    if (found.kind !== 'table') throw new Error('expected a table')
    const { preview } = found
    expect(preview).toMatchObject({
      problem: null,
      rowsTried: 500,
      plan: { delimiter: ';', decimal: ',', time: { column: 0, unit: 's' } },
    })
    expect(preview.timing?.sampleRateHz).toBe(600)
    const renamed = valueOf(
      await session.changePlan({ plan: { ...preview.plan, channels: [{ column: 1, name: 'deck', unit: 'g' }] } }),
    )
    const later = valueOf(await session.changePlan({ settled: { time: { column: 0, unit: 'ms' } } }))
    expect(later.timing?.sampleRateHz).toBe(600_000)
    expect(later.plan.channels).toEqual(renamed.plan.channels)
    const wrong = valueOf(await session.changePlan({ settled: { delimiter: ',', decimal: '.' } }))
    expect(wrong.problem?.code).toBeDefined()
    valueOf(await session.changePlan({ settled: { delimiter: ';', decimal: ',' } }))
    const summary = valueOf(await session.readTable(quiet))
    expect(summary).toMatchObject({ kind: 'table', frames: 500, sampleRateHz: 600, flawCount: 0 })
  })

  it('is saved with its numbers untouched and its user text kept from being a formula', async () => {
    const session = createSession()
    const found = valueOf(
      await session.open(
        makeTable([['t', '=cmd(1) [m/s²]', 'b'], ...Array.from({ length: 80 }, (_, i) => [i / 600, -5.2, -0.1 * i])]),
        'a b.csv',
        quiet,
      ),
    )
    if (found.kind !== 'table') throw new Error('expected a table')
    valueOf(await session.changePlan({ settled: { statedRateHz: 600 } }))
    valueOf(await session.readTable(quiet))
    expect((await problemOf(session.save({ format: 'csv', beyondFullScale: 'refuse' }, quiet))).message).toBe(
      'Nothing has been run yet.',
    )
    valueOf(await session.run(request(), quiet))
    const saved = valueOf(await session.save({ format: 'csv', beyondFullScale: 'refuse' }, quiet))
    const lines = (await saved.blob.text()).split('\r\n')
    expect(saved.name).toBe('a b-filtered.csv')
    expect(lines[0]).toBe("time [s],'=cmd(1) before [m/s²],'=cmd(1) after [m/s²],b")
    const whole = runFilter(digital.sections, new Float64Array(80).fill(-5.2), { mode: 'causal' })
    expect(lines.slice(1, 81).map((line) => line.split(',').map(Number))).toEqual(
      Array.from({ length: 80 }, (_, i) => [i / 600, -5.2, whole[i], Number(String(-0.1 * i))]),
    )
    expect(lines[1]?.split(',')[1]).toBe('-5.2')
  })

  it('uneven stamps are resampled by straight lines only when asked', async () => {
    const stamps = [0, 0.01, 0.02, 0.035, 0.04, 0.05, 0.06, 0.07, 0.08, 0.09, 0.1]
    const session = createSession()
    valueOf(await session.open(makeTable([['time', 'a'], ...stamps.map((t) => [t, 3 * t + 1])]), 'x.csv', quiet))
    const summary = valueOf(await session.readTable(quiet))
    expect([summary.mayResample, summary.worstRow]).toEqual([true, expect.any(Number)])
    expect(summary.timing.jitterPercent).toBeCloseTo(50, 6)
    const even = valueOf(await session.resample(quiet))
    expect([even.frames, even.sampleRateHz, even.mayResample]).toEqual([11, 100, false])
    const window = valueOf(
      await session.window({ series: 'before', channel: 0, from: 0, to: 11, columns: 50, shift: 0 }),
    )
    if (window.kind !== 'samples') throw new Error('expected samples')
    window.values.forEach((value, i) => expect(value).toBeCloseTo(3 * 0.01 * i + 1, 12))
  })

  it('a gap in time that would blow the record up is refused with its line', async () => {
    const session = createSession()
    const stamps = [0, 0.01, 0.02, 0.03, 0.04, 500, 500.01, 500.02]
    valueOf(await session.open(makeTable([['time', 'a'], ...stamps.map((t) => [t, t])]), 'x.csv', quiet))
    valueOf(await session.readTable(quiet))
    expect(await problemOf(session.resample(quiet))).toMatchObject({ code: 'no-resampling', row: 7 })
  })
})

describe('start-up', () => {
  it('lasts until a step stays within 1 % of its end, and never longer than the record', async () => {
    for (const frames of [40, 4000]) {
      const session = createSession()
      await opened(session, await wavOf([noise(frames)]))
      const run = valueOf(await session.run(request(), quiet))
      const step = runFilter(digital.sections, new Float64Array(4000).fill(1), { mode: 'causal' })
      const settled = step.findLastIndex((y) => Math.abs(y - 1) > 0.01) + 1
      expect(settled).toBeLessThan(40)
      expect(run.settlingFrames).toBe(settled)
    }
    const low = { ...spec, analog: { ...spec.analog, edgesHz: [0.5] } }
    const session = createSession()
    await opened(session, await wavOf([noise(300)]))
    expect(valueOf(await session.run(request({ spec: low }), quiet)).settlingFrames).toBe(300)
  })
})

describe('saving as WAV', () => {
  it('holds every channel, those not run as they were', async () => {
    const session = createSession()
    const [a, b] = [noise(2000, 6), noise(2000, 7)]
    await opened(session, await wavOf([a, b]))
    valueOf(await session.run(request({ channels: [1] }), quiet))
    const saved = valueOf(await session.save({ format: 'float64', beyondFullScale: 'refuse' }, quiet))
    expect(saved.note).toMatch(/One channel was not run/)
    const back = await openWav(saved.blob, 'x')
    expect(await channelOf(back.source, 0)).toEqual([...a])
    expect(await channelOf(back.source, 1)).toEqual([...runFilter(digital.sections, b, { mode: 'causal' })])
  })

  it('24 bits never clip: refused, or scaled by a stated factor', async () => {
    const session = createSession()
    const loud = noise(2000).map((x) => 3 * x)
    await opened(session, await wavOf([loud]))
    valueOf(await session.run(request(), quiet))
    const problem = await problemOf(session.save({ format: 'int24', beyondFullScale: 'refuse' }, quiet))
    expect(problem).toMatchObject({ code: 'cannot-save', message: expect.stringMatching(/times the full scale/) })
    const saved = valueOf(await session.save({ format: 'int24', beyondFullScale: 'scale' }, quiet))
    const factor = Number(/divided by ([\d.]+)\./.exec(saved.note)?.[1])
    const whole = runFilter(digital.sections, loud, { mode: 'causal' })
    const back = await channelOf((await openWav(saved.blob, 'x')).source, 0)
    back.forEach((value, i) => expect(Math.abs(value * factor - (whole[i] ?? 0))).toBeLessThan(factor / 8_000_000))
  })

  it('24 bits can not hold a missing sample', async () => {
    const session = createSession()
    const broken = noise(2000).map((x) => x / 10)
    broken[7] = NaN
    await opened(session, await wavOf([broken, noise(2000).map((x) => x / 10)]))
    valueOf(await session.run(request({ channels: [1] }), quiet))
    expect((await problemOf(session.save({ format: 'int24', beyondFullScale: 'scale' }, quiet))).message).toMatch(
      /no value/,
    )
  })
})
