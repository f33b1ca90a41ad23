/*
 * Preferred values of resistors and capacitors.
 */

export type ESeries = 'E12' | 'E24' | 'E96'

/** E24 was laid down before the rounding rule, and departs from it from 2.7 to 4.7 and at 8.2: a table, not a formula. */
const E24 = [
  1, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2, 2.2, 2.4, 2.7, 3, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
] as const

const decades: Readonly<Record<ESeries, readonly number[]>> = {
  E12: E24.filter((_, index) => index % 2 === 0),
  E24,
  E96: Array.from({ length: 96 }, (_, index) => Math.round(100 * 10 ** (index / 96)) / 100),
}

/**
 * The values of one decade, 1 ≤ value < 10, rising.
 *
 * Source: IEC 60063:2015. E24 by its table, E12 every second of it; E96 as 10^(n/96) rounded to three digits.
 */
export const decadeOf = (series: ESeries): readonly number[] => decades[series]

/**
 * All values of a series between two bounds, both included, rising; in the unit of the bounds.
 *
 * @param from above 0
 * @param to finite
 */
export function seriesBetween(series: ESeries, from: number, to: number): readonly number[] {
  const values: number[] = []
  for (let decade = Math.floor(Math.log10(from)) - 1; decade <= Math.log10(to) + 1; decade += 1) {
    for (const value of decades[series]) {
      // Read as decimal, so that 4.7 nF is the double nearest to 4.7e-9 and not a product that misses it.
      const scaled = Number(`${value}e${decade}`)
      if (scaled >= from && scaled <= to) values.push(scaled)
    }
  }
  return values
}

/**
 * The neighbours of a value among rising ones: the last not above it and the first not below it. One where they are the same; none where
 * it lies outside.
 */
export function neighbours(rising: readonly number[], value: number): readonly number[] {
  let low = 0
  let high = rising.length - 1
  const [least = Infinity, most = -Infinity] = [rising[low], rising[high]]
  if (!(value >= least && value <= most)) return []
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (rising[middle]! <= value) low = middle
    else high = middle
  }
  const pair = [rising[low]!, rising[high]!]
  const met = pair.filter((candidate) => candidate === value)
  return met.length > 0 ? met.slice(0, 1) : pair
}
