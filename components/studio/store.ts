import { createStore } from 'zustand/vanilla'
import { DesignError, type DesignSpec } from '@/dsp'
import { edgesHzOf } from '@/lib/designs/outline'
import { sameValue } from '@/lib/designs/same-value'
import { statedDesign } from './stated-design'
import { type DrawerTab, type Refusal, type StackView, usualView } from './view'

/*
 * What the studio remembers: the spec, how it is looked at, and the gesture under way. Curves are derived from these and never kept.
 * Once a design has been reached, the spec in here always makes one: a change that doesn't is refused, with its reason, and the last
 * good design stays on the screen.
 */

const UNDO_DEPTH = 200

export interface StudioState {
  readonly spec: DesignSpec
  readonly past: readonly DesignSpec[]
  readonly future: readonly DesignSpec[]
  /** The spec to return to while a drag is under way. */
  readonly gestureMark: DesignSpec | null
  readonly refusal: Refusal | null
  readonly view: StackView
  readonly drawer: DrawerTab
  /** Another filter held up beside the design, drawn on its plots. */
  readonly held: { readonly label: string; readonly spec: DesignSpec } | null
}

export interface StudioCommands {
  /** One finished edit, one step of undo. False when it was refused; the refusal then stands in the state. */
  propose(spec: DesignSpec, field?: string): boolean
  begin(): void
  change(spec: DesignSpec, field?: string): boolean
  commit(): void
  cancel(): void
  undo(): void
  redo(): void
  dismissRefusal(): void
  look(change: Partial<StackView>): void
  /** Whether departure is judged, and drawn, with the best constant delay removed: a part of the budget. */
  removeDelay(removed: boolean): void
  resetView(): void
  open(drawer: DrawerTab): void
  hold(held: StudioState['held']): void
}

export type StudioStore = ReturnType<typeof createStudioStore>

export function createStudioStore(spec: DesignSpec, view: Partial<StackView> = {}, drawer: DrawerTab = 'rates') {
  return createStore<StudioState & StudioCommands>()((set, get) => ({
    spec,
    past: [],
    future: [],
    gestureMark: null,
    // Nothing is designed while a server renders, and the page it sends is taken over as it came: `dismissRefusal` looks afterwards.
    refusal: null,
    view: { ...usualView(spec), ...view },
    drawer,
    held: null,

    propose(next, field) {
      if (sameSpec(next, get().spec)) {
        set({ refusal: refusalOf(get().spec) })
        return true
      }
      const refusal = refusalOf(next, field)
      if (refusal) {
        set({ refusal })
        return false
      }
      set((state) => ({ ...stepped(state, state.spec), spec: next, refusal: null, view: following(state.view, next) }))
      return true
    },

    begin() {
      if (get().gestureMark === null) set({ gestureMark: get().spec })
    },
    change(next, field) {
      const refusal = refusalOf(next, field)
      set(refusal ? { refusal } : { spec: next, refusal: null })
      return refusal === null
    },
    commit() {
      const { gestureMark, spec: now } = get()
      if (gestureMark === null) return
      set((state) => ({
        ...(sameSpec(gestureMark, now) ? {} : stepped(state, gestureMark)),
        gestureMark: null,
        refusal: null,
        view: following(state.view, now),
      }))
    },
    cancel() {
      const { gestureMark } = get()
      if (gestureMark !== null) set({ spec: gestureMark, gestureMark: null, refusal: null })
    },

    undo() {
      const { past, spec: now, future } = get()
      const previous = past.at(-1)
      if (!previous) return
      set({ spec: previous, past: past.slice(0, -1), future: [now, ...future], refusal: null, gestureMark: null })
    },
    redo() {
      const { past, spec: now, future } = get()
      const [next, ...rest] = future
      if (!next) return
      set({ spec: next, past: [...past, now], future: rest, refusal: null, gestureMark: null })
    },

    dismissRefusal: () => set({ refusal: refusalOf(get().spec) }),
    look: (change) => set((state) => ({ view: { ...state.view, ...change } })),
    removeDelay: (removeDelay) => {
      const { spec: now, propose } = get()
      propose({ ...now, budget: { ...now.budget, removeDelay } })
    },
    resetView: () =>
      set((state) => {
        const { fromHz, toHz, magnitudeFloorDb } = usualView(state.spec)
        return { view: { ...state.view, fromHz, toHz, magnitudeFloorDb } }
      }),
    open: (tab) => set({ drawer: tab }),
    hold: (held) => set({ held }),
  }))
}

function stepped(state: StudioState, mark: DesignSpec): Pick<StudioState, 'past' | 'future'> {
  return { past: [...state.past, mark].slice(-UNDO_DEPTH), future: [] }
}

/** Keeps what matters on the sheet: when an edge or the fold line has left the view, the view opens to it. */
function following(view: StackView, spec: DesignSpec): StackView {
  const needed = [...edgesHzOf(spec), spec.sampleRateHz / 2]
  const inside = needed.every((hertz) => hertz > view.fromHz && hertz < view.toHz)
  if (inside) return view
  const { fromHz, toHz } = usualView(spec)
  return { ...view, fromHz, toHz }
}

/** Why a spec makes no design, or null when it does. The field is the edited word's where that is known. */
export function refusalOf(spec: DesignSpec, field?: string): Refusal | null {
  const design = statedDesign(spec)
  if (!(design instanceof DesignError)) return null
  return {
    field: field ?? design.field,
    message: design.message,
    // The nearest value belongs to the word it was computed for; beside another word it would mislead.
    ...(design.nearest !== undefined && (field ?? design.field) === design.field ? { nearest: design.nearest } : {}),
  }
}

export function sameSpec(left: DesignSpec, right: DesignSpec): boolean {
  return sameValue(left, right)
}
