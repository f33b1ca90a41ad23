import { DesignError } from '../errors'
import { firAmplitude } from '../response/fir'
import type { FirBand, FirSpec } from '../spec'
import { exchange, type ChebyshevBand, type Exchange } from './exchange'
import { forcedFactor, freedomOf, tapsFromAmplitude, type Symmetry } from './linear-phase'

export interface Equiripple {
  /** Symmetric to the last bit. */
  readonly taps: Float64Array
  /** Frequencies in Hz, rising, at which the weighted error is ±ripple in turn; one more than the filter has free coefficients. */
  readonly extremalsHz: Float64Array
  /** The weighted error that the taps have there, wanted minus true. */
  readonly errors: Float64Array
  /** The largest weighted error; of a differentiator the largest relative one. */
  readonly ripple: number
  readonly rounds: number
}

export const symmetryOf = ({ response }: Pick<FirSpec, 'response'>): Symmetry =>
  response === 'differentiator' ? 'odd' : 'even'

/** What A is to be in a band, and the weight of an error. A differentiator is sought with slope 1 per turn, its errors relative to that. */
function idealOf({ gain, weight = 1 }: FirBand, isSlope: boolean): Pick<ChebyshevBand, 'desired' | 'weight'> {
  if (isSlope) return { desired: (turns) => turns, weight: (turns) => weight / turns }
  return { desired: () => gain, weight: () => weight }
}

/** Bands as the exchange takes them: the forced factor Q divided out, and ends where Q is 0 moved in a little. */
function chebyshevBands(fir: EquirippleSpec, sampleRateHz: number, symmetry: Symmetry, terms: number): ChebyshevBand[] {
  const inset = 1 / (64 * terms)
  const factor = (turns: number): number => forcedFactor(fir.taps, symmetry, turns)
  const lowest = symmetry === 'odd' ? inset / 1024 : 0
  const highest = Math.abs(factor(0.5)) < 1e-12 ? 0.5 - inset : 0.5
  return fir.bands.map((band) => {
    const { desired, weight } = idealOf(band, symmetry === 'odd')
    const from = Math.max(band.fromHz / sampleRateHz, lowest)
    return {
      from,
      to: Math.max(from, Math.min(band.toHz / sampleRateHz, highest)),
      desired: (turns) => desired(turns) / factor(turns),
      weight: (turns) => weight(turns) * factor(turns),
    }
  })
}

export type EquirippleSpec = Pick<FirSpec, 'bands' | 'taps' | 'response'>

/** Errors this alike, in parts of the ripple, are level. */
const LEVEL = 1e-7
/** A filter whose errors differ by more than this, in parts of the ripple, is not what was asked for. */
const UNLEVEL = 1e-2
/** Most times that what rounding took from the taps is given back. */
const MOST_MENDINGS = 3

/**
 * Taps of the polynomial that was found, and their weighted errors at the extremals. Where bands lie far apart the polynomial is ill determined
 * between them, and the taps carry the rounding of that into the bands: what they miss at the extremals is sought again as a polynomial of its
 * own and added, until the errors are level.
 */
function tapsThrough(
  solved: Exchange,
  count: number,
  symmetry: Symmetry,
  bands: readonly ChebyshevBand[],
): { taps: Float64Array; errors: Float64Array } {
  const { extremals, values, ripple } = solved
  const factors = extremals.map((turns) => forcedFactor(count, symmetry, turns))
  const fromValues = (wanted: Float64Array): Float64Array => {
    const amplitude = Float64Array.from({ length: Math.floor(count / 2) + 1 }, (_, k) => {
      const factor = forcedFactor(count, symmetry, k / count)
      return factor === 0 ? 0 : factor * solved.through(wanted, k / count)
    })
    return tapsFromAmplitude(amplitude, count, symmetry)
  }
  let taps = fromValues(values)
  for (let mending = 0; ; mending++) {
    const found = firAmplitude({ domain: 'z', taps, sampleRateHz: 1, symmetry, diagnostics: [] }, extremals)
    const reached = found.map((amplitude, i) => amplitude / factors[i]!)
    const errors = extremals.map((turns, i) => {
      const band = bands.find(({ to }) => turns <= to) ?? bands.at(-1)!
      return band.weight(turns) * (band.desired(turns) - reached[i]!)
    })
    const isLevel = errors.every((error) => Math.abs(Math.abs(error) / ripple - 1) < LEVEL)
    if (isLevel || mending === MOST_MENDINGS) return { taps, errors }
    const more = fromValues(values.map((value, i) => value - reached[i]!))
    taps = taps.map((tap, n) => tap + more[n]!)
  }
}

/** The taps at which Kaiser's estimate comes to errors of 1e-11, about as far as doubles reach. */
function mostSensibleTaps({ bands }: EquirippleSpec, sampleRateHz: number): number {
  const rooms = bands.slice(1).map((band, k) => band.fromHz - bands[k]!.toHz)
  const room = rooms.length === 0 ? sampleRateHz / 10 : Math.min(...rooms)
  return Math.max(3, Math.floor(1 + ((220 - 13) * sampleRateHz) / (14.36 * room)))
}

/**
 * Equiripple filter of linear phase by the algorithm of Parks and McClellan: the largest weighted error over all bands is the least possible,
 * and is reached with alternating sign at one frequency more than there are free coefficients. Errors of a differentiator are relative to
 * what it is to be.
 *
 * @param fir `taps` N, and bands in Hz with gain and weight (1 when left out)
 * @throws DesignError `not-converged` with field `fir.taps` and fewer taps that are likely to work
 * Sources: T. W. Parks & J. H. McClellan, Chebyshev approximation for nonrecursive digital filters with linear phase, IEEE Trans. Circuit
 * Theory 19(2), 1972; J. H. McClellan & T. W. Parks, A unified approach to the design of optimum FIR linear-phase digital filters, IEEE
 * Trans. Circuit Theory 20(6), 1973 (the four kinds).
 */
export function equiripple(fir: EquirippleSpec, sampleRateHz: number): Equiripple {
  const { taps: count } = fir
  const symmetry = symmetryOf(fir)
  const terms = freedomOf(count, symmetry)
  const bands = chebyshevBands(fir, sampleRateHz, symmetry, terms)
  const solved = exchange(bands, terms)
  if (solved !== null) {
    // jω in rad/s, of a slope of 1 per turn.
    const scale = symmetry === 'odd' ? (fir.bands[0]?.gain ?? 1) * 2 * Math.PI * sampleRateHz : 1
    const { taps, errors } = tapsThrough(solved, count, symmetry, bands)
    // Written so that NaN doesn't pass.
    if (errors.every((error) => Math.abs(error) <= (1 + UNLEVEL) * solved.ripple)) {
      return {
        taps: scale === 1 ? taps : taps.map((tap) => tap * scale),
        extremalsHz: solved.extremals.map((turns) => turns * sampleRateHz),
        errors,
        ripple: solved.ripple,
        rounds: solved.rounds,
      }
    }
  }
  const sensible = Math.min(mostSensibleTaps(fir, sampleRateHz), Math.floor(0.8 * count))
  const nearest = Math.max(3, sensible % 2 === count % 2 ? sensible : sensible - 1)
  throw new DesignError(
    'not-converged',
    'fir.taps',
    `The exchange did not converge with ${count} taps: the ripple is lost in rounding. Fewer taps, less room between the bands or weights closer together help.`,
    nearest,
  )
}
