import type { OwnTarget } from '@/dsp'

/** What the three ways of giving an original have in common. */
export interface GivenForm<Given extends OwnTarget> {
  /** What the design states now, when it is given in this way. */
  readonly given: Given | null
  readonly readOnly: boolean
  onTake(own: Given): void
}
