import { logScale, linearScale, type Scale } from '@/components/plot/scale'
import type { DesignSpec } from '@/dsp'
import { stackLayout, type StackLayout } from './layout'
import { autoRanges, grownRanges, type Ranges } from './ranges'
import type { StackView, Trace } from '../view'
import type { PlotId } from './props'

/* The stack's coordinates: hertz and values to pixels and back. Painting, handles and gestures all use this one frame. */

export interface StackFrame {
  readonly layout: StackLayout
  readonly ranges: Ranges
  /** Hertz to pixels, whatever unit the axis is labelled in. */
  readonly x: Scale
  /** dB, degrees, seconds, and the departure's unit. */
  readonly y: Readonly<Record<PlotId, Scale>>
  readonly foldHz: number
}

/** A view that can be drawn, whatever came in from the address bar. */
function soundSpan(view: Pick<StackView, 'fromHz' | 'toHz' | 'logFrequency'>): [number, number] {
  const to = Number.isFinite(view.toHz) && view.toHz > 0 ? view.toHz : 1000
  const least = view.logFrequency ? to * 1e-9 : 0
  const from = Number.isFinite(view.fromHz) ? Math.max(view.fromHz, least) : to / 100
  return from < to ? [from, to] : [to / 100, to]
}

export function stackFrame(
  spec: DesignSpec,
  traces: readonly Trace[],
  view: StackView,
  width: number,
  held: Ranges | null,
): StackFrame {
  const layout = stackLayout(width)
  const auto = autoRanges(spec, traces, view)
  const ranges = held ? grownRanges(held, auto) : auto
  const boxes = layout.plots
  const domain = soundSpan(view)
  const xRange = [boxes.magnitude.left, boxes.magnitude.right] as const
  const y = (plot: PlotId): Scale => linearScale(ranges[plot], [boxes[plot].bottom, boxes[plot].top])
  return {
    layout,
    ranges,
    x: view.logFrequency ? logScale(domain, xRange) : linearScale(domain, xRange),
    y: { magnitude: y('magnitude'), phase: y('phase'), 'group-delay': y('group-delay'), departure: y('departure') },
    foldHz: spec.sampleRateHz / 2,
  }
}
