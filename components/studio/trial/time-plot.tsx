'use client'

import { useEffect, useMemo, useRef } from 'react'
import { valuePerPixel } from '@/components/plot/scale'
import { formatNumber, formatQuantity, formatSeconds } from '@/lib/format/quantity'
import { DataTable } from '../panels/chart/data-table'
import { PlotSheet } from '../panels/chart/plot-sheet'
import { Act, Toggle } from '../stack/choice'
import { useWidth } from '../stack/use-width'
import { PlotReader } from './plot-reader'
import { timeTable, valueIn } from './reading'
import { shiftFrames, type TrialView } from './store'
import { plotLeft, timeScene } from './time-scene'
import type { Trial } from './trial'
import { wayWords } from './words'

/** Before and after in time, with what helps to look closer. */
export function TimePlot({
  trial,
  state,
  traceId,
}: {
  trial: Trial
  state: TrialView
  traceId: Parameters<typeof timeScene>[0]['trace']
}) {
  const frame = useRef<HTMLDivElement>(null)
  const width = useWidth(frame)
  const { recording, run, view, windows, settings } = state
  useEffect(() => {
    trial.setColumns(Math.max(60, width - plotLeft(width)))
  }, [trial, width])
  const channel = recording?.channels[settings.shown]
  const shift = shiftFrames(state)
  const wasRun = run?.request.channels.includes(settings.shown) ?? false
  const rate = recording?.sampleRateHz ?? 1
  const picture = useMemo(() => {
    if (!recording) return null
    const causal = run?.request.mode === 'causal'
    const how = run ? `After, ${wayWords(run.zeroPhase)}` : 'After'
    const moved =
      shift === 0 ? '' : `, moved ${formatSeconds(Math.abs(shift) / rate)} ${shift > 0 ? 'earlier' : 'later'}`
    return timeScene({
      width,
      sampleRateHz: rate,
      frames: recording.frames,
      view,
      before: windows.before,
      after: windows.after,
      unit: channel?.unit ?? '',
      trace: traceId,
      afterWords: wasRun ? `${how}${moved}` : 'After: not run',
      startUpFrames: wasRun && causal ? run.settlingFrames : 0,
      shiftFrames: shift,
      extensionFrames: wasRun && run && !causal ? run.extensionFrames : 0,
      sameScale: settings.sameScale,
    })
  }, [recording, width, run, shift, rate, view, windows, channel, traceId, wasRun, settings.sameScale])
  if (!recording) return null

  const unit = channel?.unit ?? ''
  const span = view.to - view.from
  const zoom = (factor: number, around = (view.from + view.to) / 2) => {
    trial.look(around - (around - view.from) * factor, around + (view.to - around) * factor)
  }
  const frameAt = (pixel: number) => (picture ? picture.x.toValue(pixel) * rate : 0)
  const readOut = (pixel: number) => {
    const at = frameAt(pixel)
    const time = formatTime(Math.round(at) / rate, span / rate)
    const before = valueIn(windows.before, at, unit)
    const after = wasRun ? valueIn(windows.after, at, unit) : null
    const text = `before ${before}${after === null ? '' : `, after ${after}`}`
    return { valueText: `${time}, ${text}`, words: `at ${time}: ${text}` }
  }
  return (
    <figure className="flex min-w-0 flex-col">
      <figcaption className="sr-only">The recording in time, before and after the design</figcaption>
      <div className="mb-5 flex flex-wrap items-center gap-1" role="group" aria-label="View in time">
        <Act label="Zoom in" onPress={() => zoom(0.5)}>
          +
        </Act>
        <Act label="Zoom out" onPress={() => zoom(2)}>
          −
        </Act>
        <Act label="Earlier" onPress={() => trial.look(view.from - span / 2, view.to - span / 2)}>
          ←
        </Act>
        <Act label="Later" onPress={() => trial.look(view.from + span / 2, view.to + span / 2)}>
          →
        </Act>
        <Act label="Whole recording" onPress={() => trial.look(0, recording.frames)}>
          all
        </Act>
        <Toggle pressed={settings.sameScale} onChange={(sameScale) => trial.set({ sameScale })}>
          same scale
        </Toggle>
        <Toggle pressed={settings.aligned} onChange={(aligned) => trial.set({ aligned })}>
          delay removed
        </Toggle>
      </div>
      <div ref={frame} className="min-w-0">
        {picture ? (
          <PlotSheet scene={picture.scene}>
            <PlotReader
              box={{ ...picture.before.box, bottom: picture.after.box.bottom }}
              x={picture.x}
              label="Time"
              axisHeight={22}
              readOut={readOut}
              onSpan={(from, to) => trial.look(frameAt(from), frameAt(to) + 1)}
              onZoom={(factor, pixel) => zoom(factor, frameAt(pixel))}
              onMove={(pixels) => {
                const frames = pixels * valuePerPixel(picture.x, picture.before.box.left) * rate
                trial.look(view.from - frames, view.to - frames)
              }}
              onWhole={() => trial.look(0, recording.frames)}
            />
          </PlotSheet>
        ) : null}
      </div>
      <DataTable
        summary="table of values"
        columns={timeTable.columns(unit, wasRun)}
        rows={() => timeTable.rows(view, windows, rate, wasRun)}
      />
    </figure>
  )
}

/** Digits enough to tell neighbours on the screen apart. */
const formatTime = (seconds: number, spanSeconds: number): string => {
  const digits = Math.max(3, Math.ceil(Math.log10(Math.max(1, Math.abs(seconds)) / (spanSeconds / 2000))) + 1)
  return Math.abs(seconds) >= 1
    ? `${formatNumber(seconds, Math.min(12, digits))}\u2009s`
    : formatQuantity(seconds, 's', Math.min(12, digits))
}
