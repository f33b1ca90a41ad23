/*
 * The exchange of Remez for one weighted Chebyshev problem: the polynomial P of n terms in cos ω that brings the largest |W·(D − P)| over
 * some bands to its least. Frequencies are in turns, 0 to ½.
 */

/** One band with what P is to be there, and the weight of its errors. */
export interface ChebyshevBand {
  readonly from: number
  readonly to: number
  desired(turns: number): number
  weight(turns: number): number
}

export interface Exchange {
  /** n + 1 frequencies at which the weighted error is ±ripple in turn, rising. */
  readonly extremals: Float64Array
  /** |weighted error| at the extremals. */
  readonly ripple: number
  readonly rounds: number
  /** P at the extremals. */
  readonly values: Float64Array
  /** At a frequency, the polynomial that has some values at the extremals. */
  through(values: Float64Array, turns: number): number
}

interface Grid {
  readonly turns: Float64Array
  readonly x: Float64Array
  readonly desired: Float64Array
  readonly weight: Float64Array
  /** Index of the first point of each band, and the number of points at the end. */
  readonly starts: readonly number[]
}

const MOST_ROUNDS = 60
/** The largest error may be above the levelled one by this part when the exchange ends. */
const SETTLED = 1e-6
/** What still counts as settled when rounding keeps the exchange from getting any closer. */
const NEARLY_SETTLED = 2e-3
const LEAST_POINTS = 12

const cosine = (turns: number): number => Math.cos(2 * Math.PI * turns)

function gridOf(bands: readonly ChebyshevBand[], terms: number): Grid {
  const density = terms > 200 ? 10 : 16
  const turns: number[] = []
  const desired: number[] = []
  const weight: number[] = []
  const starts: number[] = []
  for (const band of bands) {
    starts.push(turns.length)
    const width = band.to - band.from
    const count = width > 0 ? Math.max(LEAST_POINTS, Math.ceil(2 * width * density * terms)) : 1
    for (let k = 0; k < count; k++) {
      const at = k === count - 1 ? band.to : band.from + (width * k) / (count - 1)
      turns.push(at)
      desired.push(band.desired(at))
      weight.push(band.weight(at))
    }
  }
  starts.push(turns.length)
  return {
    turns: Float64Array.from(turns),
    x: Float64Array.from(turns, cosine),
    desired: Float64Array.from(desired),
    weight: Float64Array.from(weight),
    starts,
  }
}

/** Nodes with the barycentric weights and values of the polynomial that levels the error on them. */
interface Levelled {
  readonly x: Float64Array
  readonly factor: Float64Array
  readonly value: Float64Array
  readonly ripple: number
}

/** 1/∏(x_i − x_j), common scale left out: sums of logarithms, since the products leave the range of a double. */
function barycentricFactors(x: Float64Array): Float64Array {
  const count = x.length
  const logs = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    const xi = x[i]!
    let product = 1
    let log = 0
    for (let j = 0; j < count; j++) {
      if (j === i) continue
      product *= Math.abs(xi - x[j]!) * 2
      if (product < 1e-200 || product > 1e200) {
        log += Math.log(product)
        product = 1
      }
    }
    logs[i] = -(log + Math.log(product))
  }
  const most = logs.reduce((high, value) => Math.max(high, value), -Infinity)
  // x falls as the frequency rises, so the signs alternate.
  return logs.map((log, i) => (i % 2 === 0 ? 1 : -1) * Math.exp(log - most))
}

function level(nodes: Float64Array, bandOf: (turns: number) => ChebyshevBand): Levelled {
  const x = nodes.map(cosine)
  const factor = barycentricFactors(x)
  const value = new Float64Array(nodes.length)
  let above = 0
  let below = 0
  const share = new Float64Array(nodes.length)
  nodes.forEach((turns, i) => {
    const band = bandOf(turns)
    value[i] = band.desired(turns)
    share[i] = (i % 2 === 0 ? 1 : -1) / band.weight(turns)
    above += factor[i]! * value[i]!
    below += factor[i]! * share[i]!
  })
  const ripple = above / below
  for (let i = 0; i < value.length; i++) value[i] = value[i]! - ripple * share[i]!
  return { x, factor, value, ripple }
}

