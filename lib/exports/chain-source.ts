import type { StoredChainNumbers } from '@/lib/chains/stored-numbers'
import type { ChainRecord, ChainVersionSummary } from '@/lib/chains/types'

/** What a file is made from: a version of a chain and the numbers that were kept with it. */
export interface ChainSource {
  readonly chain: Pick<ChainRecord, 'drawingNumber' | 'title' | 'projectName'>
  readonly version: ChainVersionSummary & { readonly numbers: StoredChainNumbers }
}
