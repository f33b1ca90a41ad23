import * as z from 'zod'

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

export const designSpecSchema = z.strictObject({
  format: z.literal(1),
  analog: analogSpecSchema,
  sampleRateHz: hertz,
  how: methodSchema,
  budget: departureBudgetSchema,
})

export type Family = z.infer<typeof familySchema>
export type ResponseKind = z.infer<typeof responseSchema>
export type AnalogSpec = z.infer<typeof analogSpecSchema>
export type DesignMethod = z.infer<typeof methodSchema>
export type DepartureBudget = z.infer<typeof departureBudgetSchema>
export type DesignSpec = z.infer<typeof designSpecSchema>

/** Every way from analog to digital that the product knows by name; `fitted` is not computed yet and is refused by discretize. */
export type Method = DesignMethod | { method: 'fitted'; upToHz: number; freeDelay?: boolean }
export type MethodName = DesignMethod['method']
