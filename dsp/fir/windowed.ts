import type { FirBand, FirSpec } from '../spec'
import { mirrored } from './linear-phase'
import { firWindow } from './windows'

/** A step of the ideal response: from one gain to the next in the middle of the room between two bands. */
interface Cut {
  readonly turns: number
  readonly step: number
}

function cutsOf(bands: readonly FirBand[], sampleRateHz: number): Cut[] {
  return bands.flatMap((band, index) => {
    const next = bands[index + 1]
    if (next === undefined) return []
    return [{ turns: (band.toHz + next.fromHz) / 2 / sampleRateHz, step: band.gain - next.gain }]
  })
}

/** h(m) of the ideal bands: each step from one gain to another at f_c adds step·sin(2πf_c·m)/(πm). */
function idealBands(cuts: readonly Cut[], lastGain: number, m: number): number {
  if (m === 0) return cuts.reduce((sum, { turns, step }) => sum + 2 * step * turns, lastGain)
  const sum = cuts.reduce((total, { turns, step }) => total + step * Math.sin(2 * Math.PI * turns * m), 0)
  // What remains is the last gain up to half the rate: sin(πm)/(πm), which is 0 for whole m.
  return (sum + lastGain * (Number.isInteger(m) ? 0 : Math.sin(Math.PI * m))) / (Math.PI * m)
}

/** h(m) of jω up to half the rate: cos(πm)/m − sin(πm)/(πm²). */
function idealDifferentiator(m: number): number {
  if (m === 0) return 0
  if (Number.isInteger(m)) return (m % 2 === 0 ? 1 : -1) / m
  return -Math.sin(Math.PI * m) / (Math.PI * m * m)
}

/** Where a plain response is to be exactly 1, in turns; null for the others. */
function unityAt({ response, bands }: FirSpec, sampleRateHz: number): number | null {
  const pass = bands.find(({ gain }) => gain !== 0)
  switch (response) {
    case 'lowpass':
    case 'bandstop':
      return 0
    case 'highpass':
      return 0.5
    case 'bandpass':
      return pass === undefined ? null : (pass.fromHz + pass.toHz) / 2 / sampleRateHz
    default:
      return null
  }
}

function amplitudeOf(taps: Float64Array, turns: number): number {
  const middle = (taps.length - 1) / 2
  return taps.reduce((sum, tap, n) => sum + tap * Math.cos(2 * Math.PI * turns * (n - middle)), 0)
}

/**
 * The windowed method: the impulse response of the ideal bands, times a window. The ideal steps in the middle of the room between two bands; its
 * first band reaches down to 0 Hz and its last up to half the rate. A plain response is scaled to exactly 1 at 0 Hz (low-pass, band-stop), at
 * the middle of its band (band-pass) or at half the rate (high-pass). A differentiator is cut at half the rate, the middle of the room between
 * its band and the image of it.
 *
 * @returns N taps, symmetric (of a differentiator: antisymmetric) to the last bit
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §7.5; differentiator: §7.5.3 (numbering from memory).
 */
export function windowedTaps(fir: FirSpec, sampleRateHz: number): Float64Array {
  const { taps: count, bands, response } = fir
  const window = firWindow(fir.window ?? 'kaiser', count, fir.attenuationDb)
  const middle = (count - 1) / 2
  if (response === 'differentiator') {
    const factor = (bands[0]?.gain ?? 1) * sampleRateHz
    return mirrored(
      window.map((value, n) => value * factor * idealDifferentiator(n - middle)),
      'odd',
    )
  }
  const cuts = cutsOf(bands, sampleRateHz)
  const lastGain = bands.at(-1)?.gain ?? 0
  const taps = mirrored(
    window.map((value, n) => value * idealBands(cuts, lastGain, n - middle)),
    'even',
  )
  const turns = unityAt(fir, sampleRateHz)
  if (turns === null) return taps
  const gain = amplitudeOf(taps, turns)
  // A window wider than the band leaves too little there to scale by.
  return Math.abs(gain) > 0.5 ? taps.map((tap) => tap / gain) : taps
}
