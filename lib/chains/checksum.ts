import 'server-only'
import { createHash } from 'node:crypto'
import type { ChainSpec } from '@/dsp'
import { canonicalJson } from './canonical'
import type { StoredChainNumbers } from './stored-numbers'
import type { ChainFigures } from './types'

/** SHA-256 of what a version says: its spec, the figures it was saved with and the numbers of its digital stages; hex. */
export const chainChecksum = (version: {
  readonly spec: ChainSpec
  readonly figures: ChainFigures
  readonly numbers: StoredChainNumbers
}): string => {
  const { spec, figures, numbers } = version
  return createHash('sha256').update(canonicalJson({ spec, figures, numbers }), 'utf8').digest('hex')
}
