import { show } from '../../check'
import { designAnalog } from '../../design-analog'
import { DesignError } from '../../errors'
import type { Filter } from '../../forms/filter'
import { magnitudeDb } from '../../response/frequency'
import type { AnalogSpec } from '../../spec'
import { isFamilyDesign } from '../../spec-kinds'
import type { ComputedChain } from '../chain'
import { averagingAmplitude } from '../closed-forms'
import { computeChain } from '../compute'
import { MOST_CHAIN_STAGES, MOST_TOTAL_DECIMATION } from '../limits'
import { chainSketch } from '../sketch'
import type { AnalogStage, ChainSpec } from '../spec'
import { factorisations } from './factorisations'
import { figuresFor, gridOf, levelOf, needsOf, stoppedBy, type Figures, type Needs } from './needs'
import { estimatePlan, isDecimation, withPlan, type PlanTask } from './plan-search'
import { aheadOf, checkedRipple, finish, settlePlan } from './plans'
import type { PlanKind, StageBook } from './stage-choice'

export interface RateOption {
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
  /** No other option has as low an order with a lower rate, or as low a rate with a lower order. */
  readonly isBest: boolean
  readonly notes: readonly string[]
  readonly spec: ChainSpec
}

const MOST_ORDER = 10
/** Of the room that the flat lines leave, what the anti-alias filter may use up; the rest is the decimations’. */
const ANALOG_SHARE = 0.75
/** Rates tried above the lowest that the analog filter allows, where that has no plan. */
const MOST_RATES = 24
const KINDS: readonly PlanKind[] = ['cic', 'half-band', 'kaiser']
/** Factorisations designed for one rate, of those that the estimates put first. */
const MOST_DESIGNED = 3

interface AntiAlias {
  /** Where it stands, or is to be put in. */
  readonly index: number
  readonly isNew: boolean
  /** Of the same family, ripple and attenuation. */
  readonly like: AnalogSpec
  readonly notes: readonly string[]
}

const USUAL: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 10, edgesHz: [1] }

/** The family of the chain's own anti-alias filter: its first analog low-pass; a Butterworth filter where it has none. */
function antiAliasOf({ stages }: ChainSpec): AntiAlias {
  const isAnalog = (stage: (typeof stages)[number]): stage is AnalogStage => stage.kind === 'analog' && !stage.bypassed
  for (const [index, stage] of stages.entries()) {
    if (!isAnalog(stage)) continue
    const { source } = stage
    const linked = source.from === 'design' && isFamilyDesign(source.link.spec) ? source.link.spec.analog : null
    const analog = source.from === 'here' ? source.analog : linked
    if (analog?.response !== 'lowpass') continue
    const isLinked = source.from === 'design'
    const notes = isLinked
      ? [`Each option states its own filter in place of “${source.link.title}”, version ${source.link.version}.`]
      : []
    return { index, isNew: false, like: analog, notes }
  }
  const index = stages.findIndex(({ kind }) => kind === 'converter')
  return {
    index,
    isNew: true,
    like: USUAL,
    notes: ['The chain has no analog low-pass of a known family; a Butterworth filter was taken.'],
  }
}

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

/** What the search of one order needs to know of the chain. */
interface Ground {
  readonly chain: ComputedChain
  readonly needs: Needs
  readonly antiAlias: AntiAlias
  /** Level of all stages but the anti-alias filter, the averaging and the decimations, at each flat line's grid. */
  readonly rest: readonly { readonly grid: Float64Array; readonly level: Float64Array; readonly withinDb: number }[]
  /** Level ahead of the converter without anti-alias filter and averaging. */
  readonly sensorDb: (hertz: Float64Array) => Float64Array
  readonly averaging: number
}

/** Stages that stay: all but the anti-alias filter, the converter and the decimations. */
const othersOf = (chain: ComputedChain, antiAlias: AntiAlias): number[] =>
  chain.stages.flatMap(({ stage, index }) => {
    const isReplaced = !antiAlias.isNew && index === antiAlias.index
    return isReplaced || stage.kind === 'converter' || isDecimation(stage) ? [] : [index]
  })

function groundOf(chain: ComputedChain, needs: Needs, antiAlias: AntiAlias): Ground {
  const others = othersOf(chain, antiAlias)
  const ahead = others.filter((index) => index < chain.converterIndex)
  const converter = chain.stages[chain.converterIndex]?.stage
  return {
    chain,
    needs,
    antiAlias,
    rest: needs.flat.map((line) => {
      const grid = gridOf(line)
      return { grid, level: levelOf(chain, others, grid), withinDb: line.withinDb }
    }),
    sensorDb: (hertz) => levelOf(chain, ahead, hertz),
    averaging: converter?.kind === 'converter' ? (converter.averaging?.order ?? 0) : 0,
  }
}

const averagingDb = (order: number, rateHz: number, hertz: number): number =>
  order === 0 ? 0 : 20 * Math.log10(Math.abs(averagingAmplitude(hertz, order, rateHz)))

