import { createStore } from 'zustand/vanilla'
import { DesignError, type ChainSpec, type ToleranceResult } from '@/dsp'
import type { Refusal } from '@/components/studio/view'
import { sameValue } from '@/lib/designs/same-value'
import { computedChain } from './computed-chain'
import type { ChainDrawerTab } from './view'

/*
 * What the chain page remembers: the spec, the stage and the output frequency that are looked at, and the gesture under way. Curves and
 * figures are derived from these and never kept; the one exception is the last tolerance run, which takes seconds and was asked for.
 * Once a chain has been reached, the spec in here always makes one, as in the studio.
 */

const UNDO_DEPTH = 200

export interface ChainState {
  readonly spec: ChainSpec
  readonly past: readonly ChainSpec[]
  readonly future: readonly ChainSpec[]
  /** The spec to return to while a gesture is under way. */
  readonly gestureMark: ChainSpec | null
  readonly refusal: Refusal | null
  readonly drawer: ChainDrawerTab
  /** The output frequency whose images are traced on the fold chart. */
  readonly traceHz: number | null
  /** The stage that lies on the desk. */
  readonly stageId: string | null
  /** The last tolerance run, and the spec it was of; see `toleranceFor`. */
  readonly tolerance: { readonly spec: ChainSpec; readonly result: ToleranceResult } | null
}

export interface ChainCommands {
  /** One finished edit, one step of undo. False when it was refused; the refusal then stands in the state. */
  propose(spec: ChainSpec, field?: string): boolean
  begin(): void
  change(spec: ChainSpec, field?: string): boolean
  commit(): void
  cancel(): void
  undo(): void
  redo(): void
  dismissRefusal(): void
  /** Says why something can't be done that was never a spec at all. */
  refuse(refusal: Refusal): void
  open(drawer: ChainDrawerTab): void
  trace(hz: number | null): void
  choose(stageId: string | null): void
  keepTolerance(spec: ChainSpec, result: ToleranceResult): void
}

export type ChainStore = ReturnType<typeof createChainStore>

export function createChainStore(
  spec: ChainSpec,
  { drawer = 'trade-offs', traceHz = null }: { drawer?: ChainDrawerTab; traceHz?: number | null } = {},
) {
  return createStore<ChainState & ChainCommands>()((set, get) => ({
    spec,
    past: [],
    future: [],
    gestureMark: null,
    // Nothing is computed while a server renders, and the page it sends is taken over as it came: `dismissRefusal` looks afterwards.
    refusal: null,
    drawer,
    traceHz,
    stageId: null,
    tolerance: null,

    propose(next, field) {
      if (sameValue(next, get().spec)) {
        set({ refusal: chainRefusal(get().spec) })
        return true
      }
      const refusal = chainRefusal(next, field)
      if (refusal) {
        set({ refusal })
        return false
      }
      set((state) => ({ ...stepped(state, state.spec), ...standing(state, next) }))
      return true
    },

    begin() {
      if (get().gestureMark === null) set({ gestureMark: get().spec })
    },
    change(next, field) {
      const refusal = chainRefusal(next, field)
      set((state) => (refusal ? { refusal } : standing(state, next)))
      return refusal === null
    },
    commit() {
      const { gestureMark, spec: now } = get()
      if (gestureMark === null) return
      set((state) => ({
        ...(sameValue(gestureMark, now) ? {} : stepped(state, gestureMark)),
        gestureMark: null,
        refusal: null,
      }))
    },
    cancel() {
      const { gestureMark } = get()
      if (gestureMark !== null) set((state) => ({ ...standing(state, gestureMark), gestureMark: null }))
    },

    undo() {
      const { past, spec: now, future } = get()
      const previous = past.at(-1)
      if (!previous) return
      set((state) => ({
        ...standing(state, previous),
        past: past.slice(0, -1),
        future: [now, ...future],
        gestureMark: null,
      }))
    },
    redo() {
      const { past, spec: now, future } = get()
      const [next, ...rest] = future
      if (!next) return
      set((state) => ({ ...standing(state, next), past: [...past, now], future: rest, gestureMark: null }))
    },

    dismissRefusal: () => set({ refusal: chainRefusal(get().spec) }),
    refuse: (refusal) => set({ refusal }),
    open: (tab) => set({ drawer: tab }),
    trace: (traceHz) => set({ traceHz }),
    choose: (stageId) => set({ stageId }),
    keepTolerance: (of, result) => set({ tolerance: { spec: of, result } }),
  }))
}

function stepped(state: ChainState, mark: ChainSpec): Pick<ChainState, 'past' | 'future'> {
  return { past: [...state.past, mark].slice(-UNDO_DEPTH), future: [] }
}

/** Another spec, with what is looked at kept where that is still there. */
function standing({ stageId }: ChainState, spec: ChainSpec): Pick<ChainState, 'spec' | 'refusal' | 'stageId'> {
  return { spec, refusal: null, stageId: spec.stages.some(({ id }) => id === stageId) ? stageId : null }
}

/** Why a spec makes no chain, or null when it does. The field is the edited word's where that is known. */
export function chainRefusal(spec: ChainSpec, field?: string): Refusal | null {
  const chain = computedChain(spec)
  if (!(chain instanceof DesignError)) return null
  return {
    field: field ?? chain.field,
    message: chain.message,
    // The nearest value belongs to the word it was computed for; beside another word it would mislead.
    ...(chain.nearest !== undefined && (field ?? chain.field) === chain.field ? { nearest: chain.nearest } : {}),
  }
}

/** The tolerance run that speaks for a spec: one of the same stages, kept band and settings; null where there is none. */
export function toleranceFor(spec: ChainSpec, tolerance: ChainState['tolerance']): ToleranceResult | null {
  if (!tolerance) return null
  const { stages, kept, tolerance: settings } = tolerance.spec
  const isSame = sameValue(stages, spec.stages) && sameValue(kept, spec.kept) && sameValue(settings, spec.tolerance)
  return isSame ? tolerance.result : null
}
