import type { Ground } from '@/components/plot/ground'
import type { DesignSpec } from '@/dsp'
import type { Refusal, StackView, Trace, TraceId } from '../view'

export type PlotId = 'magnitude' | 'phase' | 'group-delay' | 'departure'

/** A drag or a run of key presses on the spec: one undo step, or none at all. */
export interface SpecEdit {
  /** Marks a state to return to. */
  begin(): void
  /** Previews live. */
  change(spec: DesignSpec): void
  /** Makes one undo step. */
  commit(): void
  /** Restores everything. */
  cancel(): void
}

/** Where a version keeps inside the departure budget. */
export interface TrustedBand {
  readonly id: TraceId
  readonly fromHz?: number
  readonly upToHz: number
}

export interface StackProps {
  readonly spec: DesignSpec
  readonly traces: readonly Trace[]
  readonly trusted: readonly TrustedBand[]
  readonly view: StackView
  onView(change: Partial<StackView>): void
  onResetView(): void
  readonly edit: SpecEdit
  readonly refusal: Refusal | null
  readonly readOnly?: boolean
  /** Ground beyond the departure budget, which the stack draws by itself: limits that a curve must keep out of. */
  readonly grounds?: readonly Ground<PlotId>[]
}
