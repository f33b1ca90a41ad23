import { DesignError } from '../errors'
import { fftOf, powerOfTwoFrom } from '../numeric/fft'
import type { AnyFilter } from '../response/factors'
import { frequencyResponse } from '../response/frequency'
import { firstNotFinite, refuseSample } from './cascade'
import type { CorrelationLines } from './correlation-peak'
import { correlationAt, refinePeak } from './correlation-peak'
import type { Spectrum } from './welch'

export interface MeasuredDelay {
  /** Positive when `after` is later than `before`. */
  readonly delaySeconds: number
  readonly delaySamples: number
  /** Correlation coefficient at that delay, −1 to 1: how much of `after` is `before`, delayed. */
  readonly correlation: number
}

export interface DelayOptions {
  readonly sampleRateHz: number
  /** Longest delay looked for, either way; by default 8192 samples, or the recording but one sample. */
  readonly maxDelaySeconds?: number
}

const DEFAULT_MOST = 8192

interface Moments {
  readonly mean: number
  /** Sum of squares about the mean. */
  readonly energy: number
}

function moments(samples: Float64Array): Moments {
  let sum = 0
  for (let n = 0; n < samples.length; n++) sum += samples[n]!
  const mean = sum / samples.length
  let energy = 0
  for (let n = 0; n < samples.length; n++) energy += (samples[n]! - mean) ** 2
  return { mean, energy }
}

function check(before: Float64Array, after: Float64Array, options: DelayOptions): void {
  if (before.length !== after.length) {
    throw new DesignError('length', 'after', 'Both recordings must be equally long to be compared.', before.length)
  }
  if (before.length < 16)
    throw new DesignError('too-short', 'before', 'A delay needs at least 16 samples to be measured.', 16)
  if (!(options.sampleRateHz > 0)) {
    throw new DesignError('not-positive', 'sampleRateHz', 'The sampling rate must be above 0 Hz.')
  }
  for (const samples of [before, after]) {
    const bad = firstNotFinite(samples, 0, samples.length)
    if (bad >= 0) refuseSample(samples[bad]!, bad)
  }
}

/**
 * Sum over the whole recording of conj(X)·Y, taken segment by segment: L samples of `before` against the L + 2M of `after` that lags from
 * −M to M can reach, so that every lag is a true (not a circular) correlation. Returns the interleaved spectrum.
 */
function crossSpectrum(
  before: Float64Array,
  after: Float64Array,
  means: readonly [number, number],
  most: number,
  size: number,
): Float64Array {
  const fft = fftOf(size)
  const step = size - 2 * most
  const x = new Float64Array(size)
  const y = new Float64Array(size)
  const xs = new Float64Array(2 * size)
  const ys = new Float64Array(2 * size)
  const sum = new Float64Array(2 * size)
  for (let from = 0; from < before.length; from += step) {
    for (let i = 0; i < size; i++) {
      const n = from + i
      const m = n - most
      x[i] = i < step && n < before.length ? before[n]! - means[0] : 0
      y[i] = m >= 0 && m < after.length ? after[m]! - means[1] : 0
    }
    fft.realForward(x, xs, true)
    fft.realForward(y, ys, true)
    for (let i = 0; i < 2 * size; i += 2) {
      sum[i]! += xs[i]! * ys[i]! + xs[i + 1]! * ys[i + 1]!
      sum[i + 1]! += xs[i]! * ys[i + 1]! - xs[i + 1]! * ys[i]!
    }
  }
  return sum
}

/** Lines of an interleaved spectrum from 0 to half its size, each for itself and its mirror image, as terms of C(lag in samples). */
function linesOf(spectrum: Float64Array, size: number): CorrelationLines {
  const half = size / 2
  const re = new Float64Array(half + 1)
  const im = new Float64Array(half + 1)
  const omega = new Float64Array(half + 1)
  for (let k = 0; k <= half; k++) {
    const weight = (k === 0 || k === half ? 1 : 2) / size
    re[k] = spectrum[2 * k]! * weight
    im[k] = spectrum[2 * k + 1]! * weight
    omega[k] = (2 * Math.PI * k) / size
  }
  return { re, im, omega }
}

/**
 * The delay between a recording before and after a filter: the lag of the highest peak of their cross-correlation. The peak is found
 * among whole samples by transforms, then between them on the band-limited correlation itself (its lines' phases), not on a parabola
 * through three values, which is off by up to a few hundredths of a sample.
 *
 * A nearly periodic signal has peaks almost as high a period away; `maxDelaySeconds` below half a period keeps the answer unique.
 *
 * @param before N samples, 16 or more
 * @param after N samples
 * @throws DesignError `length`, `too-short`, `not-finite` with the index, `silent` when either recording is constant
 * Source: C. H. Knapp & G. C. Carter, The generalized correlation method for estimation of time delay, IEEE Trans. Acoust. Speech
 * Signal Process. 24(4), 1976, with weight 1.
 */
