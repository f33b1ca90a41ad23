'use client'

import { useMemo, useRef, useState, useSyncExternalStore, type PointerEvent } from 'react'
import type { Ground } from '@/components/plot/ground'
import { lookWithoutPage, onPageLook, pageLook } from '@/components/plot/page-look'
import { statementText } from '@/lib/designs/statement'
import { isEditing } from '../interact/gesture'
import { useGestures } from '../interact/use-gestures'
import type { StackView, TraceId } from '../view'
import { Crosshair } from './crosshair'
import { csvFile, offerFile, pngFile, svgFile } from './download'
import { exportScene } from './export-scene'
import { FoldLineGrip } from './fold-line-grip'
import { stackFrame } from './frame'
import { isNarrow } from './layout'
import { placedHandles } from './handle-places'
import { Handles } from './handles'
import { LiveValues } from './live-values'
import { stackPicture } from './paint-plan'
import { PlotCorners } from './plot-corners'
import type { PlotId, StackProps } from './props'
import type { Ranges } from './ranges'
import { spokenValues, valueAt } from './read-out'
import { ReadOutRow } from './read-out-row'
import { specHandles, type Point } from './spec-handles'
import { StaticLayer } from './static-layer'
import { Surface } from './surface'
import { TableOfValues } from './table-of-values'
import { ToolsRow } from './tools-row'
import { useWheel } from './use-wheel'
import { useWidth } from './use-width'
import { csvOfTraces } from './value-table'

const noGrounds: readonly Ground<PlotId>[] = []

/**
 * Magnitude, phase, group delay and departure over one frequency axis, with the parts of the design that can be taken hold of. All it
 * knows comes from its props; all it wants goes out through `onView` and `edit`.
 */
