import { candidateSteps, isOffered, type CandidateRequest, type RequirementSheet, type Spend } from '@/dsp'

/** One pass, one stop, a phase departure and a delay line. */
const sheet: RequirementSheet = [
  { kind: 'pass', fromHz: 0, toHz: 100, withinDb: 0.5 },
  { kind: 'stop', fromHz: 200, attenuationDb: 40 },
  { kind: 'phase-departure', upToHz: 100, withinDegrees: 5, removeDelay: true },
  { kind: 'delay', fromHz: 0, toHz: 100, atMostSeconds: 0.02 },
]

export interface SearchTime {
  readonly spend: Spend
  readonly offered: number
  readonly refused: number
  /** Of processor time, in one thread: the first search of a fresh process, and the median of the ones after it. */
  readonly firstSeconds: number
  readonly seconds: number
}

function search(spend: Spend): { readonly offered: number; readonly refused: number; readonly seconds: number } {
  const request: CandidateRequest = {
    sheet,
    sampleRateHz: 1000,
    budget: { magnitudeDb: 0.1, phaseDegrees: 5, removeDelay: true },
    spend,
  }
  let [offered, refused] = [0, 0]
  const start = process.cpuUsage()
  for (const row of candidateSteps(request)) {
    if (row !== null && isOffered(row)) offered += 1
    else if (row !== null) refused += 1
  }
  const { user, system } = process.cpuUsage(start)
  return { offered, refused, seconds: (user + system) / 1e6 }
}

const ROUNDS = 3

/** A usual sheet searched whole: every family by every method and every FIR kind. */
export function benchCandidates(): readonly SearchTime[] {
  return (['narrower', 'flatter', 'less-delay'] as const).map((spend) => {
    const first = search(spend)
    const rest = Array.from({ length: ROUNDS }, () => search(spend).seconds).sort((left, right) => left - right)
    const { offered, refused } = first
    return { spend, offered, refused, firstSeconds: first.seconds, seconds: rest[1] ?? first.seconds }
  })
}
