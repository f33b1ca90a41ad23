import { useDeferredValue, useMemo } from 'react'
import { methodNames } from '@/lib/designs/words'
import { deriveFigures, deriveTraces, deriveTrust, deriveVersions } from '../derive'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'

/**
 * Everything the screen shows of the current design; null while the spec makes none. What is drawn on the plots follows the hand within
 * the frame; what stands beside them in words and tables may come a moment later, and gives way to the next movement.
 */
export function useDerived(store: StudioStore) {
  const spec = useStudio(store, (state) => state.spec)
  const looked = useStudio(store, (state) => state.view)
  const { removeDelay } = spec.budget
  const view = useMemo(() => ({ ...looked, removeDelay }), [looked, removeDelay])
  const { fromHz, toHz, logFrequency, hidden } = view

  const drawn = useMemo(
    () =>
      deriveVersions(
        spec,
        methodNames.filter((id) => !hidden.includes(id)),
      ),
    [spec, hidden],
  )
  const traces = useMemo(
    () => (drawn ? deriveTraces(spec, drawn, { fromHz, toHz, logFrequency, removeDelay, hidden }) : []),
    [spec, drawn, fromHz, toHz, logFrequency, removeDelay, hidden],
  )

  const settledSpec = useDeferredValue(spec)
  const settled = useMemo(() => {
    const versions = deriveVersions(settledSpec)
    if (!versions) return null
    return {
      spec: settledSpec,
      versions,
      trust: deriveTrust(settledSpec, versions),
      figures: deriveFigures(settledSpec, versions),
    }
  }, [settledSpec])

  return { view, drawn, traces, settled }
}
