import { useId, type KeyboardEvent, type PointerEvent } from 'react'
import { sliderKey } from '@/components/plot/handle'
import { classNames } from '@/lib/format/class-names'
import type { Gesture, GestureEvent } from '../interact/gesture'
import type { Refusal } from '../view'
import type { StackFrame } from './frame'
import { HandleGlyph } from './handle-glyph'
import type { HandlePlace, PlacedHandle } from './handle-places'
import type { Point, SpecHandle } from './spec-handles'

/** The parts of the spec that can be taken hold of: sliders by the ARIA pattern, for mouse, touch and keys alike. */
export function Handles({
  placed,
  frame,
  gesture,
  refusal,
  readOnly,
  dispatch,
  grabSlope,
  pointOf,
}: {
  placed: readonly PlacedHandle[]
  frame: StackFrame
  gesture: Gesture
  refusal: Refusal | null
  readOnly: boolean
  dispatch(event: GestureEvent): void
  grabSlope(pointerId: number, point: Point): void
  /** A pointer's place on the stack. */
  pointOf(event: PointerEvent): Point
}) {
  return (
    <>
      <LevelLines placed={placed} frame={frame} />
      {placed.map(({ handle, place }) => (
        <Handle
          key={handle.id}
          handle={handle}
          place={place}
          isHeld={isHeld(gesture, handle)}
          flipped={place.x > frame.layout.width * 0.7}
          refusal={refusal?.field.startsWith(handle.field) ? refusal : null}
          readOnly={readOnly}
          dispatch={dispatch}
          grabSlope={grabSlope}
          pointOf={pointOf}
        />
      ))}
    </>
  )
}

function isHeld(gesture: Gesture, handle: SpecHandle): boolean {
  if (gesture.name === 'dragging' || gesture.name === 'keying') return gesture.handleId === handle.id
  return gesture.name === 'steepening' && handle.id === 'order'
}

/** The lines that level handles move, and the held frequency's. */
function LevelLines({ placed, frame }: { placed: readonly PlacedHandle[]; frame: StackFrame }) {
  const { top, bottom } = frame.layout.plots.magnitude
  return (
    <svg
      aria-hidden="true"
      className="pointer-events-none absolute top-0 left-0"
      width={frame.layout.width}
      height={frame.layout.height}
    >
      {placed.map(({ handle, place }) => {
        if (place.level) {
          const { left, right, y } = place.level
          return (
            <line
              key={handle.id}
              x1={left}
              x2={right}
              y1={y}
              y2={y}
              stroke="var(--ink)"
              strokeDasharray="2 3"
              opacity={0.7}
            />
          )
        }
        if ((handle.look !== 'hold' && handle.look !== 'fit') || place.outside !== null) return null
        return (
          <line
            key={handle.id}
            x1={place.x}
            x2={place.x}
            y1={top}
            y2={bottom}
            stroke="var(--spruce)"
            strokeDasharray="1.5 4"
          />
        )
      })}
    </svg>
  )
}

function Handle({
  handle,
  place,
  isHeld,
  flipped,
  refusal,
  readOnly,
  dispatch,
  grabSlope,
  pointOf,
}: {
  handle: SpecHandle
  place: HandlePlace
  isHeld: boolean
  /** Its words stand to the left of it. */
  flipped: boolean
  refusal: Refusal | null
  readOnly: boolean
  dispatch(event: GestureEvent): void
  grabSlope(pointerId: number, point: Point): void
  pointOf(event: PointerEvent): Point
}) {
  const refusalId = useId()
  const glyph = (
    <svg
      aria-hidden="true"
      className="pointer-events-none absolute top-1/2 left-1/2 overflow-visible"
      width="1"
      height="1"
    >
      <HandleGlyph look={handle.look} angle={place.angle} outside={place.outside} />
    </svg>
  )
  const at = { left: place.x, top: place.y }
  if (readOnly) {
    return (
      <div aria-hidden="true" className="pointer-events-none absolute" style={at}>
        {glyph}
      </div>
    )
  }

  function onPointerDown(event: PointerEvent<HTMLDivElement>) {
    if (event.button !== 0) return
    event.currentTarget.setPointerCapture(event.pointerId)
    const point = pointOf(event)
    if (handle.id === 'order') grabSlope(event.pointerId, point)
    else dispatch({ kind: 'grab-handle', pointerId: event.pointerId, point, centre: place, handle })
  }

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey) return
    if (event.key === 'Enter') {
      dispatch({ kind: 'finish' })
      return
    }
    const key = sliderKey(event.key, { shift: event.shiftKey, alt: event.altKey })
    if (!key) return
    event.preventDefault()
    const value = key.kind === 'end' ? handle[key.which] : handle.next(key.size, key.direction)
    dispatch({ kind: 'step', handle, value })
  }

  const isWide = handle.id === 'fold'
  return (
    <div
      role="slider"
      tabIndex={0}
      aria-label={handle.label}
      aria-orientation={handle.orientation}
      aria-valuemin={handle.min}
      aria-valuemax={handle.max}
      aria-valuenow={handle.value}
      aria-valuetext={handle.valueText}
      aria-invalid={refusal ? true : undefined}
      aria-describedby={refusal ? refusalId : undefined}
      data-handle={handle.id}
      className={classNames(
        'group absolute -translate-x-1/2 -translate-y-1/2 touch-none rounded select-none focus-visible:z-10',
        handle.orientation === 'horizontal' ? 'cursor-ew-resize' : 'cursor-ns-resize',
        isWide
          ? 'h-[26px] w-[42px] pointer-coarse:h-[40px] pointer-coarse:w-[56px]'
          : 'size-[26px] pointer-coarse:size-[40px]',
        isHeld && 'z-10',
      )}
      style={at}
      onPointerDown={onPointerDown}
      onPointerMove={(event) =>
        dispatch({ kind: 'move', pointerId: event.pointerId, point: pointOf(event), fine: event.altKey })
      }
      onPointerUp={(event) => dispatch({ kind: 'release', pointerId: event.pointerId })}
      onPointerCancel={(event) => dispatch({ kind: 'lose', pointerId: event.pointerId })}
      onKeyDown={onKeyDown}
      onBlur={() => dispatch({ kind: 'finish' })}
    >
      {glyph}
      <span
        aria-hidden="true"
        className={classNames(
          'pointer-events-none absolute border border-graph-strong bg-sheet px-1.5 font-mono text-[11px] leading-5 whitespace-nowrap text-ink',
          handle.id === 'fold' ? 'bottom-full mb-1' : 'top-1/2 -translate-y-1/2',
          flipped ? 'right-full mr-1' : 'left-full ml-1',
          isHeld ? 'block' : 'hidden group-hover:block group-focus-visible:block',
        )}
      >
        {handle.valueText}
      </span>
      {refusal ? (
        <span
          id={refusalId}
          className={classNames(
            'pointer-events-none absolute z-20 w-max max-w-[16rem] border border-vermilion bg-sheet px-2 py-1 text-[12px] leading-4 text-vermilion',
            handle.id === 'fold' ? 'bottom-full mb-7' : 'top-full mt-1',
            flipped ? 'right-0' : 'left-0',
          )}
        >
          {refusal.message}
        </span>
      ) : null}
    </div>
  )
}
