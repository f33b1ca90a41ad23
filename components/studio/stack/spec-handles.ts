import { clamped, steppedBy, steppedDigit, type HandleValue, type StepSize } from '@/components/plot/handle'
import { valuePerPixel } from '@/components/plot/scale'
import { roundedStep, roundedTo } from '@/components/plot/ticks'
import type { DesignSpec } from '@/dsp'
import { withAnalog, withEdge, withHold } from '@/lib/designs/edits'
import { formatDb, formatHz } from '@/lib/format/quantity'
import type { StackFrame } from './frame'

/*
 * The parts of a spec that can be taken hold of on the plots. Each is a slider: a value with bounds, steps for the keys, the value under
 * a dragging pointer (the scale's inverse) and the spec with that value put in.
 */

export type HandleId = 'edge-0' | 'edge-1' | 'ripple' | 'attenuation' | 'hold' | 'fold' | 'order'

export interface Point {
  readonly x: number
  readonly y: number
}

/** Where a drag began: the point, and the handle's value then. */
export interface Grab {
  readonly point: Point
  /** From the handle's centre to the pointer, so that it doesn't jump under the hand. */
  readonly offset: Point
  readonly value: number
}

export interface SpecHandle extends HandleValue {
  readonly id: HandleId
  readonly label: string
  /** Path of the spec's part, by which a refusal is set beside its handle. */
  readonly field: string
  readonly orientation: 'horizontal' | 'vertical'
  readonly valueText: string
  next(size: StepSize, direction: 1 | -1): number
  /** null for a handle whose drag needs more than the frame (the slope). */
  under(point: Point, grab: Grab, frame: StackFrame, fine: boolean): number | null
  apply(spec: DesignSpec, value: number): DesignSpec
}

/** An edge keeps this far below half the rate; the statement takes the rest. */
const HIGHEST_EDGE_PART = 0.495
const LEAST_HZ = 1e-6
/** Edges lie no lower than this part of the rate. */
const LEAST_PART_OF_RATE = 1e-6
const APART = 1.001

/** A bound with four digits, up or down to the safe side: no one wants to read 242.42424 Hz. */
function shortened(hz: number, direction: 1 | -1): number {
  const step = 10 ** (Math.floor(Math.log10(hz)) - 3)
  const count = direction > 0 ? Math.ceil(hz / step - 1e-9) : Math.floor(hz / step + 1e-9)
  return Number((count * step).toPrecision(4))
}

const highestEdgeHz = (sampleRateHz: number): number => shortened(sampleRateHz * HIGHEST_EDGE_PART, -1)

export const MOST_ORDER = 24

export function specHandles(spec: DesignSpec): readonly SpecHandle[] {
  const { analog, how } = spec
  const handles: SpecHandle[] = [...edgeHandles(spec)]
  const hasRipple = analog.family === 'chebyshev1' || analog.family === 'elliptic'
  const hasAttenuation = analog.family === 'chebyshev2' || analog.family === 'elliptic'
  if (hasRipple && analog.rippleDb !== undefined) handles.push(rippleHandle(analog.rippleDb, analog.attenuationDb))
  if (hasAttenuation && analog.attenuationDb !== undefined)
    handles.push(attenuationHandle(analog.attenuationDb, analog.rippleDb))
  handles.push(orderHandle(analog.order))
  if (how.method === 'bilinear' && typeof how.hold === 'number') handles.push(holdHandle(how.hold, spec.sampleRateHz))
  handles.push(foldHandle(spec))
  return handles
}

/** The frequency under a pointer, rounded to what a pixel can tell. */
function frequencyUnder(point: Point, grab: Grab, frame: StackFrame, fine: boolean): number {
  const [start, end] = frame.x.range
  // Past the plot's sides the hand pulls no further.
  const at = Math.min(end, Math.max(start, point.x - grab.offset.x))
  const step = roundedStep(valuePerPixel(frame.x, at)) * (fine ? 0.1 : 1)
  return roundedTo(frame.x.toValue(at), step)
}

function edgeHandles(spec: DesignSpec): SpecHandle[] {
  const { edgesHz } = spec.analog
  const highest = highestEdgeHz(spec.sampleRateHz)
  const lowest = Math.max(LEAST_HZ, shortened(spec.sampleRateHz * LEAST_PART_OF_RATE * 1.001, 1))
  return edgesHz.map((value, index) => {
    const other = edgesHz.length < 2 ? null : (edgesHz[1 - index] ?? null)
    const bounds = {
      value,
      min: index === 1 && other !== null ? shortened(other * APART, 1) : lowest,
      max: index === 0 && other !== null ? Math.min(shortened(other / APART, -1), highest) : highest,
    }
    const label = other === null ? 'Corner frequency' : index === 0 ? 'Lower band edge' : 'Upper band edge'
    return {
      ...bounds,
      id: index === 0 ? 'edge-0' : 'edge-1',
      label,
      field: `analog.edgesHz.${index}`,
      orientation: 'horizontal',
      valueText: formatHz(value),
      next: (size, direction) => steppedDigit(bounds, size, direction),
      under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
      apply: (now, hz) => withEdge(now, index === 0 ? 0 : 1, hz),
    }
  })
}

