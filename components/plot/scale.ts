/*
 * A scale is a transform and its inverse: painting uses the one, dragging the other. Pixels grow to the right and downwards; a range
 * may run either way.
 */

export type Span = readonly [number, number]

export interface Scale {
  readonly kind: 'linear' | 'log'
  readonly domain: Span
  readonly range: Span
  toPixel(value: number): number
  toValue(pixel: number): number
}

export function linearScale(domain: Span, range: Span): Scale {
  const [from, to] = domain
  const [start, end] = range
  if (!(Number.isFinite(from) && Number.isFinite(to)) || from === to) {
    throw new RangeError(`A linear scale needs two different finite ends, not ${from} and ${to}.`)
  }
  const pixelsPerUnit = (end - start) / (to - from)
  return {
    kind: 'linear',
    domain,
    range,
    toPixel: (value) => start + (value - from) * pixelsPerUnit,
    toValue: (pixel) => from + (pixel - start) / pixelsPerUnit,
  }
}

export function logScale(domain: Span, range: Span): Scale {
  const [from, to] = domain
  const [start, end] = range
  if (!(from > 0 && to > 0 && Number.isFinite(from) && Number.isFinite(to)) || from === to) {
    throw new RangeError(
      `A logarithmic scale needs two different ends above 0, not ${from} and ${to}; use a linear scale to show 0.`,
    )
  }
  const logFrom = Math.log(from)
  const pixelsPerNeper = (end - start) / (Math.log(to) - logFrom)
  return {
    kind: 'log',
    domain,
    range,
    toPixel: (value) => start + (Math.log(value) - logFrom) * pixelsPerNeper,
    toValue: (pixel) => Math.exp(logFrom + (pixel - start) / pixelsPerNeper),
  }
}

export const scaleOf = (kind: Scale['kind'], domain: Span, range: Span): Scale =>
  kind === 'log' ? logScale(domain, range) : linearScale(domain, range)

/** Pixel position of every value; same length as `values`. */
export function pixelsOf(scale: Scale, values: Float64Array): Float64Array {
  const pixels = new Float64Array(values.length)
  for (let i = 0; i < values.length; i++) pixels[i] = scale.toPixel(values[i] ?? Number.NaN)
  return pixels
}

/** How much one pixel is worth at `pixel`, in the scale's own unit. */
export const valuePerPixel = (scale: Scale, pixel: number): number =>
  Math.abs(scale.toValue(pixel + 0.5) - scale.toValue(pixel - 0.5))

export interface DomainLimits {
  readonly least: number
  readonly most: number
  /** Smallest span that may be shown: a difference for a linear scale, a ratio above 1 for a logarithmic one. */
  readonly smallest: number
}

/** The domain after zooming by `factor` (below 1 shows less) with the value under `aroundPixel` staying in place. */
export function zoomedDomain(scale: Scale, factor: number, aroundPixel: number, limits: DomainLimits): Span {
  const [start, end] = scale.range
  return within(
    scale,
    scale.toValue(aroundPixel + (start - aroundPixel) * factor),
    scale.toValue(aroundPixel + (end - aroundPixel) * factor),
    limits,
  )
}

/** The domain after its picture was pulled by `pixels` to the right. */
export function pannedDomain(scale: Scale, pixels: number, limits: DomainLimits): Span {
  const [start, end] = scale.range
  let shift = -pixels
  // Pull no further than to the limit, keeping the span as it is.
  const lowest =
    scale.kind === 'log' && limits.least <= 0 ? Number.NEGATIVE_INFINITY : scale.toPixel(limits.least) - start
  const highest = scale.toPixel(limits.most) - end
  shift = Math.min(Math.max(shift, lowest), highest)
  return [scale.toValue(start + shift), scale.toValue(end + shift)]
}

/** The domain that puts `valueA` at `pixelA` and `valueB` at `pixelB`: two fingers on the plot. */
export function pinchedDomain(
  scale: Scale,
  a: { readonly value: number; readonly pixel: number },
  b: { readonly value: number; readonly pixel: number },
  limits: DomainLimits,
): Span {
  const [start, end] = scale.range
  const apart = b.pixel - a.pixel
  if (Math.abs(apart) < 8) return scale.domain
  const [from, to] = scale.kind === 'log' ? [Math.log(a.value), Math.log(b.value)] : [a.value, b.value]
  const perPixel = (to - from) / apart
  const ends = [start, end].map((pixel) => from + (pixel - a.pixel) * perPixel)
  const [low = 0, high = 1] = scale.kind === 'log' ? ends.map(Math.exp) : ends
  return low < high ? within(scale, low, high, limits) : scale.domain
}

function within(scale: Scale, from: number, to: number, limits: DomainLimits): Span {
  const low = Math.max(from, limits.least)
  const high = Math.min(to, limits.most)
  const tooNarrow = scale.kind === 'log' ? high / low < limits.smallest : high - low < limits.smallest
  return tooNarrow ? scale.domain : [low, high]
}
