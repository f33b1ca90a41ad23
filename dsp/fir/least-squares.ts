import { DesignError } from '../errors'
import { solveDamped } from '../numeric/cholesky'
import type { FirSpec } from '../spec'
import { symmetryOf } from './equiripple'
import { freedomOf, mirrored } from './linear-phase'

/** ∫ cos(mω) dω from a to b. */
const cosineArea = (m: number, a: number, b: number): number =>
  m === 0 ? b - a : (Math.sin(m * b) - Math.sin(m * a)) / m

/** ∫ ω·sin(pω) dω from a to b. */
const rampArea = (p: number, a: number, b: number): number => {
  const at = (w: number) => Math.sin(p * w) / (p * p) - (w * Math.cos(p * w)) / p
  return at(b) - at(a)
}

/** Damping tried in turn, in parts of the diagonal: with wide room between bands the equations are singular to a double. */
const DAMPING = [0, 1e-15, 1e-14, 1e-13, 1e-12] as const

export interface LeastSquares {
  readonly taps: Float64Array
  /** Part of the diagonal that had to be added; 0 where the least error is exact. */
  readonly damping: number
}

/**
 * Linear phase with the least weighted integral of the squared error over the bands. With A = Σ a_k·cos(p_k·ω) (sines for a differentiator)
 * the equations are Σ_k a_k·½[C(p_j − p_k) ± C(p_j + p_k)] = ∫ W·D·cos(p_j·ω), C(m) = ∫ W·cos(mω): Toeplitz plus Hankel, all in closed form.
 * They are solved by Cholesky's method. The errors of a differentiator count as they are, not relative to what it is to be.
 *
 * @returns N taps, symmetric (of a differentiator: antisymmetric) to the last bit
 * @throws DesignError `not-converged`
 * Source: T. W. Parks & C. S. Burrus, Digital Filter Design, 1987, §3.2 (least squared error in bands); from memory.
 */
export function leastSquares(fir: Pick<FirSpec, 'bands' | 'taps' | 'response'>, sampleRateHz: number): LeastSquares {
  const { taps: count, bands } = fir
  const symmetry = symmetryOf(fir)
  const isOdd = symmetry === 'odd'
  const terms = freedomOf(count, symmetry)
  const isHalf = count % 2 === 0
  const shift = isHalf ? 0.5 : isOdd ? 1 : 0
  const stretches = bands.map(({ fromHz, toHz, gain, weight = 1 }) => ({
    from: (2 * Math.PI * fromHz) / sampleRateHz,
    to: (2 * Math.PI * toHz) / sampleRateHz,
    gain: isOdd ? gain * sampleRateHz : gain,
    weight,
  }))
  const areas = Float64Array.from({ length: 2 * terms + 2 }, (_, m) =>
    stretches.reduce((sum, { from, to, weight }) => sum + weight * cosineArea(m, from, to), 0),
  )
  const normal = new Float64Array(terms * terms)
  const right = new Float64Array(terms)
  for (let j = 0; j < terms; j++) {
    const p = j + shift
    for (let k = 0; k <= j; k++) {
      const sum = areas[Math.round(j + k + 2 * shift)]!
      normal[j * terms + k] = (areas[j - k]! + (isOdd ? -sum : sum)) / 2
    }
    for (const { from, to, gain, weight } of stretches) {
      right[j] = right[j]! + weight * gain * (isOdd ? rampArea(p, from, to) : cosineArea(p, from, to))
    }
  }
  for (const damping of DAMPING) {
    const a = solveDamped(normal, right, damping)
    if (a === null || !a.every(Number.isFinite)) continue
    const taps = new Float64Array(count)
    for (let k = 0; k < terms; k++) {
      const p = k + shift
      taps[Math.round((count - 1) / 2 - p)] = p === 0 ? a[k]! : a[k]! / 2
    }
    return { taps: mirrored(taps, symmetry), damping }
  }
  throw new DesignError(
    'not-converged',
    'fir.taps',
    `The equations for ${count} taps are singular in double precision; fewer taps or less room between the bands help.`,
    Math.max(3, count - 2 * Math.ceil(count / 8)),
  )
}
