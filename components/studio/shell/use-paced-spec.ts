import { startTransition, useEffect, useState } from 'react'
import type { DesignSpec } from '@/dsp'
import type { StudioStore } from '../store'

/**
 * The spec at the pace of words and tables: at once where nothing moves, at intervals while a gesture lasts; either way it gives place to
 * whatever the hand does next. Whoever listens to this doesn't render at every step of a drag.
 */
export function usePacedSpec(store: StudioStore, everyMs: number): DesignSpec {
  const [spec, setSpec] = useState(() => store.getState().spec)
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
      else timer ??= setTimeout(tell, everyMs)
    })
    // Whatever happened between the first render and now.
    tell()
    return () => {
      unsubscribe()
      clearTimeout(timer)
    }
  }, [store, everyMs])
  return spec
}
