import { DesignError } from '../errors'

export type WindowName = 'hann' | 'hamming' | 'blackman' | 'flat-top' | 'rectangular'

/**
 * w[n] = Σ a_k·(−1)^k·cos(2πkn/N). Hann, Hamming, Blackman: F. J. Harris, On the Use of Windows for Harmonic Analysis with the DFT,
 * Proc. IEEE 66(1), 1978. Flat-top: G. D'Antona & A. Ferrero, Digital Signal Processing for Measurement Systems, 2006, p. 70, whose
 * ratios are those of ISO 18431-2 to four digits.
 */
const cosines: Readonly<Record<WindowName, readonly number[]>> = {
  rectangular: [1],
  hann: [0.5, 0.5],
  hamming: [0.54, 0.46],
  blackman: [0.42, 0.5, 0.08],
  'flat-top': [0.21557895, 0.41663158, 0.277263158, 0.083578947, 0.006947368],
}

export const windowNames = Object.keys(cosines).filter((name): name is WindowName => name in cosines)

export interface SpectralWindow {
  readonly values: Float64Array
  /** Mean of the window: what the amplitude of a line is multiplied by. */
  readonly coherentGain: number
  /** Mean of its square: what the power of noise is multiplied by. */
  readonly noiseGain: number
  /** Equivalent noise bandwidth in bins of fs/N. */
  readonly noiseBandwidthBins: number
}

/**
 * A window for spectra, in its periodic form (period N, as the transform's).
 *
 * @param length N, at least 1
 */
export function spectralWindow(name: WindowName, length: number): SpectralWindow {
  const terms = cosines[name]
  if (terms === undefined)
    throw new DesignError('window', 'window', `There is no window named “${String(name)}”.`, 'hann')
  const values = new Float64Array(length)
  let sum = 0
  let squares = 0
  for (let n = 0; n < length; n++) {
    let value = 0
    for (let k = 0; k < terms.length; k++) {
      // k·n is reduced to one turn first, so that long windows keep their symmetry.
      const angle = (2 * Math.PI * ((k * n) % length)) / length
      value += (k % 2 === 0 ? 1 : -1) * terms[k]! * Math.cos(angle)
    }
    values[n] = value
    sum += value
    squares += value * value
  }
  const coherentGain = sum / length
  const noiseGain = squares / length
  return { values, coherentGain, noiseGain, noiseBandwidthBins: noiseGain / (coherentGain * coherentGain) }
}
