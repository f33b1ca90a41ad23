import { show } from '../check'
import { DesignError } from '../errors'
import type { ResponseKind } from '../spec'

/** What a filter must do: lose at most rippleDb up to the pass edge(s), at least attenuationDb from the stop edge(s) on. */
export interface OrderRequirement {
  /** One edge in Hz, or [low, high]. */
  readonly passHz: number | readonly [number, number]
  /** One edge in Hz, or [low, high]; outside the pass edges for a band-pass, inside them for a band-stop. */
  readonly stopHz: number | readonly [number, number]
  readonly rippleDb: number
  readonly attenuationDb: number
  /** With it the filter is digital, by the bilinear transform with its edges held. */
  readonly sampleRateHz?: number
}

/** The requirement with its response told from the edges. */
export interface CheckedRequirement {
  readonly response: ResponseKind
  readonly pass: readonly number[]
  readonly stop: readonly number[]
  readonly rippleDb: number
  readonly attenuationDb: number
  readonly sampleRateHz?: number
}

const refuse = (code: string, field: string, message: string, nearest?: number) =>
  new DesignError(code, field, message, nearest)

const listOf = (edges: number | readonly [number, number]): readonly number[] =>
  typeof edges === 'number' ? [edges] : edges

function checkEach(field: string, edges: number | readonly [number, number], sampleRateHz: number | undefined): void {
  listOf(edges).forEach((edge, index) => {
    const path = typeof edges === 'number' ? field : `${field}.${index}`
    if (!(edge >= 1e-6 && edge <= 1e9)) {
      const nearest = Number.isNaN(edge) ? 100 : Math.min(Math.max(edge, 1e-6), 1e9)
      throw refuse(
        'edge-out-of-range',
        path,
        `0.000001 Hz ≤ edge ≤ 1000000000 Hz; ${show(edge)} Hz was given.`,
        nearest,
      )
    }
    if (sampleRateHz !== undefined && edge >= sampleRateHz / 2) {
      throw refuse(
        'edge-above-half-rate',
        path,
        `0 < edge < ${show(sampleRateHz / 2)} Hz (half the rate); ${show(edge)} Hz was given.`,
        sampleRateHz * 0.4995,
      )
    }
  })
}

function responseOf(pass: readonly number[], stop: readonly number[]): ResponseKind {
  const [passLow = 0, passHigh] = pass
  const [stopLow = 0, stopHigh] = stop
  if (pass.length !== stop.length) {
    throw refuse('edge-count', 'stopHz', 'Give one pass edge and one stop edge, or two of each for a band.')
  }
  if (passHigh === undefined || stopHigh === undefined) {
    if (passLow === stopLow) {
      throw refuse(
        'edges-equal',
        'stopHz',
        `Pass edge and stop edge are both ${show(passLow)} Hz; a filter needs room in between.`,
        2 * passLow,
      )
    }
    return passLow < stopLow ? 'lowpass' : 'highpass'
  }
  if (passLow >= passHigh)
    throw refuse('edges-out-of-order', 'passHz.1', 'The high pass edge must lie above the low one.', 2 * passLow)
  if (stopLow >= stopHigh)
    throw refuse('edges-out-of-order', 'stopHz.1', 'The high stop edge must lie above the low one.', 2 * stopLow)
  if (stopLow < passLow && passHigh < stopHigh) return 'bandpass'
  if (passLow < stopLow && stopHigh < passHigh) return 'bandstop'
  throw refuse(
    'edges-not-nested',
    'stopHz',
    'For a band-pass both stop edges lie outside the pass band, for a band-stop both lie inside the pass edges.',
  )
}

/** Checks a requirement and tells its response. Throws DesignError with the field to blame. */
export function checkRequirement(requirement: OrderRequirement): CheckedRequirement {
  const { passHz, stopHz, rippleDb, attenuationDb, sampleRateHz } = requirement
  if (sampleRateHz !== undefined && !(sampleRateHz > 0 && Number.isFinite(sampleRateHz))) {
    throw refuse(
      'rate-out-of-range',
      'sampleRateHz',
      `The sampling rate is a positive frequency; ${show(sampleRateHz)} Hz was given.`,
      1000,
    )
  }
  checkEach('passHz', passHz, sampleRateHz)
  checkEach('stopHz', stopHz, sampleRateHz)
  if (!(rippleDb >= 1e-6 && rippleDb <= 60)) {
    const nearest = Number.isNaN(rippleDb) ? 0.5 : Math.min(Math.max(rippleDb, 1e-6), 60)
    throw refuse(
      'ripple-out-of-range',
      'rippleDb',
      `0.000001 dB ≤ ripple ≤ 60 dB; ${show(rippleDb)} dB was given.`,
      nearest,
    )
  }
  if (!(attenuationDb > rippleDb && attenuationDb <= 300)) {
    throw refuse(
      attenuationDb <= rippleDb ? 'attenuation-below-ripple' : 'attenuation-out-of-range',
      'attenuationDb',
      `ripple (${show(rippleDb)} dB) < attenuation ≤ 300 dB; ${show(attenuationDb)} dB was given.`,
      attenuationDb > 300 ? 300 : rippleDb + 1,
    )
  }
  const pass = listOf(passHz)
  const stop = listOf(stopHz)
  const checked = { response: responseOf(pass, stop), pass, stop, rippleDb, attenuationDb }
  return sampleRateHz === undefined ? checked : { ...checked, sampleRateHz }
}
