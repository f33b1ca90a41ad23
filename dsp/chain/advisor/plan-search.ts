import type { ChainSpec, ChainStage, DecimateStage } from '../spec'
import { chooseStage, estimateStage, type PlanKind, type StageBook, type StageTask } from './stage-choice'

/** What a plan as a whole must do; all of it behind the converter. */
export interface PlanTask {
  readonly converterRateHz: number
  readonly outputRateHz: number
  readonly passHz: number
  readonly cleanHz: number
  /** For all stages together. */
  readonly rippleDb: number
  readonly aliasDb: number
  /** Level ahead of the converter, dB, at input frequencies. */
  readonly aheadDb: (hertz: Float64Array) => Float64Array
}

export interface Plan {
  readonly factors: readonly number[]
  readonly filters: readonly DecimateStage['filter'][]
  /** For each sample that the plan gives out. */
  readonly multiplies: number
}

const POINTS = 9

/**
 * How far down a stage must hold what folds below `cleanHz` at its output: the floor, less what the analog stages hold back already at every
 * input frequency that stands there, plus the ripple of the other stages.
 */
function attenuationFor(task: PlanTask, inRateHz: number, factor: number): number {
  const outRateHz = inRateHz / factor
  const inputs: number[] = []
  const half = Math.floor(factor / 2)
  // Bands far up are weaker ahead; the lowest, the middle and the highest of a large factor stand for all.
  for (const k of new Set([1, 2, 3, Math.ceil(half / 2), half].filter((one) => one >= 1 && one <= half))) {
    for (let n = 0; n < POINTS; n++) {
      const offset = ((2 * n) / (POINTS - 1) - 1) * task.cleanHz
      const hertz = Math.abs(k * outRateHz + offset)
      inputs.push(hertz)
      for (const rates of [1, 2])
        inputs.push(rates * task.converterRateHz - hertz, rates * task.converterRateHz + hertz)
    }
  }
  const ahead = task.aheadDb(Float64Array.from(inputs, Math.abs))
  return task.aliasDb + task.rippleDb + ahead.reduce((most, value) => Math.max(most, value), -Infinity)
}

/** The tasks of the stages of a factorisation, the ripple shared evenly. */
function tasksOf(task: PlanTask, factors: readonly number[]): StageTask[] {
  let inRateHz = task.converterRateHz
  return factors.map((factor) => {
    const needed = Math.round(10 * attenuationFor(task, inRateHz, factor)) / 10
    const one: StageTask = {
      inRateHz,
      factor,
      passHz: task.passHz,
      rippleDb: task.rippleDb / factors.length,
      cleanHz: task.cleanHz,
      attenuationDb: needed,
    }
    inRateHz /= factor
    return one
  })
}

/** Multiplies behind each stage, counted for a sample at the end. */
const perOutput = (task: PlanTask, { inRateHz, factor }: StageTask): number => inRateHz / factor / task.outputRateHz

/** CIC filters stand first alone: behind another filter little is left to be gained without multiplying. */
const allowedAt = (kinds: readonly PlanKind[], index: number): readonly PlanKind[] =>
  index === 0 ? kinds : kinds.filter((kind) => kind !== 'cic')

export function estimatePlan(task: PlanTask, factors: readonly number[], kinds: readonly PlanKind[]): number {
  return tasksOf(task, factors).reduce(
    (sum, stage, index) => sum + estimateStage(allowedAt(kinds, index), stage) * perOutput(task, stage),
    0,
  )
}

/**
 * The plan of a factorisation: in each stage the kind that multiplies least. Null where some stage can't be had.
 *
 * Source: R. E. Crochiere & L. R. Rabiner, Multirate Digital Signal Processing, 1983, ch. 5 (tolerances shared among the stages, every stage
 * as short as its own bands allow).
 */
export function makePlan(
  task: PlanTask,
  factors: readonly number[],
  kinds: readonly PlanKind[],
  book: StageBook,
): Plan | null {
  const filters: DecimateStage['filter'][] = []
  let multiplies = 0
  for (const [index, stage] of tasksOf(task, factors).entries()) {
    const choices = allowedAt(kinds, index).flatMap((kind) => chooseStage(kind, stage, book) ?? [])
    if (choices.length === 0) return null
    const best = choices.reduce((least, choice) => (choice.multiplies < least.multiplies ? choice : least))
    filters.push(best.filter)
    multiplies += best.multiplies * perOutput(task, stage)
  }
  return { factors, filters, multiplies }
}

export const isDecimation = (stage: ChainStage): stage is DecimateStage => stage.kind === 'decimate' && !stage.bypassed

/** The chain with its decimations exchanged for those of a plan, which stand where the first of them (or the end of the chain) was. */
export function withPlan(spec: ChainSpec, { factors, filters }: Pick<Plan, 'factors' | 'filters'>): ChainSpec {
  const first = spec.stages.findIndex(isDecimation)
  const converter = spec.stages.findIndex(({ kind }) => kind === 'converter')
  const at = first < 0 ? converter + 1 : first
  const others = spec.stages.filter((stage) => !isDecimation(stage))
  const taken = new Set(others.map(({ id }) => id))
  const reused = spec.stages.filter(isDecimation).map(({ id }) => id)
  const freshId = (): string => {
    const known = reused.find((id) => !taken.has(id))
    let number = 1
    while (taken.has(`s${number}`)) number += 1
    const id = known ?? `s${number}`
    taken.add(id)
    return id
  }
  const stages = factors.map((factor, index): DecimateStage => {
    const filter = filters[index]!
    return { id: freshId(), bypassed: false, kind: 'decimate', factor, filter }
  })
  return { ...spec, stages: [...others.slice(0, at), ...stages, ...others.slice(at)] }
}
