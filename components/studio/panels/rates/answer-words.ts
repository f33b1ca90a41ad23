import type { DepartureBudget, MethodName } from '@/dsp'
import { methodLabels } from '@/lib/designs/words'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import type { LowestRate } from './questions'

export const budgetWords = ({
  magnitudeDb,
  phaseDegrees,
}: Pick<DepartureBudget, 'magnitudeDb' | 'phaseDegrees'>): string =>
  `${formatNumber(magnitudeDb)}\u2009dB and ${formatNumber(phaseDegrees)}°`

export const multipleWords = (rateHz: number, edgeHz: number): string => `${formatNumber(rateHz / edgeHz, 3)}×`

export type Kept = { readonly id: MethodName; readonly sampleRateHz: number }

export const keptOf = (answers: readonly LowestRate[]): readonly Kept[] =>
  answers
    .flatMap((answer) => ('sampleRateHz' in answer ? [answer] : []))
    .sort((a, b) => a.sampleRateHz - b.sampleRateHz)

/** The answers as one sentence, the lowest rate first. */
export function answerWords(
  answers: readonly LowestRate[],
  budget: DepartureBudget,
  upToHz: number,
  edgeHz: number,
): string {
  const what = `${budgetWords(budget)} up to ${formatHz(upToHz)}${budget.removeDelay ? ', best delay removed,' : ''}`
  const kept = keptOf(answers)
  const [best, ...others] = kept
  const none = answers.filter((answer) => 'refused' in answer).map(({ id }) => methodLabels[id])
  if (!best) return `No method keeps ${what} at any rate that was tried.`
  const at = ({ id, sampleRateHz }: Kept) => `${methodLabels[id]} from ${formatHz(sampleRateHz)}`
  const first = `${methodLabels[best.id]} keeps ${what} from ${formatHz(best.sampleRateHz)}, ${multipleWords(best.sampleRateHz, edgeHz)} the edge`
  const rest = others.length === 0 ? '' : `; ${others.map(at).join(', ')}`
  return `${first}${rest}${none.length === 0 ? '' : `; ${none.join(' and ')} at no rate tried`}.`.replace(
    /^./,
    (letter) => letter.toUpperCase(),
  )
}
