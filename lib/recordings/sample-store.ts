import { RecordingError } from './errors'
import type { FrameSource } from './types'

/** Samples in one sealed chunk: 1 MiB of doubles. */
const CHUNK = 131_072
/** Where the first chunk begins, so that a thousand short channels stay small. */
const SMALLEST = 1024

/** What all stores of one session may keep in memory before further chunks are handed to the browser as Blobs, which it can page to disk. */
export class MemoryBudget {
  private used = 0
  constructor(private readonly limitBytes: number) {}

  take(bytes: number): boolean {
    if (this.used + bytes > this.limitBytes) return false
    this.used += bytes
    return true
  }

  give(bytes: number): void {
    this.used -= bytes
  }
}

/**
 * Doubles that arrive in order and are read anywhere. Chunks never move once sealed, so growing costs no copy, and memory stays
 * within the budget however long the signal is.
 */
export class SampleStore {
  private readonly sealed: (Float64Array<ArrayBuffer> | Blob)[] = []
  private open = new Float64Array(SMALLEST)
  private filled = 0
  private held = 0

  constructor(private readonly budget: MemoryBudget) {}

  get length(): number {
    return this.sealed.length * CHUNK + this.filled
  }

  append(samples: Float64Array): void {
    let taken = 0
    while (taken < samples.length) {
      if (this.filled === this.open.length) this.widen()
      const count = Math.min(this.open.length - this.filled, samples.length - taken)
      this.open.set(samples.subarray(taken, taken + count), this.filled)
      this.filled += count
      taken += count
      if (this.filled === CHUNK) this.seal()
    }
  }

  async read(start: number, out: Float64Array): Promise<void> {
    if (start < 0 || start + out.length > this.length)
      throw new RangeError(`samples ${start} to ${start + out.length} of ${this.length}`)
    let written = 0
    while (written < out.length) {
      const at = start + written
      const index = Math.floor(at / CHUNK)
      const from = at - index * CHUNK
      const count = Math.min(CHUNK - from, out.length - written)
      const chunk = this.sealed[index] ?? this.open
      out.set(chunk instanceof Blob ? await readBlob(chunk, from, count) : chunk.subarray(from, from + count), written)
      written += count
    }
  }

  /** Gives the memory back; the store is empty afterwards. */
  clear(): void {
    this.budget.give(this.held)
    this.held = 0
    this.sealed.length = 0
    this.filled = 0
  }

  private widen(): void {
    const wider = new Float64Array(Math.min(CHUNK, this.open.length * 4))
    wider.set(this.open)
    this.open = wider
  }

  private seal(): void {
    const bytes = CHUNK * 8
    if (this.budget.take(bytes)) {
      this.held += bytes
      this.sealed.push(this.open)
      this.open = new Float64Array(CHUNK)
    } else {
      this.sealed.push(new Blob([this.open])) // copies, so that the open chunk can be used again
    }
    this.filled = 0
  }
}

async function readBlob(blob: Blob, from: number, count: number): Promise<Float64Array> {
  try {
    return new Float64Array(await blob.slice(from * 8, (from + count) * 8).arrayBuffer())
  } catch (cause) {
    throw new RecordingError(
      'out-of-room',
      'The browser has no room left for the samples. Close other pages, or try a shorter recording.',
      {},
      cause,
    )
  }
}

/** Several stores of one length as one source. */
export function storesAsSource(stores: readonly SampleStore[]): FrameSource {
  return {
    frames: stores[0]?.length ?? 0,
    channelCount: stores.length,
    async read(startFrame, channels, outs) {
      for (const [position, channel] of channels.entries()) {
        const store = stores[channel]
        const out = outs[position]
        if (store && out) await store.read(startFrame, out)
      }
    },
  }
}

/** Whole arrays as a source; for the demo and for tests. */
export function arraysAsSource(arrays: readonly Float64Array[]): FrameSource {
  return {
    frames: arrays[0]?.length ?? 0,
    channelCount: arrays.length,
    async read(startFrame, channels, outs) {
      for (const [position, channel] of channels.entries()) {
        const out = outs[position]
        const samples = arrays[channel]
        if (out && samples) out.set(samples.subarray(startFrame, startFrame + out.length))
      }
    },
  }
}
