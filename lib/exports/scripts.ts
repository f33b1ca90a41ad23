import { aboutLines } from './about'
import type { CoefficientSet } from './coefficient-set'
import { octaveString, pythonString, scriptComment } from './escape'
import { decimalText, withPoint, type NumberType } from './numbers'

/*
 * Array literals for NumPy and for Octave: the same names and the same comments, in the two notations.
 */

interface Notation {
  readonly comment: string
  readonly preamble: readonly string[]
  assign(name: string, literal: string): string
  text(value: string): string
  /** A matrix has one row a line; a vector is one row over several lines. */
  array(rows: readonly (readonly string[])[], shape: 'vector' | 'matrix', type: NumberType): string
}

const numpy: Notation = {
  comment: '#',
  preamble: ['import numpy as np', ''],
  assign: (name, literal) => `${name} = ${literal}`,
  text: pythonString,
  array(rows, shape, type) {
    const [open, close] = shape === 'matrix' ? ['[', ']'] : ['', '']
    const lines = rows.map((row) => `    ${open}${row.join(', ')}${close},\n`).join('')
    return `np.array([${lines === '' ? '' : `\n${lines}`}], dtype=${type === 'float' ? 'np.float32' : 'np.float64'})`
  },
}

const octave: Notation = {
  comment: '%',
  preamble: [],
  assign: (name, literal) => `${name} = ${literal};`,
  text: octaveString,
  array(rows, shape, type) {
    // A line end would part rows; three dots carry on, and only a semicolon parts them.
    const lines = rows.map((row) => `    ${row.join(', ')}`).join(shape === 'matrix' ? '; ...\n' : ', ...\n')
    const body = lines === '' ? '[]' : `[ ...\n${lines} ...\n]`
    return type === 'float' ? `single(${body})` : body
  },
}

export const numpyFile = (set: CoefficientSet): string => script(set, numpy)
export const octaveFile = (set: CoefficientSet): string => script(set, octave)

function script(set: CoefficientSet, notation: Notation): string {
  const { name, source, numbers } = set
  const type = set.options.number
  const put = (suffix: string, literal: string) => notation.assign(`${name}_${suffix}`, literal)
  const vector = (values: readonly number[], of = type) => notation.array(fourToALine(texts(values, of)), 'vector', of)
  const matrix = (rows: readonly (readonly number[])[]) =>
    notation.array(
      rows.map((row) => texts(row, type)),
      'matrix',
      type,
    )
  const note = (text: string) => `${notation.comment} ${text}`
  const body =
    numbers.structure === 'taps'
      ? [note('h0 ... hN, the taps; run from rest'), put('taps', vector(numbers.taps))]
      : numbers.structure === 'ratio'
        ? [
            note('b0 ... bN and a1 ... aN; the coefficient of y[n] is 1 and is not listed'),
            put('b', vector(numbers.b)),
            put('a', vector(numbers.a)),
            put('steady_state', vector(numbers.steadyState)),
          ]
        : [
            note('a row for each section: b0, b1, b2, a1, a2; the coefficient of y[n] is 1 and is not listed'),
            put('sections', matrix(numbers.sections.map(({ b0, b1, b2, a1, a2 }) => [b0, b1, b2, a1, a2]))),
            put('steady_state', matrix(numbers.steadyState)),
          ]
  return [
    note('Polewright coefficient set'),
    ...aboutLines(set).map(({ key, text }) => note(`${key}: ${scriptComment(text)}`)),
    '',
    ...notation.preamble,
    put('title', notation.text(source.design.title)),
    put('version', String(source.version.number)),
    put('sha256', notation.text(source.version.checksum)),
    put('sampling_rate_hz', withPoint(decimalText(set.sampleRateHz, 'double'))),
    put('held_hz', vector(set.heldHz, 'double')),
    '',
    ...body,
    '',
    put('test_input', vector(set.testVector.input)),
    put('test_output', vector(set.testVector.output)),
    '',
  ].join('\n')
}

const texts = (values: readonly number[], type: NumberType) =>
  values.map((value) => withPoint(decimalText(value, type)))

function fourToALine(values: readonly string[]): string[][] {
  const lines: string[][] = []
  for (let k = 0; k < values.length; k += 4) lines.push(values.slice(k, k + 4))
  return lines
}
