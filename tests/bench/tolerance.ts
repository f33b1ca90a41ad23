import {
  computeChain,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  type ChainSpec,
  type ComputedChain,
} from '@/dsp'
import { median, times } from './measure'

const CHANNELS = 2000
const POINTS = 512
const ASKED_SECONDS = 3

/** An order-8 anti-alias filter behind an AC-coupled sensor: five sections of second order. */
const spec: ChainSpec = {
  format: 1,
  stages: [
    {
      id: 'sensor',
      bypassed: false,
      kind: 'sensor',
      name: 'Accelerometer',
      unit: 'g',
      sensitivity: 0.1,
      resonance: null,
      highPass: { cornerHz: 0.5, order: 2 },
    },
    {
      id: 'analog',
      bypassed: false,
      kind: 'analog',
      source: {
        from: 'here',
        analog: { family: 'butterworth', response: 'lowpass', order: 8, edgesHz: [22_000] },
      },
    },
    {
      id: 'converter',
      bypassed: false,
      kind: 'converter',
      sampleRateHz: 102_400,
      resolution: { by: 'bits', bits: 24 },
      fullScaleVolts: 10,
      averaging: null,
    },
  ],
  kept: { fromHz: 0, toHz: 20_000 },
  sheet: [],
  interferers: [],
  tolerance: { spread: { of: 'parts', percent: 1 }, channels: CHANNELS, seed: 1 },
}

/** Seconds of one half of the channels, and of putting the whole together. */
function halfAndResult(chain: ComputedChain): { half: number; result: number } {
  const frequenciesHz = toleranceFrequencies(chain, POINTS)
  const shard = (part: 0 | 1) =>
    toleranceShard(chain, frequenciesHz, (part * CHANNELS) / 2, ((part + 1) * CHANNELS) / 2)
  const halves = [shard(0), shard(1)]
  return {
    half: median(times(7, 2, () => void shard(1))) / 1000,
    result: median(times(7, 2, () => void toleranceResult(chain, frequenciesHz, halves))) / 1000,
  }
}

/** The speed of a tolerance run, in seconds of processor time: on one core, and with the channels halved between two. */
export function benchTolerance() {
  const { half, result } = halfAndResult(computeChain(spec))
  const [oneCore, twoCores] = [2 * half + result, half + result]
  return {
    channels: CHANNELS,
    points: POINTS,
    oneCore,
    twoCores,
    ratio: twoCores / ASKED_SECONDS,
    askedSeconds: ASKED_SECONDS,
  }
}
