import {
  DesignError,
  steadyState,
  toTransferFunction,
  isFamilyDesign,
  isFir,
  isFirDesign,
  type DesignSpec,
  type DigitalFilter,
  type FirFilter,
  type Section,
  type TransferFunction,
} from '@/dsp'
import { statementText } from '@/lib/designs/statement'
import { filtersOf, type StoredCoefficients } from '@/lib/designs/stored-coefficients'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { differenceEquation } from './equation'
import { defaultIdentifier } from './names'
import { decimalText, negated, roundTo, type NumberType } from './numbers'
import type { ExportOptions } from './options'
import { runCascade, runDirectForm, runRatio, steadyRatioState } from './reference-run'
import { effectOfRatio, effectOfSections, effectOfTaps, type RoundingEffect } from './rounding'
import { checkStructure } from './structures'
import { tapsTestLength, testInput } from './test-vector'

/** What a file is made from: a version and the numbers that were kept with it. */
export interface ExportSource {
  readonly design: Pick<DesignRecord, 'drawingNumber' | 'title' | 'projectName'>
  readonly version: VersionSummary
  /** The numbers kept with the version; on the server never a recomputation. */
  readonly kept: StoredCoefficients
}

/** The numbers in the chosen structure, type and sign; `a` and every row leave out the coefficient 1 of y[n]. */
export type Numbers =
  | {
      readonly structure: 'sections'
      readonly sections: readonly Section[]
      readonly steadyState: readonly (readonly number[])[]
    }
  | {
      readonly structure: 'ratio'
      readonly b: readonly number[]
      readonly a: readonly number[]
      readonly steadyState: readonly number[]
    }
  | {
      readonly structure: 'taps'
      readonly taps: readonly number[]
      readonly symmetry: FirFilter['symmetry']
    }

/** Everything a file states, ready to be written in any format. */
export interface CoefficientSet {
  readonly source: ExportSource
  readonly options: ExportOptions
  readonly name: string
  readonly statement: string
  readonly sampleRateHz: number
  /** Frequencies at which the digital response equals the analog one by construction; empty when there are none. */
  readonly heldHz: readonly number[]
  readonly heldWords: string
  readonly equation: string
  readonly numbers: Numbers
  readonly gainPlacement: string
  readonly rounding: RoundingEffect
  readonly testVector: { readonly input: readonly number[]; readonly output: readonly number[] }
}

/** Above this a ratio b/a is refused. */
export const ratioLimitDb = 0.01

/**
 * @throws DesignError field `structure`: the version hasn't that structure, nearest the usual one, or the ratio b/a is badly conditioned, nearest `sections`; field `number`: single precision
 *   can't hold the filter, nearest `double`
 */
export function coefficientSet(source: ExportSource, options: ExportOptions): CoefficientSet {
  const { version, design, kept } = source
  checkStructure(kept, options.structure)
  const { digital } = filtersOf(kept)
  const run = isFir(digital)
    ? tapsNumbers(digital, options.number)
    : options.structure === 'ratio'
      ? ratioNumbers(digital, options.number)
      : cascadeNumbers(digital, options.number)
  const input = run.numbers.structure === 'taps' ? testInput(tapsTestLength(run.numbers.taps.length)) : testInput()
  const output = referenceRun(run.numbers, input, options.number)
  refuseEndlessOutput(output, options.number)
  return {
    source,
    options,
    name: options.name ?? defaultIdentifier(design.drawingNumber, version.number),
    statement: statementText(version.spec),
    sampleRateHz: digital.sampleRateHz,
    ...held(version.spec),
    equation: differenceEquation(options.structure, options.feedback, orderOf(run.numbers)),
    numbers: options.feedback === 'add' ? withAddedFeedback(run.numbers) : run.numbers,
    gainPlacement: gainWords(run.numbers),
    rounding: run.effect,
    testVector: { input: Array.from(input), output: Array.from(output, (value) => roundTo(options.number, value)) },
  }
}

