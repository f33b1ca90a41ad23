import type { StackView } from '../view'
import { Act, Choice } from './choice'
import type { StackFrame } from './frame'
import { switchedAxis, zoomedView } from './framing'
import { zoomCentre } from './handle-places'

/** Below the plots: how much of the axis is shown, its kind and unit, and the picture to take away. */
export function ToolsRow({
  frame,
  view,
  onView,
  onResetView,
  onDownload,
}: {
  frame: StackFrame
  view: StackView
  onView(change: Partial<StackView>): void
  onResetView(): void
  onDownload(kind: 'svg' | 'png' | 'csv'): void
}) {
  const zoom = (factor: number) => onView(zoomedView(frame.x, factor, zoomCentre(frame.x, view.crosshairHz)))
  return (
    <div role="group" aria-label="Frequency axis and downloads" className="flex flex-wrap items-center gap-x-4">
      <span className="inline-flex">
        <Act label="Show less of the axis" onPress={() => zoom(0.7)}>
          +
        </Act>
        <Act label="Show more of the axis" onPress={() => zoom(1 / 0.7)}>
          −
        </Act>
        <Act label="Show the whole band" onPress={onResetView}>
          whole band
        </Act>
      </span>
      <Choice
        label="Kind of axis"
        options={[
          { value: true, word: 'log' },
          { value: false, word: 'linear' },
        ]}
        value={view.logFrequency}
        onChange={(logFrequency) => onView(switchedAxis(view, logFrequency))}
      />
      <Choice
        label="Unit of the axis"
        options={[
          { value: false, word: 'Hz', name: 'Frequencies in hertz' },
          { value: true, word: 'f/fs', name: 'Frequencies as parts of the sampling rate' },
        ]}
        value={view.normalised}
        onChange={(normalised) => onView({ normalised })}
      />
      <span role="group" aria-label="Download" className="inline-flex">
        <Act label="Download the plots as SVG" onPress={() => onDownload('svg')}>
          SVG
        </Act>
        <Act label="Download the plots as PNG" onPress={() => onDownload('png')}>
          PNG
        </Act>
        <Act label="Download the plotted values as CSV" onPress={() => onDownload('csv')}>
          CSV
        </Act>
      </span>
    </div>
  )
}
