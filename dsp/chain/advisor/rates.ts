import { show } from '../../check'
import { designAnalog } from '../../design-analog'
import { DesignError } from '../../errors'
import type { Filter } from '../../forms/filter'
import type { ComputedChain } from '../chain'
import { computeChain } from '../compute'
import { MOST_CHAIN_STAGES, MOST_TOTAL_DECIMATION } from '../limits'
import { chainSketch } from '../sketch'
import type { ChainSpec } from '../spec'
import {
  aliasRoom,
  antiAliasOf,
  groundOf,
  lowestCorner,
  lowestRate,
  othersOf,
  prototype,
  USUAL,
  withAntiAlias,
  type Ground,
} from './anti-alias'
import { factorisations } from './factorisations'
import { finish } from './finish'
import { figuresFor, levelOf, needsOf, stoppedBy, type Figures } from './needs'
import { aheadOf, checkedRipple } from './plan-ground'
import { estimatePlan, isDecimation, withPlan, type PlanTask } from './plan-search'
import { searchFor, settlePlan } from './settle'
import type { PlanKind } from './stage-choice'
import { metFirst, standingOf, type Standing } from './standing'

export interface RateOption extends Standing {
  readonly order: number
  readonly converterRateHz: number
  /** Converter rate over output rate. */
  readonly factor: number
  readonly cornerHz: number
  /** How far down the worst image is, positive. */
  readonly aliasDb: number
  /** Largest departure from unity over the lines that ask for flatness. */
  readonly rippleDb: number
  readonly delaySeconds: number
  readonly multipliesPerSecond: number
  /** No other has as low an order with a lower rate, or as low a rate with a lower order, of those that meet the sheet (of all, if none does). */
  readonly isBest: boolean
  readonly notes: readonly string[]
  readonly spec: ChainSpec
}

const MOST_ORDER = 10
/** Rates tried above the lowest that the analog filter allows, where that has no plan. */
const MOST_RATES = 24
const KINDS: readonly PlanKind[] = ['cic', 'half-band', 'kaiser']
/** Factorisations designed for one rate, of those that the estimates put first. */
const MOST_DESIGNED = 3

/** A linked design ahead of the decimations runs at the converter's rate, which is then not free. */
function checkFree(spec: ChainSpec): void {
  const last = spec.stages.findLastIndex(isDecimation)
  const at = spec.stages.findIndex(
    (stage, index) => stage.kind === 'shape' && !stage.bypassed && index < last && stage.filter.type === 'design',
  )
  if (at < 0) return
  const message =
    'This filter stands ahead of a decimation and is designed for its rate there, which a new converter rate would change; behind the last decimation it is in no rate’s way.'
  throw new DesignError('shape-ahead', `stages.${at}`, message)
}

interface Made {
  readonly chain: ComputedChain
  readonly figures: Figures
}

/** The chain at a rate, with the cheapest plan that meets the needs; null where there is none. */
function makeAt(ground: Ground, spec: ChainSpec, factor: number): Made | null {
  const { needs } = ground
  const converterRateHz = factor * ground.chain.outputRateHz
  const atRate: ChainSpec = {
    ...spec,
    stages: spec.stages.map((stage) =>
      stage.kind === 'converter' ? { ...stage, sampleRateHz: converterRateHz } : stage,
    ),
  }
  const bare = withPlan(atRate, { factors: [], filters: [] })
  if (factor === 1) {
    const chain = computeChain(bare)
    const figures = figuresFor(chain, needs)
    return figures.meets ? { chain, figures } : null
  }
  // Stages behind the decimations are counted at the output rate, where they stay; those ahead of the converter as they are.
  const ahead = computeChain({
    ...bare,
    stages: bare.stages.filter(({ kind }) => kind !== 'shape' && kind !== 'decimate'),
    sheet: [],
    interferers: [],
  })
  const left = needs.flat.map((line, k) => {
    const { grid, level } = ground.rest[k]!
    const shaped = levelOf(
      ahead,
      ahead.stages.map(({ index }) => index),
      grid,
    )
    const sensor = ground.sensorDb(grid)
    const most = shaped.reduce((largest, value, n) => Math.max(largest, Math.abs(value + level[n]! - sensor[n]!)), 0)
    return line.withinDb - most
  })
  const rippleDb = Math.min(...left)
  if (!(rippleDb > 0)) return null
  const task: PlanTask = {
    converterRateHz,
    outputRateHz: ground.chain.outputRateHz,
    passHz: needs.passHz,
    cleanHz: needs.cleanHz,
    rippleDb,
    aliasDb: needs.aliasDb,
    aheadDb: aheadOf(ahead),
  }
  const room = MOST_CHAIN_STAGES - bare.stages.length
  const ranked = factorisations(factor, Math.min(3, room))
    .map((factors) => ({ factors, estimate: estimatePlan(task, factors, KINDS) }))
    .filter(({ estimate }) => Number.isFinite(estimate))
    .sort((a, b) => a.estimate - b.estimate)
    .slice(0, MOST_DESIGNED)
  const search = searchFor(atRate, needs)
  let best: Made | null = null
  for (const { factors } of ranked) {
    const made = settlePlan(search, task, factors, KINDS)
    const cost = (one: Made): number => chainSketch(one.chain).multipliesPerStoredSample
    if (made !== null && (best === null || cost(made) < cost(best))) best = made
  }
  return best
}

