import { isFir, isFirDesign, minimumSamplesForZeroPhase, type AnyDigital, type DesignSpec } from '@/dsp'

/**
 * How a filter is run without delay, offline: one with feedback forward and backward, which acts twice on the magnitude; symmetric taps of
 * odd number once, and moved earlier by the whole samples that they delay by.
 */
export type ZeroPhaseWay = 'forward-backward' | 'delay-removed'

export const NO_WHOLE_DELAY =
  'These taps don’t delay every frequency by the same whole number of samples, so that no delay can be taken off; an odd number of symmetric taps can.'

/** Null where a filter has no such way. */
export function zeroPhaseWay(filter: AnyDigital): ZeroPhaseWay | null {
  if (!isFir(filter)) return 'forward-backward'
  return filter.symmetry !== 'none' && filter.taps.length % 2 === 1 ? 'delay-removed' : null
}

/** The same known from the statement, before anything is designed: all kinds of FIR filters but the minimum-phase one are symmetric. */
export function offeredWay(spec: DesignSpec): ZeroPhaseWay | null {
  if (!isFirDesign(spec)) return 'forward-backward'
  return spec.fir.kind !== 'minimum-phase' && spec.fir.taps % 2 === 1 ? 'delay-removed' : null
}

/** Samples by which the record is extended at each end before it is run without delay; it must be longer than that. */
export const extensionOf = (filter: AnyDigital): number =>
  isFir(filter) ? Math.floor((filter.taps.length - 1) / 2) : minimumSamplesForZeroPhase(filter.sections) - 1