/** A filter of an order with its corner at 1 Hz, whose levels are those of any corner at f/corner. */
function prototype(like: AnalogSpec, order: number): Filter<'s'> | null {
  try {
    return designAnalog({ ...like, order, edgesHz: [1] })
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}

/** Worst use of the flat lines' room: the largest of |level| over its limit, the decimations' share left out. */
function flatUse({ rest, averaging }: Ground, filter: Filter<'s'>, cornerHz: number, rateHz: number): number {
  let most = 0
  for (const { grid, level, withinDb } of rest) {
    const own = magnitudeDb(
      filter,
      grid.map((hertz) => hertz / cornerHz),
    )
    own.forEach((value, n) => {
      const there = level[n]! + averagingDb(averaging, rateHz, grid[n]!)
      const room = withinDb - Math.abs(there)
      const use = room <= 0 ? Infinity : (Math.abs(there + value) - Math.abs(there)) / (ANALOG_SHARE * room)
      most = Math.max(most, use)
    })
  }
  return most
}

const CORNERS_AN_OCTAVE = 12
const OCTAVES = 9

/** The lowest corner at which the flat lines hold with the decimations' share to spare; null where none does. */
function lowestCorner(ground: Ground, filter: Filter<'s'>, rateHz: number): number | null {
  const start = ground.needs.passHz / 4
  const at = (step: number): number => start * 2 ** (step / CORNERS_AN_OCTAVE)
  let high = 0
  while (flatUse(ground, filter, at(high), rateHz) > 1) {
    high += 1
    if (high > CORNERS_AN_OCTAVE * OCTAVES) return null
  }
  let low = high - 1
  for (let round = 0; round < 12; round++) {
    const middle = (low + high) / 2
    if (flatUse(ground, filter, at(middle), rateHz) > 1) low = middle
    else high = middle
  }
  // Rounded up to four digits, so that the corner can be said.
  const corner = at(high)
  const unit = 10 ** (Math.floor(Math.log10(corner)) - 3)
  return Number((Math.ceil(corner / unit) * unit).toPrecision(4))
}

const IMAGE_POINTS = 33
const IMAGE_RATES = [1, 2, 3, 4]

/** Room of the alias lines at the converter, dB; negative where an image comes through. */
function aliasRoom(ground: Ground, filter: Filter<'s'>, cornerHz: number, rateHz: number): number {
  let least = Infinity
  for (const { toHz, atLeastDb } of ground.needs.alias) {
    const hertz = Float64Array.from(
      IMAGE_RATES.flatMap((rates) =>
        Array.from({ length: IMAGE_POINTS }, (_, n) => rates * rateHz + ((2 * n) / (IMAGE_POINTS - 1) - 1) * toHz),
      ),
    )
    const own = magnitudeDb(
      filter,
      hertz.map((one) => one / cornerHz),
    )
    const sensor = ground.sensorDb(hertz)
    own.forEach((value, n) => {
      const level = value + sensor[n]! + averagingDb(ground.averaging, rateHz, hertz[n]!)
      least = Math.min(least, -level - atLeastDb)
    })
  }
  return least
}

interface Pair {
  readonly factor: number
  readonly cornerHz: number
}

/** The lowest whole factor of the output rate, from `least` on, at which both kinds of line hold ahead of the decimations. */
function lowestRate(ground: Ground, filter: Filter<'s'>): Pair | null {
  const holds = (factor: number): Pair | null => {
    const rateHz = factor * ground.chain.outputRateHz
    const cornerHz = lowestCorner(ground, filter, rateHz)
    return cornerHz !== null && aliasRoom(ground, filter, cornerHz, rateHz) >= ROOM_DB ? { factor, cornerHz } : null
  }
  let low = 0
  let high = 1
  let found = holds(high)
  while (found === null) {
    if (high >= MOST_TOTAL_DECIMATION) return null
    low = high
    high = Math.min(2 * high, MOST_TOTAL_DECIMATION)
    found = holds(high)
  }
  while (high - low > 1) {
    const middle = (low + high) >> 1
    const there = holds(middle)
    if (there === null) low = middle
    else {
      high = middle
      found = there
    }
  }
  return found
}

/** For the ripple of the decimations, on which an image rides. */
const ROOM_DB = 0.2

function withAntiAlias(spec: ChainSpec, { index, isNew, like }: AntiAlias, order: number, cornerHz: number): ChainSpec {
  const analog: AnalogSpec = { ...like, order, edgesHz: [cornerHz] }
  const old = spec.stages[index]!
  let number = 1
  while (spec.stages.some(({ id }) => id === `s${number}`)) number += 1
  const id = isNew ? `s${number}` : old.id
  const stage: AnalogStage = { id, bypassed: false, kind: 'analog', source: { from: 'here', analog } }
  return { ...spec, stages: isNew ? spec.stages.toSpliced(index, 0, stage) : spec.stages.with(index, stage) }
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
  const book: StageBook = new Map()
  let best: Made | null = null
  for (const { factors } of ranked) {
    const made = settlePlan({ spec: atRate, needs, factors, kinds: KINDS, book }, task)
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
        notes: [...needs.notes, ...antiAlias.notes],
        spec: made.chain.spec,
      })
      break
    }
  }
  if (found.length === 0) throw refusal(ground, highest ?? designAnalog(USUAL))
  yield 1
  return found.map((one) => ({ ...one, isBest: isBestOf(found, one) }))
}

/**
 * For each order of the anti-alias filter the lowest converter rate at which the chain meets its sheet; the output rate stays.
 *
 * Steps: 1. what the lines ask, or usual values; 2. for each order from 1 to 10 of the chain's own family, and each whole multiple of the
 * output rate, the lowest corner that leaves the flat lines a quarter of their room; 3. by halving, the lowest multiple at which the filter,
 * with its sensor and the converter's averaging, holds every image that folds at the converter; 4. the cheapest of a few plans for it, the
 * whole computed as a chain and judged; where there is no plan, the next multiple.
 *
 * @returns by order; each option holds the whole chain, ready to be taken over. Orders that don't come to a rate are left out
 * @throws DesignError as computeChain; `shape-ahead`; `flatness-out-of-reach` or `alias-out-of-reach` with the field of the line that stops
 *   it, and the nearest level in dB that works
 * Sources: the trade of filter order against oversampling is common practice in data acquisition; Crochiere & Rabiner 1983, ch. 5, for the plan.
 */
export const adviseRates = (spec: ChainSpec): readonly RateOption[] => finish(rateSteps(spec))
