import { DesignError } from '../errors'
import { fftOf, powerOfTwoFrom } from '../numeric/fft'
import type { FirBand, FirSpec } from '../spec'
import { equiripple, type Equiripple, type EquirippleSpec } from './equiripple'

/** What the amplitude is lifted by beyond its deepest ripple, in parts of that: double zeros leave the circle a little, so that log|H| is smooth. */
const LIFT = 4e-3
/** Points of the transform per tap to begin with; doubled until the cepstrum has died away before it folds. */
const POINTS_PER_TAP = 512
const MOST_POINTS = 2 ** 20
/** The magnitudes must agree to this part of the largest. */
const AGREEMENT = 1e-6
const SPOILT = 1e-3
const ROUNDS = 4

interface Lifted {
  readonly design: Equiripple
  /** Largest errors of |H|² in the pass and stop bands, before it is scaled. */
  readonly passError: number
  readonly deepest: number
}

/** Of the taps that |H|² could have with equal errors: its stop error is the square of that of |H|, and sooner lost in rounding. */
const SENSIBLE_PART = 0.6

/** The equiripple design of |H|²; what it refuses is said of the N taps that were asked for. */
function squaredEquiripple(spec: EquirippleSpec, sampleRateHz: number): Equiripple {
  try {
    return equiripple(spec, sampleRateHz)
  } catch (error) {
    if (!(error instanceof DesignError && error.code === 'not-converged')) throw error
    const count = (spec.taps + 1) / 2
    throw new DesignError(
      error.code,
      error.field,
      `A minimum-phase filter of ${count} taps is lost in rounding. Fewer taps, less room between the bands or weights closer together help.`,
      Math.max(3, Math.floor((SENSIBLE_PART * (Number(error.nearest) + 1)) / 2)),
    )
  }
}

/**
 * The linear-phase filter of 2N − 1 taps whose amplitude is to become |H|². Pass errors of |H| are half of those of |H|², stop errors the
 * root of theirs; the product of the two errors of |H|² hardly depends on their weights, from which the weights follow in a few rounds.
 */
function squaredDesign(fir: FirSpec, sampleRateHz: number): Lifted {
  const weightOf = (isPass: boolean): number =>
    fir.bands.reduce((most, { gain, weight = 1 }) => ((gain !== 0) === isPass ? Math.max(most, weight) : most), 0)
  const likeness = weightOf(false) / weightOf(true)
  let stopWeight = 100
  let found: Lifted | null = null
  for (let round = 0; round < ROUNDS; round++) {
    const bands = fir.bands.map((band): FirBand => {
      const own = (band.weight ?? 1) / weightOf(band.gain !== 0)
      return { ...band, gain: band.gain ** 2, weight: band.gain !== 0 ? own : own ** 2 * stopWeight }
    })
    const design = squaredEquiripple({ response: fir.response, taps: 2 * fir.taps - 1, bands }, sampleRateHz)
    const passError = design.ripple
    const stopError = design.ripple / stopWeight
    found = { design, passError, deepest: stopErrorOf(fir, stopError) }
    // δp/2 = r·√(2·δs) with δp·δs = P: δs = (P/(2√2·r))^⅔
    const product = passError * stopError
    const wanted = (product / (2 * Math.SQRT2 * likeness)) ** (2 / 3)
    const next = Math.min(Math.max(product / wanted ** 2, 1e-3), 1e9)
    if (Math.abs(Math.log(next / stopWeight)) < 0.05) break
    stopWeight = next
  }
  return found!
}

/** Log-magnitude in, minimum-phase impulse response out: the cepstrum with its left half folded onto its right. */
function fromLogMagnitude(log: Float64Array): Float64Array {
  const size = log.length
  const fft = fftOf(size)
  const spectrum = new Float64Array(2 * size)
  const cepstrum = new Float64Array(2 * size)
  for (let k = 0; k < size; k++) spectrum[2 * k] = log[k]!
  fft.inverse(spectrum, cepstrum)
  const folded = new Float64Array(size)
  folded[0] = cepstrum[0]!
  for (let n = 1; n < size / 2; n++) folded[n] = 2 * cepstrum[2 * n]!
  folded[size / 2] = cepstrum[size]!
  fft.realForward(folded, spectrum, true)
  for (let k = 0; k < size; k++) {
    const radius = Math.exp(spectrum[2 * k]!)
    const angle = spectrum[2 * k + 1]!
    spectrum[2 * k] = radius * Math.cos(angle)
    spectrum[2 * k + 1] = radius * Math.sin(angle)
  }
  fft.inverse(spectrum, cepstrum)
  return Float64Array.from({ length: size }, (_, n) => cepstrum[2 * n]!)
}

