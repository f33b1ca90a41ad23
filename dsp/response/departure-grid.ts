import type { DigitalFilter, Filter } from '../forms/filter'

/** Where a resonance of half-width d is looked at, in half-widths from its centre. */
const OFFSETS = [-8, -4, -2, -1, -0.5, 0, 0.5, 1, 2, 4, 8]

function addResonance(grid: number[], centreHz: number, halfWidthHz: number): void {
  for (const offset of OFFSETS) grid.push(centreHz + offset * halfWidthHz)
}

/**
 * Frequencies for judging a departure from `fromHz` to `toHz`: evenly spread, and around every root of either filter as closely as the
 * root is sharp, since nothing else can make a response bend. So no dip falls between two of them, however narrow it is.
 *
 * @returns sorted, without repetitions, both ends included
 */
export function departureGrid(
  fromHz: number,
  toHz: number,
  analog: Filter<'s'>,
  digital: DigitalFilter | null = null,
  even = 96,
): Float64Array {
  const turn = 2 * Math.PI
  const grid: number[] = []
  for (let i = 0; i <= even; i++) grid.push(fromHz + ((toHz - fromHz) * i) / even)
  for (const { re, im } of [...analog.poles, ...analog.zeros]) {
    if (im >= 0 && (re !== 0 || im !== 0)) addResonance(grid, im / turn, Math.abs(re) / turn)
  }
  if (digital !== null) {
    for (const { re, im } of [...digital.poles, ...digital.zeros]) {
      const radius = Math.hypot(re, im)
      if (im < 0 || radius === 0) continue
      addResonance(
        grid,
        (Math.atan2(im, re) / turn) * digital.sampleRateHz,
        (Math.abs(1 - radius) / turn) * digital.sampleRateHz,
      )
    }
  }
  const inside = Float64Array.from(grid.filter((hertz) => hertz > fromHz && hertz < toHz)).sort()
  const out: number[] = [fromHz]
  const least = (toHz - fromHz) * 1e-12
  for (const hertz of inside) if (hertz - out[out.length - 1]! > least) out.push(hertz)
  if (toHz - out[out.length - 1]! <= least && out.length > 1) out.pop()
  if (toHz > fromHz) out.push(toHz)
  return Float64Array.from(out)
}

/** Points to add where |values| has a hump between grid points: the vertex of the parabola through its three highest. */
export function humps(frequenciesHz: Float64Array, values: Float64Array): number[] {
  const found: number[] = []
  for (let n = 1; n + 1 < values.length; n++) {
    const [a, b, c] = [Math.abs(values[n - 1]!), Math.abs(values[n]!), Math.abs(values[n + 1]!)]
    if (!(b >= a && b >= c && b > Math.min(a, c)) || !Number.isFinite(b)) continue
    const [x, y, z] = [frequenciesHz[n - 1]!, frequenciesHz[n]!, frequenciesHz[n + 1]!]
    const left = (b - a) * (z - y)
    const right = (b - c) * (y - x)
    const vertex = y + (0.5 * (left * (z - y) - right * (y - x))) / (left + right)
    if (vertex > x && vertex < z && vertex !== y) found.push(vertex)
  }
  return found
}
