import { useCallback, useEffect, useLayoutEffect, useRef, useState } from 'react'
import { isFamilyDesign, type DesignSpec } from '@/dsp'
import { withAnalog } from '@/lib/designs/edits'
import type { StackView } from '../view'
import type { StackFrame } from '../stack/frame'
import { pannedView, pinchedView } from '../stack/framing'
import type { PlotId, SpecEdit } from '../stack/props'
import { plotAt } from '../stack/layout'
import { orderFinder, type OrderFinder } from '../stack/slope'
import type { SpecHandle } from '../stack/spec-handles'
import { nextGesture, resting, type Effect, type Gesture, type GestureEvent, type Situation } from './gesture'

/** What the gestures act on, as of the last painted frame. */
export interface GestureScope {
  readonly spec: DesignSpec
  readonly frame: StackFrame
  readonly handles: readonly SpecHandle[]
  readonly edit: SpecEdit
  onView(change: Partial<StackView>): void
  onReadPlot(plot: PlotId): void
}

/** Runs the gesture machine: events go in, its effects are carried out on the spec and the view. */
export function useGestures(scope: GestureScope) {
  const latest = useRef(scope)
  useLayoutEffect(() => {
    latest.current = scope
  })
  const state = useRef<Gesture>(resting)
  const finder = useRef<OrderFinder | null>(null)
  const [gesture, setGesture] = useState<Gesture>(resting)

  const perform = useCallback((effect: Effect): void => {
    const { spec, frame, handles, edit, onView, onReadPlot } = latest.current
    switch (effect.do) {
      case 'begin':
        finder.current = isFamilyDesign(spec) ? orderFinder(spec) : null
        edit.begin()
        return
      case 'set': {
        const handle = handles.find(({ id }) => id === effect.handleId)
        if (handle) edit.change(handle.apply(spec, effect.value))
        return
      }
      case 'set-by-slope': {
        if (!isFamilyDesign(spec)) return
        const { order } = spec.analog
        const db = frame.y.magnitude.toValue(effect.point.y) - effect.offsetDb
        const found = finder.current?.(frame.x.toValue(effect.point.x), db, order) ?? order
        if (found !== order) edit.change(withAnalog(spec, { order: found }))
        return
      }
      case 'commit':
        edit.commit()
        return
      case 'cancel':
        edit.cancel()
        return
      case 'show':
        onView(effect.span)
        return
      case 'pan':
        onView(pannedView(frame.x, effect.from, effect.pixels))
        return
      case 'pinch':
        onView(pinchedView(frame.x, effect.a, effect.b))
        return
      case 'read': {
        const { left, right } = frame.layout.plots.magnitude
        const { x, y } = effect.point
        if (x < left || x > right) return
        onReadPlot(plotAt(frame.layout, y))
        onView({ crosshairHz: frame.x.toValue(x) })
        return
      }
    }
  }, [])

  const dispatch = useCallback(
    (event: GestureEvent): void => {
      const { frame, handles } = latest.current
      const [fromHz, toHz] = frame.x.domain
      const situation: Situation = {
        handles,
        span: { fromHz, toHz },
        hzAt: (x) => frame.x.toValue(x),
        valueUnder: (handle, point, grab, fine) => handle.under(point, grab, frame, fine),
      }
      const step = nextGesture(state.current, event, situation)
      state.current = step.gesture
      step.effects.forEach(perform)
      // Only a change of state is news to the screen; the course of a drag is not.
      setGesture((shown) => (sameState(shown, step.gesture) ? shown : step.gesture))
    },
    [perform],
  )

  useEffect(() => {
    function onKeyDown(event: KeyboardEvent) {
      if (event.key !== 'Escape' || state.current.name === 'resting') return
      event.preventDefault()
      event.stopPropagation()
      dispatch({ kind: 'escape' })
    }
    addEventListener('keydown', onKeyDown, { capture: true })
    return () => removeEventListener('keydown', onKeyDown, { capture: true })
  }, [dispatch])

  return { gesture, dispatch }
}

function sameState(a: Gesture, b: Gesture): boolean {
  if (a.name !== b.name) return false
  return 'handleId' in a && 'handleId' in b ? a.handleId === b.handleId : true
}
