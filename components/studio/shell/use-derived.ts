import { useMemo } from 'react'
import type { MethodName } from '@/dsp'
import { deriveFigures, deriveTraces, deriveTrust, deriveVersions } from '../derive'
import { refusalOf, type StudioStore } from '../store'
import { useStudio } from '../use-studio'
import type { TraceId } from '../view'

/** Everything the screen shows of the current design; null while the spec makes none. */
export function useDerived(store: StudioStore) {
  const spec = useStudio(store, (state) => state.spec)
  const view = useStudio(store, (state) => state.view)
  const { fromHz, toHz, logFrequency, removeDelay, hidden } = view

  const versions = useMemo(() => {
    if (refusalOf(spec)) return null
    return deriveVersions(spec)
  }, [spec])

  const traces = useMemo(
    () => (versions ? deriveTraces(spec, versions, { ...view, fromHz, toHz, logFrequency, removeDelay, hidden }) : []),
    // The crosshair and the other parts of the view don't touch the curves.
    // eslint-disable-next-line react-hooks/exhaustive-deps
    [spec, versions, fromHz, toHz, logFrequency, removeDelay, hidden],
  )
  const trust = useMemo(() => (versions ? deriveTrust(spec, versions) : []), [spec, versions])
  const figures = useMemo(() => (versions ? deriveFigures(spec, versions) : null), [spec, versions])
  return { versions, traces, trust, figures }
}

export const isShown = (hidden: readonly TraceId[], id: MethodName): boolean => !hidden.includes(id)
