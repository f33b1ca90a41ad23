import type { SpecHandle, HandleId, Grab, Point } from '../stack/spec-handles'

/*
 * What the hands are doing, as named states. Each state that changes the spec began with a mark to return to; each that changes the view
 * remembers the view it began with. Escape leads from all of them back to where they started.
 */

export type Gesture =
  | { readonly name: 'resting' }
  /** A finger or button is down on the plots: the crosshair follows. */
  | { readonly name: 'reading'; readonly pointerId: number; readonly point: Point }
  /** A handle is pulled by a pointer. */
  | { readonly name: 'dragging'; readonly pointerId: number; readonly handleId: HandleId; readonly grab: Grab }
  /** The slope is pulled: the order follows. */
  | { readonly name: 'steepening'; readonly pointerId: number; readonly offsetDb: number }
  /** The frequency axis is pulled along, from where it was taken hold of. */
  | {
      readonly name: 'panning'
      readonly pointerId: number
      readonly x: number
      readonly hold: Hold
      readonly start: SpanHz
    }
  /** Two fingers hold two frequencies. */
  | { readonly name: 'pinching'; readonly a: Finger; readonly b: Finger; readonly start: SpanHz }
  /** A handle is stepped by keys; Enter, or leaving it, finishes. */
  | { readonly name: 'keying'; readonly handleId: HandleId }

interface SpanHz {
  readonly fromHz: number
  readonly toHz: number
}

interface Hold {
  readonly x: number
  readonly span: SpanHz
}

interface Finger {
  readonly pointerId: number
  readonly x: number
  readonly hz: number
}

export const resting: Gesture = { name: 'resting' }

/** States that hold a spec edit open. */
export const isEditing = (gesture: Gesture): boolean =>
  gesture.name === 'dragging' || gesture.name === 'steepening' || gesture.name === 'keying'

type GestureGround = 'plots' | 'axis'

export type GestureEvent =
  | {
      readonly kind: 'grab-handle'
      readonly pointerId: number
      readonly point: Point
      readonly centre: Point
      readonly handle: SpecHandle
    }
  | { readonly kind: 'grab-slope'; readonly pointerId: number; readonly point: Point; readonly offsetDb: number }
  | {
      readonly kind: 'press'
      readonly pointerId: number
      readonly point: Point
      readonly on: GestureGround
      readonly shift: boolean
    }
  | { readonly kind: 'move'; readonly pointerId: number; readonly point: Point; readonly fine: boolean }
  | { readonly kind: 'release'; readonly pointerId: number }
  /** The system took the pointer away: nothing it did may stay. */
  | { readonly kind: 'lose'; readonly pointerId: number }
  | { readonly kind: 'step'; readonly handle: SpecHandle; readonly value: number }
  | { readonly kind: 'finish' }
  | { readonly kind: 'escape' }

/** What a gesture asks for; the hook carries it out. */
export type Effect =
  | { readonly do: 'begin' }
  | { readonly do: 'set'; readonly handleId: HandleId; readonly value: number }
  | { readonly do: 'set-by-slope'; readonly point: Point; readonly offsetDb: number }
  | { readonly do: 'commit' }
  | { readonly do: 'cancel' }
  | { readonly do: 'show'; readonly span: SpanHz }
  | { readonly do: 'pan'; readonly from: SpanHz; readonly pixels: number }
  | { readonly do: 'pinch'; readonly a: { value: number; pixel: number }; readonly b: { value: number; pixel: number } }
  | { readonly do: 'read'; readonly point: Point }

export interface Situation {
  readonly handles: readonly SpecHandle[]
  readonly span: SpanHz
  hzAt(x: number): number
  valueUnder(handle: SpecHandle, point: Point, grab: Grab, fine: boolean): number | null
}

export interface Step {
  readonly gesture: Gesture
  readonly effects: readonly Effect[]
}

const stay = (gesture: Gesture): Step => ({ gesture, effects: [] })

export function nextGesture(gesture: Gesture, event: GestureEvent, situation: Situation): Step {
  switch (event.kind) {
    case 'grab-handle': {
      if (isPointing(gesture)) return stay(gesture)
      const { point, centre, handle, pointerId } = event
      const grab: Grab = { point, offset: { x: point.x - centre.x, y: point.y - centre.y }, value: handle.value }
      const state: Gesture =
        handle.id === 'order'
          ? { name: 'steepening', pointerId, offsetDb: 0 }
          : { name: 'dragging', pointerId, handleId: handle.id, grab }
      return { gesture: state, effects: [...finished(gesture), { do: 'begin' }] }
    }
    case 'grab-slope':
      if (isPointing(gesture)) return stay(gesture)
      return {
        gesture: { name: 'steepening', pointerId: event.pointerId, offsetDb: event.offsetDb },
        effects: [...finished(gesture), { do: 'begin' }],
      }
    case 'press':
      return pressed(gesture, event, situation)
    case 'move':
      return moved(gesture, event, situation)
    case 'release':
      return released(gesture, event.pointerId, situation)
    case 'lose':
      return holds(gesture, event.pointerId) ? undone(gesture) : stay(gesture)
    case 'step': {
      if (isPointing(gesture)) return stay(gesture)
      const { handle, value } = event
      const set: Effect = { do: 'set', handleId: handle.id, value }
      if (gesture.name === 'keying' && gesture.handleId === handle.id) return { gesture, effects: [set] }
      return { gesture: { name: 'keying', handleId: handle.id }, effects: [...finished(gesture), { do: 'begin' }, set] }
    }
    case 'finish':
      return gesture.name === 'keying' ? { gesture: resting, effects: [{ do: 'commit' }] } : stay(gesture)
    case 'escape':
      return undone(gesture)
  }
}

