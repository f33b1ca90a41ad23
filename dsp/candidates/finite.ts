import { designFromSpec, type Design } from '../design'
import { DesignError } from '../errors'
import type { FirBand, FirDesign, FirKind, FirSpec, FirWindow } from '../spec'
import { judge, LEVEL_KINDS } from './judge'
import type { Outline, Stretch } from './outline'
import type { CandidateRequest } from './request'
import type { Miss } from './screen'
import { fitWindow, levelLinesOf, type WindowSetting } from './window-fit'

/*
 * The fewest taps of a FIR kind that meet a sheet. An estimate is the start; from there the number is doubled or cut until it brackets
 * what pass and stop lines need, and halved down to it. All lines are then judged, and the room is spent by moving the edges of the bands
 * into the room between them: those of what is lost for a narrower filter, those of what is kept for a flatter one. A windowed filter's
 * cut and attenuation are searched for each number of taps.
 */

const MOST_CANDIDATE_TAPS = 400
const FEWEST_TAPS = 3
/** Lengths tried beyond the first that holds pass and stop lines, for the sake of the other lines. */
const LONGER = 4
const STEP = 1.25
const REFINEMENTS = 5
/** How far into the room between two bands an edge may move. */
const INTO_ROOM = 0.9
/** A tone alone becomes a band of this part of the room beside it, to each side. */
const TONE_WIDTH = 0.02
const MOST_WEIGHT = 1e6

interface FiniteKind {
  readonly kind: FirKind
  readonly window?: FirWindow
}

export const FINITE_KINDS: readonly FiniteKind[] = [
  { kind: 'equiripple' },
  { kind: 'windowed', window: 'kaiser' },
  { kind: 'windowed', window: 'dolph-chebyshev' },
  { kind: 'windowed', window: 'hamming' },
  { kind: 'windowed', window: 'hann' },
  { kind: 'windowed', window: 'blackman' },
  { kind: 'least-squares' },
  { kind: 'half-band' },
  { kind: 'minimum-phase' },
]

interface Found {
  readonly spec: FirDesign
  readonly design: Design
  readonly size: number
}

type Search = Generator<null, Found | { readonly miss: number | null; readonly reason: string }>

/** Largest error allowed as a factor: of what is kept, about 1; of what is lost, about 0. */
const errorOf = ({ isKept, strictestDb }: Stretch): number =>
  isKept ? 1 - 10 ** (-strictestDb / 20) : 10 ** (-strictestDb / 20)

interface Plan {
  readonly request: CandidateRequest
  readonly what: FiniteKind
  readonly response: FirSpec['response']
  /** From low to high, room between them; the first begins at 0 Hz, the last ends at half the rate. */
  readonly stretches: readonly Stretch[]
  readonly attenuationDb: number
  readonly estimate: number
  /** Lengths are `first`, `first + step`, … */
  readonly first: number
  readonly step: number
  /** Of a windowed filter, by its number of taps: what came nearest. */
  readonly settings: Map<number, WindowSetting>
}

function widened({ stretches, sampleRateHz }: Outline): Stretch[] {
  return stretches.map((stretch, k) => {
    const below = stretches[k - 1]
    const above = stretches[k + 1]
    const isTone = stretch.fromHz === stretch.toHz
    const down = below === undefined || !isTone ? 0 : (stretch.fromHz - below.toHz) * TONE_WIDTH
    const up = above === undefined || !isTone ? 0 : (above.fromHz - stretch.toHz) * TONE_WIDTH
    return {
      ...stretch,
      fromHz: below === undefined ? 0 : stretch.fromHz - down,
      toHz: above === undefined ? sampleRateHz / 2 : stretch.toHz + up,
    }
  })
}

/** The published estimates of the number of taps, with the transition as a part of the rate. */
function estimateOf({ kind, window }: FiniteKind, errors: readonly number[], transition: number): number {
  const least = Math.min(...errors)
  const attenuationDb = -20 * Math.log10(least)
  if (kind === 'windowed' || kind === 'half-band') {
    // Main lobes: von Hann and Hamming four, Blackman six bins wide; Kaiser's formula 1974 for the windows with a parameter.
    if (window === 'hann' || window === 'hamming') return 3.2 / transition
    if (window === 'blackman') return 5.5 / transition
    return (attenuationDb - 7.95) / (14.36 * transition) + 1
  }
  // Kaiser's estimate for equal ripples.
  const product = errors.reduce((sum, error) => sum + Math.log10(error), 0) / errors.length
  const taps = (-20 * product - 13) / (14.6 * transition) + 1
  return kind === 'minimum-phase' ? taps / 2 : taps
}

const quarterWords = (hz: number) => `${Number(hz.toPrecision(6))} Hz`

