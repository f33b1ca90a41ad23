import { show } from '../../check'
import { DesignError } from '../../errors'
import type { ComputedChain } from '../chain'
import { computeChain } from '../compute'
import { chainSketch } from '../sketch'
import type { ChainSpec, DecimateStage } from '../spec'
import { MOST_CHAIN_STAGES, MOST_STAGE_TAPS } from '../limits'
import { factorisations, MOST_PLAN_STAGES } from './factorisations'
import { figuresFor, gridOf, levelOf, needsOf, stoppedBy, type Figures, type Needs } from './needs'
import { estimatePlan, isDecimation, makePlan, withPlan, type Plan, type PlanTask } from './plan-search'
import type { PlanKind, StageBook } from './stage-choice'

export interface PlanOption {
  readonly factors: readonly number[]
  /** Kind of filter in each stage, as a stage states it: `half-band`, `kaiser`, `equiripple`, `cic`, `design`. */
  readonly filters: readonly string[]
  readonly multipliesPerStoredSample: number
  readonly words: number
  /** How far down the worst image is, positive. */
  readonly aliasDb: number
  /** Largest departure from unity over the lines that ask for flatness. */
  readonly rippleDb: number
  readonly delaySeconds: number
  readonly isCurrent: boolean
  /** Whether flatness and images are as the sheet asks; false for a current plan that is listed for comparison. */
  readonly meets: boolean
  readonly notes: readonly string[]
  readonly spec: ChainSpec
}

const MOST_OPTIONS = 12
/** Factorisations that are designed, of those that the estimates put first. */
const MOST_DESIGNED = 18
/** Times that a plan which misses is tightened by what it missed. */
const MOST_TIGHTENINGS = 4
/** Times that one which meets with room to spare is tried with less. */
const MOST_SHORTENINGS = 2
/** Room for what neither the stop band's edges nor the tidy numbers foresee. */
const ALIAS_ROOM_DB = 0.1

const ALL: readonly PlanKind[] = ['cic', 'half-band', 'equiripple', 'kaiser']
/** What each factorisation is tried with: everything, no CIC filter, windows alone. */
const MIXES: readonly (readonly PlanKind[])[] = [ALL, ['half-band', 'equiripple', 'kaiser'], ['half-band', 'kaiser']]

/** What stands between two decimations runs at a rate that another plan doesn't have. */
function checkMovable(spec: ChainSpec): void {
  const places = spec.stages.flatMap((stage, index) => (isDecimation(stage) ? [index] : []))
  const [first = 0] = places
  const last = places.at(-1) ?? 0
  const between = spec.stages.findIndex(
    (stage, index) => index > first && index < last && stage.kind === 'shape' && !stage.bypassed,
  )
  if (between < 0) return
  const message =
    'This shaping stands between two decimations, at a rate that other plans don’t have; behind the last decimation, or ahead of the first, it is in no plan’s way.'
  throw new DesignError('shape-between', `stages.${between}`, message)
}

/** What a usual line of flatness leaves to the filters that are sought where the other stages use it all up. */
const LEAST_USUAL_DB = 0.3

/**
 * What the flat lines leave to the filters that are sought, dB: their limits less what the other stages come to. A line of the sheet that leaves nothing is
 * refused; a usual one is widened.
 *
 * @param rest indices of the other stages
 */
export function checkedRipple(
  chain: ComputedChain,
  needs: Needs,
  rest: readonly number[],
): { readonly needs: Needs; readonly rippleDb: number } {
  let checked = needs
  let rippleDb = Infinity
  for (const line of needs.flat) {
    const grid = gridOf(line)
    const level = levelOf(chain, rest, grid)
    let at = 0
    level.forEach((value, n) => {
      if (Math.abs(value) > Math.abs(level[at]!)) at = n
    })
    const most = Math.abs(level[at]!)
    const where = `${show(Number(level[at]!.toPrecision(3)))} dB at ${show(Number(grid[at]!.toPrecision(4)))} Hz`
    let { withinDb } = line
    if (most > withinDb - LEAST_USUAL_DB && line.index === null && Number.isFinite(most)) {
      withinDb = Math.ceil(10 * (most + LEAST_USUAL_DB)) / 10
      const note = `The sheet asks for no flatness; ±${show(withinDb)} dB over the kept band was taken, since the other stages come to ${where}.`
      checked = { ...needs, flat: [{ ...line, withinDb }], notes: [note, ...needs.notes.slice(1)] }
    }
    if (most >= withinDb) {
      const why = `the other stages come to ${where} by themselves, whatever filter is put in.`
      throw stoppedBy(line, why, Number((1.1 * most).toPrecision(2)))
    }
    rippleDb = Math.min(rippleDb, withinDb - most)
  }
  return { needs: checked, rippleDb }
}

/**
 * What comes through ahead of the converter no decimation can mend: a line of the sheet is refused, a usual one lowered to that. Refuses a line
 * that leaves no room to fall in.
 */
