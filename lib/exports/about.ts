import { stateWords } from '@/lib/designs/words'
import { caution } from '../caution'
import { deviationWords, type CoefficientSet } from './coefficient-set'
import { noFeedbackWords, signWords } from './equation'
import { decimalText } from './numbers'
import { judgedRangeDb } from './rounding'
import { testVectorWords } from './test-vector'

/*
 * What every text format says about its numbers, in one order. The texts are raw: each format escapes them in its own way, since the
 * title, project, note and the saver's label are the user's.
 */

export interface AboutLine {
  readonly key: string
  readonly text: string
}

export function aboutLines(set: CoefficientSet): readonly AboutLine[] {
  const { design, version } = set.source
  return [
    { key: 'design', text: design.drawingNumber },
    { key: 'title', text: design.title },
    { key: 'project', text: design.projectName },
    { key: 'version', text: String(version.number) },
    { key: 'state', text: stateWords[version.state] },
    { key: 'saved', text: `${version.savedAt} by ${version.savedBy}` },
    { key: 'note', text: version.note },
    { key: 'statement', text: set.statement },
    { key: 'sampling rate', text: `${decimalText(set.sampleRateHz, 'double')} Hz` },
    { key: 'held frequency', text: set.heldWords },
    { key: 'structure', text: structureWords(set) },
    { key: 'number type', text: numberWords[set.options.number] },
    { key: 'difference equation', text: set.equation },
    { key: 'sign convention', text: signConvention(set) },
    { key: 'gain', text: set.gainPlacement },
    { key: 'rounding', text: roundingWords(set) },
    { key: 'steady state', text: steadyWords(set) },
    { key: 'test vector', text: `${testVectorWords(set.testVector.input.length)}; ${arithmeticWords(set)}` },
    { key: 'SHA-256', text: version.checksum },
    {
      key: 'checksum covers',
      text: `the version's kept ${keptWords(set)} in double precision, so it is the same in every file of it; the JSON file carries them`,
    },
    { key: 'engine', text: version.engineVersion },
    { key: 'caution', text: caution },
  ]
}

const numberWords = {
  double: 'double precision (IEEE 754 binary64)',
  float: 'single precision (IEEE 754 binary32)',
} as const

function signConvention({ numbers, options }: CoefficientSet): string {
  return numbers.structure === 'taps' ? noFeedbackWords : signWords[options.feedback]
}

const steadyWords = ({ numbers }: CoefficientSet): string =>
  numbers.structure === 'taps'
    ? 'the state is the inputs before; filled with the level of a constant input, it starts settled'
    : 'initial state that makes an input of constant 1 start settled; multiply it by the level'

const arithmeticWords = ({ numbers }: CoefficientSet): string =>
  numbers.structure === 'taps'
    ? "the output is that of this file's own arithmetic, products added one by one from the oldest sample's to the newest's"
    : "the output is that of this file's own arithmetic"

const keptWords = ({ numbers }: CoefficientSet): string =>
  numbers.structure === 'taps' ? 'taps' : 'roots and sections'

const symmetryWords = {
  even: ', the same from either end',
  odd: ', from the other end the same with the other sign',
  none: '',
} as const

export function structureWords({ numbers }: CoefficientSet): string {
  if (numbers.structure === 'taps') {
    const { taps, symmetry } = numbers
    return `direct form of ${taps.length} taps${symmetryWords[symmetry]}`
  }
  if (numbers.structure === 'ratio') return `ratio b/a of order ${numbers.a.length}, direct form II transposed`
  const count = numbers.sections.length
  return `cascade of ${count} second-order ${count === 1 ? 'section' : 'sections'}, direct form II transposed`
}

export function roundingWords({ rounding, options }: CoefficientSet): string {
  const moved = `by ${deviationWords(rounding.worstDeviationDb)} at most, where it is within ${judgedRangeDb} dB of its peak`
  const to = options.number === 'float' ? 'single precision' : 'double precision'
  return `rounding the coefficients to ${to} moves the response ${moved}`
}
