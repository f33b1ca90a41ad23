import type { RequirementKind, RequirementResult, RequirementSheet, Requirement } from '@/dsp'
import { isNearDc, type LineField } from '@/lib/designs/requirement-words'
import {
  numberOf,
  sheetOf,
  withField,
  withLine,
  withLineAdded,
  withLineMoved,
  withoutLine,
  withSheet,
  type LineRefusal,
} from '@/lib/designs/sheet-edits'
import type { StudioStore } from '../store'

/*
 * What the panel does to the studio's store. Every edit is put to the sheet as it stands in the store at that moment: the panel itself is
 * told of changes a little later.
 */

export interface LineDesk {
  /** Sets one number of a line; answers with the reason when that can't be. */
  setField(index: number, field: LineField, value: number): LineRefusal | null
  /** One step of a run that `stepped` ends; the whole run is one step of undo. */
  step(index: number, field: LineField, next: (value: number) => number): void
  stepped(): void
  setLine(index: number, line: Requirement): void
  add(kind: RequirementKind): void
  remove(index: number): void
  move(index: number, by: 1 | -1): void
  replace(sheet: RequirementSheet): void
  /** Takes the crosshair to where a line is worst, opening the view to it and turning the departure plot to its unit. */
  lookAt(result: RequirementResult): void
}

export function lineDesk(store: StudioStore): LineDesk {
  const spec = () => store.getState().spec
  const edited = (index: number, field: LineField, value: number) => {
    const line = sheetOf(spec())[index]
    return line && withField(line, field, value, spec().sampleRateHz / 2)
  }
  return {
    setField(index, field, value) {
      const edit = edited(index, field, value)
      if (!edit) return null
      if (!edit.ok) return edit
      const { propose } = store.getState()
      return propose(withLine(spec(), index, edit.line)) ? null : { message: 'The design can’t be changed like this.' }
    },
    step(index, field, next) {
      const line = sheetOf(spec())[index]
      const value = line ? numberOf(line, field) : null
      const edit = value === null ? undefined : edited(index, field, next(value))
      if (!edit?.ok) return
      store.getState().begin()
      store.getState().change(withLine(spec(), index, edit.line))
    },
    stepped: () => store.getState().commit(),
    setLine: (index, line) => void store.getState().propose(withLine(spec(), index, line)),
    add: (kind) => void store.getState().propose(withLineAdded(spec(), kind)),
    remove: (index) => void store.getState().propose(withoutLine(spec(), index)),
    move: (index, by) => void store.getState().propose(withLineMoved(spec(), index, by)),
    replace: (sheet) => void store.getState().propose(withSheet(spec(), sheet)),
    lookAt({ worstHz, requirement }) {
      if (worstHz === null) return
      const { view, look } = store.getState()
      const near = isNearDc(worstHz, spec().sampleRateHz)
      // A logarithmic axis never reaches 0 Hz: its lower end stands for it.
      const crosshairHz = near ? view.fromHz : worstHz
      const unit =
        requirement.kind === 'magnitude-departure'
          ? ({ departureUnit: 'db' } as const)
          : requirement.kind === 'phase-departure'
            ? ({ departureUnit: 'degrees' } as const)
            : {}
      look({
        crosshairHz,
        ...unit,
        ...(crosshairHz < view.fromHz ? { fromHz: crosshairHz / 1.5 } : {}),
        ...(crosshairHz > view.toHz ? { toHz: crosshairHz * 1.2 } : {}),
      })
    },
  }
}
