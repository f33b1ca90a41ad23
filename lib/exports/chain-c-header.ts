import { isStoredTaps, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import { chainText } from '@/lib/chains/statement'
import { stateWords } from '@/lib/designs/words'
import type { StoredChainPart, StoredDecimation } from '@/lib/chains/stored-numbers'
import { array, commentLines } from './c-parts'
import type { ChainSource } from './chain-source'
import { caution } from './coefficient-set'
import { cComment, cString } from './escape'
import { cLiteral, decimalText } from './numbers'

/*
 * One self-contained C99 header with what the decimation stages of a chain run: nothing but numbers, which firmware feeds to its own filters.
 * Whatever a stage is named for people stands in comments alone; identifiers count the stages.
 */

const literal = (value: number): string => cLiteral(value, 'double', 'decimal')
const hertz = (value: number): string => `${decimalText(value, 'double')} Hz`

export function chainCHeaderFile(source: ChainSource, name: string): string {
  const { version } = source
  const upper = name.toUpperCase()
  const { decimations } = version.numbers
  const converter = version.spec.stages.find((stage) => stage.kind === 'converter')
  return [
    '/*',
    ' * Polewright chain: coefficients of its decimation stages',
    ' *',
    ...aboutLines(source).flatMap(([key, text]) => commentLines(`${key}: ${cComment(text)}`)),
    ' */',
    `#ifndef ${upper}_H`,
    `#define ${upper}_H`,
    '',
    `#define ${upper}_VERSION ${version.number}`,
    `#define ${upper}_SHA256 ${cString(version.checksum)}`,
    `#define ${upper}_CONVERTER_RATE_HZ ${literal(converter?.sampleRateHz ?? 0)}`,
    `#define ${upper}_OUTPUT_RATE_HZ ${literal(version.figures.outputRateHz)}`,
    `#define ${upper}_DECIMATIONS ${decimations.length}`,
    '',
    ...decimations.flatMap((stage, index) => stageLines(stage, index + 1, decimations.length, name)),
    `#endif /* ${upper}_H */`,
    '',
  ].join('\n')
}

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
    [
      'order of use',
      'as numbered, from the converter to the stored sample; what stands between them is not in this file',
    ],
    ['number type', 'double precision (IEEE 754 binary64)'],
    ['delay', 'group delay in the middle of the kept band, seconds'],
    ['SHA-256', version.checksum],
    ['checksum covers', "the version's spec, figures and numbers; the JSON file of the chain carries them"],
    ['engine', version.engineVersion],
    ['caution', caution],
  ]
}

function stageLines(stage: StoredDecimation, at: number, of: number, name: string): string[] {
  const own = `${name}_d${at}`
  const upper = own.toUpperCase()
  return [
    ...blockComment(
      `Decimation ${at} of ${of} (stage ${stage.stageId}): from ${hertz(stage.inRateHz)} down by ${stage.factor} to ${hertz(stage.outRateHz)}. ` +
        orderWords(stage),
    ),
    `#define ${upper}_FACTOR ${stage.factor}`,
    `#define ${upper}_IN_RATE_HZ ${literal(stage.inRateHz)}`,
    `#define ${upper}_OUT_RATE_HZ ${literal(stage.outRateHz)}`,
    `#define ${upper}_DELAY_SECONDS ${literal(stage.delaySeconds)}`,
    ...stage.parts.flatMap((part, index) => partLines(part, nameOf(stage, index, own))),
    '',
  ]
}

const hasCic = ({ parts }: StoredDecimation) => parts.some(({ kind }) => kind === 'cic')

/** What the firmware does with the parts, in order. */
function orderWords(stage: StoredDecimation): string {
  if (!hasCic(stage))
    return 'Filter at the rate ahead, then keep every FACTOR-th sample; taps need computing for those alone.'
  const cic =
    'CIC_ORDER integrators at the rate ahead, keep every FACTOR-th sample, as many combs over CIC_COMB_DELAY samples each, divide by CIC_GAIN'
  return stage.parts.length > 1 ? `${cic}, then filter at the rate behind.` : `${cic}.`
}

/** A filter behind a CIC filter lifts its droop. */
const nameOf = (stage: StoredDecimation, index: number, own: string): string =>
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
