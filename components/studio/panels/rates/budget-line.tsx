'use client'

import { Button } from '@/components/ui/button'
import { steppedDigit } from '@/components/plot/handle'
import type { DepartureBudget } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { parseDecibels, parseDegrees, parseFrequency } from '@/lib/units/parse'
import { InlineQuantity } from '../../shell/inline-quantity'
import { Choice, Toggle } from '../../stack/choice'
import { budgetWords } from './answer-words'
import type { DepartureUnit } from './questions'

const units: readonly { value: DepartureUnit; word: string; name: string }[] = [
  { value: 'db', word: 'dB', name: 'Departure in decibels' },
  { value: 'degrees', word: '°', name: 'Departure in degrees' },
  { value: 'microseconds', word: 'µs', name: 'Departure in microseconds' },
]

const LEAST_BUDGET = 1e-6
const stepSpan = { min: LEAST_BUDGET, max: 1e6 }

/** What is asked, as a sentence whose quantities can be typed over. */
export function QuestionLine({
  unit,
  onUnit,
  upToHz,
  usualHz,
  mostHz,
  nyquistHz,
  reasonAgainst,
  onUpTo,
  budget,
  onBudget,
}: {
  unit: DepartureUnit
  onUnit(unit: DepartureUnit): void
  upToHz: number
  /** The highest edge, as a rule. */
  usualHz: number
  mostHz: number
  nyquistHz: number
  /** Why a frequency can't be used. */
  reasonAgainst(hertz: number): string | null
  /** Null goes back to the highest edge. */
  onUpTo(hertz: number | null): void
  budget: DepartureBudget
  onBudget(budget: DepartureBudget): void
}) {
  function setUpTo(hertz: number): string | null {
    if (!(hertz > 0)) return 'The frequency must be above 0 Hz.'
    if (hertz > mostHz) return `No rate that is tried reaches so far; ${formatHz(mostHz)} is the most.`
    const reason = reasonAgainst(hertz)
    if (reason !== null) return reason
    onUpTo(hertz === usualHz ? null : hertz)
    return null
  }
  function setBudget(change: Partial<DepartureBudget>): string | null {
    const next = { ...budget, ...change }
    if (!(next.magnitudeDb >= LEAST_BUDGET && next.phaseDegrees >= LEAST_BUDGET))
      return 'A budget is above 0; 0.001 is already a strict one.'
    onBudget(next)
    return null
  }
  const stepped = (value: number, direction: 1 | -1) => steppedDigit({ value, ...stepSpan }, 'coarse', direction)
  return (
    <div className="flex flex-wrap items-baseline gap-x-1.5 gap-y-1 text-[14px]">
      <span>Worst departure in</span>
      <Choice label="Unit of the departure" options={units} value={unit} onChange={(next) => onUnit(next)} />
      <span>up to</span>
      <InlineQuantity
        label="Departure judged up to"
        text={formatHz(upToHz, 6)}
        parse={(text) => parseFrequency(text, { nyquistHz })}
        onValue={setUpTo}
        onStep={(direction) =>
          void setUpTo(steppedDigit({ value: upToHz, min: LEAST_BUDGET, max: mostHz }, 'plain', direction))
        }
      />
      {upToHz === usualHz ? null : (
        <Button small kind="quiet" onClick={() => onUpTo(null)}>
          Back to the edge
        </Button>
      )}
      <span className="ml-2">within</span>
      <InlineQuantity
        label="Budget tried, magnitude"
        text={`${formatNumber(budget.magnitudeDb)}\u2009dB`}
        parse={parseDecibels}
        onValue={(magnitudeDb) => setBudget({ magnitudeDb })}
        onStep={(direction) => void setBudget({ magnitudeDb: stepped(budget.magnitudeDb, direction) })}
      />
      <span>and</span>
      <InlineQuantity
        label="Budget tried, phase"
        text={`${formatNumber(budget.phaseDegrees)}°`}
        parse={parseDegrees}
        onValue={(phaseDegrees) => setBudget({ phaseDegrees })}
        onStep={(direction) => void setBudget({ phaseDegrees: stepped(budget.phaseDegrees, direction) })}
      />
      <span className="ml-2">
        <Toggle pressed={budget.removeDelay} onChange={(removeDelay) => void setBudget({ removeDelay })}>
          best delay removed
        </Toggle>
      </span>
    </div>
  )
}

/** Said while a budget is tried that the design doesn't state. */
export function TrialNotice({
  stated,
  onKeep,
  onDrop,
}: {
  stated: DepartureBudget
  onKeep: (() => void) | null
  onDrop(): void
}) {
  return (
    <div role="status" className="flex flex-wrap items-center gap-x-3 gap-y-1 border-l-2 border-slate pl-3 text-[13px]">
      <span>
        A trial: the design states {budgetWords(stated)}
        {stated.removeDelay ? ' with the best delay removed' : ' with every delay counted'}.
      </span>
      {onKeep ? (
        <Button small onClick={onKeep}>
          Make it the budget
        </Button>
      ) : null}
      <Button small kind="quiet" onClick={onDrop}>
        Back to the stated budget
      </Button>
    </div>
  )
}
