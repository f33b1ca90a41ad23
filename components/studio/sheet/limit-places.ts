import type { HandlePlace, PlacedHandle, SpecHandle } from '../stack/handle-shape'
import type { StackFrame } from '../stack/frame'

/*
 * Where the marks of requirements stand: an edge anywhere on the upright side of its ground, a level anywhere along it. That freedom is
 * spent on keeping them out of each other's way.
 */

/** Half a mark, kept inside the plot. */
const INSET_PIXELS = 8

/** On the side or the level of a requirement's ground; null when that is out of view. */
export function limitPlace(handle: SpecHandle, frame: StackFrame): HandlePlace | null {
  const reach = freedom(handle, frame)
  if (!reach) return null
  const { magnitude } = frame.y
  if (reach.along === 'y') {
    const db = typeof handle.across === 'number' ? handle.across : 0
    return standing(reach.at, within(magnitude.toPixel(db), reach))
  }
  return standing((reach.low + reach.high) / 2, reach.at)
}

const standing = (x: number, y: number): HandlePlace => ({ x, y, outside: null, level: null, angle: 0 })

const within = (pixel: number, { low, high }: { low: number; high: number }): number =>
  Math.min(high, Math.max(low, pixel))

interface Freedom {
  readonly along: 'x' | 'y'
  /** The other coordinate, which is the handle's value. */
  readonly at: number
  readonly low: number
  readonly high: number
}

function freedom({ look, value, across }: SpecHandle, frame: StackFrame): Freedom | null {
  const box = frame.layout.plots.magnitude
  if (look === 'limit-edge') {
    const at = frame.x.toPixel(value)
    if (!(at >= box.left && at <= box.right)) return null
    return { along: 'y', at, low: box.top + INSET_PIXELS, high: box.bottom - INSET_PIXELS }
  }
  const at = frame.y.magnitude.toPixel(value)
  if (!(at >= box.top && at <= box.bottom)) return null
  const [fromHz, toHz] = typeof across === 'number' ? [across, across] : (across ?? [0, 0])
  // At 0 Hz a logarithmic axis has no pixel; the ground reaches to the side.
  const start = frame.x.toPixel(fromHz)
  const from = Number.isFinite(start) ? start : box.left
  const to = frame.x.toPixel(toHz)
  if (!(to >= box.left && from <= box.right)) return null
  const [low, high] = [Math.max(from, box.left + INSET_PIXELS), Math.min(to, box.right - INSET_PIXELS)]
  return low <= high ? { along: 'x', at, low, high } : { along: 'x', at, low: (low + high) / 2, high: (low + high) / 2 }
}

/** Two targets of 26 pixels lie clear of each other from here on. */
const CLEAR_PIXELS = 28

const isLimit = ({ look }: SpecHandle): boolean => look === 'limit-edge' || look === 'limit-level'

/** The places with the marks of requirements moved along their grounds to where they stand clear; those that find no room stay. */
export function withRoom(placed: readonly PlacedHandle[], frame: StackFrame): readonly PlacedHandle[] {
  const taken = placed.filter(({ handle }) => !isLimit(handle)).map(({ place }) => place)
  return placed.map((each) => {
    if (!isLimit(each.handle)) return each
    const place = clearPlace(each, taken, frame)
    taken.push(place)
    return { handle: each.handle, place }
  })
}

function clearPlace({ handle, place }: PlacedHandle, taken: readonly HandlePlace[], frame: StackFrame): HandlePlace {
  const reach = freedom(handle, frame)
  if (!reach) return place
  const isClear = (x: number, y: number) =>
    taken.every((other) => Math.abs(other.x - x) >= CLEAR_PIXELS || Math.abs(other.y - y) >= CLEAR_PIXELS)
  if (isClear(place.x, place.y)) return place
  const start = reach.along === 'x' ? place.x : place.y
  for (let shift = 4; shift <= reach.high - reach.low; shift += 4) {
    for (const at of [start + shift, start - shift]) {
      if (at < reach.low || at > reach.high) continue
      const [x, y] = reach.along === 'x' ? [at, place.y] : [place.x, at]
      if (isClear(x, y)) return { ...place, x, y }
    }
  }
  return place
}
