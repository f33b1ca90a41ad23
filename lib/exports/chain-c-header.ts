import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { chainText } from '@/lib/chains/statement'
import { stateWords } from '@/lib/designs/words'
import {
  digitalStagesOf,
  type StoredChainPart,
  type StoredDesignName,
  type StoredDigitalStage,
} from '@/lib/chains/stored-numbers'
import { array, commentLines } from './c-parts'
import type { ChainSource } from './chain-source'
import { chainInput, chainTestVector, lacksStages, storedUnit, type ChainTestVector } from './chain-test-vector'
import { caution } from '../caution'
import { cComment, cString } from './escape'
import { cLiteral, decimalText } from './numbers'

/*
 * One self-contained C99 header with what the digital stages of a chain run: numbers, which firmware feeds to its own filters, and samples
 * to hold it to. Whatever a stage is named for people stands in comments alone; identifiers count the stages.
 */

const literal = (value: number): string => cLiteral(value, 'double', 'decimal')
const hertz = (value: number): string => `${decimalText(value, 'double')} Hz`

export function chainCHeaderFile(source: ChainSource, name: string): string {
  const { version } = source
  const upper = name.toUpperCase()
  const stages = digitalStagesOf(version.numbers)
  const { rateHz, voltsPerUnit } = chainInput(version.spec)
  const body = [
    ...stages.flatMap((stage, index) => stageLines(stage, index + 1, stages.length, name)),
    ...testLines(source, name),
  ]
  return [
    '/*',
    ' * Polewright chain: what its digital stages run',
    ' *',
    ...aboutLines(source).flatMap(([key, text]) => commentLines(`${key}: ${cComment(text)}`)),
    ' */',
    `#ifndef ${upper}_H`,
    `#define ${upper}_H`,
    '',
    `#define ${upper}_VERSION ${version.number}`,
    `#define ${upper}_SHA256 ${cString(version.checksum)}`,
    `#define ${upper}_CONVERTER_RATE_HZ ${literal(rateHz)}`,
    `#define ${upper}_OUTPUT_RATE_HZ ${literal(version.figures.outputRateHz)}`,
    '/* Of the sensor: what the converter reads, in volts, is divided by it ahead of the first stage. */',
    `#define ${upper}_VOLTS_PER_UNIT ${literal(voltsPerUnit)}`,
    `#define ${upper}_STAGES ${stages.length}`,
    '',
    ...body,
    ...contentsLines(body, name),
    `#endif /* ${upper}_H */`,
    '',
  ].join('\n')
}

