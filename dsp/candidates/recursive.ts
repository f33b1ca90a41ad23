import { designFromSpec, type Design } from '../design'
import { designAnalog } from '../design-analog'
import { discretize } from '../discretise/discretize'
import { DesignError } from '../errors'
import { checkDiscretization } from '../check'
import { groupDelay } from '../response/delay'
import { magnitudeDb } from '../response/frequency'
import { sampledResponse, sampledSystem } from '../response/sampled'
import { minimumOrder } from '../prototypes/order'
import type { AnalogSpec, Family, FamilyDesign, Method, MethodName } from '../spec'
import type { RequirementSheet } from '../requirements/requirement'
import { keptDelay } from './figures'
import { judge, LEVEL_KINDS, type Verdict } from './judge'
import type { Outline } from './outline'
import type { CandidateRequest } from './request'
import { isNearer, passRoom, quickMiss, screenOf, stopRoom, type Levels, type Miss, type Screen } from './screen'
import { slideOf, type Slide } from './slide'

/*
 * The least order of a family that meets a sheet by a method. At each order the edges slide between where the pass lines and where the
 * stop lines are just met, and all lines are judged at a few places in between; the first order at which one place meets them all is
 * taken, and its room is spent as asked.
 */

export const MOST_ORDER = 24
/** Orders that may pass without coming nearer to the sheet before a search gives up. */
const PATIENCE = 4
/** A fit takes long. */
const PATIENCE_WITH_FITS = 2
/** The wanted end, the other one, and between. */
const PLACES = [0, 1, 0.5, 0.25, 0.75]
const NARROWINGS = 10
const LAST_NARROWINGS = 22
/** Missed by less than this part of its limit, a bound is sought more closely. */
const CLOSE = 0.02
const REFINEMENTS = 5
/** Ripple is lessened by up to this factor, in so many halvings of its logarithm. */
const LEAST_RIPPLE = 1 / 64
const FLATTENINGS = 4

export interface Found {
  readonly spec: FamilyDesign
  readonly design: Design
  readonly size: number
}

export type Search = Generator<null, Found | { readonly miss: number | null; readonly reason: string }>

/** Ripple and attenuation to design with, as parts of and beyond what the sheet asks. */
interface Shape {
  readonly ripple: number
  readonly extraDb: number
}

/** A hair inside, so that a ripple isn't missed by rounding. */
const HAIR = 1e-6

