import type { StackView } from '../view'
import type { StackFrame } from './frame'
import { delayUnit } from './paint-plan'
import type { PlotId } from './props'

/** "Group delay, ms": what a plot shows and in which unit. */
export function plotTitle(plot: PlotId, view: StackView, frame: StackFrame): string {
  switch (plot) {
    case 'magnitude':
      return 'Magnitude, dB'
    case 'phase':
      return 'Phase, °'
    case 'group-delay':
      return `Group delay, ${delayUnit(frame.y['group-delay'].domain[1]).symbol}`
    case 'departure':
      switch (view.departureUnit) {
        case 'db':
          return 'Magnitude departure, dB'
        case 'degrees':
          return 'Phase departure, °'
        case 'microseconds':
          return 'Delay departure, µs'
      }
  }
}
