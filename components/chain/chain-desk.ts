import type { ChainRequirementKind, ChainSpec, Interferer } from '@/dsp'
import { nearestWorking } from '@/components/studio/statement/nearest'
import { stepped as steppedQuantity } from '@/components/studio/statement/apply'
import type { StepSize } from '@/components/studio/statement/quantity-word'
import { withField, type StagesEdit } from '@/lib/chains/edits'
import {
  boundRefusal,
  chainFieldOf,
  chainFieldText,
  isWholeNumber,
  numberAt,
  type FieldRefusal,
} from '@/lib/chains/fields'
import { usualLine } from '@/lib/chains/words'
import { chainRefusal, type ChainStore } from './store'

/*
 * What the desk, the sheet and the interferers do to the store. Every edit is put to the chain as it stands in the store at that moment:
 * the page itself is told of changes a little later. Refusals are answered, so that they stand beside the field that was edited.
 */

export type DeskRefusal = FieldRefusal & { readonly nearestText?: string }

export type ChainDesk = ReturnType<typeof chainDesk>

export function chainDesk(store: ChainStore) {
  const spec = () => store.getState().spec

  /** One finished edit; answers with the reason when it makes no chain, and leaves the store as it was. */
  function put(next: ChainSpec): string | null {
    const refusal = chainRefusal(next)
    if (refusal) return refusal.message
    store.getState().propose(next)
    return null
  }

  return {
    put,
    /** Tells of every change of the chain, also by undo and redo; the answer ends it. */
    onEdit: (tell: () => void): (() => void) =>
      store.subscribe((now, before) => {
        if (now.spec !== before.spec) tell()
      }),
    /** Whether an edit of the stages would make a chain. */
    wouldTake(change: (spec: ChainSpec) => StagesEdit): boolean {
      const edit = change(spec())
      return edit.ok && chainRefusal(edit.spec) === null
    },
    /** Edits the chain as it stands now. */
    edit: (change: (spec: ChainSpec) => ChainSpec): string | null => put(change(spec())),

    /** Adds, moves, bypasses, duplicates or removes a stage; the stage it is about lies on the desk afterwards. */
    editStages(change: (spec: ChainSpec) => StagesEdit): string | null {
      const edit = change(spec())
      if (!edit.ok) return edit.message
      const refusal = put(edit.spec)
      if (refusal === null) store.getState().choose(edit.stageId)
      return refusal
    },

    /** Sets the number at a path. */
    setNumber(path: string, value: number): DeskRefusal | null {
      const refusal = numberRefusal(spec(), path, value)
      if (refusal) return refusal
      store.getState().propose(withField(spec(), path, value), path)
      return null
    },
    /** One step of a run that `stepped` ends; the whole run is one step of undo. */
    step(path: string, direction: 1 | -1): void {
      const standing = numberAt(spec(), path)
      if (standing === null) return
      const value = nextValue(path, standing, direction, 'usual')
      const next = withField(spec(), path, value)
      if (boundRefusal(spec(), path, value) || chainRefusal(next)) return
      store.getState().begin()
      store.getState().change(next, path)
    },
    stepped: () => store.getState().commit(),

    addLine: (kind: ChainRequirementKind) => put({ ...spec(), sheet: [...spec().sheet, usualLine(kind, spec())] }),
    removeLine: (index: number) => put({ ...spec(), sheet: without(spec().sheet, index) }),
    moveLine: (index: number, by: 1 | -1) => put({ ...spec(), sheet: moved(spec().sheet, index, by) }),
    addInterferer: (one: Interferer) => put({ ...spec(), interferers: [...spec().interferers, one] }),
    removeInterferer: (index: number) => put({ ...spec(), interferers: without(spec().interferers, index) }),
  }
}

const without = <Item>(items: readonly Item[], index: number): readonly Item[] => items.filter((_, at) => at !== index)

function moved<Item>(items: readonly Item[], index: number, by: 1 | -1): readonly Item[] {
  const [one, other] = [items[index], items[index + by]]
  if (one === undefined || other === undefined) return items
  const next = [...items]
  next[index] = other
  next[index + by] = one
  return next
}

/** Why a number can't stand at a path, with the nearest that can; null when it can. */
function numberRefusal(spec: ChainSpec, path: string, value: number): DeskRefusal | null {
  const refusal = boundRefusal(spec, path, value) ?? chainRefusal(withField(spec, path, value), path)
  if (!refusal) return null
  const nearest = typeof refusal.nearest === 'number' ? refusal.nearest : nearestNumber(spec, path, value)
  return nearest === null
    ? { message: refusal.message }
    : { message: refusal.message, nearest, nearestText: chainFieldText(spec, path, nearest) }
}

/** The number nearest to a refused one that makes a chain at a path, from the one that stands there. */
export function nearestNumber(spec: ChainSpec, path: string, refused: number): number | null {
  const standing = numberAt(spec, path)
  if (standing === null) return null
  const works = (value: number) =>
    boundRefusal(spec, path, value) === null && chainRefusal(withField(spec, path, value)) === null
  return nearestWorking(works, { standing, refused, isCount: isWhole(path) })
}

const isWhole = (path: string): boolean => isWholeNumber(chainFieldOf(path)?.unit ?? 'number')

/** One press of an arrow key: 1 for a count, else one unit of the third significant digit. */
export function nextValue(path: string, value: number, direction: 1 | -1, size: StepSize): number {
  if (isWhole(path)) return value + direction
  return steppedQuantity('Hz', value, direction, size)
}
