import type { ChainSpec, ChainStage, ConverterStage, DesignLink, SensorStage } from '@/dsp'

/*
 * The demo's chains: what it takes that the samples can be trusted, and how it fails. One meets its sheet; one was shortened in a place that
 * its fold chart shows; one runs a fast averaging converter down and integrates.
 */

/** The link to a version of a design of the same project, by its title. */
export type LinkTo = (title: string, version: number) => DesignLink

export interface SeedChainVersion {
  readonly spec: (linkTo: LinkTo) => ChainSpec
  readonly note: string
  readonly by: 'owner' | 'designer'
  readonly daysAgo: number
}

export interface SeedChain {
  readonly title: string
  readonly versions: readonly SeedChainVersion[]
}

const stage = { bypassed: false } as const

const accelerometer = (sensitivity: number, resonance: SensorStage['resonance'], highPassHz: number): SensorStage => ({
  ...stage,
  id: 'acc',
  kind: 'sensor',
  name: 'accelerometer',
  unit: 'g',
  sensitivity,
  resonance,
  highPass: { cornerHz: highPassHz, order: 1 },
})

const sixteenBits = (sampleRateHz: number): ConverterStage => ({
  ...stage,
  id: 'adc',
  kind: 'converter',
  sampleRateHz,
  resolution: { by: 'bits', bits: 16 },
  fullScaleVolts: 5,
  averaging: null,
})

const kaiser = (
  id: string,
  factor: number,
  taps: number,
  passHz: number,
  stopHz: number,
  attenuationDb: number,
): ChainStage => ({
  ...stage,
  id,
  kind: 'decimate',
  factor,
  filter: { type: 'kaiser', taps, passHz, stopHz, attenuationDb },
})

const halfBand = (id: string, taps: number, attenuationDb: number): ChainStage => ({
  ...stage,
  id,
  kind: 'decimate',
  factor: 2,
  filter: { type: 'half-band', taps, attenuationDb },
})

const deck =
  (antiAlias: (linkTo: LinkTo) => ChainStage, sheet: ChainSpec['sheet']) =>
  (linkTo: LinkTo): ChainSpec => ({
    format: 1,
    stages: [
      accelerometer(1, { f0Hz: 2500, q: 12 }, 0.05),
      antiAlias(linkTo),
      sixteenBits(2000),
      kaiser('down4', 4, 35, 90, 410, 85),
      kaiser('down2', 2, 41, 90, 160, 85),
    ],
    kept: { fromHz: 0.5, toHz: 90 },
    sheet,
    interferers: [
      { kind: 'tone', name: 'hanger rattle', hz: 250, level: 0.2 },
      { kind: 'tone', name: 'generator, third harmonic', hz: 150, level: 0.05 },
      { kind: 'band', name: 'traffic on the deck joint', fromHz: 300, toHz: 800, level: 0.1 },
    ],
    tolerance: { spread: { of: 'parts', percent: 1 }, channels: 2000, seed: 20_161 },
  })

const deckLogger: SeedChain = {
  title: 'Deck logger, accelerometer to stored sample',
  versions: [
    {
      spec: deck(
        () => ({
          ...stage,
          id: 'aa',
          kind: 'analog',
          source: { from: 'here', analog: { family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [120] } },
        }),
        [
          { kind: 'alias-floor', toHz: 90, atLeastDb: 80 },
          { kind: 'effective-bits', atLeast: 16 },
        ],
      ),
      note: 'Order 2 ahead of 2 kHz, as the old loggers had it. What folds at the converter is 39 dB down at 90 Hz.',
      by: 'designer',
      daysAgo: 26,
    },
    {
      spec: deck(
        (linkTo) => ({
          ...stage,
          id: 'aa',
          kind: 'analog',
          source: { from: 'design', link: linkTo('Deck accelerometer, logger low-pass', 3) },
        }),
        [
          { kind: 'alias-floor', toHz: 90, atLeastDb: 80 },
          { kind: 'flatness', fromHz: 0.5, toHz: 80, withinDb: 0.3 },
          { kind: 'phase', fromHz: 1, toHz: 60, withinDegrees: 5 },
          { kind: 'delay', atHz: 10, atMostSeconds: 0.06 },
          { kind: 'channel-match', toHz: 60, withinDegrees: 2, withinDb: 0.2 },
          { kind: 'effective-bits', atLeast: 16 },
        ],
      ),
      note: 'The anti-alias filter is the order 4 of our own drawing now. Nothing that folds comes within 80 dB.',
      by: 'owner',
      daysAgo: 11,
    },
  ],
}

