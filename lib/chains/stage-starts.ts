import {
  chainUnits,
  integralOf,
  kaiserOrder,
  MOST_STAGE_TAPS,
  type ChainSpec,
  type ChainStage,
  type ChainStageKind,
  type ChainUnit,
  type DecimateStage,
  type ShapeStage,
} from '@/dsp'
import { converterOf, outputRateOf, ratesOf, unitAfter } from './outline'

/* The values that a new chain, a new stage and a stage of another kind begin with. */

export type DecimateFilter = DecimateStage['filter']
export type DecimateFilterType = DecimateFilter['type']
export type ShapeFilter = ShapeStage['filter']

const USUAL_ATTENUATION_DB = 80

/** What a chain begins with: an accelerometer, a filter of order 4, a converter of 16 bits, and eightfold decimation. */
export const startingChain: ChainSpec = {
  format: 1,
  stages: [
    {
      id: 's1',
      bypassed: false,
      kind: 'sensor',
      name: 'accelerometer',
      unit: 'g',
      sensitivity: 1,
      resonance: null,
      highPass: { cornerHz: 0.1, order: 1 },
    },
    {
      id: 's2',
      bypassed: false,
      kind: 'analog',
      source: { from: 'here', analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [160] } },
    },
    {
      id: 's3',
      bypassed: false,
      kind: 'converter',
      sampleRateHz: 2000,
      resolution: { by: 'bits', bits: 16 },
      fullScaleVolts: 5,
      averaging: null,
    },
    {
      id: 's4',
      bypassed: false,
      kind: 'decimate',
      factor: 4,
      filter: { type: 'kaiser', taps: 34, passHz: 90, stopHz: 410, attenuationDb: USUAL_ATTENUATION_DB },
    },
    {
      id: 's5',
      bypassed: false,
      kind: 'decimate',
      factor: 2,
      filter: { type: 'kaiser', taps: 37, passHz: 90, stopHz: 160, attenuationDb: USUAL_ATTENUATION_DB },
    },
  ],
  kept: { fromHz: 0.5, toHz: 90 },
  sheet: [
    { kind: 'alias-floor', toHz: 90, atLeastDb: 80 },
    { kind: 'flatness', fromHz: 0.5, toHz: 60, withinDb: 0.5 },
  ],
  interferers: [],
  tolerance: { spread: { of: 'parts', percent: 1 }, channels: 2000, seed: 7 },
}

/** A name that no stage of the chain has. */
export function freshStageId({ stages }: Pick<ChainSpec, 'stages'>): string {
  const taken = new Set(stages.map(({ id }) => id))
  for (let number = 1; ; number += 1) if (!taken.has(`s${number}`)) return `s${number}`
}

/** Where the pass and the stop band of a decimating filter belong: everything kept passes, everything that would fold onto it stops. */
export function usualEdges(toHz: number, inRateHz: number, factor: number) {
  const outRateHz = inRateHz / factor
  // A kept band that reaches beyond half the output rate makes no chain; the filter still gets a room to fall in.
  const passHz = toHz < 0.49 * outRateHz ? toHz : 0.4 * outRateHz
  return { passHz: rounded(passHz), stopHz: rounded(Math.min(outRateHz - passHz, inRateHz / 2)) }
}

const rounded = (hz: number): number => Number(hz.toPrecision(6))
const most = (taps: number): number => Math.min(Math.max(taps, 3), MOST_STAGE_TAPS)
/** Lengths of half-band filters: 3, 7, 11 … every other tap of the others would be nothing at both ends. */
const halfBandLength = (taps: number): number => 4 * Math.ceil((most(taps) - 3) / 4) + 3

/** Taps that Kaiser's estimate asks for. */
export function usualTaps(attenuationDb: number, passHz: number, stopHz: number, inRateHz: number): number {
  return most(Math.ceil(kaiserOrder(attenuationDb, stopHz - passHz, inRateHz)) + 1)
}

/** A decimating filter of a type, as the kept band and the rates ask for it. */
export function usualFilter(
  type: Exclude<DecimateFilterType, 'design'>,
  { toHz, inRateHz, factor }: { readonly toHz: number; readonly inRateHz: number; readonly factor: number },
): DecimateFilter {
  const { passHz, stopHz } = usualEdges(toHz, inRateHz, factor)
  const attenuationDb = USUAL_ATTENUATION_DB
  const taps = usualTaps(attenuationDb, passHz, stopHz, inRateHz)
  switch (type) {
    case 'half-band':
      return { type, taps: Math.min(halfBandLength(taps), MOST_STAGE_TAPS - 1), attenuationDb }
    case 'kaiser':
      return { type, taps, passHz, stopHz, attenuationDb }
    case 'equiripple':
      // Shorter by a tenth than a window asks for, and the stop band counted more: most of what matters is what folds.
      return { type, taps: most(Math.ceil(taps * 0.9)), passHz, stopHz, stopWeight: 10 }
    case 'cic':
      return { type, order: 4, combDelay: 1, compensation: null }
  }
}

/** The units that integration `times` over can end in. */
export function integralUnits(from: ChainUnit, times: 1 | 2): readonly ChainUnit[] {
  const quantity = integralOf(chainUnits[from].quantity, times)
  return (Object.keys(chainUnits) as ChainUnit[]).filter((unit) => chainUnits[unit].quantity === quantity)
}

/** Integration as the unit before it asks for; null where there is nothing to integrate to. */
export function usualIntegration(spec: ChainSpec, before: ChainUnit): ShapeFilter | null {
  const units = integralUnits(before, 1)
  const unit = units.find((one) => one.startsWith('mm')) ?? units[0]
  const cornerHz = spec.kept.fromHz > 0 ? spec.kept.fromHz / 2 : spec.kept.toHz / 100
  return unit ? { type: 'integrate', times: 1, unit, highPass: { cornerHz: rounded(cornerHz), order: 2 } } : null
}

/** A new stage that is to stand at `index`; null where there is nothing sensible for it to be. */
export function newStage(kind: ChainStageKind, spec: ChainSpec, index: number): ChainStage | null {
  const id = freshStageId(spec)
  const base = { id, bypassed: false }
  const { toHz } = spec.kept
  switch (kind) {
    case 'sensor':
      return { ...base, kind, name: 'sensor', unit: 'g', sensitivity: 1, resonance: null, highPass: null }
    case 'analog': {
      const rateHz = converterOf(spec)?.sampleRateHz ?? 10 * toHz
      const edgeHz = rounded(Math.min(1.8 * toHz, (toHz + rateHz / 2) / 2))
      const analog = { family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [edgeHz] } as const
      return { ...base, kind, source: { from: 'here', analog } }
    }
    case 'converter': {
      const sampleRateHz = rounded(8 * toHz)
      return { ...base, kind, sampleRateHz, resolution: { by: 'bits', bits: 16 }, fullScaleVolts: 5, averaging: null }
    }
    case 'decimate': {
      const inRateHz = ratesOf(spec)[index - 1]?.outRateHz ?? outputRateOf(spec)
      return { ...base, kind, factor: 2, filter: usualFilter('kaiser', { toHz, inRateHz, factor: 2 }) }
    }
    case 'shape': {
      const filter = usualIntegration(spec, unitAfter(spec, index - 1))
      return filter && { ...base, kind, filter }
    }
  }
}
