import FftJs from 'fft.js'
import { DesignError } from '../errors'

/*
 * A typed face for fft.js (radix 4, double precision). Spectra are interleaved: re at 2k, im at 2k + 1. The forward transform is
 * X[k] = Σ x[n]·e^{−j2πkn/N}; the inverse divides by N.
 */

export interface Fft {
  readonly size: number
  /** N real values → 2N numbers; all of them are filled when `whole`, else only k = 0 … N/2. */
  realForward(input: Float64Array, spectrum: Float64Array, whole?: boolean): void
  /** N complex values → N complex values; the arrays must differ. */
  forward(input: Float64Array, spectrum: Float64Array): void
  inverse(spectrum: Float64Array, output: Float64Array): void
}

const LEAST_SIZE = 8
/** Above this the tables of fft.js leave fast arrays. */
export const MOST_FFT_SIZE = 2 ** 22

export const isPowerOfTwo = (n: number): boolean => Number.isInteger(n) && n > 0 && Number.isInteger(Math.log2(n))

/** The least power of two that is not below n. */
export const powerOfTwoFrom = (n: number): number => 2 ** Math.ceil(Math.log2(Math.max(n, 1)))

const plans = new Map<number, Fft>()

/**
 * The transform of a size, made once.
 *
 * @param size a power of two, 8 to 2²²
 * @throws DesignError `fft-size` with the nearest size that works
 */
export function fftOf(size: number): Fft {
  const known = plans.get(size)
  if (known !== undefined) return known
  if (!isPowerOfTwo(size) || size < LEAST_SIZE || size > MOST_FFT_SIZE) {
    const nearest = Number.isFinite(size) ? 2 ** Math.round(Math.log2(Math.max(size, LEAST_SIZE))) : LEAST_SIZE
    throw new DesignError(
      'fft-size',
      'size',
      `A transform takes a power of two from ${LEAST_SIZE} to ${MOST_FFT_SIZE} values.`,
      Math.min(nearest, MOST_FFT_SIZE),
    )
  }
  const engine = new FftJs(size)
  const plan: Fft = {
    size,
    realForward(input, spectrum, whole = false) {
      engine.realTransform(spectrum, input)
      if (whole) engine.completeSpectrum(spectrum)
    },
    forward(input, spectrum) {
      engine.transform(spectrum, input)
    },
    inverse(spectrum, output) {
      engine.inverseTransform(output, spectrum)
    },
  }
  plans.set(size, plan)
  return plan
}