export function measureDelay(before: Float64Array, after: Float64Array, options: DelayOptions): MeasuredDelay {
  check(before, after, options)
  const first = moments(before)
  const second = moments(after)
  if (!(first.energy > 0) || !(second.energy > 0)) {
    throw new DesignError(
      'silent',
      first.energy > 0 ? 'after' : 'before',
      'A recording that never changes has no delay to measure.',
    )
  }
  const longest = before.length - 1
  const wanted =
    options.maxDelaySeconds === undefined ? DEFAULT_MOST : Math.floor(options.maxDelaySeconds * options.sampleRateHz)
  const most = Math.min(Math.max(wanted, 1), longest)
  const size = powerOfTwoFrom(Math.max(1024, 4 * most))
  const spectrum = crossSpectrum(before, after, [first.mean, second.mean], most, size)
  const correlation = new Float64Array(2 * size)
  fftOf(size).inverse(spectrum, correlation)
  let peak = 0
  for (let lag = 1; lag <= 2 * most; lag++) if (correlation[2 * lag]! > correlation[2 * peak]!) peak = lag
  const lines = linesOf(spectrum, size)
  const delaySamples = refinePeak(lines, peak, 1) - most
  return {
    delaySamples,
    delaySeconds: delaySamples / options.sampleRateHz,
    correlation: correlationAt(lines, delaySamples + most) / Math.sqrt(first.energy * second.energy),
  }
}

/** Humps of the correlation that reach this part of the highest count as equally high. */
const NEARLY_HIGHEST = 0.98

/** Points to each side of a top when it is looked at more closely. */
const CLOSER = 32

/**
 * The top within `start ± reach`, looked at ever more closely until even the highest line turns by an eighth of a radian a step at most.
 * Steps to the mean radian find the hump, but where most of a signal is slow its tip is far sharper, and beside the tip the curve is hollow:
 * Newton's method can't start there.
 * @returns where it is, and to within what
 */
function closeIn(lines: CorrelationLines, start: number, reach: number): readonly [number, number] {
  const least = 1 / (8 * lines.omega[lines.omega.length - 1]!)
  let [top, within] = [start, reach]
  while (within > least) {
    const [middle, step] = [top, within / CLOSER]
    let most = correlationAt(lines, middle)
    for (let k = -CLOSER; k <= CLOSER; k++) {
      const value = k === 0 ? most : correlationAt(lines, middle + k * step)
      if (value > most) [most, top] = [value, middle + k * step]
    }
    within = step
  }
  return [top, within]
}

/**
 * The delay that {@link measureDelay} should find for a signal of the given spectrum behind a filter: the peak of the correlation
 * Σ S(f)·H(f)·e^{jωτ}, of equally high ones the nearest to no delay. For a narrow band this is the phase delay there; for a broad one a mean, weighted as the signal is.
 *
 * @param spectrum of the signal before the filter, from {@link welch}; its line at 0 Hz is left out, as an offset has no delay
 * @returns seconds
 * @throws DesignError `silent` when no power passes the filter
 */
export function predictDelay(filter: AnyFilter, spectrum: Pick<Spectrum, 'frequenciesHz' | 'density'>): number {
  const response = frequencyResponse(filter, spectrum.frequenciesHz)
  const re = response.re.map((value, k) => value * spectrum.density[k]!)
  const im = response.im.map((value, k) => value * spectrum.density[k]!)
  re[0] = 0
  im[0] = 0
  const omega = spectrum.frequenciesHz.map((hertz) => 2 * Math.PI * hertz)
  const lines = { re, im, omega }
  let total = 0
  let spread = 0
  for (let k = 0; k < omega.length; k++) {
    const size = Math.hypot(re[k]!, im[k]!)
    total += size
    spread += size * omega[k]! ** 2
  }
  if (!(total > 0)) throw new DesignError('silent', 'spectrum', 'Nothing of this signal passes the filter.')
  // C can't turn faster than its highest lines; eight steps to a mean radian don't miss its highest hump.
  const step = 1 / (8 * Math.sqrt(spread / total))
  const longest = Math.PI / (omega[1]! - omega[0]!)
  const steps = Math.min(Math.ceil(longest / step), 4096)
  const first = -Math.min(steps, 256)
  const values = Float64Array.from({ length: steps - first + 1 }, (_, index) =>
    correlationAt(lines, (first + index) * step),
  )
  const highest = values.reduce((most, value) => Math.max(most, value), -Infinity)
  // A tone's humps are all but equally high, a period apart: the one nearest to no delay is meant.
  let best = Infinity
  values.forEach((value, index) => {
    const isHump = value >= (values[index - 1] ?? -Infinity) && value >= (values[index + 1] ?? -Infinity)
    const delay = (first + index) * step
    if (isHump && value >= NEARLY_HIGHEST * highest && Math.abs(delay) < Math.abs(best)) best = delay
  })
  const [top, reach] = closeIn(lines, best, step)
  return refinePeak(lines, top, reach)
}
