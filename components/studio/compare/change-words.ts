import type { DesignSpec } from '@/dsp'
import { changedParts } from '@/lib/designs/statement-changes'
import { kindOf } from './marked-statement'

const kindWords = {
  family: 'a filter of a known family',
  fir: 'an FIR filter',
  own: 'a filter from a response of its own',
} as const

export interface ChangeWords {
  /** "an FIR filter"; null for designs of one kind. */
  readonly otherKind: string | null
  /** Names of what differs; between kinds only of what every design has. */
  readonly parts: readonly string[]
}

const common = new Set(['sampling rate', 'departure budget', 'requirement sheet'])

/** What a design has otherwise than the base. */
export function changeWords(base: DesignSpec, other: DesignSpec): ChangeWords {
  const parts = changedParts(base, other)
  return kindOf(base) === kindOf(other)
    ? { otherKind: null, parts }
    : { otherKind: kindWords[kindOf(other)], parts: parts.filter((part) => common.has(part)) }
}
