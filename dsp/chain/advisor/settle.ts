import { DesignError } from '../../errors'
import type { ComputedChain } from '../chain'
import { computeChain } from '../compute'
import { chainSketch } from '../sketch'
import type { ChainSpec, DecimateStage } from '../spec'
import { figuresFor, type Figures, type Needs } from './needs'
import { makePlan, withPlan, type Plan, type PlanTask } from './plan-search'
import type { PlanKind, StageBook } from './stage-choice'

/* From a plan by its shares to one that the whole chain is judged by: lengthened where it misses, shortened where it has room. */

/** Times that a plan which misses is tightened by what it missed. */
const MOST_TIGHTENINGS = 4
/** Room for what neither the stop band's edges nor the tidy numbers foresee. */
const ALIAS_ROOM_DB = 0.1

export interface Judged {
  readonly plan: Pick<Plan, 'factors' | 'filters'>
  readonly chain: ComputedChain
  readonly figures: Figures
}

/** A plan computed as a chain and held against the needs, once in a search; null where it makes none. */
function judge({ spec, needs, judged }: Search, plan: Judged['plan']): Judged | null {
  const key = JSON.stringify(plan.filters)
  const known = judged.get(key)
  if (known !== undefined) return known
  let made: Judged | null = null
  try {
    const chain = computeChain(withPlan(spec, plan))
    made = { plan, chain, figures: figuresFor(chain, needs) }
  } catch (error) {
    if (!(error instanceof DesignError)) throw error
  }
  judged.set(key, made)
  return made
}

/** What a search for plans is about, and what it has found out so far. */
export interface Search {
  readonly spec: ChainSpec
  readonly needs: Needs
  readonly book: StageBook
  readonly judged: Map<string, Judged | null>
}

export const searchFor = (spec: ChainSpec, needs: Needs): Search => ({
  spec,
  needs,
  book: new Map(),
  judged: new Map(),
})

export interface Settled extends Judged {
  readonly kinds: readonly PlanKind[]
  /** What its stages were made for. */
  readonly task: PlanTask
}

/** A plan, lengthened until the whole chain meets the needs; null where it doesn't come to that. */
export function settlePlan(
  search: Search,
  first: PlanTask,
  factors: readonly number[],
  kinds: readonly PlanKind[],
): Settled | null {
  let task = { ...first, aliasDb: first.aliasDb + ALIAS_ROOM_DB }
  for (let round = 0; round <= MOST_TIGHTENINGS; round++) {
    const plan = makePlan(task, factors, kinds, search.book)
    const made = plan === null ? null : judge(search, plan)
    if (made === null) return null
    if (made.figures.meets) return { ...made, kinds, task }
    const { aliasRoomDb, flatRoomDb } = made.figures
    const missed = Math.max(0, -aliasRoomDb)
    const aliasDb = missed > 0 ? task.aliasDb + 1.1 * missed + ALIAS_ROOM_DB : task.aliasDb
    task = { ...task, aliasDb, rippleDb: flatRoomDb < 0 ? 0.7 * task.rippleDb : task.rippleDb }
  }
  return null
}

/** The plan made again for what it had to spare, where that comes out shorter. */
export function relaxed(search: Search, start: Settled): Judged {
  const { figures, task, kinds, plan } = start
  const aliasDb = task.aliasDb - 0.9 * figures.aliasRoomDb
  const rippleDb = task.rippleDb + 0.6 * figures.flatRoomDb
  return [
    { ...task, aliasDb, rippleDb },
    { ...task, rippleDb },
  ].reduce((least: Judged, one) => {
    const again = makePlan(one, plan.factors, kinds, search.book)
    const made = again === null ? null : judge(search, again)
    return made?.figures.meets === true && costOf(made) < costOf(least) ? made : least
  }, start)
}

export const costOf = ({ chain }: Judged): number => chainSketch(chain).multipliesPerStoredSample

/** A filter one step shorter; null where there is none. */
function shorter(filter: DecimateStage['filter']): DecimateStage['filter'] | null {
  switch (filter.type) {
    case 'half-band':
      return filter.taps > 7 ? { ...filter, taps: filter.taps - 4 } : null
    case 'kaiser':
    case 'equiripple':
      return filter.taps > 3 ? { ...filter, taps: filter.taps - 1 } : null
    case 'cic': {
      const { compensation } = filter
      if (compensation === null || compensation.taps <= 3) return null
      return { ...filter, compensation: { ...compensation, taps: compensation.taps - 2 } }
    }
    case 'design':
      return null
  }
}

/**
 * The plan with taps taken away one by one as long as the whole meets the needs: what one stage doesn't use of the shares that were foreseen
 * for it, another may do without. The last stage first, whose taps are most.
 */
export function trimmed(search: Search, start: Judged): Judged {
  let best = start
  for (let stage = start.plan.filters.length - 1; stage >= 0; stage--) {
    for (;;) {
      const filter = shorter(best.plan.filters[stage]!)
      if (filter === null) break
      const next = judge(search, { ...best.plan, filters: best.plan.filters.with(stage, filter) })
      if (next?.figures.meets !== true) break
      best = next
    }
  }
  return best
}
