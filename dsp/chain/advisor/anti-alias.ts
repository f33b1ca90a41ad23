import { designAnalog } from '../../design-analog'
import { DesignError } from '../../errors'
import type { Filter } from '../../forms/filter'
import { magnitudeDb } from '../../response/frequency'
import type { AnalogSpec } from '../../spec'
import { isFamilyDesign } from '../../spec-kinds'
import type { ComputedChain } from '../chain'
import { averagingAmplitude } from '../closed-forms'
import { MOST_TOTAL_DECIMATION } from '../limits'
import type { AnalogStage, ChainSpec } from '../spec'
import { gridOf, levelOf, type Needs } from './needs'
import { isDecimation } from './plan-search'

/* The anti-alias filter of an order: its lowest corner, and the lowest rate at which it holds what folds at the converter. */

/** Of the room that the flat lines leave, what the anti-alias filter may use up; the rest is the decimations’. */
const ANALOG_SHARE = 0.75

export interface AntiAlias {
  /** Where it stands, or is to be put in. */
  readonly index: number
  readonly isNew: boolean
  /** Of the same family, ripple and attenuation. */
  readonly like: AnalogSpec
  readonly notes: readonly string[]
}

export const USUAL: AnalogSpec = { family: 'butterworth', response: 'lowpass', order: 10, edgesHz: [1] }

/** The family of the chain's own anti-alias filter: its first analog low-pass; a Butterworth filter where it has none. */
export function antiAliasOf({ stages }: ChainSpec): AntiAlias {
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

/** What the search of one order needs to know of the chain. */
export interface Ground {
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
export const othersOf = (chain: ComputedChain, antiAlias: AntiAlias): number[] =>
  chain.stages.flatMap(({ stage, index }) => {
    const isReplaced = !antiAlias.isNew && index === antiAlias.index
    return isReplaced || stage.kind === 'converter' || isDecimation(stage) ? [] : [index]
  })

export function groundOf(chain: ComputedChain, needs: Needs, antiAlias: AntiAlias): Ground {
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
export function prototype(like: AnalogSpec, order: number): Filter<'s'> | null {
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
export function lowestCorner(ground: Ground, filter: Filter<'s'>, rateHz: number): number | null {
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
export function aliasRoom(ground: Ground, filter: Filter<'s'>, cornerHz: number, rateHz: number): number {
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

export interface Pair {
  readonly factor: number
  readonly cornerHz: number
}

/** The lowest whole factor of the output rate, from `least` on, at which both kinds of line hold ahead of the decimations. */
export function lowestRate(ground: Ground, filter: Filter<'s'>): Pair | null {
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

export function withAntiAlias(
  spec: ChainSpec,
  { index, isNew, like }: AntiAlias,
  order: number,
  cornerHz: number,
): ChainSpec {
  const analog: AnalogSpec = { ...like, order, edgesHz: [cornerHz] }
  const old = spec.stages[index]!
  let number = 1
  while (spec.stages.some(({ id }) => id === `s${number}`)) number += 1
  const id = isNew ? `s${number}` : old.id
  const stage: AnalogStage = { id, bypassed: false, kind: 'analog', source: { from: 'here', analog } }
  return { ...spec, stages: isNew ? spec.stages.toSpliced(index, 0, stage) : spec.stages.with(index, stage) }
}
