'use client'

import { useEffect } from 'react'
import { traceStyles } from '@/components/plot/trace-style'
import type { StudioStore } from '../store'
import { type DrawerTab, drawerTabs, type StackView, type TraceId } from '../view'

/*
 * The address bar holds the view: range, axis, what is shown, which drawer. A link to a sheet opens as its sender saw it.
 */

const traceIds = Object.keys(traceStyles) as readonly TraceId[]

export function viewToSearch(view: StackView, drawer: DrawerTab): string {
  const search = new URLSearchParams()
  search.set('band', `${short(view.fromHz)}-${short(view.toHz)}`)
  if (!view.logFrequency) search.set('axis', 'linear')
  if (view.normalised) search.set('frequency', 'normalised')
  if (!view.unwrapped) search.set('phase', 'wrapped')
  if (view.departureUnit !== 'degrees') search.set('departure', view.departureUnit)
  if (view.magnitudeFloorDb !== -60) search.set('floor', String(view.magnitudeFloorDb))
  search.set('without', view.hidden.join('.') || 'none')
  if (view.crosshairHz !== null) search.set('at', short(view.crosshairHz))
  search.set('drawer', drawer)
  return search.toString()
}

export function viewFromSearch(search: URLSearchParams): { view: Partial<StackView>; drawer?: DrawerTab } {
  const view: { -readonly [Key in keyof StackView]?: StackView[Key] } = {}
  const [from, to] = (search.get('band') ?? '').split('-').map(Number)
  if (
    from !== undefined &&
    to !== undefined &&
    from >= 0 &&
    to > from &&
    (from > 0 || search.get('axis') === 'linear') &&
    Number.isFinite(to)
  ) {
    view.fromHz = from
    view.toHz = to
  }
  if (search.get('axis') === 'linear') view.logFrequency = false
  if (search.get('frequency') === 'normalised') view.normalised = true
  if (search.get('phase') === 'wrapped') view.unwrapped = false
  const unit = search.get('departure')
  if (unit === 'db' || unit === 'degrees' || unit === 'microseconds') view.departureUnit = unit
  const floor = Number(search.get('floor') ?? Number.NaN)
  if (floor <= -1 && floor >= -400) view.magnitudeFloorDb = floor
  const without = search.get('without')
  if (without !== null) view.hidden = traceIds.filter((id) => without.split('.').includes(id))
  const at = Number(search.get('at') ?? Number.NaN)
  if (at > 0 && Number.isFinite(at)) view.crosshairHz = at
  const drawer = drawerTabs.find((tab) => tab === search.get('drawer'))
  return drawer ? { view, drawer } : { view }
}

const SETTLE_MS = 300

/** Keeps the address in step with the view, once it rests. */
export function useAddress(store: StudioStore): void {
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout>
    const unsubscribe = store.subscribe((now, before) => {
      if (now.view === before.view && now.drawer === before.drawer) return
      clearTimeout(timer)
      timer = setTimeout(() => {
        const { view, drawer } = store.getState()
        history.replaceState(history.state, '', `${location.pathname}?${viewToSearch(view, drawer)}`)
      }, SETTLE_MS)
    })
    return () => {
      unsubscribe()
      clearTimeout(timer)
    }
  }, [store])
}

const short = (hertz: number): string => String(Number(hertz.toPrecision(5)))
