import type { Family, MethodName, ResponseKind } from '@/dsp'
import type { VersionState } from './types'

/** The product's words for the parts of a design; one place, so that the statement, menus, tables and files say the same. */

export const responseWords: Record<ResponseKind, string> = {
  lowpass: 'low-pass',
  highpass: 'high-pass',
  bandpass: 'band-pass',
  bandstop: 'band-stop',
}

export const familyWords: Record<Family, string> = {
  butterworth: 'Butterworth',
  chebyshev1: 'Chebyshev I',
  chebyshev2: 'Chebyshev II',
  elliptic: 'elliptic',
  bessel: 'Bessel–Thomson',
  'critically-damped': 'critically damped',
}

export const methodWords: Record<MethodName, string> = {
  bilinear: 'bilinear transform',
  'impulse-invariant': 'impulse-invariant method',
  'matched-z': 'matched-z transform',
  'step-invariant': 'step-invariant method',
}

/** Short names for legends and tables. */
export const methodLabels: Record<MethodName, string> = {
  bilinear: 'bilinear',
  'impulse-invariant': 'impulse-invariant',
  'matched-z': 'matched-z',
  'step-invariant': 'step-invariant',
}

export const methodNames = Object.keys(methodWords) as readonly MethodName[]

/** Where a version stands, as screens and files say it. */
export const stateWords: Record<VersionState, string> = {
  draft: 'not reviewed',
  'in-review': 'in review',
  approved: 'approved',
  returned: 'returned for changes',
  released: 'released',
  superseded: 'superseded',
  withdrawn: 'withdrawn',
}
