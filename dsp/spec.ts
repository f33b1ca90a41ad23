import * as z from 'zod'
import { specRefusal } from './spec-refusal'
import { sheetSchema } from './requirements/requirement'
import { MOST_MEASURED_ROWS, MOST_TAPS } from './limits'

/*
 * The written form of a design, versioned by `format`. The shapes are checked here; whether the numbers make a filter is decided by
 * design.ts, which answers with a DesignError naming the field and the nearest value that works.
 */

export const familySchema = z.enum([
  'butterworth',
  'chebyshev1',
  'chebyshev2',
  'elliptic',
  'bessel',
  'critically-damped',
])
export const responseSchema = z.enum(['lowpass', 'highpass', 'bandpass', 'bandstop'])

const hertz = z.number().positive()

export const analogSpecSchema = z.strictObject({
  family: familySchema,
  response: responseSchema,
  /** Order of the low-pass prototype; a band-pass or band-stop filter has twice as many poles. */
  order: z.int().min(1).max(24),
  /** One edge for low-pass and high-pass, [low, high] for band-pass and band-stop. */
  edgesHz: z.array(hertz).min(1).max(2).readonly(),
  rippleDb: z.number().positive().optional(),
  attenuationDb: z.number().positive().optional(),
  normalization: z.enum(['magnitude', 'delay', 'phase']).optional(),
})

export const methodSchema = z.discriminatedUnion('method', [
  z.strictObject({ method: z.literal('bilinear'), hold: z.union([z.enum(['edges', 'none']), hertz]) }),
  z.strictObject({
    method: z.literal('impulse-invariant'),
    halfFirstSample: z.boolean().optional(),
    restoreGain: z.boolean().optional(),
  }),
  z.strictObject({ method: z.literal('matched-z') }),
  z.strictObject({ method: z.literal('step-invariant') }),
  z.strictObject({
    method: z.literal('fitted'),
    /** The complex error is made least from 0 Hz up to here. */
    upToHz: hertz,
    /** Leaves one constant delay free, which the fit then chooses. */
    freeDelay: z.boolean().optional(),
    /** Poles of the fitted filter; without it as many as the original has. A measured table must say. */
    order: z.int().min(1).max(24).optional(),
  }),
])

export const firKindSchema = z.enum(['windowed', 'equiripple', 'least-squares', 'half-band', 'minimum-phase'])
export const firWindowSchema = z.enum(['kaiser', 'hann', 'hamming', 'blackman', 'dolph-chebyshev'])
export const firResponseSchema = z.enum([...responseSchema.options, 'multiband', 'differentiator'])

export const firSpecSchema = z.strictObject({
  kind: firKindSchema,
  /** Of a windowed or half-band filter; the others have none. */
  window: firWindowSchema.optional(),
  response: firResponseSchema,
  taps: z.int().min(3).max(MOST_TAPS),
  /**
   * What each band is to become, from low to high, with room between them; a windowed filter is cut in the middle of that room. The gain
   * is a factor (1 or 0 in the plain responses); of a differentiator, the one band's gain is the factor of dx/dt in 1/s. The weight
   * counts errors, 1 when left out.
   */
  bands: z
    .array(
      z.strictObject({
        fromHz: z.number().nonnegative(),
        toHz: hertz,
        gain: z.number().min(-1000).max(1000),
        weight: z.number().positive().max(1e6).optional(),
      }),
    )
    .min(1)
    .max(10)
    .readonly(),
  /** Kaiser and Dolph–Chebyshev windows: how far down the side lobes, or the stop band, are to be. */
  attenuationDb: z.number().positive().max(300).optional(),
})

const plane = z.strictObject({ re: z.number(), im: z.number() })

/** Stands in the sentence of a design and in exports: control characters and marks that turn the reading direction would spoil both. */
const ownName = z
  .string()
  .max(80)
  .regex(/\S/u, 'A name has at least one character that can be seen.')
  .regex(
    /^[^\p{Cc}\p{Cs}\p{Bidi_Control}]*$/u,
    'A name has no control characters, no halves of characters and no marks that turn the reading direction.',
  )

/** An analog original of the user's own; s in rad/s. */
export const ownTargetSchema = z.discriminatedUnion('given', [
  z.strictObject({
    given: z.literal('roots'),
    name: ownName,
    zeros: z.array(plane).max(24).readonly(),
    poles: z.array(plane).min(1).max(24).readonly(),
    gain: z.number(),
  }),
  z.strictObject({
    given: z.literal('polynomials'),
    name: ownName,
    /** Coefficients from the highest power of s down to the constant. */
    numerator: z.array(z.number()).min(1).max(25).readonly(),
    denominator: z.array(z.number()).min(2).max(25).readonly(),
  }),
  z.strictObject({
    given: z.literal('measured'),
    name: ownName,
    /** Frequency in Hz, rising; magnitude in dB; phase in degrees. */
    rows: z
      .array(z.tuple([z.number().nonnegative(), z.number(), z.number()]).readonly())
      .min(4)
      .max(MOST_MEASURED_ROWS)
      .readonly(),
  }),
])

/** Outside these a budget means nothing, and a plot of it would be all grid. */
const LEAST_BUDGET = 1e-6
const MOST_BUDGET_DB = 300
const MOST_BUDGET_DEGREES = 36_000

/** What the departure of digital from analog may be, and whether the best constant delay is removed before it is judged. */
export const departureBudgetSchema = z.strictObject({
  magnitudeDb: z.number().min(LEAST_BUDGET).max(MOST_BUDGET_DB),
  phaseDegrees: z.number().min(LEAST_BUDGET).max(MOST_BUDGET_DEGREES),
  removeDelay: z.boolean(),
})

const common = {
  format: z.literal(1),
  sampleRateHz: hertz,
  budget: departureBudgetSchema,
  sheet: sheetSchema.optional(),
}

/** A filter of one of the known families, brought to the sampling rate by a method. */
export const familyDesignSchema = z.strictObject({ ...common, analog: analogSpecSchema, how: methodSchema })
/** A digital filter of finite impulse response, stated by its bands. */
export const firDesignSchema = z.strictObject({ ...common, fir: firSpecSchema })
/** An analog response of the user's own, brought to the sampling rate by a method. */
export const ownDesignSchema = z.strictObject({ ...common, own: ownTargetSchema, how: methodSchema })

/** A design says which of the three it is by the part it has: `analog`, `fir` or `own`. */
export const designSpecSchema = z.union([familyDesignSchema, firDesignSchema, ownDesignSchema], {
  error: (issue) => (issue.code === 'invalid_union' ? specRefusal(issue.input, issue.errors) : undefined),
})

export type Family = z.infer<typeof familySchema>
export type ResponseKind = z.infer<typeof responseSchema>
export type AnalogSpec = z.infer<typeof analogSpecSchema>
export type Method = z.infer<typeof methodSchema>
export type MethodName = Method['method']
export type FirSpec = z.infer<typeof firSpecSchema>
export type FirBand = FirSpec['bands'][number]
export type FirKind = z.infer<typeof firKindSchema>
export type FirWindow = z.infer<typeof firWindowSchema>
export type FirResponse = z.infer<typeof firResponseSchema>
export type OwnTarget = z.infer<typeof ownTargetSchema>
export type DepartureBudget = z.infer<typeof departureBudgetSchema>
export type FamilyDesign = z.infer<typeof familyDesignSchema>
export type FirDesign = z.infer<typeof firDesignSchema>
export type OwnDesign = z.infer<typeof ownDesignSchema>
export type DesignSpec = FamilyDesign | FirDesign | OwnDesign
