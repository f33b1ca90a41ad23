import { show } from '../../check'
import { DesignError } from '../../errors'
import { computeChain } from '../compute'
import { MOST_CHAIN_STAGES, MOST_STAGE_TAPS } from '../limits'
import { chainSketch } from '../sketch'
import type { ChainSpec, DecimateStage } from '../spec'
import { factorisations, MOST_PLAN_STAGES } from './factorisations'
import { finish } from './finish'
import { figuresFor, needsOf, stoppedBy, type Needs } from './needs'
import { aheadOf, checkedAhead, checkedRipple, checkMovable } from './plan-ground'
import { estimatePlan, isDecimation, type PlanTask } from './plan-search'
import { costOf, relaxed, searchFor, settlePlan, trimmed, type Judged, type Settled } from './settle'
import type { PlanKind } from './stage-choice'
import { metFirst, standingOf, type Standing } from './standing'

export interface PlanOption extends Standing {
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
  /** Whether flatness and images are as was searched for; false for a current plan that is listed for comparison. */
  readonly meets: boolean
  readonly notes: readonly string[]
  readonly spec: ChainSpec
}

const MOST_OPTIONS = 12
/** Factorisations that are designed, of those that the estimates put first. */
const MOST_DESIGNED = 16
/** Chains computed and judged in one search; a large factor has many images to look at, and gets fewer. */
const MOST_JUDGED = 240
const LEAST_JUDGED = 24
const USUAL_FACTOR = 64
/** Of those, what finding plans may take; the rest is for shortening them. */
const FINDING_SHARE = 0.6
/** Plans that are enough when the chains run out. */
const ENOUGH = 4

const ALL: readonly PlanKind[] = ['cic', 'half-band', 'equiripple', 'kaiser']
/** What each factorisation is tried with: everything, no CIC filter, windows alone. */
const MIXES: readonly (readonly PlanKind[])[] = [ALL, ['half-band', 'equiripple', 'kaiser'], ['half-band', 'kaiser']]

function optionOf({ plan, chain, figures }: Judged, isCurrent: boolean, needs: Needs): PlanOption {
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
    ...standingOf(chain, needs),
    notes: needs.notes,
    spec: chain.spec,
  }
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
  const search = searchFor(spec, needs)
  const most = Math.max(LEAST_JUDGED, Math.min(MOST_JUDGED, (MOST_JUDGED * USUAL_FACTOR) / total))
  for (const [index, { factors }] of ranked.entries()) {
    for (const [mix, kinds] of MIXES.entries()) {
      if (search.judged.size > FINDING_SHARE * most && found.length >= ENOUGH) continue
      const made = settlePlan(search, task, factors, kinds)
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
    const short = search.judged.size < most ? trimmed(search, relaxed(search, one)) : one
    if (options.every(({ plan }) => !sameFilters(plan.filters, short.plan.filters))) options.push(short)
    yield 0.65 + (0.35 * (index + 1)) / first.length
  }
  return options
    .map((one) => optionOf(one, one === mine, needs))
    .sort(
      (a, b) =>
        metFirst(a, b) ||
        Number(b.meets) - Number(a.meets) ||
        a.multipliesPerStoredSample - b.multipliesPerStoredSample ||
        a.words - b.words,
    )
}

/**
 * Decimation plans for the factor that a chain has, whose filters are as short as the sheet's flatness and images allow. Those that meet the
 * whole sheet come first, and among them the fewest multiplies for a stored sample.
 *
 * Steps: 1. what the lines ask (flatness, images; usual values where none does), less what the other stages use up of it; 2. every ordered
 * factorisation into up to four factors, ranked by the published estimates of taps; 3. of the first, each stage's shortest filter of the kind
 * that multiplies least (half-band at 2, CIC with compensation first, Kaiser, equiripple), the ripple shared evenly, images that fold only
 * outside the band left alone; 4. each plan computed as a chain and judged, lengthened where it misses and
 * shortened where it has room.
 *
 * @returns at most 12 options, the current plan among them for comparison; each holds the whole chain, ready to be taken over
 * @throws DesignError as computeChain; `nothing-to-decimate`, `shape-between`; `flatness-out-of-reach` or `alias-out-of-reach` with the field
 *   of the line that stops it, and the nearest level in dB that works
 * Source: R. E. Crochiere & L. R. Rabiner, Multirate Digital Signal Processing, 1983, ch. 5 (multistage decimation).
 */
export const advisePlans = (spec: ChainSpec): readonly PlanOption[] => finish(planSteps(spec))