/** Samples of the amplitude of a symmetric filter of odd length, all round the circle. */
function amplitudeSamples(taps: Float64Array, size: number): Float64Array {
  const centred = new Float64Array(size)
  const middle = (taps.length - 1) / 2
  taps.forEach((tap, n) => (centred[(n - middle + size) % size] = tap))
  const spectrum = new Float64Array(2 * size)
  fftOf(size).realForward(centred, spectrum, true)
  return Float64Array.from({ length: size }, (_, k) => spectrum[2 * k]!)
}

/** The spectral factor by a transform of one size; null when its magnitude is not the one that was to be factored. */
function factored(
  squaredTaps: Float64Array,
  count: number,
  lift: number,
  deepest: number,
  size: number,
): Float64Array | null {
  // Between the bands the amplitude may dip below; there it only has to stay positive.
  const log = amplitudeSamples(squaredTaps, size).map(
    (value) => 0.5 * Math.log(Math.max(value + lift, (deepest * LIFT) / 8)),
  )
  const taps = fromLogMagnitude(log).slice(0, count)
  const padded = new Float64Array(size)
  padded.set(taps)
  const spectrum = new Float64Array(2 * size)
  fftOf(size).realForward(padded, spectrum, true)
  let [worst, largest] = [0, 0]
  for (let k = 0; k < size; k++) {
    const wanted = Math.exp(log[k]!)
    largest = Math.max(largest, wanted)
    worst = Math.max(worst, Math.abs(Math.hypot(spectrum[2 * k]!, spectrum[2 * k + 1]!) - wanted))
  }
  // Written so that NaN doesn't pass; a thousandth of the stop band may be spoilt at most.
  return worst <= Math.min(AGREEMENT * largest, SPOILT * Math.sqrt(2 * lift)) ? taps : null
}

/**
 * Minimum phase with N taps: an equiripple filter of 2N − 1 taps, lifted until its amplitude is nowhere below 0, is |H|²; its spectral factor
 * is found through the real cepstrum. Pass bands are scaled so that they go as far above their gain as below it. The filter is accepted only
 * when its magnitude is the one that was to be factored.
 *
 * @throws DesignError `not-converged`, `not-matched`
 * Sources: O. Herrmann & W. Schuessler, Design of nonrecursive digital filters with minimum phase, Electronics Letters 6(11), 1970 (lifting);
 * A. V. Oppenheim & R. W. Schafer, Discrete-Time Signal Processing, 3rd ed., ch. 13 (cepstrum, minimum phase).
 */
export function minimumPhaseTaps(fir: FirSpec, sampleRateHz: number): Float64Array {
  const { taps: count } = fir
  const { design, passError, deepest } = squaredDesign(fir, sampleRateHz)
  const lift = deepest * (1 + LIFT)
  let taps: Float64Array | null = null
  for (let size = powerOfTwoFrom(POINTS_PER_TAP * count); size <= MOST_POINTS && taps === null; size *= 2) {
    taps = factored(design.taps, count, lift, deepest, size)
  }
  if (taps === null) {
    throw new DesignError(
      'not-matched',
      'fir.taps',
      `A minimum-phase filter of ${count} taps with this magnitude can’t be computed in double precision; fewer taps, less room between the bands or a smaller weight of the stop band help.`,
      Math.max(3, Math.floor(0.8 * count)),
    )
  }
  const factor = evenFactor(fir, lift, passError)
  return taps.map((tap) => tap * factor)
}

/** |H|² runs from g² + lift − δ to g² + lift + δ; the factor that lets |H| lie evenly about g, the largest gain. */
function evenFactor(fir: FirSpec, lift: number, passError: number): number {
  const gain = fir.bands.reduce((most, band) => Math.max(most, Math.abs(band.gain)), 0)
  const edge = (sign: number): number => Math.sqrt(Math.max(gain * gain + lift + sign * passError, 0))
  return (2 * gain) / (edge(1) + edge(-1))
}

/**
 * What {@link minimumPhaseTaps} would come to, without its factoring: the largest |H| in the stop bands and the largest departure of |H| from 1
 * in the pass bands.
 */
export function minimumPhaseErrors(
  fir: FirSpec,
  sampleRateHz: number,
): { readonly pass: number; readonly stop: number } {
  const { passError, deepest } = squaredDesign(fir, sampleRateHz)
  const lift = deepest * (1 + LIFT)
  const factor = evenFactor(fir, lift, passError)
  return { pass: factor * Math.sqrt(1 + lift + passError) - 1, stop: factor * Math.sqrt(lift + deepest) }
}

/** Error of |H|² in the stop band that weighs least, from that of the one that weighs most. */
function stopErrorOf(fir: FirSpec, least: number): number {
  const weights = fir.bands.flatMap(({ gain, weight = 1 }) => (gain === 0 ? [weight] : []))
  return least * (Math.max(...weights) / Math.min(...weights)) ** 2
}