/** The bands of a half-band filter, mirrored about a quarter of the rate; a sentence when the sheet isn't of that kind. */
function mirrored(outline: Outline, stretches: readonly Stretch[]): Stretch[] | string {
  const fold = outline.sampleRateHz / 2
  const [kept, lost] = stretches
  const quarter = quarterWords(fold / 2)
  if (outline.response !== 'lowpass' || kept === undefined || lost === undefined) {
    return `A half-band filter is a low-pass cut at a quarter of the rate, ${quarter}.`
  }
  const edge = Math.max(kept.toHz, fold - lost.fromHz)
  if (!(edge < fold / 2)) {
    return `A half-band filter is cut at a quarter of the rate, ${quarter}; what is kept must end below and what is lost begin above it.`
  }
  const error = Math.min(errorOf(kept), errorOf(lost))
  const keptDb = -20 * Math.log10(1 - error)
  return [
    { ...kept, toHz: edge, strictestDb: keptDb },
    { ...lost, fromHz: fold - edge, strictestDb: -20 * Math.log10(error) },
  ]
}

function planOf(request: CandidateRequest, outline: Outline, what: FiniteKind): Plan | string {
  let stretches: readonly Stretch[] = widened(outline)
  if (what.kind === 'half-band') {
    const mirror = mirrored(outline, stretches)
    if (typeof mirror === 'string') return mirror
    stretches = mirror
  }
  const errors = stretches.map(errorOf)
  const rooms = stretches.slice(1).map(({ fromHz }, k) => fromHz - (stretches[k]?.toHz ?? 0))
  const transition = Math.min(...rooms) / request.sampleRateHz
  const endsKept = stretches[stretches.length - 1]?.isKept === true
  // What is kept at half the rate takes an odd number; a half-band filter one of the form 4k + 3.
  const step = what.kind === 'half-band' ? 4 : endsKept ? 2 : 1
  return {
    request,
    what,
    response: outline.response,
    stretches,
    attenuationDb: -20 * Math.log10(Math.min(...errors)),
    estimate: estimateOf(what, errors, transition),
    first: FEWEST_TAPS,
    step,
    settings: new Map(),
  }
}

/** Edges moved into the room beside them by a part of it: those of what is lost, or below 0 those of what is kept. */
function moved({ stretches }: Plan, part: number): readonly Stretch[] {
  if (part === 0) return stretches
  return stretches.map((stretch, k) => {
    const below = stretches[k - 1]
    const above = stretches[k + 1]
    if (stretch.isKept === part > 0) return stretch
    const reach = Math.abs(part) * INTO_ROOM
    return {
      ...stretch,
      fromHz: below === undefined ? stretch.fromHz : stretch.fromHz - (stretch.fromHz - below.toHz) * reach,
      toHz: above === undefined ? stretch.toHz : stretch.toHz + (above.fromHz - stretch.toHz) * reach,
    }
  })
}

function specOf(plan: Plan, taps: number, { part, attenuationDb }: WindowSetting): FirDesign {
  const { request, what, response } = plan
  const errors = plan.stretches.map(errorOf)
  const largest = Math.max(...errors)
  const isWeighted = what.kind !== 'windowed' && what.kind !== 'half-band'
  const bands = moved(plan, part).map(({ isKept, fromHz, toHz }, k): FirBand => {
    const weight = Math.min(largest / errors[k]!, MOST_WEIGHT)
    return { fromHz, toHz, gain: isKept ? 1 : 0, ...(isWeighted ? { weight } : {}) }
  })
  const hasLevel = what.window === 'kaiser' || what.window === 'dolph-chebyshev'
  return {
    format: 1,
    sampleRateHz: request.sampleRateHz,
    budget: request.budget,
    sheet: request.sheet,
    fir: {
      kind: what.kind,
      ...(what.window === undefined ? {} : { window: what.window }),
      response,
      taps,
      bands,
      ...(hasLevel ? { attenuationDb } : {}),
    },
  }
}

/** The bands in their places, or for a window the cut and attenuation that come nearest with so many taps. */
function settingOf(plan: Plan, taps: number): WindowSetting {
  const { request, what, attenuationDb, settings } = plan
  const { sheet, sampleRateHz } = request
  const known = settings.get(taps)
  if (known !== undefined) return known
  if (what.kind !== 'windowed') return { part: 0, attenuationDb }
  const search = {
    lines: levelLinesOf(sheet, sampleRateHz),
    sampleRateHz,
    attenuationDb,
    specOf: (setting: WindowSetting) => specOf(plan, taps, setting).fir,
  }
  const found = fitWindow(search, [...settings.values()].at(-1))
  settings.set(taps, found)
  return found
}

interface Trial extends Found {
  readonly miss: Miss | null
}

/** A filter of so many taps, held against all lines, or against pass and stop lines alone. */
function trial(plan: Plan, taps: number, isWhole: boolean, part?: number): Trial {
  const setting = settingOf(plan, taps)
  const spec = specOf(plan, taps, part === undefined ? setting : { ...setting, part })
  const design = designFromSpec(spec)
  const { sheet } = plan.request
  const verdict = judge(design, sheet, isWhole ? undefined : ({ kind }) => LEVEL_KINDS.has(kind))
  return { spec, design, size: taps, miss: 'miss' in verdict ? verdict.miss : null }
}

/** The next length of the plan's kind that is not below `taps`. */
const lengthOf = ({ first, step }: Plan, taps: number): number =>
  first + step * Math.max(0, Math.ceil((taps - first) / step))

