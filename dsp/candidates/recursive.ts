import { designAnalog } from '../design-analog'
import type { Design } from '../design'
import { DesignError } from '../errors'
import type { RequirementSheet } from '../requirements/requirement'
import { groupDelay } from '../response/delay'
import type { AnalogSpec, Family, FamilyDesign, Method, MethodName } from '../spec'
import { keptDelay } from './figures'
import { LEVEL_KINDS } from './judge'
import type { Outline } from './outline'
import { analogAt, isMet, placeAt, placesOf, quick, shapesOf, spanOf, type Place, type Task } from './places'
import type { CandidateRequest } from './request'
import { isNearer, quickMiss, screenOf, type Miss } from './screen'
import { slideOf } from './slide'
import { MOST_ORDER, startOrder } from './start-order'

/*
 * The least order of a family that meets a sheet by a method. At each order the edges slide between where the pass lines and where the
 * stop lines are just met, and all lines are judged at a few places in between; the first order at which one place meets them all is
 * taken, and its room is spent as asked.
 */

/** Orders that may pass without coming nearer to the sheet before a search gives up. */
const PATIENCE = 4
/** A fit takes long. */
const PATIENCE_WITH_FITS = 2
const REFINEMENTS = 5
/** Ripple is lessened by up to this factor, in so many halvings of its logarithm. */
const LEAST_RIPPLE = 1 / 64
const FLATTENINGS = 4

interface Found {
  readonly spec: FamilyDesign
  readonly design: Design
  readonly size: number
}

type Search = Generator<null, Found | { readonly miss: number | null; readonly reason: string }>

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
