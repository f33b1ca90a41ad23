import { aboutLines } from './about'
import type { CoefficientSet } from './coefficient-set'
import { csvText } from './escape'
import { decimalText } from './numbers'

/*
 * One table of four columns (RFC 4180): what a row belongs to, its index, the name of the value, the value. Index 1 is the first
 * section; samples, taps and the delays of a ratio count as their formulas do. Numbers are written bare, text is guarded.
 */
export function csvFile(set: CoefficientSet): string {
  const number = (value: number) => decimalText(value, set.options.number)
  const rows: string[] = ['part,index,name,value']
  const put = (part: string, index: number | '', name: string, value: string) =>
    rows.push(`${part},${index},${name},${value}`)

  for (const { key, text } of aboutLines(set)) put('about', '', key, isPlainNumber(text) ? text : csvText(text))
  put('rate', '', 'sampling rate in Hz', decimalText(set.sampleRateHz, 'double'))
  set.heldHz.forEach((hertz, k) => put('held', k + 1, 'frequency in Hz', decimalText(hertz, 'double')))

  const { numbers } = set
  if (numbers.structure === 'sections') {
    numbers.sections.forEach((row, k) => {
      for (const name of ['b0', 'b1', 'b2', 'a1', 'a2'] as const) put('section', k + 1, name, number(row[name]))
    })
    numbers.steadyState.forEach((state, k) =>
      state.forEach((value, at) => put('steady state', k + 1, `s${at + 1}`, number(value))),
    )
  } else if (numbers.structure === 'taps') {
    numbers.taps.forEach((value, k) => put('tap', k, 'h', number(value)))
  } else {
    numbers.b.forEach((value, k) => put('ratio', k, 'b', number(value)))
    numbers.a.forEach((value, k) => put('ratio', k + 1, 'a', number(value)))
    numbers.steadyState.forEach((value, k) => put('steady state', k + 1, 's', number(value)))
  }
  set.testVector.input.forEach((value, n) => put('test input', n, 'x', number(value)))
  set.testVector.output.forEach((value, n) => put('test output', n, 'y', number(value)))
  return `${rows.join('\r\n')}\r\n`
}

/** The version's number, which no guard may touch. */
const isPlainNumber = (text: string) => /^\d+$/.test(text)
