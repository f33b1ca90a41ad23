import type { ChainSpec, ComputedChain } from '@/dsp'

/** What every panel of the drawer is given. */
export interface ChainPanelProps {
  readonly chain: ComputedChain
  readonly spec: ChainSpec
  /** False when the change makes no chain; the page then says why. */
  propose(spec: ChainSpec): boolean
  readonly readOnly: boolean
}
