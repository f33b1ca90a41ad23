import * as z from 'zod'
import { chainSpecSchema, chainUnitSchema } from '@/dsp'
import { chainFiguresSchema, chainTestVectorSchema, storedChainNumbersSchema } from './chain-kept'
import { chainText } from '@/lib/chains/statement'
import { stateWords } from '@/lib/designs/words'
import { caution } from '../caution'
import { asciiJson } from './escape'
import type { ChainSource } from './chain-source'
import { chainInput, chainTestVector, storedUnit } from './chain-test-vector'

/*
 * The documented file of a chain: this schema is what is written, what is served as JSON Schema, and what tests read the file back with.
 */

export const chainFileSchema = z
  .strictObject({
    format: z.literal('polewright chain'),
    formatVersion: z.literal(2),
    name: z.string().meta({ description: 'What identifiers made from this chain begin with.' }),
    chain: z.strictObject({ drawingNumber: z.string(), title: z.string(), project: z.string() }),
    version: z.strictObject({
      number: z.int(),
      state: z.string(),
      note: z.string(),
      savedAt: z.string().meta({ description: 'ISO 8601, UTC.' }),
      savedBy: z.string(),
      engine: z.string().meta({ description: 'Version of the program that computed the numbers.' }),
    }),
    statement: z.string().meta({ description: 'The chain as one sentence.' }),
    unit: chainUnitSchema.meta({ description: 'Of the sensor, to which all gains are referred.' }),
    spec: chainSpecSchema.meta({
      description:
        'The chain as it was stated: its stages in signal order, the band that is kept, the requirement sheet, the interferers and the ' +
        'settings of the tolerance run. Frequencies in Hz, levels in the sensor’s unit.',
    }),
    figures: chainFiguresSchema.meta({ description: 'What the version was saved with.' }),
    numbers: storedChainNumbersSchema.meta({
      description:
        'What runs between the converter and the stored sample, in double precision and with subtracted feedback: a section is ' +
        'y[n] = b0·x[n] + b1·x[n−1] + b2·x[n−2] − a1·y[n−1] − a2·y[n−2], and sections follow each other.',
    }),
    test: chainTestVectorSchema.nullable().meta({
      description:
        'A run of the whole digital part on these numbers, to hold firmware to. null where the version was saved before stages that ' +
        'integrate and shape were kept, and has some.',
    }),
    checksum: z.strictObject({
      algorithm: z.literal('SHA-256'),
      of: z.literal('spec, figures and numbers').meta({
        description:
          'As one object of these three keys, written by RFC 8785: keys in order, no spaces, numbers as ECMAScript writes them.',
      }),
      hex: z.string().regex(/^[0-9a-f]{64}$/),
    }),
    caution: z.string(),
  })
  .meta({ title: 'Polewright chain' })

/** The schema as JSON Schema (draft 2020-12). */
export const chainJsonSchema = () => z.toJSONSchema(chainFileSchema)

export function chainJsonFile({ chain, version }: ChainSource, name: string): string {
  const { spec, figures, numbers } = version
  const { unit, rateHz, voltsPerUnit } = chainInput(spec)
  const test = chainTestVector(version)
  const file = chainFileSchema.parse({
    format: 'polewright chain',
    formatVersion: 2,
    name,
    chain: { drawingNumber: chain.drawingNumber, title: chain.title, project: chain.projectName },
    version: {
      number: version.number,
      state: stateWords[version.state],
      note: version.note,
      savedAt: version.savedAt,
      savedBy: version.savedBy,
      engine: version.engineVersion,
    },
    statement: chainText(spec),
    unit,
    spec,
    figures,
    numbers,
    test: test && { inputRateHz: rateHz, voltsPerUnit, unit: storedUnit(spec), ...test },
    checksum: { algorithm: 'SHA-256', of: 'spec, figures and numbers', hex: version.checksum },
    caution,
  })
  return `${asciiJson(file)}\n`
}
