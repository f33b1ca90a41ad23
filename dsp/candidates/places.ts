import { checkDiscretization } from '../check'
import { designFromSpec, type Design } from '../design'
import { designAnalog } from '../design-analog'
import { discretize } from '../discretise/discretize'
import { magnitudeDb } from '../response/frequency'
import { sampledResponse, sampledSystem } from '../response/sampled'
import type { AnalogSpec, Family, FamilyDesign, Method } from '../spec'
import { judge, type Verdict } from './judge'
import type { Outline } from './outline'
import type { CandidateRequest } from './request'
import { passRoom, stopRoom, type Levels, type Screen } from './screen'
import type { Slide } from './slide'

/*
 * The places that a search for a recursive filter looks at: an order, an Ω, and how much ripple and attenuation to design with.
 */

/** The wanted end, the other one, and between. */
const PLACES = [0, 1, 0.5, 0.25, 0.75]
const NARROWINGS = 10
const LAST_NARROWINGS = 22
/** Missed by less than this part of its limit, a bound is sought more closely. */
const CLOSE = 0.02

/** Ripple and attenuation to design with, as parts of and beyond what the sheet asks. */
export interface Shape {
  readonly ripple: number
  readonly extraDb: number
}

/** A hair inside, so that a ripple isn't missed by rounding. */
const HAIR = 1e-6

export function shapesOf(family: Family, isExact: boolean, hasMore: boolean): readonly Shape[] {
  const exact = { ripple: 1 - HAIR, extraDb: HAIR }
  if (family === 'chebyshev1' || family === 'elliptic') {
    // Other methods than the bilinear don't keep ripples; and less ripple has less of a delay to spread.
    const tighter = [
      { ripple: 0.5, extraDb: 3 },
      { ripple: 0.1, extraDb: 6 },
    ]
    if (isExact) return hasMore ? [exact, ...tighter] : [exact]
    return [{ ripple: 0.9, extraDb: 0.5 }, ...tighter]
  }
  if (family === 'chebyshev2' && !isExact) return [exact, { ripple: 1, extraDb: 3 }]
  return [exact]
}

export interface Task {
  readonly request: CandidateRequest
  readonly outline: Outline
  readonly family: Family
  readonly how: Method
  readonly slide: Slide
  readonly screen: Screen
}

export function analogAt(task: Task, order: number, omega: number, shape: Shape): AnalogSpec {
  const { family, outline, slide } = task
  const kept = outline.stretches.filter(({ isKept }) => isKept)
  const lost = outline.stretches.filter(({ isKept }) => !isKept)
  const rippleDb = Math.min(...kept.map(({ strictestDb }) => strictestDb)) * shape.ripple
  const attenuationDb = Math.max(...lost.map(({ strictestDb }) => strictestDb)) + shape.extraDb
  return {
    family,
    response: slide.response,
    order,
    edgesHz: slide.edgesAt(omega),
    ...(family === 'chebyshev1' || family === 'elliptic' ? { rippleDb } : {}),
    ...(family === 'chebyshev2' || family === 'elliptic' ? { attenuationDb } : {}),
  }
}

const specAt = ({ request, how }: Task, analog: AnalogSpec): FamilyDesign => ({
  format: 1,
  sampleRateHz: request.sampleRateHz,
  budget: request.budget,
  sheet: request.sheet,
  analog,
  how,
})

/**
 * Levels for the quick look: of the digital filter, or of what gives nearly the same sooner. An impulse- or step-invariant filter takes
 * long to find its zeros, and is looked at through its state space; a fitted one is looked at by its original.
 */
export function quick({ how, request }: Task, analog: AnalogSpec): Levels {
  if (how.method === 'fitted') {
    const filter = designAnalog(analog)
    return (at) => magnitudeDb(filter, at)
  }
  if (how.method === 'impulse-invariant' || how.method === 'step-invariant') {
    checkDiscretization(analog, request.sampleRateHz, how)
    const kind = how.method === 'step-invariant' ? 'step' : 'impulse'
    const system = sampledSystem(designAnalog(analog), request.sampleRateHz, kind)
    return (at) => {
      const { re, im } = sampledResponse(system, at)
      return re.map((x, n) => 20 * Math.log10(Math.hypot(x, im[n]!)))
    }
  }
  const filter = discretize(analog, request.sampleRateHz, how)
  return (at) => magnitudeDb(filter, at)
}

interface Span {
  readonly low: number
  readonly high: number
  readonly isEmpty: boolean
}

/** Where Ω may lie for pass and stop lines to hold at the quick look; where none does, the place that holds the pass lines. */
export function spanOf(task: Task, order: number, shape: Shape): Span {
  const { slide, screen } = task
  const at = (omega: number) => quick(task, analogAt(task, order, omega, shape))
  let [low, high] = [slide.narrow, slide.wide]
  if (passRoom(screen, at(low)) < 0) {
    if (passRoom(screen, at(high)) < 0) return { low: high, high, isEmpty: true }
    let [bad, good] = [low, high]
    for (let round = 0; round < LAST_NARROWINGS; round++) {
      const middle = Math.sqrt(bad * good)
      const filter = at(middle)
      if (passRoom(screen, filter) < 0) bad = middle
      else good = middle
      if (round < NARROWINGS - 1) continue
      // Once the bound is known well, it matters only whether the stop lines are near it.
      const short = -stopRoom(screen, at(good))
      if (short < 0 || short > CLOSE * Math.max(1, screen.stop.limitsDb[0] ?? 1)) break
    }
    low = good
  }
  if (stopRoom(screen, at(low)) < 0) return { low, high: low, isEmpty: true }
  if (stopRoom(screen, at(high)) < 0) {
    let [good, bad] = [low, high]
    for (let round = 0; round < NARROWINGS; round++) {
      const middle = Math.sqrt(good * bad)
      if (stopRoom(screen, at(middle)) < 0) bad = middle
      else good = middle
    }
    high = good
  }
  return { low, high, isEmpty: false }
}

export interface Place {
  readonly omega: number
  readonly shape: Shape
  readonly spec: FamilyDesign
  readonly design: Design
  readonly verdict: Verdict
}

export function placeAt(task: Task, order: number, omega: number, shape: Shape): Place {
  const spec = specAt(task, analogAt(task, order, omega, shape))
  const design = designFromSpec(spec)
  return { omega, shape, spec, design, verdict: judge(design, task.request.sheet) }
}

export const isMet = ({ verdict }: Place): boolean => 'results' in verdict

/** Places between the two ends, the ones that the room is to be spent towards first. */
export function placesOf({ low, high }: Span, spend: CandidateRequest['spend']): number[] {
  if (high <= low * (1 + 1e-9)) return [low]
  const parts = spend === 'narrower' ? PLACES : PLACES.map((part) => 1 - part)
  return parts.map((part) => low * (high / low) ** part)
}
