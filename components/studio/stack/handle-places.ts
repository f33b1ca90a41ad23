import type { Scale } from '@/components/plot/scale'
import { written } from '@/components/plot/scene'
import { isFamilyDesign, isFirDesign, type DesignSpec, type FamilyDesign } from '@/dsp'
import type { Trace } from '../view'
import type { StackFrame } from './frame'
import { foldTagY } from './layout'
import type { HandleLook, HandlePlace, PlacedHandle, SpecHandle } from './handle-shape'
import { valueAt } from './read-out'
import { limitPlace, withRoom } from '../sheet/limit-places'

/* Where the handles stand on the plots. */

export type { HandlePlace, PlacedHandle } from './handle-shape'

/** As the Tab key should meet them: the edges, the levels, the slope, the held frequency, the rate. */
const tabOrder: readonly HandleLook[] = [
  'edge',
  'pass-level',
  'stop-level',
  'slope',
  'hold',
  'fit',
  'fold',
  'limit-edge',
  'limit-level',
]

/** Every handle that can stand somewhere in this frame. */
export function placedHandles(
  handles: readonly SpecHandle[],
  spec: DesignSpec,
  traces: readonly Trace[],
  frame: StackFrame,
): readonly PlacedHandle[] {
  const placed = handles
    .flatMap((handle) => {
      const place = handlePlace(handle, spec, traces, frame)
      return place ? [{ handle, place }] : []
    })
    .sort((a, b) => tabOrder.indexOf(a.handle.look) - tabOrder.indexOf(b.handle.look))
  return withRoom(placed, frame).map(({ handle, place }) => ({ handle, place: writtenPlace(place) }))
}

/** Levels steeper than this part of the way to the floor carry the slope's grip. */
const GRIP_DEPTH = 0.5

function writtenPlace(place: HandlePlace): HandlePlace {
  const { x, y, level, angle } = place
  const line = level && { left: written(level.left), right: written(level.right), y: written(level.y) }
  return { ...place, x: written(x), y: written(y), angle: written(angle), level: line }
}

function handlePlace(
  handle: SpecHandle,
  spec: DesignSpec,
  traces: readonly Trace[],
  frame: StackFrame,
): HandlePlace | null {
  const analog = traces.find((trace) => trace.id === 'analog')
  if (!analog) return null
  switch (handle.look) {
    case 'edge':
      return edgePlace(handle.value, analog, frame)
    case 'pass-level':
      return isFamilyDesign(spec) ? levelPlace(handle.value, spec, frame, 'pass') : null
    case 'stop-level':
      return isFamilyDesign(spec) ? levelPlace(handle.value, spec, frame, 'stop') : null
    case 'slope':
      return isFamilyDesign(spec) ? gripPlace(spec, analog, frame) : null
    case 'hold':
    case 'fit':
      return { ...pinnedX(handle.value, frame), y: frame.layout.plots.magnitude.top, level: null, angle: 0 }
    case 'fold':
      return { ...pinnedX(handle.value / 2, frame), y: foldTagY(frame.layout), level: null, angle: 0 }
    case 'limit-edge':
    case 'limit-level':
      return limitPlace(handle, frame)
  }
}

function pinnedX(hz: number, frame: StackFrame): Pick<HandlePlace, 'x' | 'outside'> {
  const { left, right } = frame.layout.plots.magnitude
  const x = frame.x.toPixel(hz)
  if (x > right) return { x: right, outside: 'right' }
  return x >= left ? { x, outside: null } : { x: left, outside: 'left' }
}

/** On the analog curve at its edge. */
function edgePlace(hz: number, analog: Trace, frame: StackFrame): HandlePlace {
  const { top, bottom } = frame.layout.plots.magnitude
  const { x, outside } = pinnedX(hz, frame)
  const db = valueAt(analog.frequenciesHz, analog.magnitudeDb, hz)
  const y = frame.y.magnitude.toPixel(Number.isNaN(db) ? 0 : db)
  return { x, y: Math.min(bottom - 1, Math.max(top + 1, y)), outside, level: null, angle: 0 }
}

const FLAG_CLEARANCE_PIXELS = 30
const GRIP_CLEARANCE_PIXELS = 14

/** On its level, in the middle of the band it is about and out of the way of the edges. */
function levelPlace(db: number, spec: FamilyDesign, frame: StackFrame, which: 'pass' | 'stop'): HandlePlace {
  const box = frame.layout.plots.magnitude
  const [left, right] = widestBand(spec, frame, which)
  const y = Math.min(box.bottom - 2, frame.y.magnitude.toPixel(db))
  const held = isFirDesign(spec) || spec.how.method !== 'bilinear' ? null : spec.how.hold
  const heldAt = typeof held === 'number' ? frame.x.toPixel(held) : null
  const x = levelX(left, right, heldAt)
  return { x, y, outside: db < frame.y.magnitude.domain[0] ? 'below' : null, level: { left, right, y }, angle: 0 }
}

