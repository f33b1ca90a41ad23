import { show } from '../check'
import type { Diagnostic, FirFilter } from '../forms/filter'
import type { FirSpec } from '../spec'
import { firBandMagnitudes } from './band-magnitudes'
import { checkFir } from './check'
import { equiripple, symmetryOf } from './equiripple'
import { halfBandTaps } from './half-band'
import { leastSquares } from './least-squares'
import { minimumPhaseTaps } from './minimum-phase'
import { windowedTaps } from './windowed'

const decibels = (factor: number): number => 20 * Math.log10(factor)

/** What each band comes to, and what the number of taps forces. */
function diagnosticsOf(fir: FirSpec, filter: FirFilter): Diagnostic[] {
  const isSlope = fir.response === 'differentiator'
  const found: Diagnostic[] = firBandMagnitudes(filter, fir.bands, isSlope).map(({ least, most }, index) => {
    const { gain } = fir.bands[index]!
    const field = `fir.bands.${index}`
    if (gain === 0) {
      const value = -decibels(most)
      return {
        code: 'stop-band',
        severity: 'note',
        field,
        value,
        message: `This stop band is at least ${value.toFixed(1)} dB down.`,
      }
    }
    const value = Math.max(Math.abs(decibels(least / Math.abs(gain))), Math.abs(decibels(most / Math.abs(gain))))
    const departs = `This band departs from ${isSlope ? 'its slope' : 'its gain'} by ${show(Number(value.toPrecision(3)))} dB at most.`
    return { code: 'pass-band', severity: 'note', field, value, message: departs }
  })
  if (isSlope) {
    const message =
      fir.taps % 2 === 1
        ? 'An odd number of taps delays by whole samples, and forces a zero at half the rate.'
        : 'An even number of taps delays by a whole number of samples and a half, and can reach half the rate.'
    found.push({ code: 'differentiator-taps', severity: 'note', field: 'fir.taps', message })
  }
  if (fir.kind === 'half-band' && fir.bands.some(({ weight = 1 }) => weight !== (fir.bands[0]?.weight ?? 1))) {
    const message = 'A half-band filter has the same ripple in both bands; the weights play no part.'
    found.push({ code: 'weights-not-used', severity: 'note', field: 'fir.bands.0.weight', message })
  }
  return found
}

/** Taps, and what is to be said about how they were found. */
function tapsOf(fir: FirSpec, sampleRateHz: number): { taps: Float64Array; found: readonly Diagnostic[] } {
  switch (fir.kind) {
    case 'windowed':
      return { taps: windowedTaps(fir, sampleRateHz), found: [] }
    case 'equiripple':
      return { taps: equiripple(fir, sampleRateHz).taps, found: [] }
    case 'half-band':
      return { taps: halfBandTaps(fir, sampleRateHz), found: [] }
    case 'minimum-phase':
      return { taps: minimumPhaseTaps(fir, sampleRateHz), found: [] }
    case 'least-squares': {
      const { taps, damping } = leastSquares(fir, sampleRateHz)
      if (damping === 0) return { taps, found: [] }
      const message =
        'With this much room between the bands the equations are singular in double precision; a trace was added to solve them, and the error is the least but for rounding.'
      return { taps, found: [{ code: 'damped', severity: 'note', field: 'fir.taps', value: damping, message }] }
    }
  }
}

/**
 * FIR filter from its statement: bands in, taps out.
 *
 * Linear-phase kinds are symmetric to the last bit (a differentiator antisymmetric: odd taps force zeros at 0 Hz and half the rate, even taps
 * at 0 Hz alone and delay by half a sample more). The diagnostics say what each band comes to on the true response: code `stop-band` or
 * `pass-band`, field `fir.bands.<index>`, value in dB.
 *
 * @param fir kind, response, number of taps, bands in Hz
 * @throws DesignError with field `fir.taps`, `fir.bands.1.fromHz`, `fir.attenuationDb` and so on, and the nearest value that works;
 *   `not-converged` and `not-matched` where double precision doesn't reach
 */
export function designFir(fir: FirSpec, sampleRateHz: number): FirFilter {
  checkFir(fir, sampleRateHz)
  const bare = undescribed(fir, sampleRateHz)
  return { ...bare, diagnostics: [...bare.diagnostics, ...diagnosticsOf(fir, bare)] }
}

/** The filter of a checked statement, without the diagnostics that take its response: for searches. */
export function undescribed(fir: FirSpec, sampleRateHz: number): FirFilter {
  const { taps, found } = tapsOf(fir, sampleRateHz)
  const symmetry = fir.kind === 'minimum-phase' ? 'none' : symmetryOf(fir)
  return { domain: 'z', taps, sampleRateHz, symmetry, diagnostics: found }
}
