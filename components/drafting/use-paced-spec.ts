import { startTransition, useEffect, useState } from 'react'
import type { DraftedStore } from './autosave'

/** While a gesture lasts: at intervals as it goes, or once it has paused for as long. */
export type Pace = { readonly everyMs: number } | { readonly afterMs: number }

/**
 * The spec at the pace of words and tables: at once where nothing moves, by `pace` while a gesture lasts; either way it gives place to
 * whatever the hand does next. Whoever listens to this doesn't render at every step of a drag.
 */
export function usePacedSpec<Spec>(store: Pick<DraftedStore<Spec>, 'getState' | 'subscribe'>, pace: Pace): Spec {
  const [spec, setSpec] = useState(() => store.getState().spec)
  const isAtIntervals = 'everyMs' in pace
  const waitMs = isAtIntervals ? pace.everyMs : pace.afterMs
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | undefined
    const tell = () => {
      clearTimeout(timer)
      timer = undefined
      startTransition(() => setSpec(store.getState().spec))
    }
    const unsubscribe = store.subscribe((now, before) => {
      if (now.spec === before.spec && now.gestureMark === before.gestureMark) return
      if (now.gestureMark === null) tell()
      else if (isAtIntervals) timer ??= setTimeout(tell, waitMs)
      else {
        clearTimeout(timer)
        timer = setTimeout(tell, waitMs)
      }
    })
    // Whatever happened between the first render and now.
    tell()
    return () => {
      unsubscribe()
      clearTimeout(timer)
    }
  }, [store, isAtIntervals, waitMs])
  return spec
}
