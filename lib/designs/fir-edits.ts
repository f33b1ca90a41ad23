import {
  isFirDesign,
  mostTaps,
  type DesignSpec,
  type FirBand,
  type FirDesign,
  type FirKind,
  type FirResponse,
  type FirWindow,
} from '@/dsp'
import { commonOf, edgesHzOf, responseOf } from './outline'

/* Edits of the statement of an FIR filter, and how any other design becomes one. */

/** One choice of the statement: a kind, with its window where it has one. */
export interface FirChoice {
  readonly kind: FirKind
  readonly window?: FirWindow
}

export const firChoices: readonly FirChoice[] = [
  { kind: 'windowed', window: 'kaiser' },
  { kind: 'windowed', window: 'hann' },
  { kind: 'windowed', window: 'hamming' },
  { kind: 'windowed', window: 'blackman' },
  { kind: 'windowed', window: 'dolph-chebyshev' },
  { kind: 'equiripple' },
  { kind: 'least-squares' },
  { kind: 'half-band' },
  { kind: 'minimum-phase' },
]

const USUAL_TAPS = 63
const USUAL_ATTENUATION_DB = 60
/** Room between a pass edge and the stop edge beside it, as a factor. */
const USUAL_ROOM = 1.5

/** Any design as an FIR filter of a kind: response and edges stay as far as it can have them. */
export function withFir(spec: DesignSpec, choice: FirChoice): FirDesign {
  const { kind, window } = choice
  if (isFirDesign(spec)) {
    const { fir } = spec
    const isAllowed = kindAllows(kind, fir.response)
    const bands = kind === 'half-band' ? halfBands(spec) : isAllowed ? fir.bands : lowpassBands(spec)
    return {
      ...spec,
      fir: {
        kind,
        response: isAllowed ? fir.response : 'lowpass',
        taps: kind === 'half-band' ? halfBandTaps(fir.taps) : Math.min(fir.taps, mostTaps(kind)),
        bands: weighted(bands, kind),
        ...windowParts(window, fir.attenuationDb),
      },
    }
  }
  const bands = kind === 'half-band' ? halfBands(spec) : bandsLike(spec)
  return {
    ...commonOf(spec),
    fir: {
      kind,
      response: kind === 'half-band' ? 'lowpass' : firResponseLike(spec),
      taps: USUAL_TAPS,
      bands: weighted(bands, kind),
      ...windowParts(window, undefined),
    },
  }
}

/** The nearest number that a half-band filter can have: 4k + 3. */
const halfBandTaps = (taps: number): number => Math.max(7, 4 * Math.round((taps - 3) / 4) + 3)

/** Half-band and minimum-phase filters come in the plain responses alone. */
function kindAllows(kind: FirKind, response: FirResponse): boolean {
  if (kind === 'half-band') return response === 'lowpass'
  return kind !== 'minimum-phase' || (response !== 'multiband' && response !== 'differentiator')
}

function windowParts(window: FirWindow | undefined, attenuationDb: number | undefined) {
  if (window === undefined) return {}
  const shaped = window === 'kaiser' || window === 'dolph-chebyshev'
  return { window, ...(shaped ? { attenuationDb: attenuationDb ?? USUAL_ATTENUATION_DB } : {}) }
}

/** Weights belong to the kinds that weigh errors. */
function weighted(bands: readonly FirBand[], kind: FirKind): readonly FirBand[] {
  if (kind === 'windowed' || kind === 'half-band')
    return bands.map(({ fromHz, toHz, gain }) => ({ fromHz, toHz, gain }))
  return bands.map((band) => ({ ...band, weight: band.weight ?? 1 }))
}

function firResponseLike(spec: DesignSpec): FirResponse {
  const response = responseOf(spec)
  return response === 'own' ? 'lowpass' : response
}

function bandsLike(spec: DesignSpec): readonly FirBand[] {
  const fold = spec.sampleRateHz / 2
  const edges = edgesHzOf(spec)
  const low = edges[0] ?? fold / 5
  const high = edges.at(-1) ?? low
  const pass = (fromHz: number, toHz: number): FirBand => ({ fromHz, toHz, gain: 1 })
  const stop = (fromHz: number, toHz: number): FirBand => ({ fromHz, toHz, gain: 0 })
  switch (responseOf(spec)) {
    case 'highpass':
      return [stop(0, tidy(low / USUAL_ROOM)), pass(low, fold)]
    case 'bandpass':
      return [stop(0, tidy(low / USUAL_ROOM)), pass(low, high), stop(beyond(high, fold), fold)]
    case 'bandstop':
      return [pass(0, low), stop(tidy(low + (high - low) / 4), tidy(high - (high - low) / 4)), pass(high, fold)]
    default:
      return lowpassBands(spec)
  }
}

