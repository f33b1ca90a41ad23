import type { Filter } from '../../forms/filter'
import { leastSquares } from '../../numeric/least-squares'
import { matrixExponential } from '../../numeric/matrix-exponential'
import { realise } from '../../response/state-space'

/*
 * Analog stages run in time. Between samples the input is the cubic B-spline through coefficients c[n], a function of continuous time, and the
 * states at the samples follow exactly: over one step the input is a polynomial of degree three, whose four derivatives are appended to the
 * states before the matrix exponential is taken (Van Loan 1978). No response formula is used.
 *
 * A tone in the coefficients becomes in continuous time the same tone times sinc⁴(f/fs), and its images f + k·fs times (f/(f + k·fs))⁴ of
 * that (M. Unser, Splines: a perfect fit for signal and image processing, IEEE Signal Process. Mag. 16(6), 1999). The first is undone ahead of
 * the run; the second is what `splineImage` bounds.
 */

/** Derivatives at the start of a step, of the pieces that c[n − 1], c[n], c[n + 1], c[n + 2] add to the spline. */
const PIECES = [
  [1 / 6, -1 / 2, 1, -1],
  [4 / 6, 0, -2, 3],
  [1 / 6, 1 / 2, 1, -3],
  [0, 0, 0, 1],
] as const

/** sin(x)/x */
const sinc = (x: number): number => (x === 0 ? 1 : Math.sin(x) / x)

/** What a tone of 1 in the coefficients is in the spline. */
export const splineGain = (turns: number): number => sinc(Math.PI * turns) ** 4

/** Rows of the step matrix, packed: row i reaches to the end of its own block, since the cascade is block lower triangular. */
interface SplineSystem {
  readonly order: number
  readonly rows: Float64Array
  readonly reach: Int32Array
  /** Four a state. */
  readonly inputs: Float64Array
  readonly c: Float64Array
  readonly d: number
  /** The whole A over one step. */
  readonly a: Float64Array
  /** Steps after which the slowest state has sunk below 1e-18. */
  readonly memory: number
}

function splineSystem(filter: Filter<'s'>, inputRateHz: number): SplineSystem {
  const { order, a, b, c, d, blocks, radiansPerSecond } = realise(filter)
  const h = radiansPerSecond / inputRateHz
  const step = a.map((value) => value * h)
  const size = order + 4
  const augmented = new Float64Array(size * size)
  for (let i = 0; i < order; i++) {
    augmented.set(step.subarray(i * order, (i + 1) * order), i * size)
    augmented[i * size + order] = b[i]! * h
  }
  for (let j = 0; j < 3; j++) augmented[(order + j) * size + order + j + 1] = 1
  const exponential = matrixExponential(size, augmented)
  const reach = Int32Array.from(
    blocks.flatMap((block, k) => {
      const end = blocks.slice(0, k + 1).reduce((sum, length) => sum + length, 0)
      return Array.from({ length: block }, () => end)
    }),
  )
  const rows: number[] = []
  const inputs = new Float64Array(4 * order)
  for (let i = 0; i < order; i++) {
    for (let j = 0; j < reach[i]!; j++) rows.push(exponential[i * size + j]!)
    PIECES.forEach((piece, k) => {
      inputs[4 * i + k] = piece.reduce((sum, value, p) => sum + exponential[i * size + order + p]! * value, 0)
    })
  }
  const slowest = filter.poles.reduce((least, pole) => Math.min(least, -pole.re), Infinity)
  // Forty nepers and some: 1e-18.
  const memory = slowest > 0 ? Math.ceil((42 * inputRateHz) / slowest) : Infinity
  return { order, rows: Float64Array.from(rows), reach, inputs, c, d, a: step, memory }
}

/** Steps between two looks by whoever watches. */
const PIECE = 16_384