function referenceRun(numbers: Numbers, input: Float64Array, type: NumberType): Float64Array {
  switch (numbers.structure) {
    case 'sections':
      return runCascade(numbers.sections, input, type)
    case 'ratio':
      return runRatio(numbers.b, numbers.a, input, type)
    case 'taps':
      return runDirectForm(numbers.taps, input, type)
  }
}

interface Run {
  readonly numbers: Numbers
  readonly effect: RoundingEffect
}

function cascadeNumbers(digital: DigitalFilter, type: NumberType): Run {
  const sections = digital.sections.map((section) => roundedSection(section, type))
  refuseOverflow(sections.flatMap(({ b0, b1, b2, a1, a2 }) => [b0, b1, b2, a1, a2]))
  const effect = effectOfSections(digital, sections)
  if (!effect.stable)
    throw new DesignError(
      'single-unstable',
      'number',
      'Rounded to single precision a pole of this filter leaves the unit circle; hand it over in double precision.',
      'double',
    )
  const vanished = digital.sections.some(({ b0, b1, b2 }, index) => {
    const rounded = sections[index]
    return rounded === undefined || isLost(b0, rounded.b0) || isLost(b1, rounded.b1) || isLost(b2, rounded.b2)
  })
  if (vanished)
    throw new DesignError(
      'single-underflow',
      'number',
      'A coefficient of this filter is smaller than single precision holds with all its digits (1.18e-38); hand it over in double precision.',
      'double',
    )
  const state = steadyState(sections)
  const steady = sections.map((_, k) => [roundTo(type, state[2 * k] ?? 0), roundTo(type, state[2 * k + 1] ?? 0)])
  return { numbers: { structure: 'sections', sections, steadyState: steady }, effect }
}

/** Taps that are too small for singles do no harm beside larger ones; that the largest is lost, does. */
function tapsNumbers(digital: FirFilter, type: NumberType): Run {
  const taps = Array.from(digital.taps, (tap) => roundTo(type, tap))
  refuseOverflow(taps)
  const largest = digital.taps.reduce((most, tap) => Math.max(most, Math.abs(tap)), 0)
  if (isLost(largest, roundTo(type, largest)))
    throw new DesignError(
      'single-underflow',
      'number',
      'The taps of this filter are smaller than single precision holds with all its digits (1.18e-38); hand it over in double precision.',
      'double',
    )
  return { numbers: { structure: 'taps', taps, symmetry: digital.symmetry }, effect: effectOfTaps(digital, taps) }
}

function refuseOverflow(rounded: readonly number[]): void {
  if (rounded.every(Number.isFinite)) return
  throw new DesignError(
    'single-overflow',
    'number',
    'A coefficient of this filter is larger than single precision holds (3.4e38); hand it over in double precision.',
    'double',
  )
}

function refuseEndlessOutput(output: Float64Array, type: NumberType): void {
  if (output.every(Number.isFinite)) return
  const precision = type === 'float' ? 'single' : 'double'
  throw new DesignError(
    'test-vector-overflow',
    'number',
    `Run on its test vector, this filter gives more than ${precision} precision holds.`,
    ...(type === 'float' ? (['double'] as const) : []),
  )
}

const smallestSingle = 2 ** -126
const isLost = (value: number, rounded: number) =>
  value !== 0 && Math.abs(rounded) < smallestSingle && rounded !== value

function roundedSection(section: Section, type: NumberType): Section {
  return {
    b0: roundTo(type, section.b0),
    b1: roundTo(type, section.b1),
    b2: roundTo(type, section.b2),
    a1: roundTo(type, section.a1),
    a2: roundTo(type, section.a2),
  }
}

