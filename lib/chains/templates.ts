import type { ChainSpec } from '@/dsp'
import type { ChainTemplate } from './schemas'
import { startingChain } from './stage-starts'

/** Many samples a second from a converter that averages, brought down by a CIC filter, whose droop is lifted, and by halves. */
const averagingChain: ChainSpec = {
  format: 1,
  stages: [
    {
      id: 's1',
      bypassed: false,
      kind: 'sensor',
      name: 'accelerometer',
      unit: 'g',
      sensitivity: 0.1,
      resonance: { f0Hz: 25_000, q: 20 },
      highPass: { cornerHz: 0.5, order: 1 },
    },
    {
      id: 's2',
      bypassed: false,
      kind: 'converter',
      sampleRateHz: 102_400,
      resolution: { by: 'noise', voltsPerRootHz: 2e-7 },
      fullScaleVolts: 2.5,
      averaging: { order: 3 },
    },
    {
      id: 's3',
      bypassed: false,
      kind: 'decimate',
      factor: 10,
      filter: { type: 'cic', order: 5, combDelay: 1, compensation: { taps: 15, passHz: 1000 } },
    },
    {
      id: 's4',
      bypassed: false,
      kind: 'decimate',
      factor: 2,
      filter: { type: 'half-band', taps: 23, attenuationDb: 90 },
    },
    {
      id: 's5',
      bypassed: false,
      kind: 'decimate',
      factor: 2,
      filter: { type: 'half-band', taps: 59, attenuationDb: 90 },
    },
  ],
  kept: { fromHz: 10, toHz: 1000 },
  sheet: [
    { kind: 'usable-band', toHz: 1000, rippleDb: 0.2, aliasDb: 80 },
    { kind: 'effective-bits', atLeast: 16 },
  ],
  interferers: [],
  tolerance: { spread: { of: 'parts', percent: 1 }, channels: 2000, seed: 7 },
}

/** A sensor and a converter: what no chain can do without. */
const emptyChain: ChainSpec = {
  ...startingChain,
  stages: startingChain.stages.filter(({ kind }) => kind === 'sensor' || kind === 'converter'),
  sheet: [],
}

/** What a new chain can begin with. */
export const startingChains: Readonly<Record<ChainTemplate, ChainSpec>> = {
  plain: startingChain,
  averaging: averagingChain,
  empty: emptyChain,
}

export const templateWords: Readonly<Record<ChainTemplate, string>> = {
  plain: 'Accelerometer, anti-alias filter, two decimations',
  averaging: 'Averaging converter at a high rate, CIC and half-bands',
  empty: 'Sensor and converter alone',
}
