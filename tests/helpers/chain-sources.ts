import { designFromSpec, ENGINE_VERSION, type ChainSpec, type ChainStage, type DesignSpec } from '@/dsp'
import { chainChecksum } from '@/lib/chains/checksum'
import { computeChainVersion } from '@/lib/chains/compute-version'
import { startingChain } from '@/lib/chains/stage-starts'
import { startingChains } from '@/lib/chains/templates'
import type { ChainSource } from '@/lib/exports/chain-source'
import { firDesign, lowPass } from './export-sources'

interface Texts {
  readonly title?: string
  readonly note?: string
}

/** A saved version of that chain as the server would export it. */
export async function chainSourceOf(spec: ChainSpec, text: Texts = {}): Promise<ChainSource> {
  const computed = await computeChainVersion(spec)
  return {
    chain: {
      drawingNumber: 'HMF-CH-005',
      title: text.title ?? 'Deck logger, accelerometer to stored sample',
      projectName: 'Harrow Mill footbridge',
    },
    version: {
      number: 2,
      note: text.note ?? 'The second decimation is longer',
      savedAt: '2026-12-01T09:42:00.000Z',
      savedBy: 'demo designer',
      state: 'draft',
      parentNumber: 1,
      engineVersion: ENGINE_VERSION,
      checksum: chainChecksum({ spec, ...computed }),
      spec,
      ...computed,
    },
  }
}

/** The starting chain with a decimation, and then shaping, that are tied to designs. */
export function linkedChain(
  decimation: DesignSpec,
  names: { readonly designId: string; readonly version: number; readonly drawing: string; readonly title: string },
): ChainSpec {
  designFromSpec(decimation)
  const [sensor, analog, converter] = startingChain.stages
  if (!sensor || !analog || converter?.kind !== 'converter') throw new Error('The starting chain is another one.')
  return {
    ...startingChain,
    stages: [
      sensor,
      analog,
      { ...converter, sampleRateHz: decimation.sampleRateHz },
      {
        id: 'tied',
        bypassed: false,
        kind: 'decimate',
        factor: 2,
        filter: { type: 'design', link: { ...names, spec: decimation } },
      },
    ],
    sheet: [],
  }
}

/** Designs that a stage at 1200 Hz can be tied to: taps, and one with feedback. */
export const tapsDesign: DesignSpec = firDesign({ taps: 33 })
export const feedbackDesign: DesignSpec = lowPass({ order: 5 })

const integration = (id: string, times: 1 | 2, unit: 'mm/s' | 'mm', cornerHz: number): ChainStage => ({
  id,
  bypassed: false,
  kind: 'shape',
  filter: { type: 'integrate', times, unit, highPass: { cornerHz, order: 2 } },
})

/** Acceleration that is stored as velocity: a CIC filter, then the integral, then two halvings. */
export const velocityChain: ChainSpec = {
  ...startingChains.averaging,
  stages: startingChains.averaging.stages.toSpliced(3, 0, integration('vel', 1, 'mm/s', 5)),
  sheet: [],
}

/** Acceleration that is stored as displacement, integrated at the output rate. */
export const displacementChain: ChainSpec = {
  ...startingChain,
  stages: [...startingChain.stages, integration('dis', 2, 'mm', 2)],
  kept: { fromHz: 5, toHz: 90 },
  sheet: [],
}

/** Shaped by taps ahead of the decimation, which is a design with feedback. */
export function shapedChain(names: Parameters<typeof linkedChain>[1]): ChainSpec {
  const chain = linkedChain(feedbackDesign, names)
  const shape: ChainStage = {
    id: 'shape',
    bypassed: false,
    kind: 'shape',
    filter: { type: 'design', link: { ...names, spec: tapsDesign } },
  }
  return { ...chain, stages: chain.stages.toSpliced(3, 0, shape) }
}