/** Runs from sample `from` up to `to` of the periodic coefficients, both counted from the start of a period; `out` takes what comes after 0. */
function* walk(
  system: SplineSystem,
  coefficients: Float64Array,
  state: Float64Array,
  from: number,
  to: number,
  out: Float64Array | null,
): Generator<number, Float64Array> {
  const { order, rows, reach, inputs, c, d } = system
  const length = coefficients.length
  const at = (n: number): number => coefficients[((n % length) + length) % length]!
  let x = state
  let next: Float64Array = new Float64Array(order)
  let c0 = at(from - 1)
  let c1 = at(from)
  let c2 = at(from + 1)
  for (let start = from; start < to; start += PIECE) {
    const end = Math.min(start + PIECE, to)
    for (let n = start; n < end; n++) {
      const ahead = n + 2
      const c3 =
        coefficients[ahead < 0 ? ((ahead % length) + length) % length : ahead < length ? ahead : ahead - length]!
      if (out !== null) {
        let y = (d * (c0 + 4 * c1 + c2)) / 6
        for (let i = 0; i < order; i++) y += c[i]! * x[i]!
        out[n] = y
      }
      let r = 0
      for (let i = 0; i < order; i++) {
        const k = 4 * i
        let sum = inputs[k]! * c0 + inputs[k + 1]! * c1 + inputs[k + 2]! * c2 + inputs[k + 3]! * c3
        const end = reach[i]!
        for (let j = 0; j < end; j++) sum += rows[r++]! * x[j]!
        next[i] = sum
      }
      ;[x, next] = [next, x]
      c0 = c1
      c1 = c2
      c2 = c3
    }
    yield end - start
  }
  return x
}

/**
 * The state at which a period begins when the input has been periodic for ever: from rest, x(P) = g; then (I − e^{AP})·x₀ = g. Where the
 * filter forgets faster than that, the end of a period from rest is enough.
 */
function* periodicStart(system: SplineSystem, coefficients: Float64Array): Generator<number, Float64Array> {
  const { order, a, memory } = system
  const length = coefficients.length
  const rest = new Float64Array(order)
  if (memory <= length) return yield* walk(system, coefficients, rest, -memory, 0, null)
  const reached = yield* walk(system, coefficients, rest, 0, length, null)
  const whole = matrixExponential(
    order,
    a.map((value) => value * length),
  )
  const matrix = whole.map((value, k) => (k % (order + 1) === 0 ? 1 - value : -value))
  return leastSquares(matrix, reached.slice(), order)
}

/**
 * Analog stages in the periodic steady state, sampled at the rate of the coefficients.
 *
 * @param filter all analog stages in one, proper and stable
 * @param coefficients one period of cubic B-spline coefficients of the input
 * @returns one period of the output, at the instants of the coefficients; yields how many steps were taken
 * @throws DesignError `improper`
 */
export function* runAnalog(
  filter: Filter<'s'>,
  coefficients: Float64Array,
  inputRateHz: number,
): Generator<number, Float64Array> {
  const system = splineSystem(filter, inputRateHz)
  const out = new Float64Array(coefficients.length)
  const start = yield* periodicStart(system, coefficients)
  yield* walk(system, coefficients, start, 0, coefficients.length, out)
  return out
}

/**
 * What the images of the spline add to a tone at most, as a part of it: Σ |H(f + k·fs)|·(f/(f + k·fs))⁴ / |H(f)|, k ≠ 0. Terms beyond the
 * twelfth are bounded by the largest of those looked at.
 *
 * @param gain |H| at a frequency in Hz
 */
export function splineImage(gain: (hz: number) => number, hz: number, inputRateHz: number): number {
  const own = gain(hz)
  if (!(own > 0)) return Infinity
  let sum = 0
  let largest = 0
  for (let k = 1; k <= 12; k++) {
    for (const sign of [-1, 1]) {
      const image = Math.abs(hz + sign * k * inputRateHz)
      const through = gain(image)
      largest = Math.max(largest, through)
      sum += through * (hz / image) ** 4
    }
  }
  // ∫ from 12 of 2·(f/fs)⁴/x⁴
  return (sum + (2 / 3) * largest * (hz / inputRateHz) ** 4 * 12 ** -3) / own
}
