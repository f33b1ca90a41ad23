import { computeChain, type ChainSpec, type ComputedChain } from '@/dsp'

/** A deck accelerometer: Butterworth 4 at 160 Hz, 16 bits at 2 kHz, down by 4 and by 2, kept to 90 Hz. */
export const deckSpec: ChainSpec = {
  format: 1,
  stages: [
    {
      id: 'sensor',
      kind: 'sensor',
      bypassed: false,
      name: 'accelerometer',
      unit: 'g',
      sensitivity: 1,
      resonance: { f0Hz: 9200, q: 30 },
      highPass: { cornerHz: 0.1, order: 1 },
    },
    {
      id: 'antialias',
      kind: 'analog',
      bypassed: false,
      source: {
        from: 'here',
        analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [160] },
      },
    },
    {
      id: 'adc',
      kind: 'converter',
      bypassed: false,
      sampleRateHz: 2000,
      resolution: { by: 'bits', bits: 16 },
      fullScaleVolts: 5,
      averaging: null,
    },
    {
      id: 'down4',
      kind: 'decimate',
      bypassed: false,
      factor: 4,
      filter: { type: 'kaiser', taps: 31, passHz: 100, stopHz: 375, attenuationDb: 90 },
    },
    {
      id: 'down2',
      kind: 'decimate',
      bypassed: false,
      factor: 2,
      filter: { type: 'kaiser', taps: 47, passHz: 90, stopHz: 160, attenuationDb: 80 },
    },
  ],
  kept: { fromHz: 0.5, toHz: 90 },
  sheet: [
    { kind: 'alias-floor', toHz: 90, atLeastDb: 80 },
    { kind: 'channel-match', toHz: 50, withinDegrees: 0.5, withinDb: 0.05 },
    { kind: 'delay', atHz: 5, atMostSeconds: 0.08 },
  ],
  interferers: [],
  tolerance: { spread: { of: 'parts', percent: 1 }, channels: 200, seed: 7 },
}

export const deckChain: ComputedChain = computeChain(deckSpec)
