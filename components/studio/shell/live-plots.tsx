import { useMemo } from 'react'
import { useSheetGrounds } from '../sheet/use-sheet-grounds'
import { ResponseStack } from '../stack/response-stack'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import type { Trust } from '../derive'
import { useDrawnTraces } from './use-derived'

/** The plots at the pace of the hand: nothing else in the studio is drawn anew while something is pulled. */
export function LivePlots({
  store,
  trusted,
  readOnly,
}: {
  store: StudioStore
  trusted: readonly Trust[]
  readOnly: boolean
}) {
  const { spec, view, traces } = useDrawnTraces(store)
  const grounds = useSheetGrounds(spec, view, traces)
  const refusal = useStudio(store, (state) => state.refusal)
  const { edit, onView, resetView } = useMemo(() => {
    const { begin, change, commit, cancel, look, removeDelay: remove, resetView } = store.getState()
    return {
      edit: { begin, change: (next: typeof spec) => void change(next), commit, cancel },
      onView: ({ removeDelay, ...seen }: Partial<typeof view>) => {
        if (removeDelay !== undefined) remove(removeDelay)
        look(seen)
      },
      resetView,
    }
  }, [store])
  return (
    <ResponseStack
      spec={spec}
      traces={traces}
      grounds={grounds}
      trusted={trusted}
      view={view}
      onView={onView}
      onResetView={resetView}
      edit={edit}
      refusal={refusal}
      readOnly={readOnly}
    />
  )
}
