import {
  computeChain,
  DesignError,
  planSteps,
  proofSteps,
  rateSteps,
  toleranceFrequencies,
  toleranceResult,
  toleranceShard,
  type ChainSpec,
  type PlanOption,
  type ProofResult,
  type RateOption,
  type ToleranceResult,
  type ToleranceShard,
} from '@/dsp'

/*
 * The heavy questions of the chain page, as a worker answers them. A question is dropped by ending its worker, so that nothing has to be
 * asked in between; progress runs from 0 to 1.
 */

/** A refusal is an answer too: its sentence is what the page shows. */
export type Answer<Value> = { readonly value: Value } | { readonly refused: string }

export type OnProgress = (progress: number) => unknown

export interface ChainWork {
  rates(spec: ChainSpec, onProgress: OnProgress): Promise<Answer<readonly RateOption[]>>
  plans(spec: ChainSpec, onProgress: OnProgress): Promise<Answer<readonly PlanOption[]>>
  prove(spec: ChainSpec, seed: number, onProgress: OnProgress): Promise<Answer<ProofResult>>
  /** The channels from `fromChannel` up to, not including, `toChannel`. */
  channels(
    spec: ChainSpec,
    fromChannel: number,
    toChannel: number,
    onProgress: OnProgress,
  ): Promise<Answer<readonly ToleranceShard[]>>
  spread(spec: ChainSpec, shards: readonly ToleranceShard[]): Promise<Answer<ToleranceResult>>
}

const TOLD_EVERY_MILLISECONDS = 50
const SHARD_CHANNELS = 100

export const chainWork: ChainWork = {
  rates: (spec, onProgress) => answered(() => driven(rateSteps(spec), onProgress)),
  plans: (spec, onProgress) => answered(() => driven(planSteps(spec), onProgress)),
  prove: (spec, seed, onProgress) => answered(() => driven(proofSteps(spec, { seed }), onProgress)),
  channels: (spec, fromChannel, toChannel, onProgress) =>
    answered(() => driven(channelSteps(spec, fromChannel, toChannel), onProgress)),
  spread: (spec, shards) =>
    answered(() => {
      const chain = computeChain(spec)
      return toleranceResult(chain, toleranceFrequencies(chain), shards)
    }),
}

async function answered<Value>(work: () => Value): Promise<Answer<Value>> {
  try {
    return { value: work() }
  } catch (error) {
    if (error instanceof DesignError) return { refused: error.message }
    throw error
  }
}

/** Runs steps to their end and tells of progress now and then. */
function driven<Value>(steps: Iterator<number, Value>, onProgress: OnProgress): Value {
  let toldAt = performance.now()
  for (;;) {
    const step = steps.next()
    if (step.done) return step.value
    if (performance.now() - toldAt < TOLD_EVERY_MILLISECONDS) continue
    toldAt = performance.now()
    void onProgress(step.value)
  }
}

function* channelSteps(
  spec: ChainSpec,
  fromChannel: number,
  toChannel: number,
): Generator<number, readonly ToleranceShard[]> {
  const chain = computeChain(spec)
  const frequenciesHz = toleranceFrequencies(chain)
  const shards: ToleranceShard[] = []
  for (let from = fromChannel; from < toChannel; from += SHARD_CHANNELS) {
    const to = Math.min(toChannel, from + SHARD_CHANNELS)
    shards.push(toleranceShard(chain, frequenciesHz, from, to))
    yield (to - fromChannel) / (toChannel - fromChannel)
  }
  return shards
}
