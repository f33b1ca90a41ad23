import * as z from 'zod'
import { canonicalText } from '@/lib/designs/stored-coefficients'
import { stateWords } from '@/lib/designs/words'
import { structureWords } from './about'
import { caution } from '../caution'
import type { CoefficientSet, Numbers } from './coefficient-set'
import { asciiJson } from './escape'
import { feedbackSigns, numberTypes } from './options'

/*
 * The documented file: this schema is what is written, what is served as JSON Schema, and what tests read the file back with.
 */

const section = z
  .strictObject({ b0: z.number(), b1: z.number(), b2: z.number(), a1: z.number(), a2: z.number() })
  .meta({ description: 'One second-order section; b2 = a2 = 0 in a first-order one.' })

const root = z.strictObject({ re: z.number(), im: z.number() })
const roots = { gain: z.number(), zeros: z.array(root), poles: z.array(root) }

const symmetry = z.enum(['even', 'odd', 'none']).meta({
  description: 'even: tap k equals tap N−1−k of N. odd: it is its negative. none: neither.',
})

const keptRecursive = z.strictObject({
  format: z.literal(1),
  sampleRateHz: z.number(),
  ...roots,
  sections: z.array(section),
  parallel: z.strictObject({ direct: z.number(), terms: z.array(section) }).nullable(),
  analog: z
    .strictObject(roots)
    .nullable()
    .meta({ description: 'The analog original; roots in rad/s. null where it was given as measured.' }),
})

const keptTaps = z.strictObject({
  format: z.literal(1),
  sampleRateHz: z.number(),
  taps: z.array(z.number()),
  symmetry,
})

/** The numbers of one filter, whatever is said of them where they stand. */
export const keptNumbersSchema = z.union([keptRecursive, keptTaps])

const kept = keptNumbersSchema.meta({
  description:
    'The numbers kept with the version, in double precision and with subtracted feedback. Written without spaces, keys in this ' +
    'order, as ECMAScript’s JSON.stringify writes it, their SHA-256 is the checksum.',
})

export const coefficientSetSchema = z
  .strictObject({
    format: z.literal('polewright coefficient set'),
    formatVersion: z.literal(1),
    name: z.string().meta({ description: 'What identifiers made from this set begin with.' }),
    design: z.strictObject({ drawingNumber: z.string(), title: z.string(), project: z.string() }),
    version: z.strictObject({
      number: z.int(),
      state: z.string(),
      note: z.string(),
      savedAt: z.string().meta({ description: 'ISO 8601, UTC.' }),
      savedBy: z.string(),
      engine: z.string().meta({ description: 'Version of the program that computed the numbers.' }),
    }),
    statement: z.string().meta({ description: 'The design as one sentence.' }),
    sampleRateHz: z.number().positive(),
    held: z.strictObject({ frequenciesHz: z.array(z.number()), words: z.string() }).meta({
      description:
        'Frequencies at which the digital response is the analog one by construction; empty when there are none.',
    }),
    structure: z
      .string()
      .meta({ description: 'The structure in words; `coefficients.structure` names it for programs.' }),
    numberType: z.enum(numberTypes).meta({ description: 'double: IEEE 754 binary64. float: binary32.' }),
    feedback: z.enum(feedbackSigns).nullable().meta({
      description:
        'subtract: y = b·x − a·y. add: y = b·x + a·y, the coefficients a being negated. null: taps have no feedback.',
    }),
    differenceEquation: z.string().meta({ description: 'What the firmware computes, with the signs as listed here.' }),
    coefficients: z.discriminatedUnion('structure', [
      z.strictObject({ structure: z.literal('sections'), sections: z.array(section) }).meta({
        description: 'A cascade: the output of each section is the input of the next.',
      }),
      z.strictObject({ structure: z.literal('ratio'), b: z.array(z.number()), a: z.array(z.number()) }).meta({
        description: 'b0 … bN and a1 … aN; the coefficient of y[n] is 1 and is not listed.',
      }),
      z.strictObject({ structure: z.literal('taps'), taps: z.array(z.number()), symmetry }).meta({
        description: 'h0 … hN of an FIR filter.',
      }),
    ]),
    gainPlacement: z.string(),
    rounding: z.strictObject({
      worstDeviationDb: z.number().nonnegative().meta({
        description:
          'How far rounding the coefficients to the number type moves the response, in dB, within 80 dB of its peak.',
      }),
    }),
    steadyState: z
      .union([z.array(z.tuple([z.number(), z.number()])), z.array(z.number())])
      .nullable()
      .meta({
        description:
          'Initial state of direct form II transposed that makes an input of constant 1 start settled: a pair for each section, or one ' +
          'number for each delay of the ratio. Multiply by the level of the input. null for taps, whose state is the inputs before: fill ' +
          'it with the level.',
      }),
    testVector: z.strictObject({ input: z.array(z.number()), output: z.array(z.number()) }).meta({
      description:
        'Started from zero state; the output is that of direct form II transposed in the number type, for taps that of the direct ' +
        'form, products added from the oldest sample’s to the newest’s.',
    }),
    checksum: z.strictObject({
      algorithm: z.literal('SHA-256'),
      of: z.literal('kept'),
      hex: z.string().regex(/^[0-9a-f]{64}$/),
    }),
    kept,
    caution: z.string(),
  })
  .meta({ title: 'Polewright coefficient set' })

export type CoefficientSetFile = z.infer<typeof coefficientSetSchema>

/** The schema as JSON Schema (draft 2020-12). */
export const coefficientSetJsonSchema = () => z.toJSONSchema(coefficientSetSchema)

export function jsonFile(set: CoefficientSet): string {
  const { source, numbers, options } = set
  const { design, version } = source
  const file: CoefficientSetFile = {
    format: 'polewright coefficient set',
    formatVersion: 1,
    name: set.name,
    design: { drawingNumber: design.drawingNumber, title: design.title, project: design.projectName },
    version: {
      number: version.number,
      state: stateWords[version.state],
      note: version.note,
      savedAt: version.savedAt,
      savedBy: version.savedBy,
      engine: version.engineVersion,
    },
    statement: set.statement,
    sampleRateHz: set.sampleRateHz,
    held: { frequenciesHz: [...set.heldHz], words: set.heldWords },
    structure: structureWords(set),
    numberType: options.number,
    feedback: numbers.structure === 'taps' ? null : options.feedback,
    differenceEquation: set.equation,
    coefficients: writtenNumbers(numbers),
    gainPlacement: set.gainPlacement,
    rounding: { worstDeviationDb: set.rounding.worstDeviationDb },
    steadyState: writtenState(numbers),
    testVector: { input: [...set.testVector.input], output: [...set.testVector.output] },
    checksum: { algorithm: 'SHA-256', of: 'kept', hex: version.checksum },
    kept: kept.parse(JSON.parse(canonicalText(source.kept))),
    caution,
  }
  return `${asciiJson(file)}\n`
}

function writtenNumbers(numbers: Numbers): CoefficientSetFile['coefficients'] {
  switch (numbers.structure) {
    case 'sections':
      return { structure: 'sections', sections: [...numbers.sections] }
    case 'ratio':
      return { structure: 'ratio', b: [...numbers.b], a: [...numbers.a] }
    case 'taps':
      return { structure: 'taps', taps: [...numbers.taps], symmetry: numbers.symmetry }
  }
}

function writtenState(numbers: Numbers): CoefficientSetFile['steadyState'] {
  if (numbers.structure === 'taps') return null
  if (numbers.structure === 'ratio') return [...numbers.steadyState]
  return numbers.steadyState.map(([first = 0, second = 0]): [number, number] => [first, second])
}