function lowpassBands(spec: DesignSpec): readonly FirBand[] {
  const fold = spec.sampleRateHz / 2
  const edge = Math.min(edgesHzOf(spec)[0] ?? fold / 5, 0.9 * fold)
  return [
    { fromHz: 0, toHz: edge, gain: 1 },
    { fromHz: beyond(edge, fold), toHz: fold, gain: 0 },
  ]
}

/** Symmetric about a quarter of the rate. */
function halfBands(spec: DesignSpec): readonly FirBand[] {
  const fold = spec.sampleRateHz / 2
  const edge = Math.min(edgesHzOf(spec)[0] ?? 0.4 * fold, 0.45 * fold)
  return [
    { fromHz: 0, toHz: edge, gain: 1 },
    { fromHz: fold - edge, toHz: fold, gain: 0 },
  ]
}

const beyond = (edge: number, fold: number): number => tidy(Math.min(edge * USUAL_ROOM, (edge + fold) / 2))
const tidy = (hertz: number): number => Number(hertz.toPrecision(4))

export function withFirResponse(spec: FirDesign, response: FirResponse): FirDesign {
  if (response === spec.fir.response) return spec
  const fold = spec.sampleRateHz / 2
  const quarter = tidy(fold / 4)
  const bands: Record<FirResponse, readonly FirBand[]> = {
    lowpass: lowpassBands(spec),
    highpass: [
      { fromHz: 0, toHz: quarter, gain: 0 },
      { fromHz: beyond(quarter, fold), toHz: fold, gain: 1 },
    ],
    bandpass: [
      { fromHz: 0, toHz: tidy(fold / 8), gain: 0 },
      { fromHz: tidy(fold / 5), toHz: tidy(fold / 2), gain: 1 },
      { fromHz: tidy(fold * 0.6), toHz: fold, gain: 0 },
    ],
    bandstop: [
      { fromHz: 0, toHz: tidy(fold / 8), gain: 1 },
      { fromHz: tidy(fold / 5), toHz: tidy(fold / 2), gain: 0 },
      { fromHz: tidy(fold * 0.6), toHz: fold, gain: 1 },
    ],
    multiband: [
      { fromHz: 0, toHz: tidy(fold / 8), gain: 1 },
      { fromHz: tidy(fold / 5), toHz: tidy(fold / 2), gain: 0 },
      { fromHz: tidy(fold * 0.6), toHz: fold, gain: 0.5 },
    ],
    differentiator: [{ fromHz: 0, toHz: tidy(fold * 0.8), gain: 1 }],
  }
  const kind = kindAllows(spec.fir.kind, response) ? spec.fir.kind : 'equiripple'
  // Whatever passes at half the rate needs an odd number of taps, which does for all of these.
  const taps = spec.fir.taps % 2 === 1 ? spec.fir.taps : spec.fir.taps + 1
  const { window, attenuationDb, ...rest } = spec.fir
  const kept = kind === spec.fir.kind ? windowParts(window, attenuationDb) : {}
  return { ...spec, fir: { ...rest, kind, response, taps, bands: weighted(bands[response], kind), ...kept } }
}

type BandPart = 'fromHz' | 'toHz' | 'gain' | 'weight'

/** One number of one band; a half-band filter's other edge moves along, as it must. */
export function withBand(spec: FirDesign, index: number, part: BandPart, value: number): FirDesign {
  const fold = spec.sampleRateHz / 2
  const mirrored = spec.fir.kind === 'half-band' && (part === 'fromHz' || part === 'toHz')
  const bands = spec.fir.bands.map((band, at) => {
    if (at === index) return { ...band, [part]: value }
    if (!mirrored) return band
    return part === 'toHz' ? { ...band, fromHz: fold - value } : { ...band, toHz: fold - value }
  })
  return { ...spec, fir: { ...spec.fir, bands } }
}

/** The bands at another rate: what reached up to half the old one reaches up to half the new one, and half-band edges stay mirrored. */
export function firRescaled({ fir, sampleRateHz: before }: FirDesign, sampleRateHz: number): FirDesign['fir'] {
  const scale = fir.kind === 'half-band' ? sampleRateHz / before : 1
  const bands = fir.bands.map((band) => ({
    ...band,
    fromHz: band.fromHz * scale,
    toHz: band.toHz === before / 2 ? sampleRateHz / 2 : band.toHz * scale,
  }))
  return { ...fir, bands }
}
