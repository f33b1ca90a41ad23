import { DesignError } from '../errors'
import { mirrored } from '../fir/linear-phase'
import { solveDamped } from '../numeric/cholesky'
import { cicAmplitude } from './closed-forms'

export interface CompensationRequest {
  readonly taps: number
  /** The droop is lifted up to here. */
  readonly passHz: number
  /** The rate behind the CIC filter, which this one runs at. */
  readonly sampleRateHz: number
  readonly order: number
  readonly combDelay: number
  readonly factor: number
}

const POINTS_A_TAP = 8
/** Above the pass edge only the excess of gain is to be held back. */
const BEYOND_WEIGHT = 1e-4
/** Damping tried in turn, in parts of the diagonal. */
const DAMPING = [0, 1e-15, 1e-13, 1e-11] as const

/**
 * Linear phase that lifts a CIC filter's droop: with the droop D of the CIC filter the squared error of A·D against 1 is least over the pass
 * band, on an even grid. From the pass edge up to half the rate A is drawn, with little weight, to what it has at the edge, so that it doesn't
 * rise with the droop into the first null. Scaled to exactly 1 at DC.
 *
 * The equations are Toeplitz plus Hankel in C(m) = Σ W·cos(mω), as those of the continuous problem are.
 *
 * @returns taps, symmetric to the last bit
 * @throws DesignError `not-converged` with field `taps`
 * Source: T. W. Parks & C. S. Burrus, Digital Filter Design, 1987, §3.2 (least squared error on a grid); from memory.
 */
export function compensationTaps(request: CompensationRequest): Float64Array {
  const { taps: count, passHz, sampleRateHz, order, combDelay, factor } = request
  const isHalf = count % 2 === 0
  const terms = Math.ceil(count / 2)
  const shift = isHalf ? 0.5 : 0
  const points = POINTS_A_TAP * count + 64
  const droopAt = (hertz: number): number => cicAmplitude(hertz, order, combDelay * factor, factor * sampleRateHz)
  const edge = 1 / droopAt(passHz)
  const areas = new Float64Array(2 * terms + 1)
  const right = new Float64Array(terms)
  // All angles are multiples of half the grid's step, so that one turn of cosines serves.
  const turn = 4 * points
  const cosines = Float64Array.from({ length: turn }, (_, n) => Math.cos((2 * Math.PI * n) / turn))
  for (let n = 0; n <= points; n++) {
    const hertz = (n / points) * (sampleRateHz / 2)
    const isPass = hertz <= passHz
    const droop = droopAt(hertz)
    const weight = isPass ? droop * droop : BEYOND_WEIGHT / (edge * edge)
    const wanted = isPass ? 1 / droop : edge
    const about = weight * wanted
    for (let m = 0; m < areas.length; m++) areas[m] = areas[m]! + weight * cosines[(2 * m * n) % turn]!
    for (let k = 0; k < terms; k++) right[k] = right[k]! + about * cosines[((2 * k + 2 * shift) * n) % turn]!
  }
  const normal = new Float64Array(terms * terms)
  for (let j = 0; j < terms; j++) {
    for (let k = 0; k <= j; k++) normal[j * terms + k] = (areas[j - k]! + areas[Math.round(j + k + 2 * shift)]!) / 2
  }
  for (const damping of DAMPING) {
    const a = solveDamped(normal, right, damping)
    if (a === null || !a.every(Number.isFinite)) continue
    const taps = new Float64Array(count)
    for (let k = 0; k < terms; k++) {
      const p = k + shift
      taps[Math.round((count - 1) / 2 - p)] = p === 0 ? a[k]! : a[k]! / 2
    }
    const sum = a.reduce((total, value) => total + value, 0)
    return mirrored(
      taps.map((tap) => tap / sum),
      'even',
    )
  }
  throw new DesignError(
    'not-converged',
    'taps',
    `The equations for ${count} taps are singular in double precision; fewer taps help.`,
    Math.max(3, count - 2 * Math.ceil(count / 8)),
  )
}
