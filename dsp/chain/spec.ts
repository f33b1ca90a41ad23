import * as z from 'zod'
import { analogSpecSchema, designSpecSchema } from '../spec'
import { chainSheetSchema } from './requirement'
import {
  MOST_CHANNELS,
  MOST_CHAIN_STAGES,
  MOST_DECIMATION,
  MOST_INTERFERERS,
  MOST_STAGE_TAPS,
  LEAST_CHANNELS,
} from './limits'

/*
 * The written form of a chain, versioned by `format`: stages in signal order from the sensor to the stored sample. The shapes are checked
 * here; whether the stages make a chain is decided by compute.ts, which answers with a DesignError naming the field and what would work.
 */

const hertz = z.number().positive().max(1e9)
const decibels = z.number().positive().max(300)

/** What a sensor may measure in, and what the samples may be kept in; see units.ts for their factors. */
export const chainUnitSchema = z.enum(['g', 'm/s²', 'm/s', 'mm/s', 'm', 'mm', 'µm', 'Pa', 'N', 'µm/m', 'V'])

/** Names appear in sentences and in exports: control characters and marks that turn the reading direction would spoil both. */
const plainText = (most: number) =>
  z
    .string()
    .min(1)
    .max(most)
    .regex(/[\p{L}\p{N}\p{P}\p{S}]/u, 'A name has at least one character that can be seen.')
    .regex(
      /^[^\p{Cc}\p{Cs}\p{Bidi_Control}]*$/u,
      'A name has no control characters and no marks that turn the reading direction.',
    )
const plainName = plainText(60)

/**
 * A design version that a stage is tied to. Its spec is kept here, so that the chain can be computed by itself; whoever saves compares it
 * with the version it names.
 */
export const designLinkSchema = z.strictObject({
  designId: z.uuid(),
  version: z.int().min(1),
  drawing: plainText(60),
  title: plainText(120),
  spec: designSpecSchema,
})

const stageBase = {
  /** Names the stage within its chain, however the stages are reordered. */
  id: z.string().regex(/^[a-z0-9]{1,12}$/u),
  /** Handed through unchanged: no filter and no change of rate. A sensor and a converter can't be. */
  bypassed: z.boolean(),
}

export const sensorStageSchema = z.strictObject({
  ...stageBase,
  kind: z.literal('sensor'),
  name: plainName,
  unit: chainUnitSchema,
  /** Volts per unit, in the flat part of its band. */
  sensitivity: z.number().positive().max(1e9),
  /** H(s) = ω₀² / (s² + s·ω₀/Q + ω₀²). */
  resonance: z.strictObject({ f0Hz: hertz, q: z.number().positive().max(1e4) }).nullable(),
  /** Corner of the charge amplifier or of the AC-coupled input, Butterworth of this order. */
  highPass: z.strictObject({ cornerHz: hertz, order: z.int().min(1).max(4) }).nullable(),
})

export const analogStageSchema = z.strictObject({
  ...stageBase,
  kind: z.literal('analog'),
  source: z.discriminatedUnion('from', [
    z.strictObject({ from: z.literal('here'), analog: analogSpecSchema }),
    /** The analog original of the linked design. */
    z.strictObject({ from: z.literal('design'), link: designLinkSchema }),
  ]),
})

export const converterStageSchema = z.strictObject({
  ...stageBase,
  kind: z.literal('converter'),
  sampleRateHz: hertz,
  /** Ideal quantiser of so many bits over ± full scale, or a measured noise density at the input. */
  resolution: z.discriminatedUnion('by', [
    z.strictObject({ by: z.literal('bits'), bits: z.int().min(1).max(32) }),
    z.strictObject({ by: z.literal('noise'), voltsPerRootHz: z.number().positive().max(1) }),
  ]),
  /** Peak: the range is ± this many volts. */
  fullScaleVolts: z.number().positive().max(1e6),
  /** Order N of an averaging converter: H(f) = (sin(πf/fs) / (πf/fs))^N; null when it samples an instant. */
  averaging: z.strictObject({ order: z.int().min(1).max(5) }).nullable(),
})

const firTaps = z.int().min(3).max(MOST_STAGE_TAPS)