function checkedAhead(chain: ComputedChain, needs: Needs, aheadDb: PlanTask['aheadDb'], rippleDb: number): Needs {
  const { converterRateHz, outputRateHz } = chain
  let checked = needs
  for (const line of needs.alias) {
    const inputs = [1, 2, 3].flatMap((rates) =>
      Array.from({ length: 65 }, (_, n) => rates * converterRateHz + (n / 32 - 1) * line.toHz),
    )
    const level = aheadDb(Float64Array.from(inputs))
    let at = 0
    level.forEach((value, n) => {
      if (value > level[at]!) at = n
    })
    const reached = -level[at]! - rippleDb
    if (reached < line.atLeastDb && line.index === null && reached > 1) {
      const atLeastDb = Math.floor(reached)
      const note = `The sheet asks for no alias floor; ${atLeastDb} dB over the kept band was taken, since ${show(Math.round(inputs[at]!))} Hz is no further down ahead of the converter.`
      checked = {
        ...needs,
        alias: [{ ...line, atLeastDb }],
        aliasDb: atLeastDb,
        notes: [...needs.notes.slice(0, -1), note],
      }
    } else if (reached < line.atLeastDb) {
      const why = `ahead of the converter ${show(Math.round(inputs[at]!))} Hz is ${reached.toFixed(1)} dB down, and folds there before any decimation. A higher converter rate or a steeper analog filter helps.`
      throw stoppedBy(line, why, Math.max(1, Math.floor(reached)))
    }
    if (needs.passHz + line.toHz < 0.995 * outputRateHz) continue
    const why = `the samples keep to ${show(outputRateHz / 2)} Hz, which leaves no room to fall in above ${show(needs.passHz)} Hz.`
    throw stoppedBy(line, why)
  }
  return checked
}

interface Judged {
  readonly plan: Pick<Plan, 'factors' | 'filters'>
  readonly chain: ComputedChain
  readonly figures: Figures
}

