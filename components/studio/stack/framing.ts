import {
  pannedDomain,
  pinchedDomain,
  scaleOf,
  zoomedDomain,
  type DomainLimits,
  type Scale,
  type Span,
} from '@/components/plot/scale'
import type { StackView } from '../view'

/* Zooms and pans of the frequency axis. */

type Shown = Pick<StackView, 'fromHz' | 'toHz'>

const frequencyLimits = (scale: Scale): DomainLimits =>
  scale.kind === 'log'
    ? { least: 1e-6, most: 1e9, smallest: 1.01 }
    : { least: 0, most: 1e9, smallest: Math.max(1e-6, scale.domain[1] * 1e-4) }

const shown = ([fromHz, toHz]: Span): Shown => ({ fromHz, toHz })

/** Below 1 shows less, above 1 shows more. */
export const zoomedView = (scale: Scale, factor: number, aroundPixel: number): Shown =>
  shown(zoomedDomain(scale, factor, aroundPixel, frequencyLimits(scale)))

/** The view after the span it had at first was pulled by `pixels` to the right. */
export function pannedView(scale: Scale, from: Shown, pixels: number): Shown {
  const before = scaleOf(scale.kind, [from.fromHz, from.toHz], scale.range)
  return shown(pannedDomain(before, pixels, frequencyLimits(before)))
}

export const pinchedView = (
  scale: Scale,
  a: { readonly value: number; readonly pixel: number },
  b: { readonly value: number; readonly pixel: number },
): Shown => shown(pinchedDomain(scale, a, b, frequencyLimits(scale)))

/** Changes the kind of axis without losing sight: a linear axis may start at 0, a logarithmic one can't. */
export function switchedAxis(view: StackView, logFrequency: boolean): Partial<StackView> {
  if (!logFrequency) return { logFrequency, fromHz: view.fromHz < view.toHz / 8 ? 0 : view.fromHz }
  return { logFrequency, fromHz: view.fromHz > 0 ? view.fromHz : view.toHz / 100 }
}
