import { stateWords } from '@/lib/designs/words'
import { caution, deviationWords, type CoefficientSet } from './coefficient-set'
import { signWords } from './equation'
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
    { key: 'sign convention', text: signWords[set.options.feedback] },
    { key: 'gain', text: set.gainPlacement },
    { key: 'rounding', text: roundingWords(set) },
    {
      key: 'steady state',
      text: 'initial state that makes an input of constant 1 start settled; multiply it by the level',
    },
    { key: 'test vector', text: `${testVectorWords}; the output is that of this file's own arithmetic` },
    { key: 'SHA-256', text: version.checksum },
    {
      key: 'checksum covers',
      text: "the version's kept roots and sections in double precision, so it is the same in every file of it; the JSON file carries them",
    },
    { key: 'engine', text: version.engineVersion },
    { key: 'caution', text: caution },
  ]
}

const numberWords = {
  double: 'double precision (IEEE 754 binary64)',
  float: 'single precision (IEEE 754 binary32)',
} as const

export function structureWords({ numbers }: CoefficientSet): string {
  if (numbers.structure === 'ratio') return `ratio b/a of order ${numbers.a.length}, direct form II transposed`
  const count = numbers.sections.length
  return `cascade of ${count} second-order ${count === 1 ? 'section' : 'sections'}, direct form II transposed`
}

export function roundingWords({ rounding, options }: CoefficientSet): string {
  const moved = `by ${deviationWords(rounding.worstDeviationDb)} at most, where it is within ${judgedRangeDb} dB of its peak`
  const to = options.number === 'float' ? 'single precision' : 'double precision'
  return `rounding the coefficients to ${to} moves the response ${moved}`
}
