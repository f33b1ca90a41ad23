import { useMemo } from 'react'
import { methodNames } from '@/lib/designs/words'
import {
  curvePoints,
  deriveCandidateTrace,
  deriveFigures,
  deriveTraces,
  deriveTrust,
  deriveVersions,
  statedId,
  waitingTrace,
  type Versions,
} from '../derive'
import { coreOf, sharesCore } from '../core-spec'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import { isFirDesign, type DesignSpec } from '@/dsp'
import type { TraceId } from '../view'
import { useOnPage } from '@/components/ui/use-on-page'
import { usePacedSpec, type Pace } from '@/components/drafting/use-paced-spec'

/*
 * Three paces. The curves follow the hand within the frame, with fewer points until the hand rests; the planes follow at intervals; what
 * stands beside them in figures and tables is worked out when the hand pauses, and gives way to its next movement. Only small components
 * listen at the first pace.
 */

const PAUSE: Pace = { afterMs: 120 }

const drawnVersions = new WeakMap<DesignSpec, { readonly wanted: string; readonly versions: Versions | null }>()

/** The versions that are drawn; the plots and the planes ask for the same ones. */
function versionsDrawn(spec: DesignSpec, hidden: readonly string[]): Versions | null {
  const wanted = methodNames.filter((id) => !hidden.includes(id))
  const known = drawnVersions.get(spec)
  if (known?.wanted === wanted.join()) return known.versions
  const versions = deriveVersions(spec, wanted)
  drawnVersions.set(spec, { wanted: wanted.join(), versions })
  return versions
}

/** A fit takes longer than a frame leaves room for: unless it is the stated version it waits for the hand to rest. */
const tooSlowInMotion = (spec: DesignSpec): readonly TraceId[] => (statedId(spec) === 'fitted' ? [] : ['fitted'])

/** The versions of a spec that are drawn; `waiting` are those that come when the hand rests. */
function useDrawnVersions(store: StudioStore, spec: DesignSpec) {
  const hidden = useStudio(store, (state) => state.view.hidden)
  // A drag of a requirement leaves the filter as it is, and the fit with it.
  const inMotion = useStudio(store, (state) => state.gestureMark !== null && !sharesCore(state.gestureMark, state.spec))
  const core = coreOf(spec)
  const { versions, waiting } = useMemo(() => {
    const left = inMotion ? tooSlowInMotion(core).filter((id) => !hidden.includes(id)) : []
    return { versions: versionsDrawn(core, [...hidden, ...left]), waiting: isFirDesign(core) ? [] : left }
  }, [core, hidden, inMotion])
  return { core, hidden, versions, waiting }
}

/** The roots move with the hand as the eye follows them, some twenty times a second: drawn at each step they would cost the curves a frame. */
export const useDrawnRoots = (store: StudioStore) => useDrawnVersions(store, usePacedSpec(store, { everyMs: 45 }))

/** At the pace of the hand: the curves. */
export function useDrawnTraces(store: StudioStore) {
  const spec = useStudio(store, (state) => state.spec)
  const { core, versions, waiting } = useDrawnVersions(store, spec)
  const inMotion = useStudio(store, (state) => state.gestureMark !== null)
  const looked = useStudio(store, (state) => state.view)
  const held = useStudio(store, (state) => state.held)
  const { removeDelay } = spec.budget
  const view = useMemo(() => ({ ...looked, removeDelay }), [looked, removeDelay])
  const { fromHz, toHz, logFrequency, hidden } = view
  const curveView = useMemo(
    () => ({ fromHz, toHz, logFrequency, removeDelay, hidden }),
    [fromHz, toHz, logFrequency, removeDelay, hidden],
  )
  const points = inMotion ? curvePoints.inMotion : curvePoints.atRest
  const own = useMemo(
    () => (versions ? deriveTraces(core, versions, curveView, points) : []),
    [core, versions, curveView, points],
  )
  const candidate = useMemo(
    () => (held ? deriveCandidateTrace(held, curveView, points) : null),
    [held, curveView, points],
  )
  const traces = useMemo(
    () => [...own, ...waiting.map(waitingTrace), ...(candidate ? [candidate] : [])],
    [own, waiting, candidate],
  )
  return { spec, view, traces }
}

/** At the pace of words and tables: the spec, and everything said of it; `made` is null while it makes no design, and before the page is taken over. */
export function useSettled(store: StudioStore) {
  const spec = usePacedSpec(store, PAUSE)
  const core = coreOf(spec)
  // Never while the server renders: it would be held up for every reader of a slow design, and nothing of it is shown there.
  const onPage = useOnPage()
  const derived = useMemo(() => {
    if (!onPage) return null
    const versions = deriveVersions(core)
    return versions && { versions, trust: deriveTrust(core, versions), figures: deriveFigures(core, versions) }
  }, [core, onPage])
  const made = useMemo(() => derived && { spec, ...derived }, [spec, derived])
  return { spec, made }
}

export type Settled = NonNullable<ReturnType<typeof useSettled>['made']>
