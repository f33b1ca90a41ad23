import {
  isFir,
  type AnyDigital,
  type Complex,
  type Design,
  type DesignOfFamily,
  type DigitalFilter,
  type Filter,
  type FirFilter,
  type Section,
} from '@/dsp'

/*
 * The numbers of a design as they are kept, signed and compared. One text for the same numbers, always: keys in this order, no spaces,
 * each number in the shortest decimal form that reads back to the same double (ECMA-262 Number::toString, as JSON.stringify writes it),
 * minus zero written as zero. Its SHA-256 is the version's checksum.
 */

export interface StoredRoots {
  readonly gain: number
  readonly zeros: readonly Complex[]
  readonly poles: readonly Complex[]
}

/** The numbers of a filter with poles. */
export interface StoredRecursive extends StoredRoots {
  readonly format: 1
  readonly sampleRateHz: number
  readonly sections: readonly Section[]
  /** Present where the method yields a sum of sections (impulse-invariant, step-invariant), which is then the form that runs. */
  readonly parallel: { readonly direct: number; readonly terms: readonly Section[] } | null
  /** Null where the original was given as a table. */
  readonly analog: StoredRoots | null
}

/** The numbers of an FIR filter. */
export interface StoredTaps {
  readonly format: 1
  readonly sampleRateHz: number
  readonly taps: readonly number[]
  readonly symmetry: FirFilter['symmetry']
}

export type StoredCoefficients = StoredRecursive | StoredTaps

export const isStoredTaps = (stored: StoredCoefficients): stored is StoredTaps => 'taps' in stored

function plain(value: number): number {
  if (!Number.isFinite(value)) throw new RangeError('A coefficient is not a finite number, so that it can’t be kept.')
  return value === 0 ? 0 : value
}

const complex = ({ re, im }: Complex): Complex => ({ re: plain(re), im: plain(im) })
const section = ({ b0, b1, b2, a1, a2 }: Section): Section => ({
  b0: plain(b0),
  b1: plain(b1),
  b2: plain(b2),
  a1: plain(a1),
  a2: plain(a2),
})
const roots = ({ gain, zeros, poles }: StoredRoots): StoredRoots => ({
  gain: plain(gain),
  zeros: zeros.map(complex),
  poles: poles.map(complex),
})

/** The same numbers with their keys in canonical order; jsonb forgets the order. */
function ordered(stored: StoredCoefficients): StoredCoefficients {
  if (isStoredTaps(stored)) {
    const { sampleRateHz, taps, symmetry } = stored
    return { format: 1, sampleRateHz: plain(sampleRateHz), taps: taps.map(plain), symmetry }
  }
  return {
    format: 1,
    sampleRateHz: plain(stored.sampleRateHz),
    ...roots(stored),
    sections: stored.sections.map(section),
    parallel: stored.parallel && {
      direct: plain(stored.parallel.direct),
      terms: stored.parallel.terms.map(section),
    },
    analog: stored.analog && roots(stored.analog),
  }
}

/** The numbers of a design of a known family: roots on both sides. */
export type StoredFamily = StoredRecursive & { readonly analog: StoredRoots }

export function coefficientsOf(design: Pick<DesignOfFamily, 'analog' | 'digital'>): StoredFamily
export function coefficientsOf(design: Pick<Design, 'analog' | 'digital'>): StoredCoefficients
export function coefficientsOf({ analog, digital }: Pick<Design, 'analog' | 'digital'>): StoredCoefficients {
  if (isFir(digital)) {
    const { sampleRateHz, taps, symmetry } = digital
    return ordered({ format: 1, sampleRateHz, taps: Array.from(taps), symmetry })
  }
  const { sampleRateHz, gain, zeros, poles, sections, parallel } = digital
  return ordered({ format: 1, sampleRateHz, gain, zeros, poles, sections, parallel: parallel ?? null, analog })
}

/** A stored version's numbers as filters again; what is exported are these, never a recomputation. */
export function filtersOf(stored: StoredFamily): { readonly analog: Filter<'s'>; readonly digital: DigitalFilter }
export function filtersOf(stored: StoredCoefficients): {
  readonly analog: Filter<'s'> | null
  readonly digital: AnyDigital
}
export function filtersOf(stored: StoredCoefficients): {
  readonly analog: Filter<'s'> | null
  readonly digital: AnyDigital
} {
  if (isStoredTaps(stored)) {
    const { sampleRateHz, taps, symmetry } = stored
    const digital: FirFilter = { domain: 'z', sampleRateHz, taps: Float64Array.from(taps), symmetry, diagnostics: [] }
    return { analog: null, digital }
  }
  const { sampleRateHz, gain, zeros, poles, sections, parallel } = stored
  return {
    analog: stored.analog && { domain: 's', ...stored.analog },
    digital: {
      domain: 'z',
      sampleRateHz,
      gain,
      zeros,
      poles,
      sections,
      ...(parallel && { parallel }),
      diagnostics: [],
    },
  }
}

export const canonicalText = (stored: StoredCoefficients): string => JSON.stringify(ordered(stored))
