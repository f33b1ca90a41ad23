'use client'

import { useMemo, useState } from 'react'
import { Notice } from '@/components/ui/notice'
import {
  isFamilyDesign,
  isFirDesign,
  type DepartureBudget,
  type DesignSpec,
  type FamilyDesign,
  type Method,
} from '@/dsp'
import { methodLabels, methodNames } from '@/lib/designs/words'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { methodAsShown } from '../../derive'
import { DataTable } from '../chart/data-table'
import { useOnPage } from '@/components/ui/use-on-page'
import { answerWords, keptOf, multipleWords } from './answer-words'
import { AnswersTable, spotText, type SpotValue } from './answers-table'
import { QuestionLine, TrialNotice } from './budget-line'
import { limitIn, withLimit } from './curves'
import { highestEdge, reasonAgainst, searchSpan, usualUpTo, type DepartureUnit, type RateCurve } from './questions'
import { unitSign, type RatesPlan } from './rates-picture'
import { RatesPlot } from './rates-plot'
import { useRateAnswers } from './use-rate-answers'

const unitWords: Record<DepartureUnit, string> = { db: 'magnitude', degrees: 'phase', microseconds: 'phase delay' }

interface RatesPanelProps {
  spec: DesignSpec
  /** Readers see where the rate stands and can't move it. */
  mayEdit: boolean
  /** Runs the design at a rate; `how` is set where the rate belongs to a method. */
  onRate(rateHz: number, how?: Method): void
  /** States a budget in the design; without it budgets can only be tried. */
  onBudget?(budget: DepartureBudget): void
}

/**
 * The worst departure up to a chosen frequency against the sampling rate, for every method, and the lowest rate that keeps a budget. A
 * budget can be tried here without changing the design's.
 */
export function RatesPanel({ spec, ...props }: RatesPanelProps) {
  const onPage = useOnPage()
  if (!onPage) return null
  if (isFamilyDesign(spec)) return <Rates spec={spec} {...props} />
  return (
    <Notice kind="note">
      {isFirDesign(spec)
        ? 'An FIR filter is stated by its bands and has no analog original to depart from; its requirement lines say what a rate does to it.'
        : 'The sweep over rates asks for a filter of a known family. For a response of your own, pull the fold line and read the departure table.'}
    </Notice>
  )
}

