import * as z from 'zod'
import { MOST_REQUIREMENTS } from '../limits'

/*
 * The lines of a requirement sheet as they are written down. What each measures, and by how much a design meets or misses it, is
 * evaluate.ts's; which lines can't both hold is contradictions.ts's.
 */

const hertz = z.number().positive()
const hertzOrZero = z.number().nonnegative()
const decibels = z.number().positive().max(300)
const seconds = z.number().positive()

export const requirementSchema = z.discriminatedUnion('kind', [
  /** The magnitude stays within ±`withinDb` of 0 dB. */
  z.strictObject({ kind: z.literal('pass'), fromHz: hertzOrZero, toHz: hertz, withinDb: decibels }),
  /** The magnitude stays `attenuationDb` down, or more; without `toHz` up to half the rate. */
  z.strictObject({
    kind: z.literal('stop'),
    fromHz: hertzOrZero,
    toHz: hertz.optional(),
    attenuationDb: decibels,
  }),
  /** One frequency that stays within ±`withinDb` of 0 dB. */
  z.strictObject({ kind: z.literal('keep-tone'), hz: hertz, withinDb: decibels }),
  /** One frequency that comes out `attenuationDb` down, or more. */
  z.strictObject({ kind: z.literal('lose-tone'), hz: hertz, attenuationDb: decibels }),
  /** Departure from the analog original (or the stated ideal), up to a frequency. */
  z.strictObject({ kind: z.literal('magnitude-departure'), upToHz: hertz, withinDb: decibels }),
  z.strictObject({
    kind: z.literal('phase-departure'),
    upToHz: hertz,
    withinDegrees: z.number().positive().max(36_000),
    /** With the best constant delay over 0 … upToHz taken off first. */
    removeDelay: z.boolean(),
  }),
  /** Largest minus least group delay in the band. */
  z.strictObject({ kind: z.literal('delay-spread'), fromHz: hertzOrZero, toHz: hertz, atMostSeconds: seconds }),
  /** Group delay in the band, or at one frequency when both ends are the same. */
  z.strictObject({ kind: z.literal('delay'), fromHz: hertzOrZero, toHz: hertzOrZero, atMostSeconds: seconds }),
  /** Of the step response, in per cent of its final value (of 1 where that is 0). */
  z.strictObject({ kind: z.literal('overshoot'), atMostPercent: z.number().nonnegative().max(1000) }),
  /** From when on the step response stays within ±`withinPercent` of its final value. */
  z.strictObject({
    kind: z.literal('settling'),
    atMostSeconds: seconds,
    withinPercent: z.number().positive().max(50),
  }),
  /** Multiplications per sample. */
  z.strictObject({ kind: z.literal('cost'), atMostMultiplies: z.number().positive().max(1_000_000) }),
  /** Coefficients held in this many bits, sign included, move the magnitude by no more than `withinDb` where a pass line asks for it. */
  z.strictObject({ kind: z.literal('word-length'), bits: z.int().min(4).max(53), withinDb: decibels }),
])

export const sheetSchema = z.array(requirementSchema).max(MOST_REQUIREMENTS).readonly()

export type Requirement = z.infer<typeof requirementSchema>
export type RequirementKind = Requirement['kind']
export type RequirementSheet = readonly Requirement[]
