import type { HandleValue, StepSize } from '@/components/plot/handle'
import { valuePerPixel } from '@/components/plot/scale'
import { roundedStep, roundedTo } from '@/components/plot/ticks'
import type { DesignSpec } from '@/dsp'
import type { StackFrame } from './frame'

/* What every handle on the plots has, whichever part of the spec it moves. */

export type HandleId =
  | 'edge-0'
  | 'edge-1'
  | 'ripple'
  | 'attenuation'
  | 'hold'
  | 'fit'
  | 'fold'
  | 'order'
  | `band-${number}-${'from' | 'to'}`
  | `sheet-${number}-${'from' | 'to' | 'level'}`

/** What a handle looks like, which also tells where it stands. */
export type HandleLook =
  'edge' | 'pass-level' | 'stop-level' | 'slope' | 'hold' | 'fit' | 'fold' | 'limit-edge' | 'limit-level'

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
  readonly look: HandleLook
  /** The other coordinate of a requirement's edge or level: dB for an edge; Hz for a level, or the band in whose middle it stands. */
  readonly across?: number | readonly [number, number]
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

export interface HandlePlace extends Point {
  /** Where its value lies when that is out of view; the handle then waits at the plot's side. */
  readonly outside: 'left' | 'right' | 'below' | null
  /** The horizontal line that a level handle sits on; null for the others. */
  readonly level: { readonly left: number; readonly right: number; readonly y: number } | null
  /** Of the curve under it, in degrees downwards; 0 where it doesn't matter. */
  readonly angle: number
}

export interface PlacedHandle {
  readonly handle: SpecHandle
  readonly place: HandlePlace
}

/** The frequency under a pointer, rounded to what a pixel can tell. */
export function frequencyUnder(point: Point, grab: Grab, frame: StackFrame, fine: boolean): number {
  const [start, end] = frame.x.range
  // Past the plot's sides the hand pulls no further.
  const at = Math.min(end, Math.max(start, point.x - grab.offset.x))
  const step = roundedStep(valuePerPixel(frame.x, at)) * (fine ? 0.1 : 1)
  return roundedTo(frame.x.toValue(at), step)
}
