'use client'

import { Button } from '@/components/ui/button'
import type { MethodName } from '@/dsp'
import { methodLabels } from '@/lib/designs/words'
import { classNames } from '@/lib/format/class-names'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { TraceSample } from '../../stack/trace-sample'
import { ScrollRegion } from '../chart/data-table'
import { multipleWords } from './answer-words'
import type { LowestRate } from './questions'

export interface SpotValue {
  readonly id: MethodName
  readonly text: string
  /** Both parts of the budget are kept at that rate. */
  readonly met: boolean | null
}

/** For each method: its worst departure at the current rate, and the lowest rate that keeps the budget. */
export function AnswersTable({
  methods,
  stated,
  spots,
  spotRateHz,
  lowest,
  edgeHz,
  onRun,
}: {
  methods: readonly MethodName[]
  stated: MethodName
  spots: readonly SpotValue[]
  spotRateHz: number
  /** Null until the first answer. */
  lowest: readonly LowestRate[] | null
  edgeHz: number
  /** null for readers: the rate is then plain text. */
  onRun: ((id: MethodName, rateHz: number) => void) | null
}) {
  return (
    <ScrollRegion label="Lowest rate by method">
      <table className="w-full text-[13px]">
        <thead>
          <tr className="border-b border-graph-strong text-pencil text-right [&>th]:py-1 [&>th]:font-normal [&>th]:whitespace-nowrap">
            <th scope="col" className="text-left">
              Method
            </th>
            <th scope="col" className="numeric pl-3">
              at {formatHz(spotRateHz)}
            </th>
            <th scope="col" className="pl-4 max-sm:hidden">
              × edge
            </th>
            <th scope="col" className="pl-4">
              kept from
            </th>
          </tr>
        </thead>
        <tbody>
          {methods.map((id) => {
            const spot = spots.find((candidate) => candidate.id === id)
            const answer = lowest?.find((candidate) => candidate.id === id)
            return (
              <tr key={id} className="border-b border-graph">
                <th scope="row" className="py-1 text-left align-top font-normal whitespace-nowrap">
                  <span className={classNames('flex items-center gap-2 leading-6', id === stated && 'font-semibold')}>
                    <TraceSample id={id} />
                    {methodLabels[id]}
                  </span>
                </th>
                <td
                  className={classNames(
                    'numeric py-1 pl-3 text-right align-top leading-6 whitespace-nowrap',
                    spot?.met === true && 'text-moss',
                    spot?.met === false && 'text-vermilion',
                  )}
                >
                  {spot?.text ?? ''}
                </td>
                {answer && 'sampleRateHz' in answer ? (
                  <>
                    <td className="numeric py-1 pl-4 text-right align-top leading-6 max-sm:hidden">
                      {multipleWords(answer.sampleRateHz, edgeHz)}
                    </td>
                    <td className="py-1 pl-3 text-right align-top sm:pl-4">
                      {onRun === null ? (
                        <span className="numeric leading-6">{formatHz(answer.sampleRateHz)}</span>
                      ) : (
                        <Button
                          small
                          title={`Run the design at ${formatHz(answer.sampleRateHz, 6)} by the ${methodLabels[id]} version`}
                          onClick={() => onRun(id, answer.sampleRateHz)}
                        >
                          Run at {formatHz(answer.sampleRateHz)}
                        </Button>
                      )}
                    </td>
                  </>
                ) : (
                  <td
                    colSpan={2}
                    className={classNames('py-1 pl-4 text-left align-top leading-5 text-pencil', answer && 'min-w-48')}
                  >
                    {answer ? answer.refused : '…'}
                  </td>
                )}
              </tr>
            )
          })}
        </tbody>
      </table>
    </ScrollRegion>
  )
}

export const spotText = (value: number, sign: string): string =>
  Number.isNaN(value) ? 'refused' : `${formatNumber(value, 3)}${sign}`
