import { show } from '../../check'
import { DesignError } from '../../errors'
import type { ComputedChain } from '../chain'
import type { ChainSpec } from '../spec'
import { gridOf, levelOf, stoppedBy, type Needs } from './needs'
import { isDecimation, type PlanTask } from './plan-search'

/* What a chain leaves to its decimations, and what no decimation can mend. */

/** What stands between two decimations runs at a rate that another plan doesn't have. */
export function checkMovable(spec: ChainSpec): void {
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
export function checkedAhead(
  chain: ComputedChain,
  needs: Needs,
  aheadDb: PlanTask['aheadDb'],
  rippleDb: number,
): Needs {
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

/** Level of everything ahead of the converter's samples, averaging included. */
export function aheadOf(chain: ComputedChain): PlanTask['aheadDb'] {
  const ahead = Array.from({ length: chain.converterIndex + 1 }, (_, index) => index)
  return (hertz) => levelOf(chain, ahead, hertz)
}
