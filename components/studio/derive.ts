import {
  DesignError,
  departure,
  discretize,
  frequencyResponse,
  groupDelay,
  magnitudeDb,
  phaseResponse,
  trustedBand,
  type Departure,
  type Method,
  type DesignSpec,
  type DigitalFilter,
  type Filter,
  type MethodName,
} from '@/dsp'
import { methodLabels, methodNames } from '@/lib/designs/words'
import { orRefusal } from './or-refusal'
import { statedDesign } from './stated-design'
import type { StackView, Trace } from './view'

/** The analog prototype and every digital version of it that can be had. */
export interface Versions {
  readonly analog: Filter<'s'>
  readonly digital: readonly { readonly id: MethodName; readonly filter: DigitalFilter; readonly stated: boolean }[]
  /** Methods that refuse this prototype, and why. */
  readonly refused: readonly { readonly id: MethodName; readonly message: string }[]
}

/** A method as the studio runs it beside the stated one: as stated, or with its usual options. */
export function methodAsShown(spec: DesignSpec, id: MethodName): Method {
  if (spec.how.method === id) return spec.how
  return id === 'bilinear' ? { method: id, hold: 'edges' } : { method: id }
}

/** The versions of a spec, the stated one always and the others as wanted; null while the spec makes no design. */
export function deriveVersions(spec: DesignSpec, wanted: readonly MethodName[] = methodNames): Versions | null {
  const design = statedDesign(spec)
  if (design instanceof DesignError) return null
  const digital: Versions['digital'][number][] = []
  const refused: Versions['refused'][number][] = []
  for (const id of methodNames) {
    if (id !== spec.how.method && !wanted.includes(id)) continue
    if (id === spec.how.method) {
      digital.push({ id, filter: design.digital, stated: true })
      continue
    }
    const filter = orRefusal(() => discretize(spec.analog, spec.sampleRateHz, methodAsShown(spec, id)))
    if (filter instanceof DesignError) refused.push({ id, message: filter.message })
    else digital.push({ id, filter, stated: false })
  }
  return { analog: design.analog, digital, refused }
}

/** The part of the view that curves depend on; the crosshair and the rest don't touch them. */
export type CurveView = Pick<StackView, 'fromHz' | 'toHz' | 'logFrequency' | 'removeDelay' | 'hidden'>

/** How finely curves are drawn: at rest, and while the hand moves and the frame counts. */
export const curvePoints = { atRest: 1024, inMotion: 360 } as const

/** The frequencies a curve is computed at: even on the axis as drawn, with the edges and the last frequency met exactly. */
function frequencyGrid(view: CurveView, points: number, upToHz: number, exactly: readonly number[] = []): Float64Array {
  const toHz = Math.min(view.toHz, upToHz)
  const fromHz = Math.min(view.fromHz, toHz)
  const axis = view.logFrequency
    ? (part: number) => fromHz * (toHz / fromHz) ** part
    : (part: number) => fromHz + (toHz - fromHz) * part
  const grid = Float64Array.from({ length: points }, (_, index) => axis(index / (points - 1)))
  grid[points - 1] = toHz
  const extra = exactly.filter((hertz) => hertz > fromHz && hertz < toHz)
  return extra.length === 0 ? grid : Float64Array.from([...grid, ...extra]).sort()
}

/** The band over which the best constant delay is fitted: the pass band, as far as there is one below the fold line. */
export function delayBand(spec: DesignSpec): readonly [number, number] {
  const [first = 1, second = first] = spec.analog.edgesHz
  const fold = spec.sampleRateHz / 2
  switch (spec.analog.response) {
    case 'lowpass':
    case 'bandstop':
      return [0, first]
    case 'highpass':
      return [first, Math.min(10 * first, Math.max(0.8 * fold, (first + fold) / 2))]
    case 'bandpass':
      return [first, second]
  }
}

