/** Values collected and sorted at the end. */
const SMALL = 65_536
const BINS = 65_536

/** Calls `visit` with every value, in blocks; the same values in each pass. */
export type Pass = (visit: (block: Float64Array) => void) => Promise<void>

/**
 * The median of any number of values, exactly, in memory that doesn't grow with them: each pass counts the values in equal bins and
 * goes on with the bin the median is in, until few enough are left to sort. NaN is left out. Null when there is no value.
 */
export async function medianOf(pass: Pass): Promise<number | null> {
  let low = Infinity
  let high = -Infinity
  let count = 0
  await pass((block) => {
    for (const value of block) {
      if (Number.isNaN(value)) continue
      count += 1
      if (value < low) low = value
      if (value > high) high = value
    }
  })
  if (count === 0) return null
  const upper = await ranked(pass, Math.floor(count / 2), low, high)
  return count % 2 === 1 ? upper : (upper + (await ranked(pass, count / 2 - 1, low, high))) / 2
}

/** The value of the given rank, from 0, among all values; `low` and `high` are the extremes. */
async function ranked(pass: Pass, rank: number, low: number, high: number): Promise<number> {
  let below = 0
  let inside = Infinity
  while (low < high) {
    const bins = new Float64Array(BINS)
    const from = low
    const scale = BINS / (high - low)
    const binOf = (value: number) => Math.min(BINS - 1, Math.floor((value - from) * scale))
    if (inside <= SMALL || !Number.isFinite(scale)) return sortedRank(pass, rank - below, low, high)
    await pass((block) => {
      for (const value of block) if (value >= low && value <= high) bins[binOf(value)]! += 1
    })
    let bin = 0
    while (below + bins[bin]! <= rank) below += bins[bin++]!
    inside = bins[bin]!
    // the next range is what really fell into the bin, so that rounding at its edges can't lose a value
    let nextLow = Infinity
    let nextHigh = -Infinity
    await pass((block) => {
      for (const value of block) {
        if (value < low || value > high || binOf(value) !== bin) continue
        if (value < nextLow) nextLow = value
        if (value > nextHigh) nextHigh = value
      }
    })
    low = nextLow
    high = nextHigh
  }
  return low
}

async function sortedRank(pass: Pass, rank: number, low: number, high: number): Promise<number> {
  const found: number[] = []
  await pass((block) => {
    for (const value of block) if (value >= low && value <= high) found.push(value)
  })
  return Float64Array.from(found).sort()[rank] ?? low
}
