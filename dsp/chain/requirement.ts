import * as z from 'zod'
import { MOST_CHAIN_REQUIREMENTS } from './limits'

/* The lines that a chain must meet. */

const hertz = z.number().positive().max(1e9)
const decibels = z.number().positive().max(300)

export const chainRequirementSchema = z.discriminatedUnion('kind', [
  /** From the kept band's lower edge up to here the response stays within ± `rippleDb` and every image `aliasDb` down. */
  z.strictObject({ kind: z.literal('usable-band'), toHz: hertz, rippleDb: decibels, aliasDb: decibels }),
  /** Magnitude within ± this of unity. */
  z.strictObject({
    kind: z.literal('flatness'),
    fromHz: z.number().nonnegative().max(1e9),
    toHz: hertz,
    withinDb: decibels,
  }),
  /** Every image that lands below `toHz` is at least so far down. */
  z.strictObject({ kind: z.literal('alias-floor'), toHz: hertz, atLeastDb: decibels }),
  /** Phase within ± this of a straight line, the best constant delay removed. */
  z.strictObject({
    kind: z.literal('phase'),
    fromHz: z.number().nonnegative().max(1e9),
    toHz: hertz,
    withinDegrees: z.number().positive().max(36_000),
  }),
  /** Group delay from the sensor to the stored sample. */
  z.strictObject({ kind: z.literal('delay'), atHz: hertz, atMostSeconds: z.number().positive().max(1e6) }),
  /** Between any two channels, at the 95th percentile of the tolerance run. */
  z.strictObject({
    kind: z.literal('channel-match'),
    toHz: hertz,
    withinDegrees: z.number().positive().max(360),
    withinDb: decibels,
  }),
  z.strictObject({ kind: z.literal('effective-bits'), atLeast: z.number().positive().max(40) }),
])

export const chainSheetSchema = z.array(chainRequirementSchema).max(MOST_CHAIN_REQUIREMENTS).readonly()

export type ChainRequirement = z.infer<typeof chainRequirementSchema>
export type ChainRequirementKind = ChainRequirement['kind']