const isPointing = (gesture: Gesture): boolean => gesture.name !== 'resting' && gesture.name !== 'keying'

/** A run of key presses ends when something else begins. */
const finished = (gesture: Gesture): Effect[] => (gesture.name === 'keying' ? [{ do: 'commit' }] : [])

function holds(gesture: Gesture, pointerId: number): boolean {
  if (gesture.name === 'pinching') return gesture.a.pointerId === pointerId || gesture.b.pointerId === pointerId
  return 'pointerId' in gesture && gesture.pointerId === pointerId
}

function pressed(gesture: Gesture, event: Extract<GestureEvent, { kind: 'press' }>, situation: Situation): Step {
  const { pointerId, point } = event
  if (gesture.name === 'reading' || gesture.name === 'panning') {
    // A second finger: both now hold their frequencies. Escape leads back to before the first.
    const start = gesture.name === 'panning' ? gesture.start : situation.span
    const x = gesture.name === 'reading' ? gesture.point.x : gesture.x
    const a = { pointerId: gesture.pointerId, x, hz: situation.hzAt(x) }
    const b = { pointerId, x: point.x, hz: situation.hzAt(point.x) }
    return { gesture: { name: 'pinching', a, b, start }, effects: [] }
  }
  if (isPointing(gesture)) return stay(gesture)
  if (event.on === 'axis' || event.shift) {
    const hold = { x: point.x, span: situation.span }
    return {
      gesture: { name: 'panning', pointerId, x: point.x, hold, start: situation.span },
      effects: finished(gesture),
    }
  }
  return { gesture: { name: 'reading', pointerId, point }, effects: [...finished(gesture), { do: 'read', point }] }
}

function moved(gesture: Gesture, event: Extract<GestureEvent, { kind: 'move' }>, situation: Situation): Step {
  const { point, pointerId } = event
  if (gesture.name === 'resting' || gesture.name === 'keying') return { gesture, effects: [{ do: 'read', point }] }
  if (!holds(gesture, pointerId)) return stay(gesture)
  switch (gesture.name) {
    case 'reading':
      return { gesture: { ...gesture, point }, effects: [{ do: 'read', point }] }
    case 'dragging': {
      const handle = situation.handles.find(({ id }) => id === gesture.handleId)
      const value = handle ? situation.valueUnder(handle, point, gesture.grab, event.fine) : null
      if (!handle || value === null || value === handle.value) return stay(gesture)
      return { gesture, effects: [{ do: 'set', handleId: handle.id, value }] }
    }
    case 'steepening':
      return { gesture, effects: [{ do: 'set-by-slope', point, offsetDb: gesture.offsetDb }] }
    case 'panning':
      return {
        gesture: { ...gesture, x: point.x },
        effects: [{ do: 'pan', from: gesture.hold.span, pixels: point.x - gesture.hold.x }],
      }
    case 'pinching': {
      const a = gesture.a.pointerId === pointerId ? { ...gesture.a, x: point.x } : gesture.a
      const b = gesture.b.pointerId === pointerId ? { ...gesture.b, x: point.x } : gesture.b
      return {
        gesture: { ...gesture, a, b },
        effects: [{ do: 'pinch', a: { value: a.hz, pixel: a.x }, b: { value: b.hz, pixel: b.x } }],
      }
    }
  }
}

function released(gesture: Gesture, pointerId: number, situation: Situation): Step {
  if (!holds(gesture, pointerId)) return stay(gesture)
  switch (gesture.name) {
    case 'dragging':
    case 'steepening':
      return { gesture: resting, effects: [{ do: 'commit' }] }
    case 'pinching': {
      const left = gesture.a.pointerId === pointerId ? gesture.b : gesture.a
      const hold = { x: left.x, span: situation.span }
      return stay({ name: 'panning', pointerId: left.pointerId, x: left.x, hold, start: gesture.start })
    }
    default:
      return stay(resting)
  }
}

function undone(gesture: Gesture): Step {
  switch (gesture.name) {
    case 'dragging':
    case 'steepening':
    case 'keying':
      return { gesture: resting, effects: [{ do: 'cancel' }] }
    case 'panning':
    case 'pinching':
      return { gesture: resting, effects: [{ do: 'show', span: gesture.start }] }
    default:
      return stay(resting)
  }
}
