import type { FirFilter } from '../forms/filter'

/*
 * The four kinds of linear phase. With M = (N − 1)/2, H(ω) = e^{−jωM}·A(ω) for even symmetry and j·e^{−jωM}·A(ω) for odd, A real: a factor
 * Q(ω) times a polynomial in cos ω.
 *   even, N odd:  Q = 1,         (N + 1)/2 terms;    odd, N odd:  Q = sin ω,     (N − 1)/2 terms
 *   even, N even: Q = cos(ω/2),  N/2 terms;          odd, N even: Q = sin(ω/2),  N/2 terms
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §5.7.3 (types I to IV).
 */

export type Symmetry = Exclude<FirFilter['symmetry'], 'none'>

/** How many free coefficients a filter of linear phase has. */
export function freedomOf(taps: number, symmetry: Symmetry): number {
  if (taps % 2 === 0) return taps / 2
  return symmetry === 'even' ? (taps + 1) / 2 : (taps - 1) / 2
}

/** Q at a frequency in turns (f/fs, 0 to ½). */
export function forcedFactor(taps: number, symmetry: Symmetry, turns: number): number {
  if (symmetry === 'even') return taps % 2 === 1 ? 1 : Math.sin(Math.PI * (0.5 - turns))
  return Math.sin(taps % 2 === 1 ? 2 * Math.PI * turns : Math.PI * turns)
}

/** cos(πj/N) and sin(πj/N) for j = 0 … 2N − 1, each angle from the first octant, so that mirrored angles agree to the last bit. */
function halfTurnTable(count: number): { cos: Float64Array; sin: Float64Array } {
  const size = 2 * count
  const sine = (j: number): number => {
    const k = ((j % size) + size) % size
    if (k >= count) return -sine(k - count)
    const from = Math.min(k, count - k)
    return 4 * from <= count
      ? Math.sin((Math.PI * from) / count)
      : Math.cos((Math.PI * Math.abs(count - 2 * from)) / (2 * count))
  }
  const sin = Float64Array.from({ length: size }, (_, j) => sine(j))
  // cos(πj/N) = −cos(π(N − j)/N), and the other half turn mirrors the first.
  const cos = Float64Array.from({ length: size }, (_, j) => {
    const k = j <= count ? j : size - j
    const mirrored = 2 * k > count ? count - k : k
    return 2 * k === count ? 0 : (mirrored === k ? 1 : -1) * Math.cos((Math.PI * mirrored) / count)
  })
  return { cos, sin }
}

/**
 * Taps of linear phase from samples of the amplitude: A at ω = 2πk/N, k = 0 … ⌊N/2⌋, by the inverse DFT shifted by M; symmetric to the last bit.
 *
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §8.4 (the DFT as samples of the Fourier transform).
 */
export function tapsFromAmplitude(amplitude: ArrayLike<number>, count: number, symmetry: Symmetry): Float64Array {
  const taps = new Float64Array(count)
  const { cos, sin } = halfTurnTable(count)
  const last = Math.floor((count - 1) / 2)
  const half = Math.floor(count / 2)
  for (let n = 0; n < Math.ceil(count / 2); n++) {
    // ω(n − M) = πk(2n − N + 1)/N
    const step = (((2 * n - count + 1) % (2 * count)) + 2 * count) % (2 * count)
    let sum = symmetry === 'even' ? amplitude[0]! : 0
    let at = 0
    for (let k = 1; k <= last; k++) {
      at = (at + step) % (2 * count)
      sum += symmetry === 'even' ? 2 * amplitude[k]! * cos[at]! : -2 * amplitude[k]! * sin[at]!
    }
    if (count % 2 === 0 && symmetry === 'odd') sum -= amplitude[half]! * sin[(half * step) % (2 * count)]!
    taps[n] = sum / count
  }
  return mirrored(taps, symmetry)
}

/** The second half made from the first, in place: symmetric to the last bit. */
export function mirrored(taps: Float64Array, symmetry: Symmetry): Float64Array {
  const last = taps.length - 1
  const sign = symmetry === 'even' ? 1 : -1
  for (let n = 0; n < taps.length - 1 - n; n++) taps[last - n] = sign * taps[n]!
  if (symmetry === 'odd' && taps.length % 2 === 1) taps[last / 2] = 0
  return taps
}
