import * as z from 'zod'
import { chainUnitSchema } from '@/dsp'
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
  lines: z
    .array(
      z.strictObject({
        value: z.number().nullable(),
        limit: z.number(),
        unit: z.enum(['Hz', 'dB', '°', 's', 'bits']),
        margin: z.number().nullable().meta({ description: 'Room left, 0 or more where the line is met.' }),
        met: z.boolean().nullable(),
        worstHz: z.number().nullable().meta({ description: 'Where the line is nearest to its limit.' }),
        reason: z.string().optional(),
      }),
    )
    .optional()
    .meta({
      description:
        'The lines of the sheet in their order, as they were judged; null where one could not be. Levels are held within ± 400 dB. Missing in versions that were saved before they were kept.',
    }),
})

const decimation = {
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
    .meta({
      description:
        'In signal order; each says at which rate it runs. A CIC filter keeps every factor-th sample between its integrators and its ' +
        'combs; without one the only filter runs at the rate ahead, and every factor-th of its samples is kept, the first among them.',
    }),
}

const designName = z.strictObject({
  designId: z.uuid(),
  version: z.int(),
  drawing: z.string(),
  title: z.string(),
})

const linear = { stageId: z.string(), rateHz: z.number(), delaySeconds: z.number() }

const digitalStage = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('decimate'),
    ...decimation,
    design: designName.nullable().meta({ description: 'The design version that the filter is, if it is one.' }),
  }),
  z.strictObject({
    kind: z.literal('integrate'),
    ...linear,
    times: z.union([z.literal(1), z.literal(2)]),
    rule: z.literal('trapezoidal').meta({
      description:
        'y[n] = y[n−1] + (x[n] + x[n−1]) / (2 · rateHz), so many times over, behind the high-pass; from rest all values before are 0.',
    }),
    highPass: keptNumbersSchema.meta({
      description: 'Runs ahead of the integrals, as sections whose feedback is subtracted.',
    }),
    fromUnit: chainUnitSchema,
    toUnit: chainUnitSchema,
    scale: z.number().meta({
      description: 'What the integral, in fromUnit times seconds, is multiplied by to be in toUnit.',
    }),
  }),
  z.strictObject({
    kind: z.literal('shape'),
    ...linear,
    design: designName,
    coefficients: keptNumbersSchema,
  }),
])

export const storedChainNumbersSchema = z.discriminatedUnion('format', [
  z.strictObject({
    format: z.literal(2),
    stages: z.array(digitalStage).meta({
      description:
        'Everything between the converter’s samples, divided by the sensitivity, and the stored ones: in signal order, bypassed stages ' +
        'left out.',
    }),
  }),
  z
    .strictObject({
      format: z.literal(1),
      decimations: z
        .array(z.strictObject(decimation))
        .meta({ description: 'In signal order, bypassed stages left out.' }),
    })
    .meta({ description: 'Of versions that were saved before stages that integrate and shape were kept.' }),
])

export const chainTestVectorSchema = z.strictObject({
  inputRateHz: z.number().meta({ description: 'The converter’s rate.' }),
  voltsPerUnit: z.number().meta({ description: 'The sensitivity; the digital part begins by dividing by it.' }),
  hold: z.int().meta({ description: 'Each input value stands for so many samples in a row.' }),
  inputVolts: z.array(z.number()).meta({ description: 'What the converter reads, from rest.' }),
  unit: chainUnitSchema.meta({ description: 'Of the stored samples.' }),
  stored: z.array(z.number()).meta({
    description: 'What must be stored; the first belongs to the first input, and every factor-th after it is kept.',
  }),
  tolerance: z.number().meta({ description: 'Largest difference, in that unit, of a run in double precision.' }),
})
