import type { Box } from '@/components/plot/path'
import type { PlotId } from './props'

/* Where the four plots stand. One frequency axis below them all; the gutter on the left holds the value labels. */

export interface StackLayout {
  readonly width: number
  readonly height: number
  readonly plots: Readonly<Record<PlotId, Box>>
  /** The strip under the plots: the trusted band's lane, then the frequency labels. */
  readonly axis: {
    readonly top: number
    readonly bottom: number
    readonly trustedY: number
    readonly labelBaseline: number
  }
}

export const plotIds: readonly PlotId[] = ['magnitude', 'phase', 'group-delay', 'departure']

/** The sheet's proportions at 946 px, the width of the stack on the reference page. */
const reference = { width: 946, heights: { magnitude: 196, phase: 111, 'group-delay': 79, departure: 105 } } as const
const narrow = { heights: { magnitude: 190, phase: 112, 'group-delay': 92, departure: 124 } } as const

const GAP_PIXELS = 10
/** Room for the fold line and the crosshair to stand out above the first plot. */
const HEAD_PIXELS = 6
const STRIP_PIXELS = 36

export const isNarrow = (width: number): boolean => width < 560

export function stackLayout(width: number): StackLayout {
  const heights = isNarrow(width) ? narrow.heights : reference.heights
  // Wider sheets grow a little taller, so that slopes keep their look.
  const growth = isNarrow(width) ? 1 : Math.min(1.35, Math.max(1, Math.sqrt(width / reference.width)))
  const left = isNarrow(width) ? 42 : 56
  let top = HEAD_PIXELS
  const box = (plot: PlotId): Box => {
    const height = Math.round(heights[plot] * growth)
    const made = { left, top, right: width, bottom: top + height }
    top += height + GAP_PIXELS
    return made
  }
  const plots = {
    magnitude: box('magnitude'),
    phase: box('phase'),
    'group-delay': box('group-delay'),
    departure: box('departure'),
  }
  const axisTop = plots.departure.bottom
  // On a narrow sheet the fold line's tag hangs into the strip; the labels make room.
  const strip = isNarrow(width) ? STRIP_PIXELS + 8 : STRIP_PIXELS
  return {
    width,
    height: axisTop + strip,
    plots,
    axis: { top: axisTop, bottom: axisTop + strip, trustedY: axisTop + 7, labelBaseline: axisTop + strip - 10 },
  }
}

/** The fold line's tag straddles the lowest side; on a narrow sheet it hangs below, clear of the corner's words. */
export const foldTagY = ({ width, plots }: StackLayout): number => plots.departure.bottom + (isNarrow(width) ? 11 : 0)

/** The plot under a pointer's height; the gaps belong to the plot above. */
export function plotAt(layout: StackLayout, y: number): PlotId {
  let found: PlotId = 'magnitude'
  for (const id of plotIds) if (y >= layout.plots[id].top) found = id
  return found
}
