import { proxy, wrap, type Remote } from 'comlink'
import type { ChainSpec, PlanOption, ProofResult, RateOption, ToleranceResult } from '@/dsp'
import type { Answer, ChainWork, OnProgress } from './chain-work'

export interface Job<Value> {
  readonly answer: Promise<Answer<Value>>
  /** Ends its workers at once; the answer then never comes. */
  stop(): void
}

export const findRates =
  (spec: ChainSpec) =>
  (onProgress: OnProgress): Job<readonly RateOption[]> =>
    startJob(1, ([worker]) => worker.rates(spec, proxy(onProgress)))

export const findPlans =
  (spec: ChainSpec) =>
  (onProgress: OnProgress): Job<readonly PlanOption[]> =>
    startJob(1, ([worker]) => worker.plans(spec, proxy(onProgress)))

export const runProof =
  (spec: ChainSpec, seed: number) =>
  (onProgress: OnProgress): Job<ProofResult> =>
    startJob(1, ([worker]) => worker.prove(spec, seed, proxy(onProgress)))

/** The channels in two halves, a worker each; what they come to is the same however they are split. */
export const runTolerance =
  (spec: ChainSpec) =>
  (onProgress: OnProgress): Job<ToleranceResult> =>
    startJob(2, async ([first, second]) => {
      const { channels } = spec.tolerance
      const middle = Math.ceil(channels / 2)
      const done = [0, 0]
      const told = (half: number) =>
        proxy((progress: number) => {
          done[half] = progress
          // The last part is putting the halves together.
          onProgress(0.9 * ((done[0] ?? 0) / 2 + (done[1] ?? 0) / 2))
        })
      const halves = await Promise.all([
        first.channels(spec, 0, middle, told(0)),
        second.channels(spec, middle, channels, told(1)),
      ])
      const [low, high] = halves
      if ('refused' in low) return low
      if ('refused' in high) return high
      onProgress(0.9)
      return first.spread(spec, [...low.value, ...high.value])
    })

type Workers = readonly [Remote<ChainWork>, Remote<ChainWork>]

/** Workers of its own for one job; a job for one worker is handed the same one twice. */
function startJob<Value>(count: 1 | 2, ask: (workers: Workers) => Promise<Answer<Value>>): Job<Value> {
  const workers = Array.from(
    { length: count },
    () => new Worker(new URL('./chain.worker.ts', import.meta.url), { type: 'module' }),
  )
  const stop = () => {
    for (const worker of workers) worker.terminate()
  }
  const broken = new Promise<never>((_, reject) => {
    for (const worker of workers)
      worker.onerror = (event) => reject(new Error(event.message || 'The work could not be loaded.'))
  })
  const [first, second = first] = workers.map((worker) => wrap<ChainWork>(worker))
  if (!first || !second) throw new RangeError('A job has one worker or two.')
  const answer = Promise.race([ask([first, second]), broken])
  // Done or broken, the workers have nothing left to do; the answer itself is its asker's to hear.
  answer.catch(() => undefined).finally(stop)
  return { answer, stop }
}
