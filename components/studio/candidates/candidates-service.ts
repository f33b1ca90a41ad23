import { searchCandidates, type CandidateOutcome, type CandidateRequest, type CandidateRow } from '@/dsp'

/** The search as the worker offers it. It is stopped by ending the worker, so that nothing has to be asked in between. */
export interface CandidatesService {
  search(
    request: CandidateRequest,
    onRow: (row: CandidateRow) => void | PromiseLike<unknown>,
  ): Promise<CandidateOutcome>
}

export const candidatesService: CandidatesService = {
  async search(request, onRow) {
    const told: (void | PromiseLike<unknown>)[] = []
    const outcome = await searchCandidates(request, (row) => void told.push(onRow(row)))
    // Rows travel by another way than the outcome: it must not overtake the last of them.
    await Promise.all(told)
    return outcome
  },
}