function shapesOf(family: Family, isExact: boolean, hasMore: boolean): readonly Shape[] {
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

interface Task {
  readonly request: CandidateRequest
  readonly outline: Outline
  readonly family: Family
  readonly how: Method
  readonly slide: Slide
  readonly screen: Screen
}

function analogAt(task: Task, order: number, omega: number, shape: Shape): AnalogSpec {
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
function quick({ how, request }: Task, analog: AnalogSpec): Levels {
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
function spanOf(task: Task, order: number, shape: Shape): Span {
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

interface Place {
  readonly omega: number
  readonly shape: Shape
  readonly spec: FamilyDesign
  readonly design: Design
  readonly verdict: Verdict
}

function placeAt(task: Task, order: number, omega: number, shape: Shape): Place {
  const spec = specAt(task, analogAt(task, order, omega, shape))
  const design = designFromSpec(spec)
  return { omega, shape, spec, design, verdict: judge(design, task.request.sheet) }
}

const isMet = ({ verdict }: Place): boolean => 'results' in verdict

/** Places between the two ends, the ones that the room is to be spent towards first. */
function placesOf({ low, high }: Span, spend: CandidateRequest['spend']): number[] {
  if (high <= low * (1 + 1e-9)) return [low]
  const parts = spend === 'narrower' ? PLACES : PLACES.map((part) => 1 - part)
  return parts.map((part) => low * (high / low) ** part)
}

/** Halves the way from a place that meets the sheet to one that doesn't, and gives the last that does. */
function* outermost(task: Task, order: number, good: Place, bad: number): Generator<null, Place> {
  let [best, beyond] = [good, bad]
  for (let round = 0; round < REFINEMENTS; round++) {
    yield null
    const middle = placeAt(task, order, Math.sqrt(best.omega * beyond), good.shape)
    if (isMet(middle)) best = middle
    else beyond = middle.omega
  }
  return best
}

/** As little ripple as goes. */
function* flattest(task: Task, order: number, start: Place): Generator<null, Place> {
  if (task.family !== 'chebyshev1' && task.family !== 'elliptic') return start
  let best = start
  let [bad, good] = [start.shape.ripple * LEAST_RIPPLE, start.shape.ripple]
  for (let round = 0; round < FLATTENINGS; round++) {
    yield null
    const shape = { ...start.shape, ripple: Math.sqrt(bad * good) }
    let found: Place | undefined
    try {
      const span = spanOf(task, order, shape)
      if (!span.isEmpty)
        found = placesOf(span, 'flatter')
          .slice(0, 2)
          .map((omega) => placeAt(task, order, omega, shape))
          .find(isMet)
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
    }
    if (found === undefined) bad = shape.ripple
    else {
      best = found
      good = shape.ripple
    }
  }
  return best
}

function* spent(task: Task, order: number, places: readonly Place[]): Generator<null, Place> {
  const met = places.filter(isMet)
  const [first] = met
  if (first === undefined) throw new RangeError('no place meets the sheet')
  if (task.request.spend === 'less-delay') {
    const delays = met.map((place) => keptDelay(place.design.digital, task.outline).most)
    return met[delays.indexOf(Math.min(...delays))] ?? first
  }
  // The room ends somewhere between this place and the nearest one towards the wanted end that misses a line.
  const isWanted = (omega: number): boolean =>
    task.request.spend === 'narrower' ? omega < first.omega : omega > first.omega
  const beyond = places.filter((place) => !isMet(place) && isWanted(place.omega)).map(({ omega }) => omega)
  const bad = task.request.spend === 'narrower' ? Math.max(...beyond) : Math.min(...beyond)
  const best = beyond.length === 0 ? first : yield* outermost(task, order, first, bad)
  return task.request.spend === 'flatter' ? yield* flattest(task, order, best) : best
}

const hasFormula = (family: Family): boolean => family !== 'bessel' && family !== 'critically-damped'

const LEVEL_ROUNDS = 44

/** Ω at which a monotone prototype has lost so many dB, its edge at 1. */
function whereLost(family: Family, order: number, db: number): number {
  const prototype = designAnalog({ family, response: 'lowpass', order, edgesHz: [1] })
  let [low, high] = [1e-4, 1e4]
  for (let round = 0; round < LEVEL_ROUNDS; round++) {
    const middle = Math.sqrt(low * high)
    if (-magnitudeDb(prototype, [middle])[0]! < db) low = middle
    else high = middle
  }
  return high
}

/** Least order of a family without a formula that falls from one loss to the other fast enough: not always a higher one does. */
function leastByTrying(family: Family, rippleDb: number, attenuationDb: number, room: number): number {
  for (let order = 1; order <= MOST_ORDER; order++) {
    const ratio = whereLost(family, order, attenuationDb) / whereLost(family, order, rippleDb)
    if (ratio <= room * (1 + 1e-9)) return order
  }
  return Number.POSITIVE_INFINITY
}

/** A lower bound of the order, by the published formulas from the mildest lines; methods that don't keep to them may do with less. */
function startOrder(task: Task): number {
  const { outline, slide, family, how, request } = task
  const kept = outline.stretches.filter(({ isKept }) => isKept)
  const lost = outline.stretches.filter(({ isKept }) => !isKept)
  const rippleDb = Math.max(...kept.map(({ mildestDb }) => mildestDb))
  const attenuationDb = Math.min(...lost.map(({ mildestDb }) => mildestDb))
  const isExact = how.method === 'bilinear'
  const spare = isExact ? 0 : 2
  const [low, high] = slide.edgesAt(1)
  const [stopLow, stopHigh] = slide.edgesAt(slide.wide)
  if (attenuationDb <= rippleDb || low === undefined || stopLow === undefined || slide.narrow !== 1) return 1
  if (!hasFormula(family)) {
    const least = leastByTrying(family, rippleDb, attenuationDb, slide.wide)
    return Math.min(Math.max(1, least - spare), MOST_ORDER)
  }
  const isBand = high !== undefined && stopHigh !== undefined
  try {
    const least = minimumOrder(family, {
      passHz: isBand ? [low, high] : low,
      stopHz: isBand ? [stopLow, stopHigh] : stopLow,
      rippleDb,
      attenuationDb,
      ...(isExact ? { sampleRateHz: request.sampleRateHz } : {}),
    })
    return Math.max(1, least.order - spare)
  } catch (error) {
    if (error instanceof DesignError) return error.code === 'order-too-high' ? MOST_ORDER : 1
    throw error
  }
}

/** Places looked at before the others are given up, when all of these miss by more than FAR_PARTS of a limit. */
const FIRST_PLACES = 2
const FAR_PARTS = 0.5

const isFar = ({ verdict }: Place): boolean => 'miss' in verdict && verdict.miss.parts > FAR_PARTS

const ORIGINAL_POINTS = 33

/**
 * Whether the original already has so much more delay, or spread of it, than a line allows that its digital version, which takes long to
 * make, can't be nearer than what is known.
 */
function isHopeless({ how, request }: Task, analog: AnalogSpec, known: Miss | null): boolean {
  if (known === null || !known.isLate || how.method === 'bilinear' || how.method === 'matched-z') return false
  const enough = 1 + Math.max(FAR_PARTS, 1.5 * known.parts)
  return request.sheet.some((line) => {
    if (line.kind !== 'delay' && line.kind !== 'delay-spread') return false
    const { fromHz, toHz } = line
    const at = Array.from({ length: ORIGINAL_POINTS }, (_, n) => fromHz + ((toHz - fromHz) * n) / (ORIGINAL_POINTS - 1))
    const delays = groupDelay(designAnalog(analog), at)
    const value = Math.max(...delays) - (line.kind === 'delay' ? 0 : Math.min(...delays))
    return value > enough * line.atMostSeconds
  })
}

/** Tries one order; the places it looked at, in order of preference, or the nearest miss so far. */
function* atOrder(
  task: Task,
  order: number,
  hasMore: boolean,
  known: Miss | null,
): Generator<null, readonly Place[] | Miss | null> {
  let nearest = known
  let refused: DesignError | null = null
  for (const shape of shapesOf(task.family, task.how.method === 'bilinear', hasMore)) {
    try {
      let span = spanOf(task, order, shape)
      yield null
      if (span.isEmpty) {
        for (const omega of [span.low, Math.sqrt(task.slide.narrow * task.slide.wide), task.slide.narrow]) {
          const levels = quick(task, analogAt(task, order, omega, shape))
          const miss = quickMiss(task.screen, levels, task.request.sheet)
          // Where levels don't change with Ω one way only, there may be a place after all.
          if (miss === null) span = { low: omega, high: omega, isEmpty: false }
          else if (nearest === null || isNearer(miss, nearest)) nearest = miss
        }
      }
      if (span.isEmpty) continue
      const places: Place[] = []
      for (const omega of placesOf(span, task.request.spend)) {
        if (places.length === FIRST_PLACES && places.every(isFar)) break
        if (isHopeless(task, analogAt(task, order, omega, shape), nearest)) continue
        const place = placeAt(task, order, omega, shape)
        places.push(place)
        yield null
        if ('miss' in place.verdict) {
          if (nearest === null || isNearer(place.verdict.miss, nearest)) nearest = place.verdict.miss
        } else if (task.request.spend !== 'less-delay') break
      }
      if (places.some(isMet)) return places
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
      refused = error
    }
  }
  if (nearest === null && refused !== null) throw refused
  return nearest
}

interface Nearest {
  readonly order: number
  readonly miss: Miss
}

const missIn = (nearest: Nearest | null): Miss | null => nearest?.miss ?? null

const asksMore = (sheet: RequirementSheet): boolean => sheet.some(({ kind }) => !LEVEL_KINDS.has(kind))

/**
 * The least order of a family by a method that meets every line, its room spent; a generator that comes up for air between steps.
 * @returns the design, or the line that stops it and a sentence
 */
export function* searchRecursive(request: CandidateRequest, outline: Outline, family: Family, how: Method): Search {
  const slide = slideOf(outline, how.method === 'bilinear')
  if (slide === null)
    return { miss: null, reason: 'Several bands are for FIR filters: these families have one pass or stop band.' }
  const task: Task = { request, outline, family, how, slide, screen: screenOf(request.sheet, request.sampleRateHz) }
  const hasMore = asksMore(request.sheet)
  const start = startOrder(task)
  let nearest: Nearest | null = null
  let refused: DesignError | null = null
  let tried = start
  for (let order = start; order <= MOST_ORDER; order++) {
    tried = order
    try {
      const found: readonly Place[] | Miss | null = yield* atOrder(task, order, hasMore, missIn(nearest))
      if (found !== null && !('parts' in found)) {
        const { spec, design } = yield* spent(task, order, found)
        return { spec, design, size: order }
      }
      if (found !== null && found !== missIn(nearest)) nearest = { order, miss: found }
      else if (order - (nearest?.order ?? start) >= (how.method === 'fitted' ? PATIENCE_WITH_FITS : PATIENCE)) break
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
      refused ??= error
      // What a method refuses at one order it mostly refuses at all.
      if (nearest === null && order - start >= 1) break
    }
  }
  if (nearest === null) return { miss: null, reason: refused?.message ?? 'No order could be tried.' }
  const { order, miss } = nearest
  const { words } = miss
  const reason =
    order === MOST_ORDER
      ? `It ${words} even at order ${MOST_ORDER}.`
      : `It ${words} at order ${order}, its nearest; orders up to ${tried} come no nearer.`
  return { miss: miss.index, reason }
}

/** The method as the search uses it. */
export function methodOf(name: MethodName, outline: Outline, request: CandidateRequest): Method {
  switch (name) {
    case 'bilinear':
      return { method: 'bilinear', hold: 'edges' }
    case 'impulse-invariant':
      return { method: 'impulse-invariant' }
    case 'matched-z':
      return { method: 'matched-z' }
    case 'step-invariant':
      return { method: 'step-invariant' }
    case 'fitted':
      return { method: 'fitted', upToHz: fittedTo(outline, request.sheet) }
  }
}

/** The fit reaches as far as the sheet looks at what is kept, and at departures. */
function fittedTo({ stretches, sampleRateHz }: Outline, sheet: RequirementSheet): number {
  const kept = stretches.filter(({ isKept }) => isKept).map(({ toHz }) => toHz)
  const departures = sheet.flatMap((line) => ('upToHz' in line ? [line.upToHz] : []))
  return Math.min(Math.max(...kept, ...departures), 0.45 * sampleRateHz)
}
