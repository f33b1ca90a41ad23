import { fftOf, MOST_FFT_SIZE } from '../../numeric/fft'

/** A tone by the number of its periods in the record; its value at sample n of P is `amplitude`·cos(2π·cycles·n/P + phaseRadians). */
export interface CoherentTone {
  readonly cycles: number
  readonly amplitude: number
  readonly phaseRadians: number
}

/** The largest power of two that divides n, so far as a transform goes. */
function transformSize(n: number): number {
  let size = 1
  while (n % (2 * size) === 0 && 2 * size <= MOST_FFT_SIZE) size *= 2
  return size
}

/**
 * One period of a sum of tones, by inverse transforms: with P = m·L and L a power of two, samples r, r + m, r + 2m … for each r < m are one
 * transform of length L of the spectrum folded to L lines and turned by e^{j2πkr/P} (the decimation-in-time step of Cooley & Tukey 1965).
 * A generator, so that a long one may be watched and stopped: yields after each transform.
 *
 * @param length P, a multiple of 8
 * @param tones whole numbers of cycles in the record, each below P/2
 */
export function* synthesise(length: number, tones: readonly CoherentTone[]): Generator<void, Float64Array> {
  const size = transformSize(length)
  const count = length / size
  const fft = fftOf(size)
  const out = new Float64Array(length)
  const lines = new Float64Array(2 * size)
  const samples = new Float64Array(2 * size)
  for (let r = 0; r < count; r++) {
    lines.fill(0)
    for (const { cycles, amplitude, phaseRadians } of tones) {
      // The product is reduced to a part of a turn before it becomes an angle, so that no digits are lost.
      const angle = phaseRadians + (2 * Math.PI * ((cycles * r) % length)) / length
      const at = 2 * (cycles % size)
      lines[at]! += amplitude * size * Math.cos(angle)
      lines[at + 1]! += amplitude * size * Math.sin(angle)
    }
    fft.inverse(lines, samples)
    for (let q = 0; q < size; q++) out[q * count + r] = samples[2 * q]!
    yield
  }
  return out
}
