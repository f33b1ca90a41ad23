import { DesignError } from '../errors'
import type { FirSpec } from '../spec'
import { MOST_TAPS } from '../limits'
import { checkedAttenuation } from './windows'
import { show } from '../check'

/*
 * Every refusal of the statement of an FIR filter: a code, the field, the reason and the nearest value that works.
 */

const LEAST_TAPS = 3
const hertz = (value: number): string => `${show(value)} Hz`

const names: Readonly<Record<FirSpec['response'], string>> = {
  lowpass: 'low-pass',
  highpass: 'high-pass',
  bandpass: 'band-pass',
  bandstop: 'band-stop',
  multiband: 'multiband',
  differentiator: 'differentiator',
}

/** Gains of the bands of a plain response, from low to high. */
const plainGains: Readonly<Partial<Record<FirSpec['response'], readonly number[]>>> = {
  lowpass: [1, 0],
  highpass: [0, 1],
  bandpass: [0, 1, 0],
  bandstop: [1, 0, 1],
}

type Draft = Omit<FirSpec, 'taps'>

function checkBandCount({ response, bands }: Draft): void {
  const wanted = response === 'differentiator' ? 1 : plainGains[response]?.length
  if (wanted !== undefined && bands.length !== wanted) {
    throw new DesignError(
      'band-count',
      'fir.bands',
      `A ${names[response]} filter has ${wanted} ${wanted === 1 ? 'band' : 'bands'}; ${bands.length} ${bands.length === 1 ? 'was' : 'were'} given.`,
      wanted,
    )
  }
  if (response === 'multiband' && bands.length < 2) {
    throw new DesignError('band-count', 'fir.bands', 'A multiband filter has at least 2 bands.', 2)
  }
}

function checkGains({ response, bands, kind }: Draft): void {
  const plain = plainGains[response]
  bands.forEach(({ gain, weight }, index) => {
    const field = `fir.bands.${index}.gain`
    if (!Number.isFinite(gain)) throw new DesignError('gain', field, 'The gain must be a finite number.', 1)
    const wanted = plain?.[index]
    if (wanted !== undefined && gain !== wanted) {
      throw new DesignError(
        'gain',
        field,
        `In a ${names[response]} filter this band has gain ${wanted}; ${show(gain)} was given. A multiband filter takes any.`,
        wanted,
      )
    }
    if (response === 'differentiator' && gain === 0) {
      throw new DesignError('gain', field, 'A differentiator with gain 0 passes nothing.', 1)
    }
    if (weight !== undefined && !(weight > 0 && Number.isFinite(weight))) {
      throw new DesignError('weight', `fir.bands.${index}.weight`, 'The weight must be above 0.', 1)
    }
  })
  if (bands.every(({ gain }) => gain === 0)) {
    throw new DesignError('gain', 'fir.bands.0.gain', 'At least one band must pass something.', 1)
  }
  if (kind === 'equiripple' && bands.length > 1) {
    const weights = bands.map(({ weight = 1 }) => weight)
    const least = Math.min(...weights)
    weights.forEach((weight, index) => {
      if (weight <= MOST_WEIGHT_RATIO * least) return
      throw new DesignError(
        'weights-too-unlike',
        `fir.bands.${index}.weight`,
        `Weights of one filter may differ by a factor of ${show(MOST_WEIGHT_RATIO)} at most.`,
        MOST_WEIGHT_RATIO * least,
      )
    })
  }
}

const MOST_WEIGHT_RATIO = 1e6

