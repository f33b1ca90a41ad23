import {
  chainResponse,
  checkChainSheet,
  computeChain,
  foldChart,
  interfererLandings,
  noiseBudget,
  worstAlias,
  type ChainSpec,
  type ChainStage,
} from '@/dsp'
import { sixStages } from '../dsp/chain/chains'
import { median, times } from './measure'

const ROUNDS = 60
const WARMUP = 20
const OUTPUTS = 256
const POINTS = 512

const spec: ChainSpec = {
  ...sixStages,
  sheet: [
    { kind: 'usable-band', toHz: 800, rippleDb: 3, aliasDb: 50 },
    { kind: 'flatness', fromHz: 10, toHz: 500, withinDb: 1 },
    { kind: 'alias-floor', toHz: 1000, atLeastDb: 60 },
    { kind: 'phase', fromHz: 20, toHz: 500, withinDegrees: 5 },
    { kind: 'delay', atHz: 100, atMostSeconds: 0.01 },
    { kind: 'effective-bits', atLeast: 20 },
  ],
  interferers: [
    { kind: 'tone', name: 'Pump', hz: 297, level: 0.2 },
    { kind: 'tone', name: 'Drive', hz: 50_000, level: 1 },
  ],
}

/** An edit of one stage, a little further each time, so that nothing of it is known already. */
const edits: Readonly<Record<string, (stage: ChainStage, round: number) => ChainStage>> = {
  'anti-alias corner': (stage, round) =>
    stage.kind === 'analog' && stage.source.from === 'here'
      ? {
          ...stage,
          source: { ...stage.source, analog: { ...stage.source.analog, edgesHz: [12_000 + 7 * round] } },
        }
      : stage,
  'half-band attenuation': (stage, round) =>
    stage.kind === 'decimate' && stage.filter.type === 'half-band'
      ? { ...stage, filter: { ...stage.filter, attenuationDb: 80 + round / 16 } }
      : stage,
  'CIC compensation': (stage, round) =>
    stage.kind === 'decimate' && stage.filter.type === 'cic'
      ? { ...stage, filter: { ...stage.filter, compensation: { taps: 21, passHz: 1000 + round } } }
      : stage,
}

export interface ChainTime {
  readonly edit: string
  readonly milliseconds: number
}

/** A chain of six stages computed anew on an edit: everything that its page shows but the tolerance run. */
export function benchChains(): readonly ChainTime[] {
  return Object.entries(edits).map(([edit, change]) => {
    let round = 0
    const took = times(ROUNDS, WARMUP, () => {
      round += 1
      const chain = computeChain({ ...spec, stages: spec.stages.map((stage) => change(stage, round)) })
      const half = chain.outputRateHz / 2
      chainResponse(
        chain,
        Float64Array.from({ length: POINTS }, (_, n) => (half * n) / (POINTS - 1)),
      )
      foldChart(
        chain,
        Float64Array.from({ length: OUTPUTS }, (_, n) => (half * n) / (OUTPUTS - 1)),
      )
      worstAlias(chain)
      noiseBudget(chain)
      interfererLandings(chain)
      checkChainSheet(chain, null)
    })
    return { edit, milliseconds: median(took) }
  })
}
