import type { Delimiter } from './plan'

/** Splits a line into its cells, quotes respected; runs of spaces count as one delimiter. */
export function splitCells(line: string, delimiter: Delimiter): string[] {
  const text = delimiter === ' ' ? line.trim() : line
  if (!text.includes('"')) {
    return delimiter === ' ' ? text.split(/ +/) : text.split(delimiter).map((cell) => cell.trim())
  }
  const cells: string[] = []
  let cell = ''
  let inside = false
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charAt(i)
    if (c === '"') {
      inside = !inside
      cell += c
    } else if (c === delimiter && !inside) {
      if (delimiter !== ' ' || cell !== '') cells.push(cell.trim())
      cell = ''
    } else cell += c
  }
  cells.push(cell.trim())
  return cells
}

const TIME_WORD =
  /^(?:time|t|timestamp|time[ _-]?stamp|date|datetime|date[ _-]?time|elapsed|seconds|secs?|clock|zeit|zeitstempel|temps|tiempo|tempo|tijd|tid)\b/i
const COUNTER_WORD = /^(?:index|sample|samples|n|no|nr|row|count|#|i|k)\b\.?$/i

/** "acc [m/s²]", "accel (g)", "force / kN", "level, dB": the name and the unit of a column. */
export function splitName(cell: string): { name: string; unit: string } {
  const text = cell.trim().slice(0, 80)
  const bracketed = /^(.*?)\s*[[({]([^\])}]{0,24})[\])}]\s*$/.exec(text)
  if (bracketed) return { name: bracketed[1]?.trim() ?? '', unit: bracketed[2]?.trim() ?? '' }
  const ruled = /^(.+?)(?:\s+\/\s+|\s*,\s+)(\S{1,16})$/.exec(text)
  if (ruled) return { name: ruled[1]?.trim() ?? '', unit: ruled[2] ?? '' }
  return { name: text, unit: '' }
}

export const namesTime = (name: string): boolean => TIME_WORD.test(name.trim().replaceAll('_', ' '))
export const namesCounter = (name: string): boolean => COUNTER_WORD.test(name.trim())
