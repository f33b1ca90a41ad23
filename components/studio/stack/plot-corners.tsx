import type { DepartureUnit, StackView } from '../view'
import { Choice, Toggle } from './choice'
import type { StackFrame } from './frame'
import { plotIds } from './layout'
import type { PlotId } from './props'
import { plotTitle } from './titles'

const departureUnits: readonly { value: DepartureUnit; word: string; name: string }[] = [
  { value: 'db', word: 'dB', name: 'Departure in decibels' },
  { value: 'degrees', word: '°', name: 'Departure in degrees' },
  { value: 'microseconds', word: 'µs', name: 'Departure in microseconds' },
]

/** Sheet around the letters, so that curves may pass behind them. */
const haloed = { paintOrder: 'stroke', WebkitTextStroke: '4px var(--sheet)' } as const

const floors = [-1, -60, -100, -160] as const

/** In the lower left corner of each plot: what it shows, and how else it could. */
export function PlotCorners({
  frame,
  view,
  onView,
}: {
  frame: StackFrame
  view: StackView
  onView(change: Partial<StackView>): void
}) {
  return plotIds.map((plot) => {
    const box = frame.layout.plots[plot]
    return (
      <div
        key={plot}
        className="pointer-events-none absolute flex flex-wrap items-center gap-x-3 pl-2"
        style={{
          ...haloed,
          left: box.left,
          bottom: frame.layout.height - box.bottom + 1,
          maxWidth: box.right - box.left,
        }}
      >
        <span className="text-[12px] leading-[24px] font-medium text-ink">{plotTitle(plot, view, frame)}</span>
        <span className="pointer-events-auto inline-flex flex-wrap gap-x-1 empty:hidden">
          <CornerControls plot={plot} view={view} onView={onView} />
        </span>
      </div>
    )
  })
}

function CornerControls({
  plot,
  view,
  onView,
}: {
  plot: PlotId
  view: StackView
  onView(change: Partial<StackView>): void
}) {
  switch (plot) {
    case 'magnitude':
      return (
        <Choice
          label="Lowest level shown"
          options={floors.map((value) => ({ value, word: `−${-value}`, name: `Down to −${-value} dB` }))}
          value={view.magnitudeFloorDb}
          onChange={(magnitudeFloorDb) => onView({ magnitudeFloorDb })}
        />
      )
    case 'phase':
      return (
        <Choice
          label="Phase"
          options={[
            { value: true, word: 'unwrapped' },
            { value: false, word: 'wrapped' },
          ]}
          value={view.unwrapped}
          onChange={(unwrapped) => onView({ unwrapped })}
        />
      )
    case 'group-delay':
      return null
    case 'departure':
      return (
        <>
          <Choice
            label="Unit of the departure"
            options={departureUnits}
            value={view.departureUnit}
            onChange={(departureUnit) => onView({ departureUnit })}
          />
          <Toggle pressed={view.removeDelay} onChange={(removeDelay) => onView({ removeDelay })}>
            best delay removed
          </Toggle>
        </>
      )
  }
}