/** Dragging ripple by the inverse scale would be a matter of two pixels; a lever doubles it every so many pixels instead. */
const LEVER_PIXELS = 36

function rippleHandle(rippleDb: number, attenuationDb: number | undefined): SpecHandle {
  const most = attenuationDb === undefined ? 12 : Math.min(12, attenuationDb * 0.9)
  const bounds = { value: -rippleDb, min: -most, max: -0.001 }
  return {
    ...bounds,
    id: 'ripple',
    label: 'Pass-band ripple',
    field: 'analog.rippleDb',
    orientation: 'vertical',
    valueText: `ripple ${formatDb(rippleDb, rippleDb < 0.1 ? 3 : 2)}`,
    next: (size, direction) => steppedBy(bounds, 0.1, size, direction),
    under: (point, grab, _frame, fine) => {
      const lever = fine ? LEVER_PIXELS * 10 : LEVER_PIXELS
      const value = grab.value * 2 ** ((point.y - grab.point.y) / lever)
      return clamped(roundedTo(value, roundedStep(Math.abs(value) / 50)), bounds)
    },
    apply: (now, level) => withAnalog(now, { ...now.analog, rippleDb: -level }),
  }
}

function attenuationHandle(attenuationDb: number, rippleDb: number | undefined): SpecHandle {
  const bounds = { value: -attenuationDb, min: -200, max: -Math.max(3.1, (rippleDb ?? 0) * 1.1) }
  return {
    ...bounds,
    id: 'attenuation',
    label: 'Stop-band level',
    field: 'analog.attenuationDb',
    orientation: 'vertical',
    valueText: `${formatDb(attenuationDb, 1)} down`,
    next: (size, direction) => steppedBy(bounds, 1, size, direction),
    under: (point, grab, frame, fine) => {
      const y = frame.y.magnitude
      const at = point.y - grab.offset.y
      const step = roundedStep(valuePerPixel(y, at)) * (fine ? 0.1 : 1)
      return clamped(roundedTo(y.toValue(at), step), bounds)
    },
    apply: (now, level) => withAnalog(now, { ...now.analog, attenuationDb: -level }),
  }
}

function orderHandle(order: number): SpecHandle {
  const bounds = { value: order, min: 1, max: MOST_ORDER }
  return {
    ...bounds,
    id: 'order',
    label: 'Order, by the slope',
    field: 'analog.order',
    orientation: 'vertical',
    valueText: `order ${order}`,
    next: (size, direction) => clamped(order + direction * (size === 'coarse' ? 4 : 1), bounds),
    under: () => null,
    apply: (now, value) => withAnalog(now, { ...now.analog, order: Math.round(value) }),
  }
}

function holdHandle(holdHz: number, sampleRateHz: number): SpecHandle {
  const bounds = { value: holdHz, min: LEAST_HZ, max: highestEdgeHz(sampleRateHz) }
  return {
    ...bounds,
    id: 'hold',
    label: 'Held frequency',
    field: 'how.hold',
    orientation: 'horizontal',
    valueText: `held at ${formatHz(holdHz)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(frequencyUnder(point, grab, frame, fine), bounds),
    apply: (now, hz) => withHold(now, hz),
  }
}

/** The fold line stands at half the sampling rate; the slider's value is the rate itself. */
function foldHandle(spec: DesignSpec): SpecHandle {
  const { sampleRateHz, how, analog } = spec
  const held = how.method === 'bilinear' && typeof how.hold === 'number' ? how.hold : 0
  const least = shortened(Math.max(...analog.edgesHz, held) / HIGHEST_EDGE_PART, 1)
  const bounds = {
    value: sampleRateHz,
    min: least,
    max: shortened(Math.min(...analog.edgesHz) / LEAST_PART_OF_RATE / 1.001, -1),
  }
  return {
    ...bounds,
    id: 'fold',
    label: 'Sampling rate, by the fold line at half of it',
    field: 'sampleRateHz',
    orientation: 'horizontal',
    valueText: `sampled at ${formatHz(sampleRateHz)}, folds at ${formatHz(sampleRateHz / 2)}`,
    next: (size, direction) => steppedDigit(bounds, size, direction),
    under: (point, grab, frame, fine) => clamped(2 * frequencyUnder(point, grab, frame, fine), bounds),
    apply: (now, rate) => ({ ...now, sampleRateHz: rate }),
  }
}
