/** A complex number as plain data; values of complex.js fit. */
export interface Complex {
  readonly re: number
  readonly im: number
}

/** 's': continuous time, roots in rad/s. 'z': discrete time, roots on the z-plane. */
export type Domain = 's' | 'z'

/**
 * A filter as zeros, poles and gain: H(x) = gain · ∏(x − zeros) / ∏(x − poles).
 * Complex roots stand in exact conjugate pairs. This is the truth of a filter; polynomials are only ever an output.
 */
export interface Filter<D extends Domain> {
  readonly domain: D
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
  readonly gain: number
}

/** y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂ */
export interface Section {
  readonly b0: number
  readonly b1: number
  readonly b2: number
  readonly a1: number
  readonly a2: number
}

/** A sum of sections: H = direct + Σ terms. Kept where a method yields residues (impulse-invariant, step-invariant). */
export interface ParallelForm {
  readonly direct: number
  readonly terms: readonly Section[]
}

/** Something the user should know about a design that was nevertheless computed; data, never console output. */
export interface Diagnostic {
  readonly code: string
  readonly severity: 'note' | 'caution'
  readonly message: string
  /** Path of the part of the spec it speaks about. */
  readonly field?: string
  readonly value?: number
}

export interface DigitalFilter extends Filter<'z'> {
  readonly sampleRateHz: number
  /** Cascade: the product of these sections equals the roots to 1e-12. */
  readonly sections: readonly Section[]
  readonly parallel?: ParallelForm
  readonly diagnostics: readonly Diagnostic[]
}

/** A filter of finite impulse response. Its taps are the truth of it: y[n] = Σ taps[k] · x[n − k]. */
export interface FirFilter {
  readonly domain: 'z'
  readonly taps: Float64Array
  readonly sampleRateHz: number
  /** 'even': taps[k] = taps[N−1−k]; 'odd': taps[k] = −taps[N−1−k], both to the last bit; 'none': anything else. */
  readonly symmetry: 'even' | 'odd' | 'none'
  readonly diagnostics: readonly Diagnostic[]
}

/** What a design may come to on the digital side. */
export type AnyDigital = DigitalFilter | FirFilter

export const isFir = (filter: object): filter is FirFilter => 'taps' in filter
