import type { ChainSpec, ChainStage, DecimateStage } from '@/dsp'

/** Stages and chains that several tests start from. */

export const sensor: Extract<ChainStage, { kind: 'sensor' }> = {
  id: 'acc',
  bypassed: false,
  kind: 'sensor',
  name: 'Accelerometer',
  unit: 'g',
  sensitivity: 0.1,
  resonance: { f0Hz: 35_000, q: 30 },
  highPass: { cornerHz: 0.5, order: 1 },
}

export const flatSensor: typeof sensor = { ...sensor, resonance: null, highPass: null }

export const antiAlias = (order: number, cornerHz: number, id = 'aa'): ChainStage => ({
  id,
  bypassed: false,
  kind: 'analog',
  source: { from: 'here', analog: { family: 'butterworth', response: 'lowpass', order, edgesHz: [cornerHz] } },
})

export const converter = (
  sampleRateHz: number,
  bits = 24,
  order: number | null = null,
): Extract<ChainStage, { kind: 'converter' }> => ({
  id: 'adc',
  bypassed: false,
  kind: 'converter',
  sampleRateHz,
  resolution: { by: 'bits', bits },
  fullScaleVolts: 5,
  averaging: order === null ? null : { order },
})

export const decimate = (id: string, factor: number, filter: DecimateStage['filter']): DecimateStage => ({
  id,
  bypassed: false,
  kind: 'decimate',
  factor,
  filter,
})

export const toVelocity: Extract<ChainStage, { kind: 'shape' }> = {
  id: 'int',
  bypassed: false,
  kind: 'shape',
  filter: { type: 'integrate', times: 1, unit: 'mm/s', highPass: { cornerHz: 1, order: 2 } },
}

export const chainOf = (stages: readonly ChainStage[], parts: Partial<ChainSpec> = {}): ChainSpec => ({
  format: 1,
  stages,
  kept: { fromHz: 10, toHz: 1000 },
  sheet: [],
  interferers: [],
  tolerance: { spread: { of: 'parts', percent: 1 }, channels: 2000, seed: 1 },
  ...parts,
})

/** Six stages: sensor, anti-alias, converter, CIC by 8 with compensation, half-band by 2, velocity. */
export const sixStages: ChainSpec = chainOf([
  sensor,
  antiAlias(4, 12_000),
  converter(51_200),
  decimate('cic', 8, { type: 'cic', order: 4, combDelay: 1, compensation: { taps: 21, passHz: 1200 } }),
  decimate('half', 2, { type: 'half-band', taps: 47, attenuationDb: 90 }),
  toVelocity,
])