export function deriveTraces(
  spec: DesignSpec,
  versions: Versions,
  view: CurveView,
  points: number = curvePoints.atRest,
): readonly Trace[] {
  const analogGrid = frequencyGrid(view, points, Infinity, spec.analog.edgesHz)
  const analog: Trace = {
    id: 'analog',
    label: 'analog',
    frequenciesHz: analogGrid,
    magnitudeDb: magnitudeDb(versions.analog, analogGrid),
    phaseRadians: phaseResponse(versions.analog, analogGrid),
    groupDelaySeconds: groupDelay(versions.analog, analogGrid),
    departure: null,
    stated: false,
    image: null,
  }
  const fold = spec.sampleRateHz / 2
  const grid = frequencyGrid(view, points, fold, spec.analog.edgesHz)
  const beyond = view.toHz > fold ? analogGrid.filter((hertz) => hertz >= fold) : null
  const digital = versions.digital
    .filter(({ id }) => !view.hidden.includes(id))
    .map(({ id, filter, stated }): Trace => ({
      id,
      label: methodLabels[id],
      frequenciesHz: grid,
      magnitudeDb: magnitudeDb(filter, grid),
      phaseRadians: phaseResponse(filter, grid),
      groupDelaySeconds: groupDelay(filter, grid),
      departure: departureOf(spec, versions.analog, filter, grid, view.removeDelay),
      stated,
      image: beyond ? { frequenciesHz: beyond, magnitudeDb: magnitudeDb(filter, beyond) } : null,
    }))
  return [analog, ...digital]
}

/** Departure with the best delay removed, or without where the band leaves no room to fit one. */
function departureOf(
  spec: DesignSpec,
  analog: Filter<'s'>,
  filter: DigitalFilter,
  grid: Float64Array,
  removeDelay: boolean,
): Departure {
  const removed = removeDelay
    ? orRefusal(() => departure(analog, filter, grid, { removeDelayOver: delayBand(spec) }))
    : null
  return removed === null || removed instanceof DesignError ? departure(analog, filter, grid, {}) : removed
}

export interface Trust {
  readonly id: MethodName
  readonly fromHz: number
  readonly upToHz: number
  readonly limitedBy: 'magnitude' | 'phase' | 'half the rate'
  readonly delaySeconds: number
}

/** How far each version may be trusted, the farthest first. */
export function deriveTrust(spec: DesignSpec, versions: Versions): readonly Trust[] {
  return versions.digital
    .flatMap(({ id, filter }) => {
      const band = orRefusal(() => trustedBand(versions.analog, filter, spec.budget))
      return band instanceof DesignError ? [] : [{ id, ...band }]
    })
    .sort((left, right) => right.upToHz - left.upToHz)
}

/** Figures under the statement, of the version it names. */
export function deriveFigures(spec: DesignSpec, versions: Versions) {
  const stated = versions.digital.find((version) => version.stated)?.filter
  const [first = 1, second = first] = spec.analog.edgesHz
  const isLowSide = spec.analog.response === 'lowpass' || spec.analog.response === 'bandstop'
  const delayAtHz = isLowSide
    ? 0
    : spec.analog.response === 'highpass'
      ? Math.min(2 * first, spec.sampleRateHz * 0.45)
      : Math.sqrt(first * second)
  const highestEdge = Math.max(...spec.analog.edgesHz)
  return {
    /** Half the rate over the highest edge. */
    oversampling: spec.sampleRateHz / 2 / highestEdge,
    delayAtHz,
    delaySeconds: stated ? (groupDelay(stated, [delayAtHz])[0] ?? Number.NaN) : Number.NaN,
    edgeMagnitudesDb: stated ? spec.analog.edgesHz.map((hertz) => magnitudeOf(stated, hertz)) : [],
  }
}

function magnitudeOf(filter: DigitalFilter, hertz: number): number {
  const { re, im } = frequencyResponse(filter, [hertz])
  return 20 * Math.log10(Math.hypot(re[0] ?? Number.NaN, im[0] ?? Number.NaN))
}
