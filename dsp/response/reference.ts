import type { Filter } from '../forms/filter'
import type { FirBand } from '../spec'
import type { MeasuredTable } from '../targets/measured'

/** What a digital filter is held against: the line drawn in ink. */
export type Reference =
  | { readonly kind: 'analog'; readonly filter: Filter<'s'> }
  | { readonly kind: 'measured'; readonly table: MeasuredTable }
  | {
      readonly kind: 'ideal'
      readonly bands: readonly FirBand[]
      readonly isDifferentiator: boolean
      /** The constant delay that comes with a linear-phase filter; 0 for a minimum-phase one, whose phase is not stated. */
      readonly delaySeconds: number
      readonly sampleRateHz: number
    }