/** A function that refers to every array, so that a file which uses but some of them compiles without a warning. */
function contentsLines(body: readonly string[], name: string): string[] {
  const arrays = body.flatMap((line) => /^static const double (\w+)\[/.exec(line)?.[1] ?? [])
  if (arrays.length === 0) return []
  return [
    '/* The arrays above, by their order; 0 behind the last. It also keeps compilers quiet about those that are not used. */',
    `static inline const void *${name}_contents(unsigned at)`,
    '{',
    '  switch (at) {',
    ...arrays.map((own, at) => `  case ${at}: return ${own};`),
    '  default: return 0;',
    '  }',
    '}',
    '',
  ]
}

const keptBefore =
  'saved before stages that integrate and shape were kept: THEY ARE MISSING HERE, and the stages below alone do not make the stored sample; ' +
  'save the chain again for a complete file'

function aboutLines({ chain, version }: ChainSource): readonly (readonly [string, string])[] {
  return [
    ['chain', chain.drawingNumber],
    ['title', chain.title],
    ['project', chain.projectName],
    ['version', String(version.number)],
    ['state', stateWords[version.state]],
    ['saved', `${version.savedAt} by ${version.savedBy}`],
    ['note', version.note],
    ['statement', chainText(version.spec)],
    ...(lacksStages(version) ? ([['incomplete', keptBefore]] as const) : []),
    [
      'order of use',
      'volts that the converter read, divided by VOLTS_PER_UNIT, then the stages as numbered; what comes out of the last one is stored, ' +
        `in ${storedUnit(version.spec)}`,
    ],
    ['start', 'from rest: everything before the first sample is 0'],
    [
      'sections',
      'y[n] = b0*x[n] + b1*x[n-1] + b2*x[n-2] - a1*y[n-1] - a2*y[n-2], feedback being subtracted; each feeds the next',
    ],
    ['taps', 'y[n] = h0*x[n] + h1*x[n-1] + ... + hN*x[n-N]'],
    ['decimation', 'keeps samples 0, FACTOR, 2*FACTOR ... of what comes in'],
    ['number type', 'double precision (IEEE 754 binary64)'],
    ['delay', 'group delay in the middle of the kept band, seconds'],
    ['SHA-256', version.checksum],
    ['checksum covers', "the version's spec, figures and numbers; the JSON file of the chain carries them"],
    ['engine', version.engineVersion],
    ['caution', caution],
  ]
}

type Decimation = Extract<StoredDigitalStage, { kind: 'decimate' }>

function stageLines(stage: StoredDigitalStage, at: number, of: number, name: string): string[] {
  const own = `${name}_s${at}`
  const upper = own.toUpperCase()
  const head = (text: string) => blockComment(`Stage ${at} of ${of} (${stage.stageId}): ${text}`)
  const delay = `#define ${upper}_DELAY_SECONDS ${literal(stage.delaySeconds)}`
  switch (stage.kind) {
    case 'decimate':
      return [
        ...head(
          `decimation from ${hertz(stage.inRateHz)} down by ${stage.factor} to ${hertz(stage.outRateHz)}${designWords(stage.design)}. ` +
            orderWords(stage),
        ),
        `#define ${upper}_FACTOR ${stage.factor}`,
        `#define ${upper}_IN_RATE_HZ ${literal(stage.inRateHz)}`,
        `#define ${upper}_OUT_RATE_HZ ${literal(stage.outRateHz)}`,
        delay,
        ...stage.parts.flatMap((part, index) => partLines(part, nameOf(stage, index, own))),
        '',
      ]
    case 'integrate':
      return [
        ...head(
          `integration at ${hertz(stage.rateHz)}, ${stage.times === 1 ? 'once' : 'twice'}, from ${stage.fromUnit} to ${stage.toUnit}. ` +
            'The high-pass sections first; then, INTEGRALS times over, y[n] = y[n-1] + (x[n] + x[n-1]) / (2 * RATE_HZ); then times SCALE.',
        ),
        `#define ${upper}_RATE_HZ ${literal(stage.rateHz)}`,
        `#define ${upper}_INTEGRALS ${stage.times}`,
        `#define ${upper}_SCALE ${literal(stage.scale)}`,
        delay,
        ...filterLines(stage.highPass, `${own}_high_pass`),
        '',
      ]
    case 'shape':
      return [
        ...head(
          `shaping at ${hertz(stage.rateHz)}${designWords(stage.design)}. Every sample is filtered and handed on.`,
        ),
        `#define ${upper}_RATE_HZ ${literal(stage.rateHz)}`,
        delay,
        ...filterLines(stage.coefficients, own),
        '',
      ]
  }
}

const designWords = (design: StoredDesignName | null): string =>
  design === null ? '' : `, by design ${design.drawing}, version ${design.version}, "${design.title}"`

function testLines({ version }: ChainSource, name: string): string[] {
  const test = chainTestVector(version)
  return test === null ? [] : vectorLines(test, storedUnit(version.spec), name)
}

function vectorLines({ hold, inputVolts, stored, tolerance }: ChainTestVector, unit: string, name: string): string[] {
  const upper = name.toUpperCase()
  return [
    ...blockComment(
      'A test of all stages together, from rest: each input, in volts at the converter, stands for TEST_HOLD samples in a row at ' +
        `CONVERTER_RATE_HZ; stored are these samples, in ${unit}, the first at the first input. A run in double precision differs by no more ` +
        'than TEST_TOLERANCE; converters and other number types add their own steps.',
    ),
    `#define ${upper}_TEST_HOLD ${hold}`,
    `#define ${upper}_TEST_INPUTS ${inputVolts.length}`,
    `#define ${upper}_TEST_STORED ${stored.length}`,
    `#define ${upper}_TEST_TOLERANCE ${literal(tolerance)}`,
    ...array(`static const double ${name}_test_volts[${upper}_TEST_INPUTS]`, inputVolts.map(literal)),
    ...array(`static const double ${name}_test_stored[${upper}_TEST_STORED]`, stored.map(literal)),
    '',
  ]
}

const hasCic = ({ parts }: Decimation) => parts.some(({ kind }) => kind === 'cic')

/** What the firmware does with the parts, in order. */
function orderWords(stage: Decimation): string {
  if (!hasCic(stage))
    return 'Filter at the rate ahead, then keep every FACTOR-th sample; taps need computing for those alone.'
  const cic =
    'CIC_ORDER integrators at the rate ahead, keep every FACTOR-th sample, as many combs over CIC_COMB_DELAY samples each, divide by CIC_GAIN'
  return stage.parts.length > 1 ? `${cic}, then filter at the rate behind.` : `${cic}.`
}

/** A filter behind a CIC filter lifts its droop. */
const nameOf = (stage: Decimation, index: number, own: string): string =>
  index > 0 && hasCic(stage) ? `${own}_compensation` : own

function partLines(part: StoredChainPart, name: string): string[] {
  const upper = name.toUpperCase()
  if (part.kind === 'filter') return filterLines(part.coefficients, name)
  const { order, combDelay, factor } = part
  const reach = combDelay * factor
  return [
    `#define ${upper}_CIC_ORDER ${order}`,
    `#define ${upper}_CIC_COMB_DELAY ${combDelay}`,
    '/* (FACTOR * CIC_COMB_DELAY) to the power of CIC_ORDER, and the bits that it adds to those of the input. */',
    `#define ${upper}_CIC_GAIN ${literal(reach ** order)}`,
    `#define ${upper}_CIC_BIT_GROWTH ${Math.ceil(order * Math.log2(reach) - 1e-9)}`,
  ]
}

function filterLines(kept: StoredCoefficients, name: string): string[] {
  const upper = name.toUpperCase()
  if (isStoredTaps(kept)) {
    const count = `${upper}_TAPS`
    return [
      `#define ${count} ${kept.taps.length}`,
      '/* h0 ... hN, N + 1 of them. */',
      ...array(`static const double ${name}_taps[${count}]`, kept.taps.map(literal)),
    ]
  }
  const count = `${upper}_SECTIONS`
  const rows = kept.sections.map(({ b0, b1, b2, a1, a2 }) => `  {${[b0, b1, b2, a1, a2].map(literal).join(', ')}}`)
  return [
    `#define ${count} ${kept.sections.length}`,
    '/* A row for each section: b0, b1, b2, a1, a2; feedback is subtracted. With feedback every sample is computed. */',
    `static const double ${name}_sections[${count}][5] = {`,
    rows.join(',\n'),
    '};',
  ]
}

function blockComment(text: string): string[] {
  return ['/*', ...commentLines(cComment(text)), ' */']
}
