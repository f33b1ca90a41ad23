import { describe, expect, it } from 'vitest'
import {
  isEditing,
  nextGesture,
  resting,
  type Effect,
  type Gesture,
  type GestureEvent,
  type Situation,
} from '@/components/studio/interact/gesture'
import { specHandles } from '@/components/studio/stack/spec-handles'
import { ellipticSpec, stackOf } from './stack-fixture'

const { frame } = stackOf(ellipticSpec)
const handles = specHandles(ellipticSpec)
const handleOf = (id: string) => {
  const found = handles.find((handle) => handle.id === id)
  if (!found) throw new Error(`no handle ${id}`)
  return found
}
const situation: Situation = {
  handles,
  span: { fromHz: frame.x.domain[0], toHz: frame.x.domain[1] },
  hzAt: (x) => frame.x.toValue(x),
  valueUnder: (handle, point, grab, fine) => handle.under(point, grab, frame, fine),
}

/** Runs events one after the other from rest. */
function run(...events: readonly GestureEvent[]): { gesture: Gesture; effects: Effect[] } {
  let gesture = resting
  const effects: Effect[] = []
  for (const event of events) {
    const step = nextGesture(gesture, event, situation)
    gesture = step.gesture
    effects.push(...step.effects)
  }
  return { gesture, effects }
}

const edge = handleOf('edge-0')
const centre = { x: frame.x.toPixel(400), y: 30 }
const grab: GestureEvent = {
  kind: 'grab-handle',
  pointerId: 1,
  point: { x: centre.x + 3, y: 31 },
  centre,
  handle: edge,
}
const move = (x: number, y = 30, pointerId = 1): GestureEvent => ({
  kind: 'move',
  pointerId,
  point: { x, y },
  fine: false,
})
const press = (x: number, on: 'plots' | 'axis' = 'plots', pointerId = 1, shift = false): GestureEvent => ({
  kind: 'press',
  pointerId,
  point: { x, y: 200 },
  on,
  shift,
})
const release = (pointerId = 1): GestureEvent => ({ kind: 'release', pointerId })
const escape: GestureEvent = { kind: 'escape' }
const names = (effects: readonly Effect[]) => effects.map((effect) => effect.do)

describe('dragging a handle', () => {
  it('begins, previews by the inverse scale, and commits once', () => {
    const target = frame.x.toPixel(500) + 3
    const { gesture, effects } = run(grab, move(target), release())
    expect(gesture).toEqual(resting)
    expect(names(effects)).toEqual(['begin', 'set', 'commit'])
    expect(effects[1]).toEqual({ do: 'set', handleId: 'edge-0', value: 500 })
  })

  it('does not jump when taken beside its centre', () => {
    const { effects } = run(grab, move(centre.x + 3))
    expect(names(effects)).toEqual(['begin'])
  })

  it('restores everything on Escape, and the rest of the drag changes nothing', () => {
    const { gesture, effects } = run(grab, move(300), escape, move(350), release())
    expect(gesture).toEqual(resting)
    expect(names(effects)).toEqual(['begin', 'set', 'cancel', 'read'])
  })

  it('restores everything when the system takes the pointer away', () => {
    expect(names(run(grab, move(300), { kind: 'lose', pointerId: 1 }).effects)).toEqual(['begin', 'set', 'cancel'])
  })

  it('hears no other pointer', () => {
    const { gesture, effects } = run(grab, move(300, 30, 2), release(2), press(100, 'plots', 2))
    expect(gesture.name).toBe('dragging')
    expect(names(effects)).toEqual(['begin'])
  })
})

describe('stepping a handle by keys', () => {
  const step = (value: number): GestureEvent => ({ kind: 'step', handle: edge, value })

  it('is one edit from the first key to Enter or leaving', () => {
    const { gesture, effects } = run(step(401), step(402), { kind: 'finish' })
    expect(gesture).toEqual(resting)
    expect(names(effects)).toEqual(['begin', 'set', 'set', 'commit'])
  })

  it('is undone by Escape', () => {
    expect(names(run(step(401), escape).effects)).toEqual(['begin', 'set', 'cancel'])
  })

  it('commits before another handle is stepped, or a pointer begins', () => {
    const other: GestureEvent = { kind: 'step', handle: handleOf('fold'), value: 4010 }
    expect(names(run(step(401), other).effects)).toEqual(['begin', 'set', 'commit', 'begin', 'set'])
    expect(names(run(step(401), grab).effects)).toEqual(['begin', 'set', 'commit', 'begin'])
    expect(names(run(step(401), press(100)).effects)).toEqual(['begin', 'set', 'commit', 'read'])
  })

  it('waits while a pointer drags', () => {
    const { gesture, effects } = run(grab, step(401))
    expect(gesture.name).toBe('dragging')
    expect(names(effects)).toEqual(['begin'])
  })
})

describe('the slope', () => {
  it('is steepened from where it was taken', () => {
    const { gesture, effects } = run(
      { kind: 'grab-slope', pointerId: 1, point: { x: 500, y: 90 }, offsetDb: 1.5 },
      move(500, 120),
      release(),
    )
    expect(gesture).toEqual(resting)
    expect(effects).toEqual([
      { do: 'begin' },
      { do: 'set-by-slope', point: { x: 500, y: 120 }, offsetDb: 1.5 },
      { do: 'commit' },
    ])
  })
})

describe('the frequency axis', () => {
  it('pans by the whole way from where it was taken, so that a lost frame costs nothing', () => {
    const { effects } = run(press(300, 'axis'), move(310), move(340), release())
    expect(effects).toEqual([
      { do: 'pan', from: situation.span, pixels: 10 },
      { do: 'pan', from: situation.span, pixels: 40 },
    ])
  })

  it('pans on the plots with Shift, and goes back on Escape', () => {
    const { gesture, effects } = run(press(300, 'plots', 1, true), move(340), escape)
    expect(gesture).toEqual(resting)
    expect(effects.at(-1)).toEqual({ do: 'show', span: situation.span })
  })

  it('is pinched by two fingers, each holding its frequency, and pans with the one that stays', () => {
    const { gesture, effects } = run(press(200), press(400, 'plots', 2), move(450, 200, 2), release(1))
    expect(effects.at(-1)).toEqual({
      do: 'pinch',
      a: { value: frame.x.toValue(200), pixel: 200 },
      b: { value: frame.x.toValue(400), pixel: 450 },
    })
    expect(gesture).toMatchObject({ name: 'panning', pointerId: 2 })
  })

  it('goes back to before the first finger on Escape', () => {
    expect(run(press(200), press(400, 'plots', 2), move(450, 200, 2), escape).effects.at(-1)).toEqual({
      do: 'show',
      span: situation.span,
    })
  })
})

describe('reading', () => {
  it('follows a pointer that only hovers, and never edits', () => {
    const { gesture, effects } = run(move(200), move(300), press(310), move(320), release(), escape)
    expect(gesture).toEqual(resting)
    expect(new Set(names(effects))).toEqual(new Set(['read']))
    expect(isEditing(gesture)).toBe(false)
  })
})
