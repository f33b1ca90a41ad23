import type { ChainFigures } from './types'

type Counts = Pick<ChainFigures, 'met' | 'missed' | 'unjudged'>

/** What came of the lines of a sheet, in the words that the chain's page has for it; empty where there are none. */
export function sheetWords({ met, missed, unjudged }: Counts): string {
  const all = met + missed + unjudged
  if (all === 0) return ''
  if (met === all) return `All ${all} met`
  return `${met} of ${all} met${unjudged > 0 ? `, ${unjudged} not judged` : ''}`
}

export const sheetTone = ({ met, missed, unjudged }: Counts): 'met' | 'missed' | 'open' =>
  missed > 0 ? 'missed' : unjudged > 0 || met === 0 ? 'open' : 'met'