/** The middle of a band, or beside the held frequency's flag when that stands there. */
function levelX(left: number, right: number, heldAt: number | null): number {
  const middle = (left + right) / 2
  if (heldAt === null || Math.abs(middle - heldAt) > FLAG_CLEARANCE_PIXELS) return middle
  const before = heldAt - FLAG_CLEARANCE_PIXELS
  const after = heldAt + FLAG_CLEARANCE_PIXELS
  return before - left > right - after ? before : after
}

/** Pixels of the widest visible pass or stop band, by the edges alone. */
function widestBand({ analog }: FamilyDesign, frame: StackFrame, which: 'pass' | 'stop'): [number, number] {
  const { left, right } = frame.layout.plots.magnitude
  const [first = 1, second = first] = analog.edgesHz
  const x = (hz: number) => Math.min(right, Math.max(left, frame.x.toPixel(hz)))
  const below: [number, number] = [left, x(first)]
  const between: [number, number] = [x(first), x(second)]
  const above = (hz: number): [number, number] => [x(hz), right]
  const width = ([a, b]: [number, number]) => b - a
  const wider = (a: [number, number], b: [number, number]) => (width(a) >= width(b) ? a : b)
  switch (analog.response) {
    case 'lowpass':
      return which === 'pass' ? below : above(first)
    case 'highpass':
      return which === 'pass' ? above(first) : below
    case 'bandpass':
      return which === 'pass' ? between : wider(below, above(second))
    case 'bandstop':
      return which === 'pass' ? wider(below, above(second)) : between
  }
}

/** Half-way down the visible part of the analog slope; at the plot's side, on the curve, where the slope runs out of view. */
function gripPlace(spec: FamilyDesign, analog: Trace, frame: StackFrame): HandlePlace {
  const { analog: design } = spec
  const [first = 1, second = first] = design.edgesHz
  // Towards the stop band: upwards in frequency, or downwards from the edge where the pass band lies above.
  const falls = design.response === 'lowpass' || design.response === 'bandpass'
  const hz = crossing(
    analog,
    design.response === 'lowpass' || design.response === 'highpass' ? first : second,
    falls ? 1 : -1,
    {
      db: frame.y.magnitude.domain[0] * GRIP_DEPTH,
    },
  )
  const { left, right, top, bottom } = frame.layout.plots.magnitude
  const wanted = hz === null ? (falls ? right : left) : frame.x.toPixel(hz)
  const x = Math.min(right - GRIP_CLEARANCE_PIXELS, Math.max(left + GRIP_CLEARANCE_PIXELS, wanted))
  const yAt = (pixel: number) =>
    frame.y.magnitude.toPixel(valueAt(analog.frequenciesHz, analog.magnitudeDb, frame.x.toValue(pixel)))
  const y = Math.min(bottom - 2, Math.max(top + 2, yAt(x)))
  const rise = yAt(x + 2) - yAt(x - 2)
  const angle = Number.isFinite(rise) ? (Math.atan2(rise, 4) * 180) / Math.PI : 90
  return { x, y: Number.isFinite(y) ? y : bottom - 2, outside: null, level: null, angle }
}

/** First frequency from `fromHz` on at which the curve has fallen to `db`. */
function crossing(trace: Trace, fromHz: number, direction: 1 | -1, { db }: { db: number }): number | null {
  const { frequenciesHz, magnitudeDb } = trace
  const count = frequenciesHz.length
  const start = frequenciesHz.findIndex((hz) => hz >= fromHz)
  if (start < 0) return null
  for (let i = start; i >= 0 && i < count; i += direction) {
    const here = magnitudeDb[i] ?? Number.NaN
    if (here > db) continue
    const before = magnitudeDb[i - direction] ?? Number.NaN
    const f1 = frequenciesHz[i] ?? Number.NaN
    const f0 = frequenciesHz[i - direction] ?? Number.NaN
    if (!Number.isFinite(before) || !Number.isFinite(here) || before === here) return f1
    return f0 + ((f1 - f0) * (before - db)) / (before - here)
  }
  return null
}

/** A frame's scale with zoom keys needs a centre: the crosshair, or the middle. */
export const zoomCentre = (scale: Scale, crosshairHz: number | null): number => {
  const middle = (scale.range[0] + scale.range[1]) / 2
  if (crosshairHz === null) return middle
  const at = scale.toPixel(crosshairHz)
  return at >= scale.range[0] && at <= scale.range[1] ? at : middle
}
