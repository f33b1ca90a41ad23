import {
  computeChain,
  type AnalogSpec,
  type ChainSpec,
  type ComputedChain,
  type DesignLink,
  type SensorStage,
  type ToleranceSettings,
} from '@/dsp'

interface Parts {
  readonly analog?: readonly (AnalogSpec | DesignLink)[]
  readonly highPass?: SensorStage['highPass']
  readonly resonance?: SensorStage['resonance']
  readonly tolerance?: Partial<ToleranceSettings>
  readonly kept?: ChainSpec['kept']
  readonly bypassed?: boolean
}

/** A chain of a sensor, analog stages and a converter, which is all that part spread and the build sheet look at. */
export function analogChainSpec(parts: Parts): ChainSpec {
  const { analog = [], highPass = null, resonance = null, tolerance, kept = { fromHz: 0, toHz: 2000 } } = parts
  return {
    format: 1,
    stages: [
      {
        id: 'sensor',
        bypassed: false,
        kind: 'sensor',
        name: 'Accelerometer',
        unit: 'g',
        sensitivity: 0.1,
        resonance,
        highPass,
      },
      ...analog.map((one, index) => ({
        id: `analog${index}`,
        bypassed: parts.bypassed ?? false,
        kind: 'analog' as const,
        source: 'family' in one ? ({ from: 'here', analog: one } as const) : ({ from: 'design', link: one } as const),
      })),
      {
        id: 'converter',
        bypassed: false,
        kind: 'converter',
        sampleRateHz: 51_200,
        resolution: { by: 'bits', bits: 24 },
        fullScaleVolts: 10,
        averaging: null,
      },
    ],
    kept,
    sheet: [],
    interferers: [],
    tolerance: { spread: { of: 'parts', percent: 1 }, channels: 100, seed: 1, ...tolerance },
  }
}

export const analogChain = (parts: Parts): ComputedChain => computeChain(analogChainSpec(parts))
