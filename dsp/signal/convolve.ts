import { DesignError } from '../errors'
import { fftOf, MOST_FFT_SIZE, powerOfTwoFrom } from '../numeric/fft'
import { firstNotFinite, refuseSample } from './cascade'

/** Below this a direct sum is quicker than transforms. */
const DIRECT_TAPS = 48

function direct(signal: Float64Array, kernel: Float64Array, out: Float64Array): void {
  for (let n = 0; n < out.length; n++) {
    const first = Math.max(0, n - signal.length + 1)
    const last = Math.min(kernel.length - 1, n)
    let sum = 0
    for (let k = first; k <= last; k++) sum += kernel[k]! * signal[n - k]!
    out[n] = sum
  }
}

/**
 * Overlap-save. Two blocks go through one complex transform, one as its real and one as its imaginary part: the kernel is real, so they
 * come out apart again.
 */
function overlapSave(signal: Float64Array, kernel: Float64Array, out: Float64Array): void {
  const taps = kernel.length
  const size = powerOfTwoFrom(Math.max(1024, Math.min(4 * taps, 2 * out.length)))
  if (size > MOST_FFT_SIZE) {
    throw new DesignError(
      'kernel-length',
      'kernel',
      `A kernel may have ${MOST_FFT_SIZE / 4} taps at most.`,
      MOST_FFT_SIZE / 4,
    )
  }
  const fft = fftOf(size)
  const step = size - taps + 1
  const padded = new Float64Array(size)
  padded.set(kernel)
  const response = new Float64Array(2 * size)
  fft.realForward(padded, response, true)
  const block = new Float64Array(2 * size)
  const spectrum = new Float64Array(2 * size)
  const at = (n: number): number => (n >= 0 && n < signal.length ? signal[n]! : 0)
  for (let from = 0; from < out.length; from += 2 * step) {
    for (let i = 0; i < size; i++) {
      const n = from - (taps - 1) + i
      block[2 * i] = at(n)
      block[2 * i + 1] = at(n + step)
    }
    fft.forward(block, spectrum)
    for (let i = 0; i < 2 * size; i += 2) {
      const re = spectrum[i]!
      const im = spectrum[i + 1]!
      const hr = response[i]!
      const hi = response[i + 1]!
      spectrum[i] = re * hr - im * hi
      spectrum[i + 1] = re * hi + im * hr
    }
    fft.inverse(spectrum, block)
    const firstCount = Math.min(step, out.length - from)
    for (let i = 0; i < firstCount; i++) out[from + i] = block[2 * (taps - 1 + i)]!
    const secondCount = Math.min(step, out.length - from - step)
    for (let i = 0; i < secondCount; i++) out[from + step + i] = block[2 * (taps - 1 + i) + 1]!
  }
}

/**
 * Linear convolution of a signal with a kernel; by transforms (overlap-save) when the kernel is long.
 *
 * @param signal N samples, N ≥ 1
 * @param kernel M taps, M ≥ 1
 * @returns N + M − 1 samples
 * @throws DesignError `too-short` when either is empty, `not-finite` with the index of the value, `kernel-length`
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §8.7.3 (overlap-save).
 */
export function convolve(signal: Float64Array, kernel: Float64Array): Float64Array {
  if (signal.length === 0) throw new DesignError('too-short', 'samples', 'There are no samples to convolve.', 1)
  if (kernel.length === 0) throw new DesignError('too-short', 'kernel', 'The kernel has no taps.', 1)
  const badSample = firstNotFinite(signal, 0, signal.length)
  if (badSample >= 0) refuseSample(signal[badSample]!, badSample)
  const badTap = firstNotFinite(kernel, 0, kernel.length)
  if (badTap >= 0) throw new DesignError('not-finite', 'kernel', `The tap at index ${badTap} is not a finite number.`)
  const out = new Float64Array(signal.length + kernel.length - 1)
  if (Math.min(kernel.length, signal.length) <= DIRECT_TAPS) direct(signal, kernel, out)
  else if (kernel.length <= signal.length) overlapSave(signal, kernel, out)
  else overlapSave(kernel, signal, out)
  return out
}