/** A plan made, computed as a chain and judged; null where some stage of it can't be had. */
function tryPlan(search: Search, task: PlanTask): Judged | null {
  const plan = makePlan(task, search.factors, search.kinds, search.book)
  if (plan === null) return null
  try {
    const chain = computeChain(withPlan(search.spec, plan))
    return { plan, chain, figures: figuresFor(chain, search.needs) }
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}

export interface Search {
  readonly spec: ChainSpec
  readonly needs: Needs
  readonly factors: readonly number[]
  readonly kinds: readonly PlanKind[]
  readonly book: StageBook
}

export interface Settled extends Judged {
  readonly search: Search
  /** What its stages were made for. */
  readonly task: PlanTask
}

/** A plan, lengthened until the whole chain meets the needs; null where it doesn't come to that. */
export function settlePlan(search: Search, first: PlanTask): Settled | null {
  let task = { ...first, aliasDb: first.aliasDb + ALIAS_ROOM_DB }
  for (let round = 0; round <= MOST_TIGHTENINGS; round++) {
    const made = tryPlan(search, task)
    if (made === null) return null
    const { figures } = made
    if (figures.meets) return { ...made, search, task }
    const missed = Math.max(0, -figures.aliasRoomDb)
    const aliasDb = missed > 0 ? task.aliasDb + 1.1 * missed + ALIAS_ROOM_DB : task.aliasDb
    task = { ...task, aliasDb, rippleDb: figures.flatRoomDb < 0 ? 0.7 * task.rippleDb : task.rippleDb }
  }
  return null
}

const costOf = ({ chain }: Judged): number => chainSketch(chain).multipliesPerStoredSample

/** What a plan that meets the needs with room to spare does with less, as long as it gets shorter by that. */
function shortened(start: Settled): Settled {
  let best = start
  for (let round = 0; round < MOST_SHORTENINGS; round++) {
    const { figures, task, search } = best
    const aliasDb = task.aliasDb - 0.9 * figures.aliasRoomDb
    const rippleDb = task.rippleDb + 0.6 * figures.flatRoomDb
    const tries = [
      { ...task, aliasDb, rippleDb },
      { ...task, aliasDb },
      { ...task, rippleDb },
    ]
    const better = tries
      .flatMap((one) => {
        const made = tryPlan(search, one)
        return made?.figures.meets === true ? [{ ...made, search, task: one }] : []
      })
      .reduce((least, one) => (costOf(one) < costOf(least) ? one : least), best)
    if (better === best) return best
    best = better
  }
  return best
}

function optionOf({ plan, chain, figures }: Judged, isCurrent: boolean, notes: readonly string[]): PlanOption {
  const { delaySeconds, multipliesPerStoredSample, words } = chainSketch(chain)
  return {
    factors: plan.factors,
    filters: plan.filters.map(({ type }) => type),
    multipliesPerStoredSample,
    words,
    aliasDb: figures.aliasDb,
    rippleDb: figures.rippleDb,
    delaySeconds,
    isCurrent,
    meets: figures.meets,
    notes,
    spec: chain.spec,
  }
}

/** Level of everything ahead of the converter's samples, averaging included. */
export function aheadOf(chain: ComputedChain): PlanTask['aheadDb'] {
  const ahead = Array.from({ length: chain.converterIndex + 1 }, (_, index) => index)
  return (hertz) => levelOf(chain, ahead, hertz)
}

const sameFilters = (a: readonly DecimateStage['filter'][], b: readonly DecimateStage['filter'][]): boolean =>
  JSON.stringify(a) === JSON.stringify(b)

/**
 * The plans step by step; yields progress from 0 to 1.
 * @see advisePlans
 */
export function* planSteps(spec: ChainSpec): Generator<number, readonly PlanOption[]> {
  const current = computeChain(spec)
  checkMovable(spec)
  const decimations = spec.stages.filter(isDecimation)
  const total = decimations.reduce((product, { factor }) => product * factor, 1)
  if (total === 1) {
    const message =
      'This chain stores every sample of its converter; there is nothing to plan. A decimation stage gives a plan its factor.'
    throw new DesignError('nothing-to-decimate', 'stages', message)
  }
  const aheadDb = aheadOf(current)
  const others = current.stages.flatMap(({ stage, index }) => (isDecimation(stage) ? [] : [index]))
  const { needs: flatChecked, rippleDb } = checkedRipple(current, needsOf(spec), others)
  const needs = checkedAhead(current, flatChecked, aheadDb, rippleDb)
  const task: PlanTask = {
    converterRateHz: current.converterRateHz,
    outputRateHz: current.outputRateHz,
    passHz: needs.passHz,
    cleanHz: needs.cleanHz,
    rippleDb,
    aliasDb: needs.aliasDb,
    aheadDb,
  }
  const room = MOST_CHAIN_STAGES - (spec.stages.length - decimations.length)
  const ranked = factorisations(total, Math.min(MOST_PLAN_STAGES, room))
    .map((factors) => ({ factors, estimate: estimatePlan(task, factors, ALL) }))
    .filter(({ estimate }) => Number.isFinite(estimate))
    .sort((a, b) => a.estimate - b.estimate)
    .slice(0, MOST_DESIGNED)
  yield 0.05

  const filters = decimations.map(({ filter }) => filter)
  const figures = figuresFor(current, needs)
  const mine: Judged = { plan: { factors: decimations.map(({ factor }) => factor), filters }, chain: current, figures }
  const found: Settled[] = []
  const book: StageBook = new Map()
  for (const [index, { factors }] of ranked.entries()) {
    for (const [mix, kinds] of MIXES.entries()) {
      const made = settlePlan({ spec, needs, factors, kinds, book }, task)
      const isNew = made !== null && [mine, ...found].every(({ plan }) => !sameFilters(plan.filters, made.plan.filters))
      if (isNew) found.push(made)
      yield 0.05 + (0.6 * (index * MIXES.length + mix + 1)) / (ranked.length * MIXES.length)
    }
  }
  if (found.length === 0 && !figures.meets) {
    const line = needs.alias.reduce((most, one) => (one.atLeastDb > most.atLeastDb ? one : most))
    const why = `no plan for a factor of ${total} in up to ${MOST_PLAN_STAGES} stages of ${MOST_STAGE_TAPS} taps reaches it beside ±${show(Number(task.rippleDb.toPrecision(3)))} dB of ripple.`
    throw stoppedBy(line, why, Math.max(1, Math.floor(figures.aliasDb)))
  }
  const first = found.sort((a, b) => costOf(a) - costOf(b)).slice(0, MOST_OPTIONS - 1)
  const options: Judged[] = [mine]
  for (const [index, one] of first.entries()) {
    const short = shortened(one)
    if (options.every(({ plan }) => !sameFilters(plan.filters, short.plan.filters))) options.push(short)
    yield 0.65 + (0.35 * (index + 1)) / first.length
  }
  return options
    .map((one) => optionOf(one, one === mine, needs.notes))
    .sort((a, b) => a.multipliesPerStoredSample - b.multipliesPerStoredSample || a.words - b.words)
}

/**
 * Decimation plans for the factor that a chain has, whose filters are as short as its sheet allows; fewest multiplies for a stored sample
 * first.
 *
 * Steps: 1. what the lines ask (flatness, images; usual values where none does), less what the other stages use up of it; 2. every ordered
 * factorisation into up to four factors, ranked by the published estimates of taps; 3. of the first, each stage's shortest filter of the kind
 * that multiplies least (half-band at 2, CIC with compensation first, Kaiser, equiripple), the ripple shared evenly, images that fold only
 * outside the band left alone; 4. each plan computed as a chain and judged, and lengthened where it misses.
 *
 * @returns at most 12 options, the current plan among them for comparison; each holds the whole chain, ready to be taken over
 * @throws DesignError as computeChain; `nothing-to-decimate`, `shape-between`; `flatness-out-of-reach` or `alias-out-of-reach` with the field
 *   of the line that stops it, and the nearest level in dB that works
 * Source: R. E. Crochiere & L. R. Rabiner, Multirate Digital Signal Processing, 1983, ch. 5 (multistage decimation).
 */
export const advisePlans = (spec: ChainSpec): readonly PlanOption[] => finish(planSteps(spec))

/** Runs a search to its end. */
export function finish<Result>(steps: Generator<number, Result>): Result {
  for (;;) {
    const next = steps.next()
    if (next.done === true) return next.value
  }
}