function Rates({ spec, mayEdit, onRate, onBudget }: RatesPanelProps & { spec: FamilyDesign }) {
  const [unit, setUnit] = useState<DepartureUnit>('degrees')
  const [upToByHand, setUpToByHand] = useState<number | null>(null)
  const [trial, setTrial] = useState<DepartureBudget | null>(null)
  const [pulledBudget, setPulledBudget] = useState<DepartureBudget | null>(null)
  const [pulledRateHz, setPulledRateHz] = useState<number | null>(null)

  const edgeHz = highestEdge(spec.analog)
  const { analog } = spec
  const usualHz = useMemo(() => usualUpTo(analog), [analog])
  // A frequency that was chosen for another prototype may mean nothing to this one.
  const upToHz = useMemo(
    () => (upToByHand !== null && reasonAgainst(analog, upToByHand) === null ? upToByHand : usualHz),
    [analog, upToByHand, usualHz],
  )
  const rateHz = pulledRateHz ?? spec.sampleRateHz
  const isTrial = trial !== null && !sameBudget(trial, spec.budget)
  const tried = trial ?? spec.budget
  const budget = pulledBudget ?? tried
  const { spanHz, subject, sweep, spot, lowest, failed } = useRateAnswers(spec, upToHz, budget, rateHz)

  const curves = sweep.answered?.answer
  const answers = lowest.answered?.answer ?? null
  const isLowestStale = lowest.stale
  const plan = useMemo(
    (): RatesPlan => ({
      curves: curves ?? [],
      unit,
      edgeHz,
      stated: spec.how.method,
      kept: answers && !isLowestStale ? keptOf(answers) : [],
      faded: sweep.stale,
    }),
    [curves, unit, edgeHz, spec.how.method, answers, isLowestStale, sweep.stale],
  )
  const tryBudget = (next: DepartureBudget) => setTrial(sameBudget(next, spec.budget) ? null : next)
  const limit = limitIn(unit, budget, upToHz)
  const limited = (value: number) => withLimit(budget, unit, value, upToHz)
  const searchedHz = searchSpan(subject)
  const asked = lowest.answered?.question
  const title = `Largest ${unitWords[unit]} departure to ${formatHz(upToHz)}${budget.removeDelay ? ', best delay removed' : ''}`

  return (
    <div className="flex flex-col gap-2">
      <QuestionLine
        unit={unit}
        onUnit={setUnit}
        upToHz={upToHz}
        usualHz={usualHz}
        mostHz={edgeHz * 100}
        reasonAgainst={(hertz) => reasonAgainst(analog, hertz)}
        nyquistHz={spec.sampleRateHz / 2}
        onUpTo={setUpToByHand}
        budget={budget}
        onBudget={tryBudget}
      />
      {isTrial ? (
        <TrialNotice
          stated={spec.budget}
          onKeep={
            onBudget
              ? () => {
                  onBudget(trial)
                  setTrial(null)
                }
              : null
          }
          onDrop={() => setTrial(null)}
        />
      ) : null}
      {failed ? (
        <Notice kind="caution">The rates could not be computed in this browser; reload the page to try again.</Notice>
      ) : null}
      <div className="grid gap-x-8 gap-y-4 lg:grid-cols-[minmax(0,1fr)_minmax(0,29rem)]">
        <div className="flex min-w-0 flex-col gap-1">
          <RatesPlot
            plan={plan}
            title={title}
            spanHz={spanHz}
            rateHz={rateHz}
            limit={limit}
            limitText={limitText(unit, limit, budget, upToHz)}
            rateIsFixed={!mayEdit}
            onRate={{
              onPreview: setPulledRateHz,
              onCommit: (hertz) => {
                setPulledRateHz(null)
                if (hertz !== spec.sampleRateHz) onRate(hertz)
              },
              onCancel: () => setPulledRateHz(null),
            }}
            onLimit={{
              onPreview: (value) => setPulledBudget(limited(value)),
              onCommit: (value) => {
                setPulledBudget(null)
                if (pulledBudget) tryBudget(limited(value))
              },
              onCancel: () => setPulledBudget(null),
            }}
          />
          <DataTable
            summary="Values as a table"
            columns={['rate', '× edge', ...(curves ?? []).map(({ id }) => `${methodLabels[id]},${unitSign[unit]}`)]}
            rows={() => tableRows(curves ?? [], unit, edgeHz)}
          />
        </div>
        <div className="flex min-w-0 flex-col gap-2">
          <p role="status" className={isLowestStale ? 'text-[14px] text-pencil' : 'text-[14px]'}>
            {answers && asked
              ? answerWords(answers, asked.budget, asked.upToHz, highestEdge(asked.analog))
              : 'Looking for the lowest rates…'}
          </p>
          <AnswersTable
            methods={methodNames}
            stated={spec.how.method}
            spots={spotValues(spot.answered?.answer ?? [], unit, budget)}
            spotRateHz={spot.answered?.question.ratesHz[0] ?? rateHz}
            lowest={answers}
            edgeHz={edgeHz}
            onRun={mayEdit ? (id, hertz) => onRate(hertz, methodAsShown(spec, id)) : null}
          />
          <p className="text-[13px] text-pencil">
            Rates tried: {formatHz(searchedHz[0], 3)} to {formatHz(searchedHz[1], 3)}. Green keeps both parts of the
            budget at that rate.
          </p>
        </div>
      </div>
    </div>
  )
}

const sameBudget = (a: DepartureBudget, b: DepartureBudget): boolean =>
  a.magnitudeDb === b.magnitudeDb && a.phaseDegrees === b.phaseDegrees && a.removeDelay === b.removeDelay

function limitText(unit: DepartureUnit, limit: number, budget: DepartureBudget, upToHz: number): string {
  const value = `${formatNumber(limit, 3)}${unitSign[unit]}`
  return unit === 'microseconds'
    ? `${value}, which is ${formatNumber(budget.phaseDegrees, 3)}° at ${formatHz(upToHz)}`
    : value
}

function spotValues(curves: readonly RateCurve[], unit: DepartureUnit, budget: DepartureBudget): readonly SpotValue[] {
  return curves.map((curve) => {
    const value = curve[unit][0] ?? Number.NaN
    const [db, degrees] = [curve.db[0] ?? Number.NaN, curve.degrees[0] ?? Number.NaN]
    const met = Number.isNaN(db) ? null : db <= budget.magnitudeDb && degrees <= budget.phaseDegrees
    return { id: curve.id, text: spotText(value, unitSign[unit]), met }
  })
}

function tableRows(curves: readonly RateCurve[], unit: DepartureUnit, edgeHz: number): readonly (readonly string[])[] {
  const [first] = curves
  if (!first) return []
  return [...first.ratesHz].map((hertz, index) => [
    formatHz(hertz, 4),
    multipleWords(hertz, edgeHz),
    ...curves.map((curve) => {
      const value = curve[unit][index] ?? Number.NaN
      return Number.isNaN(value) ? 'refused' : formatNumber(value, 3)
    }),
  ])
}
