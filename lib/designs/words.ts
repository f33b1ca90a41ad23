import type { Family, FirKind, FirResponse, FirWindow, MethodName, OwnTarget, ResponseKind } from '@/dsp'
import type { VersionState } from './types'

/** The product's words for the parts of a design; one place, so that the statement, menus, tables and files say the same. */

export const responseWords: Record<ResponseKind, string> = {
  lowpass: 'low-pass',
  highpass: 'high-pass',
  bandpass: 'band-pass',
  bandstop: 'band-stop',
}

export const firResponseWords: Record<FirResponse, string> = {
  ...responseWords,
  multiband: 'multiband',
  differentiator: 'differentiating',
}

export const firKindWords: Record<FirKind, string> = {
  windowed: 'windowed',
  equiripple: 'equiripple',
  'least-squares': 'least-squares',
  'half-band': 'half-band',
  'minimum-phase': 'minimum-phase',
}

export const firWindowWords: Record<FirWindow, string> = {
  kaiser: 'Kaiser',
  hann: 'Hann',
  hamming: 'Hamming',
  blackman: 'Blackman',
  'dolph-chebyshev': 'Dolph–Chebyshev',
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
  fitted: 'fitted method',
}

/** Short names for legends and tables. */
export const methodLabels: Record<MethodName, string> = {
  bilinear: 'bilinear',
  'impulse-invariant': 'impulse-invariant',
  'matched-z': 'matched-z',
  'step-invariant': 'step-invariant',
  fitted: 'fitted',
}

/** A digital version as screens know it: by its method, or as the one FIR filter that its bands make. */
export type VersionId = MethodName | 'fir'

export const versionLabels: Record<VersionId, string> = { ...methodLabels, fir: 'FIR' }

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

/** How an analog original of the user's own is given. */
export const ownWords: Record<OwnTarget['given'], string> = {
  roots: 'given by poles and zeros',
  polynomials: 'given by polynomials in s',
  measured: 'given as measured',
}
