'use client'

import { useMemo, useRef, useState } from 'react'
import { windowNames, type WindowName } from '@/dsp'
import { pannedDomain, zoomedDomain, type Span } from '@/components/plot/scale'
import { formatDb, formatHz, formatNumber } from '@/lib/format/quantity'
import { DataTable } from '../panels/chart/data-table'
import { PlotSheet } from '../panels/chart/plot-sheet'
import { Act } from '../stack/choice'
import { useWidth } from '../stack/use-width'
import { PlotReader } from './plot-reader'
import { segmentLengths } from './rates'
import { changeDb, tableLines } from './reading'
import type { SpectrumReading } from './shapes'
import { nearestLine, spectrumScene, wholeSpan } from './spectrum-scene'
import type { TrialView } from './store'
import type { Trial } from './trial'
import { formatCount } from './words'

const select = 'min-h-[24px] border border-graph-strong rounded bg-sheet px-1 text-[12px]'

/** Power spectral densities before and after, of the channel that is shown. */
export function SpectrumPlot({
  trial,
  state,
  traceId,
}: {
  trial: Trial
  state: TrialView
  traceId: Parameters<typeof spectrumScene>[3]
}) {
  const { recording, spectrum, settings } = state
  const frame = useRef<HTMLDivElement>(null)
  const width = useWidth(frame)
  const [zoomed, setZoomed] = useState<Span | null>(null)
  const unit = recording?.channels[settings.shown]?.unit ?? ''
  const whole = useMemo(() => (spectrum ? wholeSpan(spectrum) : null), [spectrum])
  const span = useMemo(() => (whole ? fitted(zoomed, whole) : null), [zoomed, whole])
  const picture = useMemo(
    () => (spectrum && span ? spectrumScene(spectrum, span, unit, traceId, width) : null),
    [spectrum, span, unit, traceId, width],
  )
  if (!recording) return null
  const limits = { least: whole?.[0] ?? 1, most: whole?.[1] ?? 2, smallest: 1.1 }
  const zoom = (factor: number, pixel: number) => {
    if (picture) setZoomed(zoomedDomain(picture.x, factor, pixel, limits))
  }
  const middle = picture ? (picture.box.left + picture.box.right) / 2 : 0
  const density = unit === '' ? '1/Hz' : `(${unit})²/Hz`
  return (
    <figure className="flex min-w-0 flex-col">
      <figcaption className="sr-only">Power spectral density before and after the design</figcaption>
      <div className="mb-5 flex flex-wrap items-center gap-x-2 gap-y-1">
        <span role="group" aria-label="View of the spectrum" className="inline-flex">
          <Act label="Zoom in on the spectrum" onPress={() => zoom(0.5, middle)}>
            +
          </Act>
          <Act label="Zoom out of the spectrum" onPress={() => zoom(2, middle)}>
            −
          </Act>
          <Act label="Whole spectrum" onPress={() => setZoomed(null)}>
            all
          </Act>
        </span>
        <label className="inline-flex items-center gap-1 text-[12px] text-pencil">
          segments of
          <select
            className={`${select} numeric`}
            value={settings.segmentLength}
            onChange={(event) => trial.set({ segmentLength: Number(event.target.value) })}
          >
            {segmentLengths(recording.frames).map((length) => (
              <option key={length} value={length}>
                {length}
              </option>
            ))}
          </select>
        </label>
        <label className="inline-flex items-center gap-1 text-[12px] text-pencil">
          window
          <select
            className={select}
            value={settings.window}
            onChange={(event) => trial.set({ window: windowOf(event.target.value) })}
          >
            {windowNames.map((name) => (
              <option key={name} value={name}>
                {WINDOW_WORDS[name]}
              </option>
            ))}
          </select>
        </label>
      </div>
      <div ref={frame} className="min-w-0">
        {picture && spectrum ? (
          <PlotSheet scene={picture.scene}>
            <PlotReader
              box={picture.box}
              x={picture.x}
              label="Frequency of the spectrum"
              axisHeight={22}
              readOut={(pixel) => readOut(spectrum, picture.x.toValue(pixel), density)}
              onSpan={(from, to) => setZoomed([picture.x.toValue(from), picture.x.toValue(to)])}
              onZoom={zoom}
              onMove={(pixels) => setZoomed(pannedDomain(picture.x, pixels, limits))}
              onWhole={() => setZoomed(null)}
            />
          </PlotSheet>
        ) : (
          <p className="py-10 text-[13px] text-pencil">No spectrum yet.</p>
        )}
      </div>
      {spectrum && span ? (
        <>
          <p className="text-[12px] text-pencil">{basis(spectrum, recording.sampleRateHz)}</p>
          <DataTable
            summary="table of values"
            columns={[
              'frequency',
              `before, ${density}`,
              ...(spectrum.after ? [`after, ${density}`, 'change, dB'] : []),
            ]}
            rows={() =>
              tableLines(spectrum, span).map((line) => [
                formatHz(spectrum.frequenciesHz[line] ?? 0, 5),
                formatNumber(spectrum.before[line] ?? NaN, 4),
                ...(spectrum.after
                  ? [formatNumber(spectrum.after[line] ?? NaN, 4), formatChange(changeDb(spectrum, line))]
                  : []),
              ])
            }
          />
        </>
      ) : null}
    </figure>
  )
}

const WINDOW_WORDS: Readonly<Record<WindowName, string>> = {
  hann: 'Hann',
  hamming: 'Hamming',
  blackman: 'Blackman',
  'flat-top': 'flat-top',
  rectangular: 'rectangular',
}

const windowOf = (text: string): WindowName => windowNames.find((name) => name === text) ?? 'hann'

/** The zoomed part, as far as it lies in this spectrum. */
function fitted(zoomed: Span | null, whole: Span): Span {
  if (!zoomed) return whole
  const from = Math.max(whole[0], zoomed[0])
  const to = Math.min(whole[1], zoomed[1])
  return to / from > 1.05 ? [from, to] : whole
}

const formatChange = (db: number | null): string => (db === null ? '—' : formatDb(db, 2))

function readOut(spectrum: SpectrumReading, hz: number, density: string) {
  const line = nearestLine(spectrum, hz)
  const at = formatHz(spectrum.frequenciesHz[line] ?? 0, 5)
  const change = changeDb(spectrum, line)
  const after = spectrum.after
    ? `, after ${formatNumber(spectrum.after[line] ?? NaN, 3)}${change === null ? '' : ` (${formatDb(change)})`}`
    : ''
  const text = `before ${formatNumber(spectrum.before[line] ?? NaN, 3)}${after}`
  return { valueText: `${at}, ${text} ${density}`, words: `at ${at}: ${text}` }
}

function basis(spectrum: SpectrumReading, sampleRateHz: number): string {
  const parts = [
    `Mean of ${formatCount(spectrum.segments, 'segment', 'segments')}, half overlapping, each less its mean`,
    `lines ${formatHz(sampleRateHz / spectrum.segmentLength, 3)} apart`,
  ]
  if (spectrum.leftOut !== 'nothing') parts.push(`the ${spectrum.leftOut} left out`)
  if (spectrum.partFrames !== null)
    parts.push(`from the first ${formatCount(spectrum.partFrames, 'sample', 'samples')} only`)
  return `${parts.join('; ')}.`
}
