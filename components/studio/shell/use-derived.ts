import { useDeferredValue, useMemo } from 'react'
import { methodNames } from '@/lib/designs/words'
import { curvePoints, deriveFigures, deriveTraces, deriveTrust, deriveVersions } from '../derive'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import { useUnhurried } from './use-unhurried'

/** How often words and tables are told of a drag that goes on. */
const TELL_EVERY_MS = 150

/**
 * Everything the screen shows of the current design; null while the spec makes none. What is drawn on the plots follows the hand within
 * the frame, with fewer points until the hand rests; what stands beside them in words and tables comes a moment later.
 */
export function useDerived(store: StudioStore) {
  const spec = useStudio(store, (state) => state.spec)
  const inMotion = useStudio(store, (state) => state.gestureMark !== null)
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
    () =>
      drawn
        ? deriveTraces(
            spec,
            drawn,
            { fromHz, toHz, logFrequency, removeDelay, hidden },
            inMotion ? curvePoints.inMotion : curvePoints.atRest,
          )
        : [],
    [spec, drawn, fromHz, toHz, logFrequency, removeDelay, hidden, inMotion],
  )

  const settledSpec = useDeferredValue(useUnhurried(spec, inMotion, TELL_EVERY_MS))
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
