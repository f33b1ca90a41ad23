import { impulseResponse, stepResponse, type AnyDigital, type AnyFilter, type Filter } from '@/dsp'
import type { TraceId } from '@/components/plot/trace-style'
import type { Span } from '@/components/plot/scale'
import type { Versions } from '../../derive'

export type TimeKind = 'impulse' | 'step'

/** The analog response over a span of time, as finely as it is drawn. */
interface AnalogCurve {
  readonly timesSeconds: Float64Array
  readonly values: Float64Array
  /** Area of the impulse that passes straight through at t = 0; it can't be drawn to scale. */
  readonly impulseArea: number
}

/** A digital version's samples from n = `first` on, at n/fs; an impulse response is divided by T, so that it compares with h(t). */
export interface DigitalSamples {
  readonly id: TraceId
  readonly first: number
  readonly sampleRateHz: number
  readonly values: Float64Array
  readonly stated: boolean
}

const POINTS_PER_SWING = 24
const LEAST_POINTS = 1024
const MOST_POINTS = 1 << 16
/** No more samples than this are computed for a picture. */
const MOST_SAMPLES = 1 << 22

const respond = (kind: TimeKind, filter: AnyFilter, grid: Parameters<typeof stepResponse>[1]) =>
  kind === 'impulse' ? impulseResponse(filter, grid) : stepResponse(filter, grid)

export function analogCurve(filter: Filter<'s'>, kind: TimeKind, [from, to]: Span): AnalogCurve {
  const start = Math.max(0, from)
  const fastestHz = filter.poles.reduce((most, { re, im }) => Math.max(most, Math.hypot(re, im)), 0) / (2 * Math.PI)
  const wanted = Math.ceil((to - start) * fastestHz * POINTS_PER_SWING)
  const count = Math.min(MOST_POINTS, Math.max(LEAST_POINTS, wanted))
  const { timesSeconds, values, impulseArea } = respond(kind, filter, {
    count,
    startSeconds: start,
    stepSeconds: (to - start) / (count - 1),
  })
  if (from >= 0) return { timesSeconds, values, impulseArea }
  // Nothing happens before t = 0; what jumps there, jumps upright.
  return {
    timesSeconds: Float64Array.from([from, 0, ...timesSeconds]),
    values: Float64Array.from([0, 0, ...values]),
    impulseArea,
  }
}

export function digitalSamples(
  filter: AnyDigital,
  id: TraceId,
  stated: boolean,
  kind: TimeKind,
  [from, to]: Span,
): DigitalSamples {
  const { sampleRateHz } = filter
  const first = Math.max(0, Math.floor(from * sampleRateHz) - 1)
  const end = Math.min(MOST_SAMPLES, Math.max(first, Math.ceil(to * sampleRateHz)) + 2)
  const shown = responseFromStart(kind, filter, end).slice(first, end)
  if (kind === 'impulse') for (let k = 0; k < shown.length; k++) shown[k] = (shown[k] ?? 0) * sampleRateHz
  return { id, first, sampleRateHz, values: shown, stated }
}

/** A recursion can only begin at n = 0: panning and zooming must not run it again and again. */
const kept = new WeakMap<AnyDigital, Partial<Record<TimeKind, Float64Array>>>()

function responseFromStart(kind: TimeKind, filter: AnyDigital, count: number): Float64Array {
  const known = kept.get(filter) ?? {}
  const before = known[kind]
  if (before && before.length >= count) return before
  // Some more than asked, so that the next few steps outwards find it done.
  const { values } = respond(kind, filter, {
    count: Math.min(MOST_SAMPLES, 2 * count),
    sampleRateHz: filter.sampleRateHz,
  })
  kept.set(filter, { ...known, [kind]: values })
  return values
}

export function timeCurves(versions: Versions, hidden: readonly TraceId[], kind: TimeKind, span: Span) {
  return {
    analog: hidden.includes('analog') || !versions.analog ? null : analogCurve(versions.analog, kind, span),
    digital: versions.digital
      .filter(({ id }) => !hidden.includes(id))
      .map(({ id, filter, stated }) => digitalSamples(filter, id, stated, kind, span)),
  }
}

export type TimeCurves = ReturnType<typeof timeCurves>

/** Every version's value at the sample `n`, the analog one's at the same instant. */
export function valuesAt(
  versions: Versions,
  curves: TimeCurves,
  kind: TimeKind,
  n: number,
  sampleRateHz: number,
): ReadonlyMap<TraceId, number> {
  const found = new Map<TraceId, number>()
  if (curves.analog && versions.analog) {
    const { values } = respond(kind, versions.analog, {
      count: 1,
      startSeconds: n / sampleRateHz,
      stepSeconds: 1 / sampleRateHz,
    })
    found.set('analog', values[0] ?? Number.NaN)
  }
  for (const { id, first, values } of curves.digital) found.set(id, values[n - first] ?? Number.NaN)
  return found
}

/** From the lowest to the highest value that has a say: the analog curve's and the stated version's. */
export function valueSpan({ analog, digital }: TimeCurves): Span {
  let low = 0
  let high = 0
  const take = (value: number) => {
    if (value < low) low = value
    if (value > high) high = value
  }
  analog?.values.forEach(take)
  const passesThrough = (analog?.impulseArea ?? 0) !== 0
  const telling = digital.some(({ stated }) => stated) ? digital.filter(({ stated }) => stated) : digital
  for (const { values, first } of telling) {
    values.forEach((value, k) => {
      // The sample that stands for the impulse passed straight through would flatten everything else.
      if (!(passesThrough && first + k === 0)) take(value)
    })
  }
  if (low === high) return [-1, 1]
  const room = (high - low) * 0.08
  return [low - room, high + room]
}