/** No other is as good in both and better in one. */
const isBestOf = (options: readonly Omit<RateOption, 'isBest'>[], one: Omit<RateOption, 'isBest'>): boolean =>
  !options.some(
    (other) =>
      other.order <= one.order &&
      other.converterRateHz <= one.converterRateHz &&
      (other.order < one.order || other.converterRateHz < one.converterRateHz),
  )

/** Why no order does: the flat lines where no corner keeps to them, else the alias lines. */
function refusal(ground: Ground, highest: Filter<'s'>): DesignError {
  const rateHz = MOST_TOTAL_DECIMATION * ground.chain.outputRateHz
  const cornerHz = lowestCorner(ground, highest, rateHz)
  const { flat, alias } = ground.needs
  if (cornerHz === null) {
    const uses = ground.rest.map(({ level }) => level.reduce((most, value) => Math.max(most, Math.abs(value)), 0))
    const worst = flat.reduce(
      (most, line, k) => (uses[k]! / line.withinDb > uses[most]! / flat[most]!.withinDb ? k : most),
      0,
    )
    const why = `the sensor and the other stages come to ${show(Number(uses[worst]!.toPrecision(3)))} dB by themselves, which leaves too little for an anti-alias filter of any corner.`
    return stoppedBy(flat[worst]!, why, Number((1.2 * uses[worst]! + 0.1).toPrecision(2)))
  }
  const room = aliasRoom(ground, highest, cornerHz, rateHz)
  const line = alias.reduce((most, one) => (one.atLeastDb > most.atLeastDb ? one : most))
  const why =
    room < 0
      ? `even at ${MOST_TOTAL_DECIMATION} times the output rate images are ${show(Math.floor(line.atLeastDb + room))} dB down.`
      : 'no decimation plan of up to three stages reaches it at the rates that the anti-alias filter allows.'
  return stoppedBy(line, why, Math.max(1, Math.floor(line.atLeastDb + Math.min(room, -1))))
}

/**
 * The rates step by step; yields progress from 0 to 1.
 * @see adviseRates
 */
export function* rateSteps(spec: ChainSpec): Generator<number, readonly RateOption[]> {
  const chain = computeChain(spec)
  checkFree(spec)
  const antiAlias = antiAliasOf(spec)
  const { needs } = checkedRipple(chain, needsOf(spec), othersOf(chain, antiAlias))
  const ground = groundOf(chain, needs, antiAlias)
  const found: Omit<RateOption, 'isBest'>[] = []
  let highest: Filter<'s'> | null = null
  for (let order = 1; order <= MOST_ORDER; order++) {
    yield (order - 1) / MOST_ORDER
    const filter = prototype(antiAlias.like, order)
    if (filter === null) continue
    highest = filter
    const pair = lowestRate(ground, filter)
    if (pair === null) continue
    for (let factor = pair.factor; factor <= Math.min(pair.factor + MOST_RATES, MOST_TOTAL_DECIMATION); factor++) {
      const converterRateHz = factor * chain.outputRateHz
      const cornerHz = lowestCorner(ground, filter, converterRateHz)
      if (cornerHz === null) continue
      const made = makeAt(ground, withAntiAlias(spec, antiAlias, order, cornerHz), factor)
      yield (order - 0.5) / MOST_ORDER
      if (made === null) continue
      const { delaySeconds, multipliesPerStoredSample } = chainSketch(made.chain)
      found.push({
        order,
        converterRateHz,
        factor,
        cornerHz,
        aliasDb: made.figures.aliasDb,
        rippleDb: made.figures.rippleDb,
        delaySeconds,
        multipliesPerSecond: multipliesPerStoredSample * chain.outputRateHz,
        ...standingOf(made.chain, needs),
        notes: [...needs.notes, ...antiAlias.notes],
        spec: made.chain.spec,
      })
      break
    }
  }
  if (found.length === 0) throw refusal(ground, highest ?? designAnalog(USUAL))
  yield 1
  const meeting = found.filter(({ missed }) => missed.length === 0)
  const rivals = meeting.length > 0 ? meeting : found
  return found.map((one) => ({ ...one, isBest: rivals.includes(one) && isBestOf(rivals, one) })).sort(metFirst)
}

/**
 * For each order of the anti-alias filter the lowest converter rate at which the chain keeps the sheet's flatness and images; the output rate
 * stays. Every option says which other lines it misses.
 *
 * Steps: 1. what the lines ask, or usual values; 2. for each order from 1 to 10 of the chain's own family, and each whole multiple of the
 * output rate, the lowest corner that leaves the flat lines a quarter of their room; 3. by halving, the lowest multiple at which the filter,
 * with its sensor and the converter's averaging, holds every image that folds at the converter; 4. the cheapest of a few plans for it, the
 * whole computed as a chain and judged; where there is no plan, the next multiple.
 *
 * @returns those that meet the whole sheet first, then by order; each option holds the whole chain, ready to be taken over. Orders that don't come to a rate are left out
 * @throws DesignError as computeChain; `shape-ahead`; `flatness-out-of-reach` or `alias-out-of-reach` with the field of the line that stops
 *   it, and the nearest level in dB that works
 * Sources: the trade of filter order against oversampling is common practice in data acquisition; Crochiere & Rabiner 1983, ch. 5, for the plan.
 */
export const adviseRates = (spec: ChainSpec): readonly RateOption[] => finish(rateSteps(spec))
