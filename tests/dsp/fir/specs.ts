import type { FirBand, FirSpec } from '@/dsp'

/** Half the rate is 1 Hz, so that edges are parts of it. */
export const RATE = 2

export const lowPass = (
  kind: FirSpec['kind'],
  taps: number,
  pass: number,
  stop: number,
  more: Partial<FirSpec> = {},
): FirSpec => ({
  kind,
  response: 'lowpass',
  taps,
  bands: [
    { fromHz: 0, toHz: pass, gain: 1 },
    { fromHz: stop, toHz: 1, gain: 0 },
  ],
  ...more,
})

const kaiser = { window: 'kaiser', attenuationDb: 60 } as const
const edges = (...bands: readonly (readonly [number, number, number])[]): FirBand[] =>
  bands.map(([fromHz, toHz, gain]) => ({ fromHz, toHz, gain }))
const bandPass = edges([0, 0.2, 0], [0.3, 0.5, 1], [0.6, 1, 0])
const bandStop = edges([0, 0.2, 1], [0.3, 0.5, 0], [0.6, 1, 1])
const highPass = edges([0, 0.3, 0], [0.4, 1, 1])

/** One of everything, of even and odd length where both are possible. */
export const everyKind: readonly FirSpec[] = [
  lowPass('windowed', 41, 0.3, 0.4, kaiser),
  lowPass('windowed', 40, 0.3, 0.4, { window: 'hann' }),
  lowPass('windowed', 41, 0.3, 0.4, { window: 'dolph-chebyshev', attenuationDb: 70 }),
  lowPass('equiripple', 41, 0.3, 0.4),
  lowPass('least-squares', 40, 0.3, 0.4),
  lowPass('half-band', 43, 0.4, 0.6),
  lowPass('half-band', 43, 0.4, 0.6, kaiser),
  lowPass('minimum-phase', 31, 0.3, 0.4),
  { kind: 'windowed', ...kaiser, response: 'highpass', taps: 41, bands: highPass },
  { kind: 'equiripple', response: 'highpass', taps: 41, bands: highPass },
  { kind: 'windowed', ...kaiser, response: 'bandpass', taps: 60, bands: bandPass },
  { kind: 'least-squares', response: 'bandpass', taps: 61, bands: bandPass },
  { kind: 'windowed', ...kaiser, response: 'bandstop', taps: 61, bands: bandStop },
  { kind: 'minimum-phase', response: 'bandstop', taps: 40, bands: bandStop },
  { kind: 'equiripple', response: 'multiband', taps: 51, bands: edges([0, 0.2, 1], [0.3, 0.5, -2], [0.6, 1, 0.5]) },
  { kind: 'equiripple', response: 'differentiator', taps: 32, bands: edges([0, 0.8, 1]) },
  { kind: 'windowed', ...kaiser, response: 'differentiator', taps: 31, bands: edges([0, 0.7, 1]) },
  { kind: 'least-squares', response: 'differentiator', taps: 31, bands: edges([0, 0.8, 1]) },
]
