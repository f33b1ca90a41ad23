import {
  createRunner,
  createTapsRunner,
  isFir,
  type AnyDigital,
  type DigitalFilter,
  type FirFilter,
  type Runner,
} from '@/dsp'
import { createBreath } from '@/lib/recordings/breathe'
import { RecordingError } from '@/lib/recordings/errors'
import { SampleStore, storesAsSource, type MemoryBudget } from '@/lib/recordings/sample-store'
import type { FrameSource, TaskControl } from '@/lib/recordings/types'
import { Overview } from './overview'
import { extensionOf, NO_WHOLE_DELAY, zeroPhaseWay } from './zero-phase'

/*
 * Running a design over a recording of any length: block by block, with the state carried on. Both ways give the samples that running
 * over the whole array at once would give, to the last bit.
 */

const BLOCK_FRAMES = 65_536

export type RunMode = 'causal' | 'zero-phase'
export type RunStart = 'zero' | 'steady'

/** What came out, one channel for each that was run, in their order. */
export interface RunOutput {
  readonly source: FrameSource
  readonly overviews: readonly Overview[]
  /** Gives the memory back. */
  release(): void
}

export interface RunPlan<Filter extends AnyDigital = AnyDigital> {
  readonly filter: Filter
  readonly channels: readonly number[]
  readonly mode: RunMode
  readonly start: RunStart
}

/**
 * @throws RecordingError 'too-short' when a zero-phase run needs more samples, 'design-refused' when the filter has none, 'cancelled'
 * @throws DesignError from dsp when the sections overflow
 */
export async function runOver(
  source: FrameSource,
  plan: RunPlan,
  budget: MemoryBudget,
  control: TaskControl,
): Promise<RunOutput> {
  const made: SampleStore[] = []
  const store = () => {
    const next = new SampleStore(budget)
    made.push(next)
    return next
  }
  try {
    if (plan.mode === 'causal') return await causal(source, plan, store, control)
    const { filter } = plan
    return await (isFir(filter)
      ? delayRemoved(source, { ...plan, filter }, store, control)
      : forwardBackward(source, { ...plan, filter }, store, control))
  } catch (cause) {
    for (const each of made) each.clear()
    throw cause
  }
}

function runnerOf(filter: AnyDigital, start: RunStart): Runner {
  if (!isFir(filter)) return createRunner(filter.sections, { start })
  const runner = createTapsRunner(filter.taps)
  return start === 'steady' ? begunSteadily(runner, filter.taps.length - 1) : runner
}

/** As if the first sample had been there for as long as the taps remember. */
function begunSteadily(runner: Runner, memory: number): Runner {
  let begun = false
  return {
    process(input, output) {
      if (!begun && input.length > 0) {
        const before = new Float64Array(memory).fill(input[0]!)
        runner.process(before, before)
        begun = true
      }
      runner.process(input, output)
    },
    reset() {
      runner.reset()
      begun = false
    },
  }
}

function refuseTooShort(frames: number, least: number, how: string): void {
  if (frames >= least) return
  throw new RecordingError(
    'too-short',
    `${how} needs at least ${least} samples with this design; the recording has ${frames}.`,
  )
}

async function causal(
  source: FrameSource,
  plan: RunPlan,
  store: () => SampleStore,
  control: TaskControl,
): Promise<RunOutput> {
  const runners = plan.channels.map(() => runnerOf(plan.filter, plan.start))
  const stores = plan.channels.map(store)
  const overviews = plan.channels.map(() => new Overview())
  const breath = createBreath(control)
  await eachBlock(source, plan.channels, async (blocks, start) => {
    blocks.forEach((block, k) => {
      runners[k]!.process(block, block)
      stores[k]!.append(block)
      overviews[k]!.take(block)
    })
    await breath(start + blocks[0]!.length, source.frames)
  })
  return { source: storesAsSource(stores), overviews, release: () => stores.forEach((each) => each.clear()) }
}

/**
 * Taps once over the record with an odd extension at each end, their delay of whole samples taken off; as runTaps does in one array.
 */
async function delayRemoved(
  source: FrameSource,
  { channels, filter }: RunPlan<FirFilter>,
  store: () => SampleStore,
  control: TaskControl,
): Promise<RunOutput> {
  if (zeroPhaseWay(filter) === null) throw new RecordingError('design-refused', NO_WHOLE_DELAY)
  const delay = extensionOf(filter)
  refuseTooShort(source.frames, delay + 1, 'Taking the delay off')
  const runners = channels.map(() => createTapsRunner(filter.taps))
  const stores = channels.map(store)
  const overviews = channels.map(() => new Overview())
  const left = channels.map(() => delay)
  const run = (k: number, block: Float64Array) => {
    runners[k]!.process(block, block)
    // the first `delay` samples that come out belong to what stands before the record
    const early = Math.min(left[k]!, block.length)
    left[k]! -= early
    stores[k]!.append(block.subarray(early))
    overviews[k]!.take(block.subarray(early))
  }
  const ends = await readEnds(source, channels, delay)
  ends.before.forEach((before, k) => runners[k]!.process(before, before))
  const breath = createBreath(control)
  await eachBlock(source, channels, async (blocks, start) => {
    blocks.forEach((block, k) => run(k, block))
    await breath(start + blocks[0]!.length, source.frames)
  })
  ends.after.forEach((after, k) => run(k, after))
  return { source: storesAsSource(stores), overviews, release: () => stores.forEach((each) => each.clear()) }
}