/** Pass and stop lines held against so many taps; the refusal where that number can't be designed. */
function levelTrial(plan: Plan, taps: number): Trial | DesignError {
  try {
    return trial(plan, taps, false)
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
}

/** What is known of the numbers of taps: `bad` miss, `good` hold; `beyond` can't be designed, being too many. */
interface Bounds {
  bad: number
  good: Trial | null
  beyond: number
  nearest: Trial | null
  refusal: DesignError | null
}

function note(bounds: Bounds, taps: number, found: Trial | DesignError): void {
  if (found instanceof DesignError) {
    bounds.beyond = Math.min(bounds.beyond, taps)
    bounds.refusal = found
  } else if (found.miss === null) bounds.good = found
  else {
    bounds.bad = Math.max(bounds.bad, taps)
    if (bounds.nearest?.miss == null || found.miss.parts < bounds.nearest.miss.parts) bounds.nearest = found
  }
}

/** Fewest taps with which pass and stop lines hold; the nearest miss when none do. */
function* fewest(plan: Plan): Generator<null, Trial | DesignError> {
  const most = lengthOf(plan, MOST_CANDIDATE_TAPS + 1) - plan.step
  const bounds: Bounds = {
    bad: plan.first - plan.step,
    good: null,
    beyond: most + plan.step,
    nearest: null,
    refusal: null,
  }
  let taps = Math.min(lengthOf(plan, Math.max(FEWEST_TAPS, 0.95 * plan.estimate)), most)
  note(bounds, taps, levelTrial(plan, taps))
  // Up, until they hold or can't be designed.
  while (bounds.good === null && bounds.beyond > most && taps < most) {
    yield null
    taps = Math.min(lengthOf(plan, taps * STEP), most)
    note(bounds, taps, levelTrial(plan, taps))
  }
  // Down from what holds, in strides.
  while (bounds.good !== null && bounds.bad < plan.first && bounds.good.size > plan.first) {
    yield null
    taps = Math.min(lengthOf(plan, bounds.good.size / STEP), bounds.good.size - plan.step)
    note(bounds, taps, levelTrial(plan, taps))
    if (bounds.beyond <= taps) break
  }
  // Between what misses and what holds, or can't be designed.
  for (;;) {
    const above = bounds.good?.size ?? bounds.beyond
    if (above - bounds.bad <= plan.step || (bounds.good === null && above > most)) break
    yield null
    const middle = lengthOf(plan, (above + bounds.bad) / 2)
    taps = middle >= above ? above - plan.step : middle
    const found = levelTrial(plan, taps)
    if (found instanceof DesignError && bounds.good !== null) break
    note(bounds, taps, found)
  }
  return bounds.good ?? bounds.nearest ?? bounds.refusal ?? trial(plan, taps, false)
}

/** Moves edges into the room beside them as far as all lines hold. */
function* spread(plan: Plan, start: Trial): Generator<null, Trial> {
  if (plan.request.spend === 'less-delay' || plan.what.kind === 'half-band') return start
  let best = start
  let good = settingOf(plan, start.size).part
  let bad = plan.request.spend === 'flatter' ? -1 : 1
  for (let round = 0; round < REFINEMENTS; round++) {
    yield null
    const part = (good + bad) / 2
    let next: Trial | null = null
    try {
      next = trial(plan, start.size, true, part)
    } catch (error) {
      if (!(error instanceof DesignError)) throw error
    }
    if (next !== null && next.miss === null) {
      best = next
      good = part
    } else bad = part
  }
  return best
}

/**
 * The fewest taps of a kind that meet every line, their room spent; a generator that comes up for air between steps.
 * @returns the design, or the line that stops it and a sentence
 */
export function* searchFinite(request: CandidateRequest, outline: Outline, what: FiniteKind): Search {
  const plan = planOf(request, outline, what)
  if (typeof plan === 'string') return { miss: null, reason: plan }
  try {
    const start = yield* fewest(plan)
    if (start instanceof DesignError) return { miss: null, reason: start.message }
    if (start.miss !== null) {
      const { index, words } = start.miss
      const isMost = start.size + plan.step > MOST_CANDIDATE_TAPS
      const reason = isMost
        ? `It ${words} even with ${start.size} taps; up to ${MOST_CANDIDATE_TAPS} are looked at.`
        : `It ${words} with ${start.size} taps, the nearest of those that can be designed.`
      return { miss: index, reason }
    }
    let nearest: Trial | null = null
    for (let more = 0; more <= LONGER; more++) {
      const taps = start.size + more * plan.step
      if (taps > MOST_CANDIDATE_TAPS) break
      yield null
      const whole = trial(plan, taps, true)
      if (whole.miss === null) return yield* spread(plan, whole)
      if (nearest?.miss == null || whole.miss.parts < nearest.miss.parts) nearest = whole
    }
    if (nearest?.miss == null) return { miss: null, reason: 'No number of taps could be tried.' }
    const reason = `With the ${start.size} taps that pass and stop lines take, or a few more, it ${nearest.miss.words}.`
    return { miss: nearest.miss.index, reason }
  } catch (error) {
    if (error instanceof DesignError) return { miss: null, reason: error.message }
    throw error
  }
}
