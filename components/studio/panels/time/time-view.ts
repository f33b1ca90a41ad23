import { linearScale, pannedDomain, zoomedDomain, type Span } from '@/components/plot/scale'
import type { TimeFigures } from './time-figures'

/* Which part of time is looked at. */

/** From a little before the step to a little after the slowest of the given versions has settled. */
export function usualSpan(figures: readonly TimeFigures[], sampleRateHz: number): Span {
  const settled = figures.map(({ settlingSeconds }) => settlingSeconds ?? 0)
  const to = Math.max(...settled, 8 / sampleRateHz) * 1.25
  return [-to / 25, to]
}

const limits = (usual: Span, sampleRateHz: number) => ({
  least: usual[0],
  // Far enough to see any tail, near enough to be computed at once.
  most: usual[1] * 20,
  smallest: Math.min(4 / sampleRateHz, usual[1] / 50),
})

/** A span as its own picture, a second a pixel: the plot's scale arithmetic then works on seconds. */
const inSeconds = (span: Span) => linearScale(span, span)

/** A factor below 1 shows less; the time `around` stays where it is. */
export const zoomed = (span: Span, factor: number, around: number, usual: Span, sampleRateHz: number): Span =>
  zoomedDomain(inSeconds(span), factor, around, limits(usual, sampleRateHz))

/** The span after its picture was pulled to the right by `seconds`. */
export const panned = (span: Span, seconds: number, usual: Span, sampleRateHz: number): Span =>
  pannedDomain(inSeconds(span), seconds, limits(usual, sampleRateHz))

/** The span moved just so far that `seconds` lies in it. */
export function showing([from, to]: Span, seconds: number): Span {
  if (seconds < from) return [seconds, seconds + to - from]
  return seconds > to ? [seconds - (to - from), seconds] : [from, to]
}