export function ResponseStack(props: StackProps) {
  const {
    spec,
    traces,
    trusted,
    view,
    onView,
    onResetView,
    edit,
    refusal,
    readOnly = false,
    grounds = noGrounds,
  } = props
  const stage = useRef<HTMLDivElement>(null)
  const width = useWidth(stage)
  const look = useSyncExternalStore(onPageLook, pageLook, () => lookWithoutPage)
  const [heldRanges, setHeldRanges] = useState<Ranges | null>(null)
  const [readPlot, setReadPlot] = useState<PlotId>('magnitude')
  const [readByKey, setReadByKey] = useState(false)

  // The static layer must not know of the crosshair: moving it repaints nothing.
  const painted = useStaticView(view)
  const frame = useMemo(
    () => stackFrame(spec, traces, painted, width, heldRanges),
    [spec, traces, painted, width, heldRanges],
  )
  const handles = useMemo(() => specHandles(spec), [spec])
  const placed = useMemo(() => placedHandles(handles, spec, traces, frame), [handles, spec, traces, frame])

  const heldEdit = useMemo(
    () => ({
      begin: () => {
        setHeldRanges(frame.ranges)
        edit.begin()
      },
      change: edit.change,
      commit: () => {
        setHeldRanges(null)
        edit.commit()
      },
      cancel: () => {
        setHeldRanges(null)
        edit.cancel()
      },
    }),
    [edit, frame],
  )
  const onReadPlot = (plot: PlotId) => {
    setReadPlot(plot)
    setReadByKey(false)
  }
  const { gesture, dispatch } = useGestures({ spec, frame, handles, edit: heldEdit, onView, onReadPlot })
  useWheel(stage, frame, onView)

  const pencilled = gesture.name === 'dragging' || gesture.name === 'steepening'
  const input = useMemo(
    () => ({ spec, traces, trusted, view: painted, grounds, pencilled }),
    [spec, traces, trusted, painted, grounds, pencilled],
  )
  const picture = useMemo(() => stackPicture(input, frame), [input, frame])

  const pointOf = (event: PointerEvent): Point => {
    const box = stage.current?.getBoundingClientRect()
    return { x: event.clientX - (box?.left ?? 0), y: event.clientY - (box?.top ?? 0) }
  }
  const grabSlope = (pointerId: number, point: Point) => {
    const analog = traces.find((trace) => trace.id === 'analog')
    if (!analog) return
    const onCurve = valueAt(analog.frequenciesHz, analog.magnitudeDb, frame.x.toValue(point.x))
    const offsetDb = frame.y.magnitude.toValue(point.y) - onCurve
    dispatch({ kind: 'grab-slope', pointerId, point, offsetDb: Number.isFinite(offsetDb) ? offsetDb : 0 })
  }
  const onToggle = (id: TraceId) =>
    onView({ hidden: view.hidden.includes(id) ? view.hidden.filter((other) => other !== id) : [...view.hidden, id] })

  const shownTraces = traces.filter((trace) => !view.hidden.includes(trace.id))
  const [problem, setProblem] = useState<string | null>(null)
  function onDownload(kind: 'svg' | 'png' | 'csv') {
    setProblem(null)
    if (kind === 'csv') {
      offerFile('response.csv', csvFile(csvOfTraces(traces)))
      return
    }
    const heading = statementText(spec)
    const scene = exportScene(input, frame, picture.scene, heading)
    if (kind === 'svg') offerFile('response.svg', svgFile(scene, look.palette, heading))
    else {
      pngFile(scene, look.palette)
        .then((file) => offerFile('response.png', file))
        .catch((error: unknown) => setProblem(error instanceof Error ? error.message : String(error)))
    }
  }

  const { crosshairHz } = view
  const spoken =
    readByKey && crosshairHz !== null ? spokenValues(shownTraces, crosshairHz, spec.sampleRateHz, view) : null
  return (
    <section aria-label="Response of the design" className="min-w-0" data-gesture={gesture.name}>
      <div style={{ paddingLeft: isNarrow(width) ? 0 : frame.layout.plots.magnitude.left }}>
        <ReadOutRow traces={traces} view={view} sampleRateHz={spec.sampleRateHz} plot={readPlot} onToggle={onToggle} />
      </div>
      <div
        ref={stage}
        className="relative mt-1"
        style={{ height: frame.layout.height }}
        onPointerLeave={() => {
          if (!isEditing(gesture)) setReadPlot('magnitude')
        }}
      >
        <StaticLayer scene={picture.scene} look={look} />
        <Surface
          frame={frame}
          view={view}
          sampleRateHz={spec.sampleRateHz}
          slope={picture.analogSlope}
          gesture={gesture}
          readOnly={readOnly}
          dispatch={dispatch}
          grabSlope={grabSlope}
          pointOf={pointOf}
          onView={onView}
          onResetView={onResetView}
          onKeyRead={() => setReadByKey(true)}
        />
        <Crosshair traces={shownTraces} view={view} frame={frame} sampleRateHz={spec.sampleRateHz} />
        {readOnly ? null : <FoldLineGrip frame={frame} handles={handles} dispatch={dispatch} pointOf={pointOf} />}
        <PlotCorners frame={frame} view={view} onView={onView} />
        <Handles
          placed={placed}
          frame={frame}
          gesture={gesture}
          refusal={refusal}
          readOnly={readOnly}
          dispatch={dispatch}
          grabSlope={grabSlope}
          pointOf={pointOf}
        />
      </div>
      <div
        className="flex flex-wrap items-start gap-x-4"
        style={{ paddingLeft: isNarrow(width) ? 0 : frame.layout.plots.magnitude.left - 4 }}
      >
        <ToolsRow frame={frame} view={view} onView={onView} onResetView={onResetView} onDownload={onDownload} />
        <div className="min-w-0 basis-auto">
          <TableOfValues traces={shownTraces} view={view} frame={frame} />
        </div>
      </div>
      {problem ? (
        <p role="alert" className="text-[13px] text-vermilion">
          {problem}
        </p>
      ) : null}
      <LiveValues words={spoken} />
    </section>
  )
}

/** The view without its crosshair, the same object as long as nothing in it changes. */
function useStaticView(view: StackView): StackView {
  const { fromHz, toHz, logFrequency, normalised, unwrapped, departureUnit, removeDelay, magnitudeFloorDb, hidden } =
    view
  return useMemo(
    () => ({
      fromHz,
      toHz,
      logFrequency,
      normalised,
      unwrapped,
      departureUnit,
      removeDelay,
      magnitudeFloorDb,
      hidden,
      crosshairHz: null,
    }),
    [fromHz, toHz, logFrequency, normalised, unwrapped, departureUnit, removeDelay, magnitudeFloorDb, hidden],
  )
}
