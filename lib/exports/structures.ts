import { DesignError } from '@/dsp'
import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import type { Structure } from './options'

/** The structures that a version can be handed over in, the usual one first: it is the kind of the design that decides. */
export const structuresOf = (kept: StoredCoefficients): readonly [Structure, ...Structure[]] =>
  isStoredTaps(kept) ? ['taps'] : ['sections', 'ratio']

export const usualStructure = (kept: StoredCoefficients): Structure => structuresOf(kept)[0]

/** @throws DesignError field `structure` with the usual one, when a version hasn't the structure that is asked for */
export function checkStructure(kept: StoredCoefficients, structure: Structure): void {
  if (structuresOf(kept).includes(structure)) return
  throw new DesignError(
    'structure-not-there',
    'structure',
    isStoredTaps(kept)
      ? 'This version is an FIR filter, whose taps are its only structure.'
      : 'This version has feedback, so that no list of taps is the same filter; hand over its sections.',
    usualStructure(kept),
  )
}
