import { searchCandidates, type CandidateOutcome, type CandidateRequest, type CandidateRow } from '@/dsp'

/** The search as the worker offers it. It is stopped by ending the worker, so that nothing has to be asked in between. */
export interface CandidatesService {
  search(request: CandidateRequest, onRow: (row: CandidateRow) => void): Promise<CandidateOutcome>
}

export const candidatesService: CandidatesService = {
  search: (request, onRow) => searchCandidates(request, onRow),
}