/** P(x), by the second barycentric formula (J.-P. Berrut & L. N. Trefethen, SIAM Review 46(3), 2004, eq. (4.2)). */
function interpolate({ x, factor, value }: Levelled, at: number): number {
  let above = 0
  let below = 0
  for (let i = 0; i < x.length; i++) {
    const difference = at - x[i]!
    if (difference === 0) return value[i]!
    const part = factor[i]! / difference
    above += part * value[i]!
    below += part
  }
  return above / below
}

interface Peak {
  turns: number
  error: number
}

/** A peak moved to the vertex of the parabola through it and its neighbours a step away, where that is higher. */
function climbed(peak: Peak, left: number, right: number, step: number, errorAt: (turns: number) => number): Peak {
  const curve = left - 2 * peak.error + right
  const offset = curve === 0 ? 0 : Math.min(Math.max((left - right) / (2 * curve), -1), 1)
  const turns = peak.turns + offset * step
  const error = errorAt(turns)
  return (peak.error < 0 ? error < peak.error : error > peak.error) ? { turns, error } : peak
}

/** Local extremes of the error on the grid, ends of bands among them, each climbed to its top. */
function peaksOf(grid: Grid, errors: Float64Array, errorAt: (turns: number) => number): Peak[] {
  const peaks: Peak[] = []
  for (let b = 0; b + 1 < grid.starts.length; b++) {
    const first = grid.starts[b]!
    const last = grid.starts[b + 1]! - 1
    for (let g = first; g <= last; g++) {
      const error = errors[g]!
      const sign = error < 0 ? -1 : 1
      if (g > first && sign * errors[g - 1]! >= sign * error) continue
      if (g < last && sign * errors[g + 1]! > sign * error) continue
      let peak: Peak = { turns: grid.turns[g]!, error }
      if (g > first && g < last) {
        const step = grid.turns[g + 1]! - grid.turns[g]!
        peak = climbed(peak, errors[g - 1]!, errors[g + 1]!, step, errorAt)
        // Beside an edge swings are steep on one side: a closer parabola finds what the first one missed.
        const near = step / 4
        peak = climbed(peak, errorAt(peak.turns - near), errorAt(peak.turns + near), near, errorAt)
      }
      peaks.push(peak)
    }
  }
  return peaks
}

/** Of neighbours with the same sign the larger stays; then the least are dropped, without breaking the turns of sign, until `count` are left. */
function alternating(peaks: readonly Peak[], count: number): Peak[] {
  const kept: Peak[] = []
  for (const peak of peaks) {
    const before = kept.at(-1)
    if (before === undefined || before.error > 0 !== peak.error > 0) kept.push(peak)
    else if (Math.abs(peak.error) > Math.abs(before.error)) kept[kept.length - 1] = peak
  }
  const size = (index: number): number => Math.abs(kept[index]!.error)
  while (kept.length > count) {
    if (kept.length === count + 1) {
      if (size(0) < size(kept.length - 1)) kept.shift()
      else kept.pop()
      break
    }
    let least = 0
    for (let i = 1; i < kept.length; i++) if (size(i) < size(least)) least = i
    if (least === 0) kept.shift()
    else if (least === kept.length - 1) kept.pop()
    else kept.splice(size(least - 1) < size(least + 1) ? least - 1 : least, 2)
  }
  return kept
}

