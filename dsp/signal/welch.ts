import { DesignError } from '../errors'
import { fftOf, isPowerOfTwo, MOST_FFT_SIZE } from '../numeric/fft'
import { firstNotFinite, refuseSample } from './cascade'
import { spectralWindow } from './windows'
import type { WindowName } from './windows'

export interface WelchOptions {
  readonly sampleRateHz: number
  /** Samples in a segment: a power of two, 8 or more. */
  readonly segmentLength: number
  /** Part of a segment that it shares with the next, 0 ≤ overlap < 1. */
  readonly overlap: number
  readonly window: WindowName
  /** `constant` takes its mean from each segment first, which keeps an offset out of the lowest lines; `none` (default) leaves it. */
  readonly detrend?: 'constant' | 'none'
}

export interface Spectrum {
  /** segmentLength/2 + 1 lines, from 0 to half the rate. */
  readonly frequenciesHz: Float64Array
  /** One-sided power spectral density in unit²/Hz. */
  readonly density: Float64Array
  readonly segments: number
  /** Bandwidth of the window in Hz: a line of power P stands P/bandwidth high. */
  readonly noiseBandwidthHz: number
}

/** A segment length that a record can carry: the largest power of two that isn't longer than it. */
const longestFor = (samples: number): number => 2 ** Math.floor(Math.log2(Math.max(samples, 8)))

function check(samples: Float64Array, options: WelchOptions): void {
  const { sampleRateHz, segmentLength, overlap } = options
  if (!(sampleRateHz > 0) || !Number.isFinite(sampleRateHz)) {
    throw new DesignError('not-positive', 'sampleRateHz', 'The sampling rate must be above 0 Hz.')
  }
  if (!isPowerOfTwo(segmentLength) || segmentLength < 8 || segmentLength > MOST_FFT_SIZE) {
    const nearest = Number.isFinite(segmentLength) ? 2 ** Math.round(Math.log2(Math.max(segmentLength, 8))) : 1024
    throw new DesignError(
      'segment-length',
      'segmentLength',
      `A segment must be a power of two from 8 to ${MOST_FFT_SIZE} samples long.`,
      Math.min(nearest, MOST_FFT_SIZE),
    )
  }
  if (!(overlap >= 0 && overlap < 1)) {
    throw new DesignError(
      'overlap',
      'overlap',
      'Segments may overlap by 0 up to, but not including, 1 of their length.',
      0.5,
    )
  }
  if (samples.length < segmentLength) {
    throw new DesignError(
      'too-short',
      'segmentLength',
      `The recording has ${samples.length} samples, fewer than one segment of ${segmentLength}.`,
      longestFor(samples.length),
    )
  }
  const bad = firstNotFinite(samples, 0, samples.length)
  if (bad >= 0) refuseSample(samples[bad]!, bad)
}

/**
 * Power spectral density by averaging windowed, overlapping segments. One-sided: its sum times the line spacing is the mean square of
 * the signal (exactly so for a line on a bin, and in the mean for noise). Samples after the last whole segment are left out.
 *
 * Steps: 1. cut; 2. take the mean off, if asked; 3. window; 4. |X|²/(fs·Σw²), twice that for all lines but 0 and fs/2; 5. average.
 *
 * @param samples N samples in a unit U
 * @returns densities in U²/Hz
 * @throws DesignError `not-positive`, `segment-length`, `overlap`, `too-short`, each with the nearest value that works; `not-finite`
 *   with the index of the sample
 * Source: P. D. Welch, The use of fast Fourier transform for the estimation of power spectra, IEEE Trans. Audio Electroacoust. 15(2),
 * 1967; Bendat & Piersol, Random Data, 4th ed., §11.5.
 */
export function welch(samples: Float64Array, options: WelchOptions): Spectrum {
  check(samples, options)
  const { sampleRateHz, segmentLength: size, overlap, window: name, detrend = 'none' } = options
  const window = spectralWindow(name, size)
  const fft = fftOf(size)
  const hop = Math.max(1, Math.round(size * (1 - overlap)))
  const segments = 1 + Math.floor((samples.length - size) / hop)
  const half = size / 2
  const sums = new Float64Array(half + 1)
  const piece = new Float64Array(size)
  const spectrum = new Float64Array(2 * size)
  for (let segment = 0; segment < segments; segment++) {
    const from = segment * hop
    let mean = 0
    if (detrend === 'constant') {
      for (let n = 0; n < size; n++) mean += samples[from + n]!
      mean /= size
    }
    for (let n = 0; n < size; n++) piece[n] = (samples[from + n]! - mean) * window.values[n]!
    fft.realForward(piece, spectrum)
    for (let k = 0; k <= half; k++) {
      const re = spectrum[2 * k]!
      const im = spectrum[2 * k + 1]!
      sums[k]! += re * re + im * im
    }
  }
  const scale = 1 / (sampleRateHz * window.noiseGain * size * segments)
  const density = sums.map((sum, k) => sum * scale * (k === 0 || k === half ? 1 : 2))
  const frequenciesHz = Float64Array.from({ length: half + 1 }, (_, k) => (k * sampleRateHz) / size)
  return { frequenciesHz, density, segments, noiseBandwidthHz: (window.noiseBandwidthBins * sampleRateHz) / size }
}