const pump =
  (second: ChainStage) =>
  (linkTo: LinkTo): ChainSpec => ({
    format: 1,
    stages: [
      accelerometer(0.1, { f0Hz: 25_000, q: 20 }, 0.5),
      {
        ...stage,
        id: 'aa',
        kind: 'analog',
        source: { from: 'here', analog: { family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [3000] } },
      },
      sixteenBits(20_480),
      {
        ...stage,
        id: 'down4',
        kind: 'decimate',
        factor: 4,
        filter: { type: 'design', link: linkTo('Ahead of the decimation by four', 4) },
      },
      second,
    ],
    kept: { fromHz: 10, toHz: 1000 },
    sheet: [
      { kind: 'alias-floor', toHz: 1000, atLeastDb: 80 },
      { kind: 'flatness', fromHz: 10, toHz: 1000, withinDb: 0.2 },
      { kind: 'delay', atHz: 100, atMostSeconds: 0.02 },
      { kind: 'effective-bits', atLeast: 16 },
    ],
    interferers: [
      { kind: 'tone', name: 'blade pass, 36th harmonic', hz: 1584, level: 0.6 },
      { kind: 'tone', name: 'drive, switching frequency', hz: 4000, level: 0.3 },
      { kind: 'band', name: 'cavitation', fromHz: 1300, toHz: 2500, level: 0.4 },
    ],
    tolerance: { spread: { of: 'parts', percent: 2 }, channels: 2000, seed: 7 },
  })

const pumpCasing: SeedChain = {
  title: 'Pump casing, rate down by four and by two',
  versions: [
    {
      spec: pump(kaiser('down2', 2, 51, 1000, 1560, 85)),
      note: 'Down by four with the filter of our drawing, then by two: 51 taps, and nothing that folds comes within 84 dB.',
      by: 'designer',
      daysAgo: 13,
    },
    {
      spec: pump(kaiser('down2', 2, 27, 1000, 1560, 48)),
      note: 'Half the taps in the second decimation, since the pass band stays as flat. To be looked at again: the fold chart.',
      by: 'designer',
      daysAgo: 4,
    },
  ],
}

const velocity = (behindCic: readonly ChainStage[]) => (): ChainSpec => ({
  format: 1,
  stages: [
    accelerometer(0.1, { f0Hz: 30_000, q: 15 }, 0.5),
    {
      ...stage,
      id: 'adc',
      kind: 'converter',
      sampleRateHz: 102_400,
      resolution: { by: 'noise', voltsPerRootHz: 2e-7 },
      fullScaleVolts: 2.5,
      averaging: { order: 3 },
    },
    {
      ...stage,
      id: 'cic',
      kind: 'decimate',
      factor: 10,
      filter: { type: 'cic', order: 5, combDelay: 1, compensation: { taps: 15, passHz: 1000 } },
    },
    ...behindCic,
  ],
  kept: { fromHz: 10, toHz: 1000 },
  sheet: [
    { kind: 'usable-band', toHz: 1000, rippleDb: 0.5, aliasDb: 75 },
    { kind: 'alias-floor', toHz: 1000, atLeastDb: 80 },
    { kind: 'phase', fromHz: 50, toHz: 1000, withinDegrees: 5 },
    { kind: 'effective-bits', atLeast: 16 },
  ],
  interferers: [
    { kind: 'tone', name: 'drive, switching frequency', hz: 9600, level: 1 },
    { kind: 'band', name: 'bearing noise', fromHz: 3000, toHz: 8000, level: 0.5 },
  ],
  tolerance: { spread: { of: 'sections', f0Percent: 2, qPercent: 5 }, channels: 2000, seed: 7 },
})

const integration: ChainStage = {
  ...stage,
  id: 'vel',
  kind: 'shape',
  filter: { type: 'integrate', times: 1, unit: 'mm/s', highPass: { cornerHz: 2, order: 2 } },
}

const casingVelocity: SeedChain = {
  title: 'Casing velocity from a fast averaging converter',
  versions: [
    {
      spec: velocity([halfBand('half1', 23, 90), halfBand('half2', 59, 90), integration]),
      note: 'Integrated last, at 2.56 kHz. The trapezoidal rule takes 7 dB off at 1 kHz there.',
      by: 'designer',
      daysAgo: 8,
    },
    {
      spec: velocity([integration, halfBand('half1', 23, 90), halfBand('half2', 59, 90)]),
      note: 'Integrated right behind the CIC filter, at 10.24 kHz: 0.3 dB at 1 kHz, for four times the work of one small stage.',
      by: 'owner',
      daysAgo: 3,
    },
  ],
}

export const seedChains: Readonly<Record<string, readonly SeedChain[]>> = {
  HMF: [deckLogger],
  SPH: [pumpCasing, casingVelocity],
}