/**
 * Forward over the record with an odd extension at each end, then backward over what came out, each pass started in the steady state
 * of its first sample; as runFilter does in one array.
 */
async function forwardBackward(
  source: FrameSource,
  { channels, filter }: RunPlan<DigitalFilter>,
  store: () => SampleStore,
  control: TaskControl,
): Promise<RunOutput> {
  const { sections } = filter
  const { frames } = source
  const pad = extensionOf(filter)
  refuseTooShort(frames, pad + 1, 'Running forward and backward')
  const breath = createBreath(control)
  const total = 3 * frames
  const forward = channels.map(store)
  const runners = channels.map(() => createRunner(sections, { start: 'steady' }))
  const run = (k: number, block: Float64Array) => {
    runners[k]!.process(block, block)
    forward[k]!.append(block)
  }
  const ends = await readEnds(source, channels, pad)
  channels.forEach((_, k) => run(k, ends.before[k]!))
  await eachBlock(source, channels, async (blocks, start) => {
    blocks.forEach((block, k) => run(k, block))
    await breath(start, total)
  })
  channels.forEach((_, k) => run(k, ends.after[k]!))

  const backward: SampleStore[] = []
  for (const [k, passed] of forward.entries()) {
    const runner = createRunner(sections, { start: 'steady' })
    const kept = store()
    const done = frames * (1 + k / channels.length)
    for (let end = frames + 2 * pad; end > pad;) {
      const count = Math.min(BLOCK_FRAMES, end - pad)
      const block = new Float64Array(count)
      await passed.read(end - count, block)
      block.reverse()
      runner.process(block, block)
      // what lies beyond the record's end came first; it is not kept
      const beyond = Math.max(0, Math.min(count, end - (frames + pad)))
      kept.append(block.subarray(beyond))
      end -= count
      await breath(done + (frames - Math.min(frames, end)) / channels.length, total)
    }
    passed.clear()
    backward.push(kept)
  }
  const result = turnedRound(backward)
  const overviews = channels.map(() => new Overview())
  await eachBlock(
    result,
    channels.map((_, k) => k),
    async (blocks, start) => {
      blocks.forEach((block, k) => overviews[k]!.take(block))
      await breath(2 * frames + start, total)
    },
  )
  return { source: result, overviews, release: () => backward.forEach((each) => each.clear()) }
}

/** Odd reflection about the first and the last sample, `pad` samples each. */
async function readEnds(
  source: FrameSource,
  channels: readonly number[],
  pad: number,
): Promise<{ before: Float64Array[]; after: Float64Array[] }> {
  const heads = channels.map(() => new Float64Array(pad + 1))
  const tails = channels.map(() => new Float64Array(pad + 1))
  await source.read(0, channels, heads)
  await source.read(source.frames - pad - 1, channels, tails)
  return {
    before: heads.map((head) => Float64Array.from({ length: pad }, (_, i) => 2 * head[0]! - head[pad - i]!)),
    after: tails.map((tail) => Float64Array.from({ length: pad }, (_, i) => 2 * tail[pad]! - tail[pad - 1 - i]!)),
  }
}

/** Stores that were filled from the end to the beginning, read from the beginning. */
function turnedRound(stores: readonly SampleStore[]): FrameSource {
  const frames = stores[0]?.length ?? 0
  return {
    frames,
    channelCount: stores.length,
    async read(startFrame, channels, outs) {
      for (const [position, channel] of channels.entries()) {
        const out = outs[position]
        if (!out) continue
        await stores[channel]!.read(frames - startFrame - out.length, out)
        out.reverse()
      }
    },
  }
}

/** Reads channels block by block into arrays that are used again. */
export async function eachBlock(
  source: FrameSource,
  channels: readonly number[],
  visit: (blocks: readonly Float64Array[], start: number) => Promise<void>,
  from = 0,
  to = source.frames,
): Promise<void> {
  const blockFrames = Math.max(256, Math.min(BLOCK_FRAMES, Math.floor((1 << 22) / Math.max(1, channels.length))))
  const buffers = channels.map(() => new Float64Array(Math.min(blockFrames, to - from)))
  for (let start = from; start < to; start += blockFrames) {
    const blocks = buffers.map((buffer) => buffer.subarray(0, Math.min(blockFrames, to - start)))
    await source.read(start, channels, blocks)
    await visit(blocks, start)
  }
}
