import type { Filter } from '../forms/filter'
import { matrixExponential } from '../numeric/matrix-exponential'
import { cosHalfTurns, foldedTurns, sinHalfTurns } from './axis'
import type { StateSpace } from './state-space'
import { realise } from './state-space'

/*
 * The response of an impulse- or step-invariant version straight from the analog filter's state space, without its zeros: they take
 * long arithmetic to find, which a sweep over hundreds of rates can't wait for. Good to about 1e-10 of the peak; designs themselves come
 * from discretize.
 *   impulse-invariant: H(z) = T·[C·(I − A_d·z⁻¹)⁻¹·B − k·C·B], k = ½ when half the first sample is taken, else 0
 *   step-invariant:    H(z) = C·(zI − A_d)⁻¹·B_d + D,   A_d = e^{AT}, B_d = ∫ e^{At}·B dt over T
 * Source: K. J. Åström & B. Wittenmark, Computer-Controlled Systems, 3rd ed., §2.3; C. F. Van Loan, IEEE Trans. Automat. Contr. 23(3),
 * 1978, for both at once.
 */

export interface SampledSystem {
  readonly kind: 'impulse' | 'step'
  readonly space: StateSpace
  readonly transition: Float64Array
  readonly input: Float64Array
  readonly scale: number
  readonly direct: number
  readonly sampleRateHz: number
}

const spaces = new WeakMap<Filter<'s'>, StateSpace>()

function spaceOf(analog: Filter<'s'>): StateSpace {
  const before = spaces.get(analog)
  if (before !== undefined) return before
  const fresh = realise(analog)
  spaces.set(analog, fresh)
  return fresh
}

/** @param firstSample part of h(0+) that the first sample takes, 1 or ½; of no matter to `step` */
export function sampledSystem(
  analog: Filter<'s'>,
  sampleRateHz: number,
  kind: 'impulse' | 'step',
  firstSample = 1,
): SampledSystem {
  const space = spaceOf(analog)
  const { order, a, b, c, d } = space
  const step = space.radiansPerSecond / sampleRateHz
  if (kind === 'impulse') {
    const transition = matrixExponential(
      order,
      a.map((value) => value * step),
    )
    const atZero = c.reduce((sum, value, i) => sum + value * b[i]!, 0)
    return { kind, space, transition, input: b, scale: step, direct: (firstSample - 1) * atZero * step, sampleRateHz }
  }
  const size = order + 1
  const wide = new Float64Array(size * size)
  for (let i = 0; i < order; i++) {
    for (let j = 0; j < order; j++) wide[i * size + j] = a[i * order + j]! * step
    wide[i * size + order] = b[i]! * step
  }
  const both = matrixExponential(size, wide)
  const transition = new Float64Array(order * order)
  const input = new Float64Array(order)
  for (let i = 0; i < order; i++) {
    transition.set(both.subarray(i * size, i * size + order), i * order)
    input[i] = both[i * size + order]!
  }
  return { kind, space, transition, input, scale: 1, direct: d, sampleRateHz }
}

/** Complex response at N frequencies, by forward substitution through the blocks of zI − A_d. */
export function sampledResponse(
  system: SampledSystem,
  frequenciesHz: ArrayLike<number>,
): { re: Float64Array; im: Float64Array } {
  const { space, transition, input, scale, direct, sampleRateHz } = system
  const { order, blocks, c } = space
  const outRe = new Float64Array(frequenciesHz.length)
  const outIm = new Float64Array(frequenciesHz.length)
  const xr = new Float64Array(order)
  const xi = new Float64Array(order)
  for (let n = 0; n < frequenciesHz.length; n++) {
    const x = foldedTurns(frequenciesHz[n]!, sampleRateHz)
    const s = sinHalfTurns(x)
    const co = cosHalfTurns(x)
    // z − 1, so that the differences from 1 on the diagonal are taken without cancellation.
    const lessOne = -2 * s * s
    const zi = 2 * s * co
    let at = 0
    for (const size of blocks) {
      let r0r = input[at]!
      let r0i = 0
      for (let j = 0; j < at; j++) {
        const factor = transition[at * order + j]!
        r0r += factor * xr[j]!
        r0i += factor * xi[j]!
      }
      const m00r = lessOne + (1 - transition[at * order + at]!)
      if (size === 1) {
        const norm = m00r * m00r + zi * zi
        xr[at] = (r0r * m00r + r0i * zi) / norm
        xi[at] = (r0i * m00r - r0r * zi) / norm
        at += 1
        continue
      }
      let r1r = input[at + 1]!
      let r1i = 0
      for (let j = 0; j < at; j++) {
        const factor = transition[(at + 1) * order + j]!
        r1r += factor * xr[j]!
        r1i += factor * xi[j]!
      }
      const m11r = lessOne + (1 - transition[(at + 1) * order + at + 1]!)
      const a01 = transition[at * order + at + 1]!
      const a10 = transition[(at + 1) * order + at]!
      const dr = m00r * m11r - zi * zi - a01 * a10
      const di = zi * (m00r + m11r)
      const norm = dr * dr + di * di
      const t0r = r0r * m11r - r0i * zi + a01 * r1r
      const t0i = r0r * zi + r0i * m11r + a01 * r1i
      const t1r = r1r * m00r - r1i * zi + a10 * r0r
      const t1i = r1r * zi + r1i * m00r + a10 * r0i
      xr[at] = (t0r * dr + t0i * di) / norm
      xi[at] = (t0i * dr - t0r * di) / norm
      xr[at + 1] = (t1r * dr + t1i * di) / norm
      xi[at + 1] = (t1i * dr - t1r * di) / norm
      at += 2
    }
    let re = 0
    let im = 0
    for (let j = 0; j < order; j++) {
      re += c[j]! * xr[j]!
      im += c[j]! * xi[j]!
    }
    if (system.kind === 'impulse') {
      // C·(I − A_d·z⁻¹)⁻¹·B = z·C·(zI − A_d)⁻¹·B
      const zr = 1 + lessOne
      const turned = re * zr - im * zi
      im = re * zi + im * zr
      re = turned
    }
    outRe[n] = re * scale + direct
    outIm[n] = im * scale
  }
  return { re: outRe, im: outIm }
}
