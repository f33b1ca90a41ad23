import type { FirSpec } from '../spec'
import { equiripple } from './equiripple'
import { mirrored } from './linear-phase'
import { firWindow } from './windows'

/**
 * Half-band low-pass of N = 4k + 3 taps: exactly ½ in the middle, exactly 0 at every second tap beside it, so that A(ω) + A(π − ω) = 1 and
 * the gain at a quarter of the rate is ½.
 *
 * Without a window equiripple, by the design of one band: a filter G of even length (N + 1)/2 that is 1 up to twice the pass edge and has its
 * forced zero at half the rate gives H(z) = ½·[z^{−(N−1)/2} + G(z²)], with half the ripple of G. With a window sin(πm/2)/(πm) times that window.
 *
 * @param fir bands symmetric about a quarter of the rate; their weights play no part
 * @throws DesignError `not-converged`
 * Source: P. P. Vaidyanathan & T. Q. Nguyen, A “trick” for the design of FIR half-band filters, IEEE Trans. Circuits Syst. 34(3), 1987.
 */
export function halfBandTaps(fir: FirSpec, sampleRateHz: number): Float64Array {
  const { taps: count, bands } = fir
  const middle = (count - 1) / 2
  const taps = new Float64Array(count)
  if (fir.window === undefined) {
    const oneBand = [{ fromHz: 0, toHz: 2 * (bands[0]?.toHz ?? 0), gain: 1 }]
    const { taps: dense } = equiripple({ response: 'lowpass', taps: (count + 1) / 2, bands: oneBand }, sampleRateHz)
    dense.forEach((tap, k) => (taps[2 * k] = tap / 2))
  } else {
    const window = firWindow(fir.window, count, fir.attenuationDb)
    for (let n = 0; n < count; n += 2) {
      const m = n - middle
      const sign = Math.abs(m) % 4 === 1 ? 1 : -1
      taps[n] = (window[n]! * sign) / (Math.PI * Math.abs(m))
    }
  }
  taps[middle] = 0.5
  return mirrored(taps, 'even')
}
