import { buildEnvelope, readEnvelope } from '@/dsp'

/** Samples that one cell of an overview stands for. */
export const CELL = 256
/** Runs of missing samples that are remembered; a channel with more is mended before it is tried. */
const KEPT_GAPS = 100_000

/** A run of samples without a finite value, from ≤ i < to, with the values that stand on its two sides. */
export interface Gap {
  readonly from: number
  to: number
  readonly before: number
  after: number
}

/** Least and greatest value of each of some equal spans. */
export interface Envelope {
  readonly low: Float64Array
  readonly high: Float64Array
}

/**
 * What is kept in memory of a channel however long it is: least and greatest of every 256 samples, its mean and mean square, and
 * where it has no value. Samples come in order, once.
 */
export class Overview {
  frames = 0
  readonly gaps: Gap[] = []
  gapFrames = 0
  gapCount = 0
  min = Infinity
  max = -Infinity
  private sum = 0
  private squares = 0
  private low = new Float64Array(64)
  private high = new Float64Array(64)
  private lastFinite = NaN
  private inGap = false

  take(samples: Float64Array): void {
    let i = 0
    while (i < samples.length) {
      const cell = Math.floor(this.frames / CELL)
      if (this.frames % CELL === 0) this.openCell(cell)
      const end = Math.min(samples.length, i + CELL - (this.frames % CELL))
      let low = this.low[cell]!
      let high = this.high[cell]!
      for (; i < end; i += 1) {
        const value = samples[i]!
        if (value - value === 0) {
          if (value < low) low = value
          if (value > high) high = value
          this.sum += value
          this.squares += value * value
          if (this.inGap) this.closeGap(value)
          this.lastFinite = value
        } else this.missing()
        this.frames += 1
      }
      this.low[cell] = low
      this.high[cell] = high
      if (low < this.min) this.min = low
      if (high > this.max) this.max = high
    }
  }

  get finiteFrames(): number {
    return this.frames - this.gapFrames
  }
  get mean(): number {
    return this.sum / this.finiteFrames
  }
  get rms(): number {
    return Math.sqrt(this.squares / this.finiteFrames)
  }

  /** Envelope over frames [from, to) in equal columns; each takes in every cell that it touches. Columns without a value are NaN. */
  envelope(from: number, to: number, columns: number): Envelope {
    const low = new Float64Array(columns)
    const high = new Float64Array(columns)
    const cells = Math.ceil(this.frames / CELL)
    for (let column = 0; column < columns; column += 1) {
      const first = Math.max(0, Math.floor((from + ((to - from) * column) / columns) / CELL))
      const last = Math.min(cells, Math.ceil((from + ((to - from) * (column + 1)) / columns) / CELL))
      let least = Infinity
      let greatest = -Infinity
      for (let cell = first; cell < last; cell += 1) {
        if (this.low[cell]! < least) least = this.low[cell]!
        if (this.high[cell]! > greatest) greatest = this.high[cell]!
      }
      low[column] = least === Infinity ? NaN : least
      high[column] = greatest === -Infinity ? NaN : greatest
    }
    return { low, high }
  }

  private openCell(cell: number): void {
    if (cell >= this.low.length) {
      this.low = widened(this.low)
      this.high = widened(this.high)
    }
    this.low[cell] = Infinity
    this.high[cell] = -Infinity
  }

  private missing(): void {
    this.gapFrames += 1
    const open = this.gaps[this.gaps.length - 1]
    if (this.inGap) {
      if (open && open.to === this.frames) open.to += 1
      return
    }
    this.inGap = true
    this.gapCount += 1
    if (this.gaps.length < KEPT_GAPS)
      this.gaps.push({ from: this.frames, to: this.frames + 1, before: this.lastFinite, after: NaN })
  }

  private closeGap(value: number): void {
    this.inGap = false
    const last = this.gaps[this.gaps.length - 1]
    if (last && last.to === this.frames) last.after = value
  }

  get gapsForgotten(): boolean {
    return this.gapCount > this.gaps.length
  }
}

function widened(values: Float64Array): Float64Array<ArrayBuffer> {
  const wider = new Float64Array(values.length * 2)
  wider.set(values)
  return wider
}

/** Envelope of samples in memory, in equal columns. */
export function envelopeOf(samples: Float64Array, columns: number): Envelope {
  const { least, greatest } = readEnvelope(buildEnvelope(samples), samples, 0, samples.length, columns)
  return {
    low: least.map((value) => (value === Infinity ? NaN : value)),
    high: greatest.map((value) => (value === -Infinity ? NaN : value)),
  }
}
