import { formatDb, formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { sheetWords } from './sheet-words'
import type { ChainFigures } from './types'

export interface FigureRow {
  readonly name: string
  /** As a number, for differences; null where there is nothing to subtract. */
  readonly value: number | null
  readonly text: string
  /** The difference to another version's value. */
  readonly change: (by: number) => string
}

const signedBy = (words: (value: number) => string) => (by: number) => `${by > 0 ? '+' : ''}${words(by)}`

/** The figures a version was saved with, in the order that every table has them in. */
export function figureRows(figures: ChainFigures): readonly FigureRow[] {
  const seconds = (value: number) => formatSeconds(value, 4)
  const decibels = (value: number) => formatDb(value, 2)
  const plain = (value: number) => formatNumber(value, 4)
  const row = (name: string, value: number, words: (value: number) => string): FigureRow => ({
    name,
    value,
    text: words(value),
    change: signedBy(words),
  })
  return [
    row('Output rate', figures.outputRateHz, (value) => formatHz(value, 6)),
    row('Worst image in the kept band', figures.worstAliasDb, decibels),
    row('Delay in the middle of the kept band', figures.delaySeconds, seconds),
    row('Effective bits', figures.effectiveBits, plain),
    row('Multiplies for each stored sample', figures.multipliesPerStoredSample, plain),
    { name: 'Requirement sheet', value: null, text: sheetWords(figures) || 'nothing asked', change: () => '' },
  ]
}
