import * as z from 'zod'
import { keptNumbersSchema } from './json'

/* The shapes that a version of a chain is kept in, as its file states them. */

export const chainFiguresSchema = z.strictObject({
  outputRateHz: z.number().positive(),
  delaySeconds: z.number().meta({ description: 'Group delay in the middle of the kept band.' }),
  worstAliasDb: z.number().meta({
    description: 'The highest image that lands in the kept band, against a signal of the same level there.',
  }),
  effectiveBits: z.number(),
  multipliesPerStoredSample: z.number(),
  met: z.int().meta({ description: 'Lines of the sheet that are met.' }),
  missed: z.int(),
  unjudged: z.int(),
  match: z
    .array(z.strictObject({ hz: z.number(), gainDb: z.number(), phaseDegrees: z.number() }))
    .meta({ description: 'Between two channels, at the 95th percentile of the tolerance run of this version’s seed.' }),
})

export const storedChainNumbersSchema = z.strictObject({
  format: z.literal(1),
  decimations: z
    .array(
      z.strictObject({
        stageId: z.string(),
        factor: z.int(),
        inRateHz: z.number(),
        outRateHz: z.number(),
        delaySeconds: z.number(),
        parts: z
          .array(
            z.discriminatedUnion('kind', [
              z
                .strictObject({
                  kind: z.literal('cic'),
                  order: z.int(),
                  combDelay: z.int(),
                  factor: z.int(),
                  sampleRateHz: z.number(),
                })
                .meta({ description: 'Integrators and combs; its output is divided by (factor · combDelay)^order.' }),
              z.strictObject({ kind: z.literal('filter'), coefficients: keptNumbersSchema }),
            ]),
          )
          .meta({ description: 'In signal order; each says at which rate it runs.' }),
      }),
    )
    .meta({ description: 'In signal order, bypassed stages left out.' }),
})
