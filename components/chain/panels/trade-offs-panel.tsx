'use client'

import { useMemo, useState } from 'react'
import { useOnPage } from '@/components/ui/use-on-page'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import type { ChainSpec, PlanOption, RateOption } from '@/dsp'
import { formatHz } from '@/lib/format/quantity'
import { FiguresRuled } from './chart/figures'
import { LinesPlot } from './chart/lines-plot'
import type { ChainPanelProps } from './props'
import {
  answersFor,
  bestWords,
  filterWords,
  missWords,
  notesOf,
  planCells,
  planColumns,
  planName,
  rateCells,
  rateColumns,
  rateName,
  ratesPlan,
  standingWords,
  standsAs,
  type Standing,
} from './trade-offs'
import { useWork } from './work/use-work'
import { findPlans, findRates } from './work/work-client'
import { WorkLine } from './work/work-line'

/** Where analog order, converter rate and arithmetic can be traded for each other, and what of the sheet each way meets. */
export function TradeOffsPanel(props: ChainPanelProps) {
  return useOnPage() ? <TradeOffs {...props} /> : null
}

function TradeOffs({ spec, propose, readOnly }: ChainPanelProps) {
  const rates = useWork(findRates)
  const plans = useWork(findPlans)
  const [taken, setTaken] = useState('')
  const isOld = (work: { question: ChainSpec | null; value: readonly { spec: ChainSpec }[] | null }) =>
    work.question !== null && work.value !== null && !answersFor(work.question, work.value, spec)
  // What is taken is put into the chain as it stands now: its interferers and settings stay.
  const take = (name: string, found: ChainSpec) => {
    const { interferers, tolerance } = spec
    if (propose({ ...found, interferers, tolerance })) setTaken(`Took ${name}.`)
    else setTaken(`${name} was refused; the reason stands beside the statement.`)
  }
  const choice = (name: string, found: ChainSpec) =>
    standsAs({ spec: found }, spec) ? (
      'as it is'
    ) : readOnly ? null : (
      <Button small aria-label={`Take ${name}`} onClick={() => take(name, found)}>
        Take
      </Button>
    )

  const ratesFaded = isOld(rates)
  const rateOptions = rates.value
  const picture = useMemo(
    () => (rateOptions === null ? null : ratesPlan(rateOptions, ratesFaded)),
    [rateOptions, ratesFaded],
  )
  return (
    <div className="grid gap-x-8 gap-y-6 xl:grid-cols-2">
      <section aria-label="Order against rate" className="flex min-w-0 flex-col gap-3">
        <h3 className="font-text text-[14px] font-semibold">Order against rate</h3>
        <WorkLine
          work={rates}
          what="The search for rates"
          startWords="Find the lowest rates"
          againWords="Find them again"
          stopWords="Stop the search for rates"
          doneWords={(found: readonly RateOption[]) => standingWords(found, 'order')}
          onStart={() => rates.run(spec)}
          onStop={rates.stop}
        />
        {ratesFaded ? <Older /> : null}
        {rates.value?.length === 0 ? (
          <Notice kind="note">
            No order of this anti-alias filter keeps flatness and images at any rate tried. Ask for less, or keep a
            narrower band.
          </Notice>
        ) : null}
        {picture ? <LinesPlot plan={picture} writeValue={(hertz) => formatHz(hertz)} /> : null}
        {rates.value && rates.value.length > 0 ? (
          <FiguresRuled
            label="Order against rate, with the best marked"
            columns={[...rateColumns, '']}
            rows={rates.value.map((option) => ({
              key: rateName(option),
              strong: option.isBest,
              cells: [
                ...rateCells(option),
                <>
                  {choice(rateName(option), option.spec)}
                  <Miss option={option} />
                </>,
              ],
            }))}
          />
        ) : null}
        {rates.value && rates.value.length > 0 ? (
          <p className="text-[13px] text-pencil">
            {bestWords(rates.value)} {notesOf(rates.value).join(' ')}
          </p>
        ) : null}
      </section>
      <section aria-label="Decimation plans" className="flex min-w-0 flex-col gap-3">
        <h3 className="font-text text-[14px] font-semibold">Decimation plans</h3>
        <WorkLine
          work={plans}
          what="The search for plans"
          startWords="Find decimation plans"
          againWords="Find plans again"
          stopWords="Stop the search for plans"
          doneWords={(found: readonly PlanOption[]) => standingWords(found, 'plan')}
          onStart={() => plans.run(spec)}
          onStop={plans.stop}
        />
        {isOld(plans) ? <Older /> : null}
        {plans.value?.length === 0 ? (
          <Notice kind="note">
            No plan keeps flatness and images with these rates. A higher converter rate, or a lower edge of the kept
            band, leaves the filters more room.
          </Notice>
        ) : null}
        {plans.value && plans.value.length > 0 ? (
          <FiguresRuled
            label="Decimation plans, those that meet the sheet first, then fewest multiplies"
            columns={[...planColumns, '']}
            wordColumns={[1]}
            rows={plans.value.map((option, index) => {
              const name = `plan ${planName(option)} (${filterWords(option)})`
              return {
                key: `${index} ${name}`,
                strong: standsAs(option, spec),
                cells: [
                  ...planCells(option),
                  <>
                    {choice(name, option.spec)}
                    <Miss option={option} />
                  </>,
                ],
              }
            })}
          />
        ) : null}
        {plans.value && plans.value.length > 0 ? (
          <p className="text-[13px] text-pencil">
            Multiplies are counted for each stored sample. Every filter is as short as flatness and images allow; what
            else the sheet asks is judged afterwards. {notesOf(plans.value).join(' ')}
          </p>
        ) : null}
      </section>
      <p role="status" className="text-[13px] text-pencil xl:col-span-2">
        {taken}
      </p>
    </div>
  )
}

/** Which lines an option misses. */
function Miss({ option }: { option: Standing }) {
  const words = missWords(option)
  return words === null ? null : (
    <span className="block max-w-56 text-left whitespace-normal text-vermilion">{words}</span>
  )
}

const Older = () => (
  <Notice kind="note">The chain or its sheet has changed since this search; search again to be sure.</Notice>
)
