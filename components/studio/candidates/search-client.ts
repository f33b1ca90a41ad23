import { proxy, wrap } from 'comlink'
import type { CandidateOutcome, CandidateRequest, CandidateRow } from '@/dsp'
import type { CandidatesService } from './candidates-service'

export interface Search {
  readonly outcome: Promise<CandidateOutcome>
  /** Ends the worker at once; the outcome then never comes. */
  stop(): void
}

/** One search in a worker of its own. */
export function startSearch(request: CandidateRequest, onRow: (row: CandidateRow) => void): Search {
  const worker = new Worker(new URL('./candidates.worker.ts', import.meta.url), { type: 'module' })
  const broken = new Promise<never>((_, reject) => {
    worker.onerror = (event) => reject(new Error(event.message || 'The search could not be loaded.'))
  })
  const outcome = Promise.race([wrap<CandidatesService>(worker).search(request, proxy(onRow)), broken])
  // Done or broken, the worker has nothing left to do; the outcome itself is its asker's to hear.
  outcome.catch(() => undefined).finally(() => worker.terminate())
  return { outcome, stop: () => worker.terminate() }
}