export const decimateStageSchema = z.strictObject({
  ...stageBase,
  kind: z.literal('decimate'),
  factor: z.int().min(2).max(MOST_DECIMATION),
  filter: z.discriminatedUnion('type', [
    /** Factor 2 alone; the stop band begins as far above a quarter of the input rate as the pass band ends below it. */
    z.strictObject({ type: z.literal('half-band'), taps: firTaps, attenuationDb: decibels }),
    z.strictObject({ type: z.literal('kaiser'), taps: firTaps, passHz: hertz, stopHz: hertz, attenuationDb: decibels }),
    z.strictObject({
      type: z.literal('equiripple'),
      taps: firTaps,
      passHz: hertz,
      stopHz: hertz,
      /** Weight of the stop band's error against the pass band's. */
      stopWeight: z.number().positive().max(1e6),
    }),
    z.strictObject({
      type: z.literal('cic'),
      /** N integrators and N combs. */
      order: z.int().min(1).max(8),
      /** M, samples of delay in a comb at the output rate. */
      combDelay: z.int().min(1).max(2),
      /** An FIR filter at the output rate that lifts the droop up to `passHz`. */
      compensation: z.strictObject({ taps: firTaps, passHz: hertz }).nullable(),
    }),
    z.strictObject({ type: z.literal('design'), link: designLinkSchema }),
  ]),
})

export const shapeStageSchema = z.strictObject({
  ...stageBase,
  kind: z.literal('shape'),
  filter: z.discriminatedUnion('type', [
    z.strictObject({ type: z.literal('design'), link: designLinkSchema }),
    z.strictObject({
      type: z.literal('integrate'),
      /** Once: acceleration to velocity, or velocity to displacement. Twice: acceleration to displacement. */
      times: z.union([z.literal(1), z.literal(2)]),
      /** Unit of the result. */
      unit: chainUnitSchema,
      /** Holds back what integration would raise without bound towards 0 Hz: Butterworth of this order. */
      highPass: z.strictObject({ cornerHz: hertz, order: z.int().min(1).max(4) }),
    }),
  ]),
})

export const chainStageSchema = z.discriminatedUnion('kind', [
  sensorStageSchema,
  analogStageSchema,
  converterStageSchema,
  decimateStageSchema,
  shapeStageSchema,
])

/** Something that is there beside the wanted signal, at the sensor. */
export const interfererSchema = z.discriminatedUnion('kind', [
  /** Level: amplitude (peak) in the sensor's unit. */
  z.strictObject({ kind: z.literal('tone'), name: plainName, hz: hertz, level: z.number().positive().max(1e9) }),
  /** Level: root mean square over the whole band, evenly spread, in the sensor's unit. */
  z.strictObject({
    kind: z.literal('band'),
    name: plainName,
    fromHz: hertz,
    toHz: hertz,
    level: z.number().positive().max(1e9),
  }),
])

const percent = z.number().positive().max(50)

export const toleranceSchema = z.strictObject({
  /** Of the parts: each R and C drawn evenly within ± so many percent; or of each section's f0 and Q directly. */
  spread: z.discriminatedUnion('of', [
    z.strictObject({ of: z.literal('parts'), percent }),
    z.strictObject({ of: z.literal('sections'), f0Percent: percent, qPercent: percent }),
  ]),
  channels: z.int().min(LEAST_CHANNELS).max(MOST_CHANNELS),
  seed: z.int().min(0).max(0xffffffff),
})

export const chainSpecSchema = z.strictObject({
  format: z.literal(1),
  stages: z.array(chainStageSchema).min(2).max(MOST_CHAIN_STAGES).readonly(),
  /** The band that the samples are kept for. */
  kept: z.strictObject({ fromHz: z.number().nonnegative().max(1e9), toHz: hertz }),
  sheet: chainSheetSchema,
  interferers: z.array(interfererSchema).max(MOST_INTERFERERS).readonly(),
  tolerance: toleranceSchema,
})

export type ChainUnit = z.infer<typeof chainUnitSchema>
export type DesignLink = z.infer<typeof designLinkSchema>
export type SensorStage = z.infer<typeof sensorStageSchema>
export type AnalogStage = z.infer<typeof analogStageSchema>
export type ConverterStage = z.infer<typeof converterStageSchema>
export type DecimateStage = z.infer<typeof decimateStageSchema>
export type ShapeStage = z.infer<typeof shapeStageSchema>
export type ChainStage = z.infer<typeof chainStageSchema>
export type ChainStageKind = ChainStage['kind']
export type Interferer = z.infer<typeof interfererSchema>
export type ToleranceSettings = z.infer<typeof toleranceSchema>
export type ChainSpec = z.infer<typeof chainSpecSchema>