function checkEdges({ bands }: Draft, sampleRateHz: number): void {
  const fold = sampleRateHz / 2
  let below = -Infinity
  bands.forEach(({ fromHz, toHz }, index) => {
    const refuse = (part: 'fromHz' | 'toHz', code: string, message: string, nearest: number): never => {
      throw new DesignError(code, `fir.bands.${index}.${part}`, message, nearest)
    }
    if (!(fromHz >= 0 && fromHz < fold)) {
      const nearest = fromHz < 0 ? 0 : Math.min(0.99 * fold, Math.max(0, (Math.max(below, 0) + fold) / 2))
      refuse(
        'fromHz',
        'edge-out-of-range',
        `0 Hz ≤ start of the band < ${hertz(fold)} (half the rate); ${hertz(fromHz)} was given.`,
        nearest,
      )
    }
    if (!(toHz <= fold)) {
      refuse(
        'toHz',
        'edge-above-half-rate',
        `End of the band ≤ ${hertz(fold)} (half the rate); ${hertz(toHz)} was given.`,
        fold,
      )
    }
    if (!(toHz > fromHz)) {
      const nearest = Math.min(fold, fromHz + Math.max(fold / 100, fromHz / 100))
      refuse(
        'toHz',
        'edges-out-of-order',
        `The band must end above its start, ${hertz(fromHz)}; ${hertz(toHz)} was given.`,
        nearest,
      )
    }
    if (index > 0 && !(fromHz - below >= LEAST_ROOM * sampleRateHz)) {
      const nearest = Math.min(below + Math.max(LEAST_ROOM * sampleRateHz * 1.001, 0.05 * (toHz - below)), toHz)
      refuse(
        'fromHz',
        'no-room-between-bands',
        `The band must start above the end of the one before, ${hertz(below)}, with room between them; ${hertz(fromHz)} was given.`,
        nearest,
      )
    }
    below = toHz
  })
}

/** Room between bands, in parts of the rate, that a thousand taps can make something of. */
const LEAST_ROOM = 1e-5

function checkKind({ kind, response, window }: Draft): void {
  if (kind === 'windowed' && window === undefined) {
    throw new DesignError('missing-window', 'fir.window', 'A windowed filter needs a window.', 'kaiser')
  }
  if (window !== undefined && kind !== 'windowed' && kind !== 'half-band') {
    throw new DesignError('window-not-used', 'fir.window', 'Only windowed and half-band filters have a window.')
  }
  if (kind === 'half-band' && response !== 'lowpass') {
    throw new DesignError('response', 'fir.response', 'A half-band filter is a low-pass filter.', 'lowpass')
  }
  if (kind === 'minimum-phase' && (response === 'multiband' || response === 'differentiator')) {
    throw new DesignError(
      'response',
      'fir.response',
      'A minimum-phase filter is a low-pass, high-pass, band-pass or band-stop filter.',
      'lowpass',
    )
  }
}

function checkHalfBandEdges({ bands }: Draft, sampleRateHz: number): void {
  const [pass, stop] = bands
  if (pass === undefined || stop === undefined) return
  const fold = sampleRateHz / 2
  const close = (a: number, b: number): boolean => Math.abs(a - b) <= 1e-9 * sampleRateHz
  if (pass.fromHz !== 0)
    throw new DesignError('half-band-edges', 'fir.bands.0.fromHz', 'A half-band filter passes from 0 Hz.', 0)
  if (!close(stop.toHz, fold)) {
    throw new DesignError(
      'half-band-edges',
      'fir.bands.1.toHz',
      `A half-band filter stops up to half the rate, ${hertz(fold)}.`,
      fold,
    )
  }
  if (pass.toHz >= fold / 2) {
    throw new DesignError(
      'half-band-edges',
      'fir.bands.0.toHz',
      `A half-band filter passes to below a quarter of the rate, ${hertz(fold / 2)}.`,
      0.8 * (fold / 2),
    )
  }
  if (close(pass.toHz + stop.fromHz, fold)) return
  throw new DesignError(
    'half-band-edges',
    'fir.bands.1.fromHz',
    `The edges of a half-band filter lie evenly about a quarter of the rate, ${hertz(fold / 2)}: with ${hertz(pass.toHz)} the stop band starts at ${hertz(fold - pass.toHz)}.`,
    fold - pass.toHz,
  )
}

/** Whether H must not be 0 at half the rate. */
function passesHalfRate({ kind, response, bands }: Draft, sampleRateHz: number): boolean {
  if (response === 'highpass' || response === 'bandstop') return true
  const last = bands.at(-1)
  if (response !== 'multiband' || last === undefined || last.gain === 0) return false
  return kind === 'windowed' || last.toHz > 0.49 * sampleRateHz
}

