import type { DesignSpec } from '@/dsp'
import type { TraceId } from '@/components/plot/trace-style'
import { lowestEdgeHz } from '@/lib/designs/outline'

export type { TraceId }

/** One curve through every plot of the stack, on its own frequency grid. */
export interface Trace {
  readonly id: TraceId
  readonly label: string
  readonly frequenciesHz: Float64Array
  readonly magnitudeDb: Float64Array
  readonly phaseRadians: Float64Array
  readonly groupDelaySeconds: Float64Array
  /** Digital minus what it is held against; null for that line itself. */
  readonly departure: {
    readonly db: Float64Array
    readonly degrees: Float64Array
    readonly microseconds: Float64Array
  } | null
  /** The version that the statement names. */
  readonly stated: boolean
  /** What the digital version repeats beyond the fold line; null for the analog prototype. */
  readonly image: { readonly frequenciesHz: Float64Array; readonly magnitudeDb: Float64Array } | null
}

export type DepartureUnit = 'db' | 'degrees' | 'microseconds'

/** How the stack is looked at; held in the address bar, never part of the design. */
export interface StackView {
  readonly fromHz: number
  readonly toHz: number
  readonly logFrequency: boolean
  /** Frequencies as parts of the sampling rate. */
  readonly normalised: boolean
  readonly unwrapped: boolean
  readonly departureUnit: DepartureUnit
  /** As the budget says; the two are never shown apart. */
  readonly removeDelay: boolean
  readonly magnitudeFloorDb: number
  readonly crosshairHz: number | null
  readonly hidden: readonly TraceId[]
}

export const drawerTabs = ['candidates', 'rates', 'time', 'sections', 'trial', 'original', 'history'] as const
export type DrawerTab = (typeof drawerTabs)[number]

/** A refusal as the studio shows it, beside the word that `field` names. */
export interface Refusal {
  readonly field: string
  readonly message: string
  readonly nearest?: number | string
}

/** The frequencies that the stack opens with: a decade and more below the lowest edge, up to the whole sampling rate. */
export function usualView(spec: DesignSpec): StackView {
  const lowEdge = lowestEdgeHz(spec)
  return {
    fromHz: Math.min(lowEdge / 15, spec.sampleRateHz / 75),
    toHz: spec.sampleRateHz,
    logFrequency: true,
    normalised: false,
    unwrapped: true,
    departureUnit: 'degrees',
    removeDelay: spec.budget.removeDelay,
    magnitudeFloorDb: -60,
    crosshairHz: null,
    hidden: ['step-invariant'],
  }
}
