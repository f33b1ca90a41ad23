import type { CoefficientSet } from './coefficient-set'
import { cLiteral, type NumberType } from './numbers'

/* What all structures write alike in C. */

export const literalOf =
  ({ options }: CoefficientSet) =>
  (value: number) =>
    cLiteral(value, options.number, options.literals)

export const zeroOf = (type: NumberType): string => (type === 'float' ? '0.0f' : '0.0')

/** An array with its numbers, four to a line. */
export function array(declaration: string, literals: readonly string[]): string[] {
  const lines: string[] = []
  for (let k = 0; k < literals.length; k += 4) lines.push(`  ${literals.slice(k, k + 4).join(', ')}`)
  return [`${declaration} = {`, lines.join(',\n'), '};']
}

const width = 112

/** A comment's text over as many lines as it needs; only spaces are broken at, so that what was parted stays parted. */
export function commentLines(text: string): string[] {
  const lines: string[] = []
  let line = ''
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line)
      line = `  ${word}`
    } else line = line === '' ? word : `${line} ${word}`
  }
  return [...lines, line].map((part) => ` * ${part}`)
}
