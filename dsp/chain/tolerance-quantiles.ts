/*
 * Quantiles without a full sort: a run of 20,000 channels has 2,048 columns of them.
 */

/**
 * Puts the value of rank k at index k, within [from, to], the smaller ones before it and the larger after it (C. A. R. Hoare, Algorithm 65:
 * FIND, Comm. ACM 4(7), 1961; the pivot is the median of first, middle and last).
 */
function select(values: Float64Array, k: number, from: number, to: number): void {
  let low = from
  let high = to
  while (high > low) {
    const [first, middle, last] = [values[low]!, values[(low + high) >> 1]!, values[high]!]
    const pivot = Math.max(Math.min(first, middle), Math.min(Math.max(first, middle), last))
    let i = low
    let j = high
    while (i <= j) {
      while (values[i]! < pivot) i += 1
      while (values[j]! > pivot) j -= 1
      if (i > j) break
      const held = values[i]!
      values[i] = values[j]!
      values[j] = held
      i += 1
      j -= 1
    }
    // Between j and i all are equal to the pivot.
    if (k <= j) high = j
    else if (k >= i) low = i
    else return
  }
}

/**
 * The p-th quantiles of values: linear between the order statistics around position p·(n − 1), which is definition 7 of R. J. Hyndman &
 * Y. Fan, Sample Quantiles in Statistical Packages, The American Statistician 50(4), 1996.
 *
 * @param values one or more, finite; put into another order
 * @param ps rising, each 0 … 1
 */
export function quantilesOf<Ps extends readonly number[]>(
  values: Float64Array,
  ps: readonly [...Ps],
): { [K in keyof Ps]: number } {
  const last = values.length - 1
  let from = 0
  const quantiles = ps.map((p) => {
    const position = p * last
    const below = Math.floor(position)
    const above = Math.min(below + 1, last)
    select(values, below, from, last)
    select(values, above, below, last)
    from = below
    const low = values[below]!
    return low + (position - below) * (values[above]! - low)
  })
  return quantiles as { [K in keyof Ps]: number }
}