function exchangeFrom(bands: readonly ChebyshevBand[], grid: Grid, start: Float64Array): Exchange | null {
  const bandOf = (turns: number): ChebyshevBand => bands.find(({ to }) => turns <= to) ?? bands.at(-1)!
  const count = start.length
  let nodes = start
  const errors = new Float64Array(grid.x.length)
  let best = Infinity
  let stale = 0
  for (let rounds = 1; rounds <= MOST_ROUNDS; rounds++) {
    const levelled = level(nodes, bandOf)
    if (!Number.isFinite(levelled.ripple)) return null
    const errorAt = (turns: number): number => {
      const band = bandOf(turns)
      return band.weight(turns) * (band.desired(turns) - interpolate(levelled, cosine(turns)))
    }
    for (let g = 0; g < errors.length; g++) {
      errors[g] = grid.weight[g]! * (grid.desired[g]! - interpolate(levelled, grid.x[g]!))
    }
    // The nodes themselves stand in for a swing too narrow for the grid, so that there are always enough turns of sign.
    const levels = Array.from(nodes, (turns, i): Peak => ({ turns, error: (i % 2 === 0 ? 1 : -1) * levelled.ripple }))
    const candidates = [...peaksOf(grid, errors, errorAt), ...levels].sort((a, b) => a.turns - b.turns)
    const peaks = alternating(candidates, count)
    if (peaks.length < count) return null
    const ripple = Math.abs(levelled.ripple)
    const largest = peaks.reduce((most, { error }) => Math.max(most, Math.abs(error)), 0)
    const excess = (largest - ripple) / largest
    stale = excess < best / 2 ? 0 : stale + 1
    best = Math.min(best, excess)
    const isStuck = stale >= 6 || rounds === MOST_ROUNDS
    if (excess <= SETTLED || (isStuck && excess <= NEARLY_SETTLED)) {
      return {
        extremals: nodes,
        ripple,
        rounds,
        values: levelled.value,
        through: (values, turns) => interpolate({ ...levelled, value: values }, cosine(turns)),
      }
    }
    nodes = Float64Array.from(peaks, ({ turns }) => turns)
  }
  return null
}

/** Points of the grid at even distances along it. */
function evenStart(grid: Grid, count: number): Float64Array {
  const last = grid.turns.length - 1
  return Float64Array.from({ length: count }, (_, i) => grid.turns[Math.round((i * last) / (count - 1))]!)
}

/** Extremals of a smaller problem spread to more points, by their places along the bands laid end to end. */
function spreadStart(bands: readonly ChebyshevBand[], coarse: Float64Array, count: number): Float64Array {
  const before: number[] = []
  let total = 0
  for (const { from, to } of bands) {
    before.push(total)
    total += to - from
  }
  const indexOf = (turns: number) =>
    Math.max(
      0,
      bands.findIndex(({ to }) => turns <= to),
    )
  const places = coarse.map((turns) => before[indexOf(turns)]! + turns - bands[indexOf(turns)]!.from)
  return Float64Array.from({ length: count }, (_, i) => {
    const at = (i * (places.length - 1)) / (count - 1)
    const k = Math.min(Math.floor(at), places.length - 2)
    const place = places[k]! + (at - k) * (places[k + 1]! - places[k]!)
    const band = before.reduce((found, start, index) => (place >= start ? index : found), 0)
    return Math.min(bands[band]!.from + place - before[band]!, bands[band]!.to)
  })
}

/** Smaller problems than this are not halved any more to find a better start. */
const LEAST_HALVED = 12

/**
 * Solves the problem, starting from extremals spread evenly over the bands; when that leads nowhere, from those of the same problem with half
 * as many terms.
 *
 * @param terms n, the number of terms of P
 * @returns null when the exchange did not settle
 * Sources: T. W. Parks & J. H. McClellan, IEEE Trans. Circuit Theory 19(2), 1972; E. Ya. Remez, 1934; start by halving: S.-I. Filip,
 * A robust and scalable implementation of the Parks–McClellan algorithm, ACM Trans. Math. Softw. 43(1), 2016.
 */
export function exchange(bands: readonly ChebyshevBand[], terms: number): Exchange | null {
  const grid = gridOf(bands, terms)
  const direct = exchangeFrom(bands, grid, evenStart(grid, terms + 1))
  if (direct !== null || terms < LEAST_HALVED) return direct
  const coarse = exchange(bands, Math.ceil(terms / 2))
  return coarse === null ? null : exchangeFrom(bands, grid, spreadStart(bands, coarse.extremals, terms + 1))
}
