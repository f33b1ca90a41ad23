'use client'

import { useMemo } from 'react'
import type { DepartureBudget, FamilyDesign } from '@/dsp'
import { drawnSpan, searchSpan, subjectOf, sweepRates, type LowestQuestion, type SweepQuestion } from './questions'
import { useAnswer, useRatesClient } from './use-rates'

/** The three questions of the panel, each asked again only when something that it depends on has changed. */
export function useRateAnswers(spec: FamilyDesign, upToHz: number, budget: DepartureBudget, spotRateHz: number) {
  const client = useRatesClient()

  // Specs are replaced whole at every step of a drag; what hasn't changed in them must not be asked again.
  const subjectKey = JSON.stringify(subjectOf(spec, upToHz))
  const subject = useMemo((): ReturnType<typeof subjectOf> => JSON.parse(subjectKey), [subjectKey])
  const [fromHz, toHz] = drawnSpan(subject, spec.sampleRateHz)
  const { removeDelay, magnitudeDb, phaseDegrees } = budget

  const sweepQuestion = useMemo(
    (): SweepQuestion => ({ ...subject, removeDelay, ratesHz: sweepRates([fromHz, toHz]) }),
    [subject, removeDelay, fromHz, toHz],
  )
  const spotQuestion = useMemo(
    (): SweepQuestion => ({ ...subject, removeDelay, ratesHz: Float64Array.of(spotRateHz) }),
    [subject, removeDelay, spotRateHz],
  )
  const lowestQuestion = useMemo(
    (): LowestQuestion => ({
      ...subject,
      budget: { magnitudeDb, phaseDegrees, removeDelay },
      searchHz: searchSpan(subject),
    }),
    [subject, magnitudeDb, phaseDegrees, removeDelay],
  )
  const sweep = useAnswer(sweepQuestion, client.sweep)
  const spot = useAnswer(spotQuestion, client.spot)
  const lowest = useAnswer(lowestQuestion, client.lowest)
  return {
    spanHz: [fromHz, toHz] as const,
    subject,
    sweep: { ...sweep, stale: sweep.answered?.question !== sweepQuestion },
    spot: { ...spot, stale: spot.answered?.question !== spotQuestion },
    lowest: { ...lowest, stale: lowest.answered?.question !== lowestQuestion },
    failed: sweep.failed || spot.failed || lowest.failed,
  }
}