/** Why b/a can't be handed over, or null when it can; screens show it beside the choice before anybody asks for the file. */
export function ratioRefusal(digital: DigitalFilter, type: NumberType): DesignError | null {
  try {
    ratioNumbers(digital, type)
    return null
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
}

function ratioNumbers(digital: DigitalFilter, type: NumberType): Run {
  const exact = transferFunction(digital)
  if (!exact.stable || !(exact.worstDeviationDb <= ratioLimitDb)) throw badRatio(exact, 'double')
  const b = Array.from(exact.b, (value) => roundTo(type, value))
  const a = Array.from(exact.a.subarray(1), (value) => roundTo(type, value))
  const effect = effectOfRatio(digital, b, a)
  if (!effect.stable || !(effect.worstDeviationDb <= ratioLimitDb)) throw badRatio(effect, type)
  if (b.some((value, k) => isLost(exact.b[k] ?? 0, value)))
    throw new DesignError(
      'ratio-underflow',
      'structure',
      'As b/a, a coefficient of this filter is smaller than single precision holds with all its digits; hand over the sections, over which the gain is shared.',
      'sections',
    )
  const steady = steadyRatioState(b, a).map((value) => roundTo(type, value))
  return { numbers: { structure: 'ratio', b, a, steadyState: steady }, effect }
}

function transferFunction(digital: DigitalFilter): TransferFunction {
  try {
    return toTransferFunction(digital)
  } catch (error) {
    if (!(error instanceof DesignError)) throw error
    // Whatever is wrong with the polynomials, it is the structure that has to change.
    throw new DesignError(error.code, 'structure', error.message, 'sections')
  }
}

function badRatio({ worstDeviationDb, stable }: RoundingEffect, type: NumberType): DesignError {
  const precision = type === 'double' ? 'double' : 'single'
  const reason = stable
    ? `the response moves by ${deviationWords(worstDeviationDb)}, more than ${ratioLimitDb} dB`
    : 'the filter is no longer stable'
  return new DesignError(
    'ratio-badly-conditioned',
    'structure',
    `As b/a in ${precision} precision, ${reason}; hand over the sections, which hold it.`,
    'sections',
  )
}

/** A deviation as the files and screens write it. */
export function deviationWords(decibels: number): string {
  if (!Number.isFinite(decibels)) return 'any amount'
  if (decibels < 1e-9) return 'less than 1e-9 dB'
  return `${decimalText(Number(decibels.toPrecision(2)), 'double')} dB`
}

function orderOf(numbers: Numbers): number {
  if (numbers.structure === 'taps') return numbers.taps.length - 1
  return numbers.structure === 'sections' ? 2 : numbers.a.length
}

function withAddedFeedback(numbers: Numbers): Numbers {
  if (numbers.structure === 'taps') return numbers
  if (numbers.structure === 'ratio') return { ...numbers, a: numbers.a.map(negated) }
  return { ...numbers, sections: numbers.sections.map((row) => ({ ...row, a1: negated(row.a1), a2: negated(row.a2) })) }
}

function held(spec: DesignSpec): { heldHz: readonly number[]; heldWords: string } {
  const none = (reason: string) => ({ heldHz: [], heldWords: `none: ${reason}` })
  const written = (hertz: number) => `${decimalText(hertz, 'double')} Hz`
  if (isFirDesign(spec)) return none('an FIR filter stated by its bands has no analog original')
  const { how } = spec
  if (how.method === 'fitted') {
    const isMeasured = !isFamilyDesign(spec) && spec.own.given === 'measured'
    return none(`fitted up to ${written(how.upToHz)}${isMeasured ? ' to a response given as measured' : ''}`)
  }
  if (how.method !== 'bilinear') return none('this method holds no single frequency')
  if (how.hold === 'none') return none('the bilinear transform was not held')
  const heldHz = how.hold !== 'edges' ? [how.hold] : isFamilyDesign(spec) ? spec.analog.edgesHz : []
  return { heldHz, heldWords: heldHz.map(written).join(' and ') }
}

function gainWords(numbers: Numbers): string {
  if (numbers.structure === 'taps') return 'in the taps'
  if (numbers.structure === 'ratio') return 'in the numerator b'
  const leads = numbers.sections.map(({ b0, b1, b2 }) => [b0, b1, b2].find((value) => value !== 0) ?? 0)
  const carriers = leads.flatMap((lead, k) => (lead === 1 ? [] : [k + 1]))
  if (leads.length === 1) return 'in the one section'
  if (carriers.length === 0) return 'one: every numerator begins with 1'
  if (carriers.length === 1) return `all in section ${carriers[0]}; the other numerators begin with 1`
  return 'shared out over the sections, in their numerators'
}