/** Step between numbers of taps that this filter can have, and the remainder they leave. */
export function tapsGrid(fir: Draft, sampleRateHz: number): { readonly step: number; readonly remainder: number } {
  if (fir.kind === 'half-band') return { step: 4, remainder: 3 }
  if (fir.kind === 'minimum-phase') return { step: 1, remainder: 0 }
  if (passesHalfRate(fir, sampleRateHz)) return { step: 2, remainder: 1 }
  // A differentiator up to half the rate needs an even number, since an odd one forces a zero there.
  const reach = fir.bands.at(-1)?.toHz ?? 0
  if (fir.response === 'differentiator' && reach > 0.49 * sampleRateHz) return { step: 2, remainder: 0 }
  return { step: 1, remainder: 0 }
}

/** Factoring a minimum-phase filter takes time that grows with the cube of its taps. */
const MOST_MINIMUM_PHASE_TAPS = 256

/** The most taps that a filter of this kind can have. */
export const mostTaps = (kind: FirSpec['kind']): number =>
  kind === 'minimum-phase' ? MOST_MINIMUM_PHASE_TAPS : MOST_TAPS

function checkTaps(fir: FirSpec, sampleRateHz: number): void {
  const { taps } = fir
  const { step, remainder } = tapsGrid(fir, sampleRateHz)
  const most = mostTaps(fir.kind)
  const least = fir.kind === 'half-band' ? 7 : LEAST_TAPS
  const fit = (value: number): number => {
    const near = Math.round((value - remainder) / step) * step + remainder
    const low = Math.ceil((least - remainder) / step) * step + remainder
    const high = Math.floor((most - remainder) / step) * step + remainder
    return Math.min(Math.max(near, low), high)
  }
  if (!Number.isInteger(taps) || taps < least || taps > most) {
    throw new DesignError(
      'taps-out-of-range',
      'fir.taps',
      `The number of taps${fir.kind === 'minimum-phase' ? ' of a minimum-phase filter' : ''} is a whole number from ${least} to ${most}; ${taps} was given.`,
      Number.isNaN(taps) ? fit(63) : fit(taps),
    )
  }
  if (taps % step === remainder) return
  if (fir.kind === 'half-band') {
    throw new DesignError(
      'taps-of-half-band',
      'fir.taps',
      `A half-band filter has 4k + 3 taps (7, 11, 15, …), else its end taps are 0; ${taps} was given.`,
      fit(taps),
    )
  }
  if (fir.response === 'differentiator') {
    throw new DesignError(
      'taps-odd',
      'fir.taps',
      'With an odd number of taps a differentiator is 0 at half the rate, which lies in its band; an even number works, and so does a band that ends lower.',
      fit(taps + 1),
    )
  }
  throw new DesignError(
    'taps-even',
    'fir.taps',
    `With an even number of taps every such filter is 0 at half the rate, which a ${names[fir.response]} filter is to pass; an odd number works.`,
    fit(taps + 1),
  )
}

/**
 * Whether a statement, its number of taps left out, makes an FIR filter at this rate.
 *
 * @throws DesignError with field `sampleRateHz`, `fir.response`, `fir.window`, `fir.attenuationDb`, `fir.bands` or one of its parts
 */
export function checkFirBands(fir: Draft, sampleRateHz: number): void {
  if (!(sampleRateHz > 0 && Number.isFinite(sampleRateHz))) {
    throw new DesignError('rate-out-of-range', 'sampleRateHz', 'The sampling rate must be above 0 Hz.', 1000)
  }
  checkKind(fir)
  checkBandCount(fir)
  checkEdges(fir, sampleRateHz)
  checkGains(fir)
  if (fir.kind === 'half-band') checkHalfBandEdges(fir, sampleRateHz)
  if (fir.window === 'kaiser' || fir.window === 'dolph-chebyshev') checkedAttenuation(fir.attenuationDb)
}

/**
 * Whether a statement makes an FIR filter at this rate.
 *
 * @throws DesignError as {@link checkFirBands}, and with field `fir.taps`
 */
export function checkFir(fir: FirSpec, sampleRateHz: number): void {
  checkFirBands(fir, sampleRateHz)
  checkTaps(fir, sampleRateHz)
}
