import {
  DesignError,
  departure,
  departureFrom,
  designFromSpec,
  frequencyResponse,
  groupDelay,
  isFir,
  isFirDesign,
  isOwnDesign,
  magnitudeDb,
  phaseResponse,
  referenceDelay,
  referenceMagnitudeDb,
  referencePhase,
  trustedBand,
  type AnyDigital,
  type Departure,
  type DesignSpec,
  type Filter,
  type Method,
  type MethodName,
  type Reference,
} from '@/dsp'
import { usualFitHz } from '@/lib/designs/edits'
import { delayReadAtHz, edgesHzOf, highestEdgeHz, passBandOf } from '@/lib/designs/outline'
import { methodNames, versionLabels, type VersionId } from '@/lib/designs/words'
import { orRefusal } from './or-refusal'
import { statedDesign } from './stated-design'
import type { StackView, Trace, TraceId } from './view'

/** What a design is held against and every digital version of it that can be had. */
export interface Versions {
  readonly reference: Reference
  /** The analog original where it is known by its roots. */
  readonly analog: Filter<'s'> | null
  readonly digital: readonly { readonly id: VersionId; readonly filter: AnyDigital; readonly stated: boolean }[]
  /** Methods that refuse this original, and why. */
  readonly refused: readonly { readonly id: VersionId; readonly message: string }[]
}

/** A method as the studio runs it beside the stated one: as stated, or with its usual options. */
export function methodAsShown(spec: Exclude<DesignSpec, { fir: unknown }>, id: MethodName): Method {
  if (spec.how.method === id) return spec.how
  if (id === 'fitted') return { method: id, upToHz: usualFitHz(spec) }
  return id === 'bilinear' ? { method: id, hold: isOwnDesign(spec) ? 'none' : 'edges' } : { method: id }
}

export const statedId = (spec: DesignSpec): VersionId => (isFirDesign(spec) ? 'fir' : spec.how.method)

/** The versions of a spec, the stated one always and the others as wanted; null while the spec makes no design. */
export function deriveVersions(spec: DesignSpec, wanted: readonly MethodName[] = methodNames): Versions | null {
  const design = statedDesign(spec)
  if (design instanceof DesignError) return null
  const { reference, analog, digital: filter } = design
  if (isFirDesign(spec)) {
    return { reference, analog, digital: [{ id: 'fir', filter, stated: true }], refused: [] }
  }
  const digital: Versions['digital'][number][] = []
  const refused: Versions['refused'][number][] = []
  for (const id of methodNames) {
    if (id === spec.how.method) digital.push({ id, filter, stated: true })
    else if (wanted.includes(id)) {
      const other = orRefusal(() => designFromSpec({ ...spec, how: methodAsShown(spec, id) } as DesignSpec))
      if (other instanceof DesignError) refused.push({ id, message: other.message })
      else digital.push({ id, filter: other.digital, stated: false })
    }
  }
  return { reference, analog, digital, refused }
}

/** The part of the view that curves depend on; the crosshair and the rest don't touch them. */
export type CurveView = Pick<StackView, 'fromHz' | 'toHz' | 'logFrequency' | 'removeDelay' | 'hidden'>

/** How finely curves are drawn: at rest, and while the hand moves and the frame counts. */
export const curvePoints = { atRest: 1024, inMotion: 200 } as const

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

const referenceLabels: Record<Reference['kind'], string> = {
  analog: 'analog',
  measured: 'measured',
  ideal: 'ideal',
}

export function deriveTraces(
  spec: DesignSpec,
  versions: Versions,
  view: CurveView,
  points: number = curvePoints.atRest,
): readonly Trace[] {
  const edges = edgesHzOf(spec)
  const inkGrid = frequencyGrid(view, points, Infinity, edges)
  const { reference } = versions
  const ink: Trace = {
    id: 'analog',
    label: referenceLabels[reference.kind],
    frequenciesHz: inkGrid,
    magnitudeDb: referenceMagnitudeDb(reference, inkGrid),
    phaseRadians: referencePhase(reference, inkGrid),
    groupDelaySeconds: referenceDelay(reference, inkGrid),
    departure: null,
    stated: false,
    image: null,
  }
  const fold = spec.sampleRateHz / 2
  const grid = frequencyGrid(view, points, fold, edges)
  const beyond = view.toHz > fold ? inkGrid.filter((hertz) => hertz >= fold) : null
  const digital = versions.digital
    .filter(({ id }) => !view.hidden.includes(id))
    .map(({ id, filter, stated }): Trace => ({
      id,
      label: versionLabels[id],
      ...curvesOf(filter, grid),
      departure: departureOf(spec, versions, filter, grid, view.removeDelay),
      stated,
      image: beyond ? { frequenciesHz: beyond, magnitudeDb: magnitudeDb(filter, beyond) } : null,
    }))
  return [ink, ...digital]
}

/** A version that has its place in the legend and no curve yet. */
export function waitingTrace(id: TraceId): Trace {
  const nothing = new Float64Array(0)
  return {
    id,
    label: id === 'analog' || id === 'candidate' ? id : versionLabels[id],
    frequenciesHz: nothing,
    magnitudeDb: nothing,
    phaseRadians: nothing,
    groupDelaySeconds: nothing,
    departure: null,
    stated: false,
    image: null,
  }
}

/** Another design's curve to hold beside this one. */
export function deriveCandidateTrace(
  held: { readonly label: string; readonly spec: DesignSpec },
  view: CurveView,
  points: number = curvePoints.atRest,
): Trace | null {
  const design = statedDesign(held.spec)
  if (design instanceof DesignError) return null
  const grid = frequencyGrid(view, points, held.spec.sampleRateHz / 2, edgesHzOf(held.spec))
  return {
    id: 'candidate',
    label: held.label,
    ...curvesOf(design.digital, grid),
    departure: departureOf(held.spec, design, design.digital, grid, view.removeDelay),
    stated: false,
    image: null,
  }
}

const curvesOf = (filter: AnyDigital, grid: Float64Array) => ({
  frequenciesHz: grid,
  magnitudeDb: magnitudeDb(filter, grid),
  phaseRadians: phaseResponse(filter, grid),
  groupDelaySeconds: groupDelay(filter, grid),
})

/** Departure with the best delay removed, or without where the band leaves no room to fit one. */
function departureOf(
  spec: DesignSpec,
  { reference, analog }: Pick<Versions, 'reference' | 'analog'>,
  filter: AnyDigital,
  grid: Float64Array,
  removeDelay: boolean,
): Departure {
  const from = (options: { removeDelayOver?: readonly [number, number] }) =>
    analog && !isFir(filter)
      ? departure(analog, filter, grid, options)
      : departureFrom(reference, filter, grid, options)
  const removed = removeDelay ? orRefusal(() => from({ removeDelayOver: passBandOf(spec) })) : null
  return removed === null || removed instanceof DesignError ? from({}) : removed
}

export interface Trust {
  readonly id: VersionId
  readonly fromHz: number
  readonly upToHz: number
  readonly limitedBy: 'magnitude' | 'phase' | 'half the rate'
  readonly delaySeconds: number
}

/** How far each version may be trusted, the farthest first; nothing is said where there is no analog original to trust it against. */
export function deriveTrust(spec: DesignSpec, { analog, digital }: Versions): readonly Trust[] {
  if (!analog) return []
  return digital
    .flatMap(({ id, filter }) => {
      if (isFir(filter)) return []
      const band = orRefusal(() => trustedBand(analog, filter, spec.budget))
      return band instanceof DesignError ? [] : [{ id, ...band }]
    })
    .sort((left, right) => right.upToHz - left.upToHz)
}

/** Figures under the statement, of the version it names. */
export function deriveFigures(spec: DesignSpec, versions: Versions) {
  const stated = versions.digital.find((version) => version.stated)?.filter
  const delayAtHz = delayReadAtHz(spec)
  return {
    /** Half the rate over the highest edge. */
    oversampling: spec.sampleRateHz / 2 / highestEdgeHz(spec),
    delayAtHz,
    delaySeconds: stated ? (groupDelay(stated, [delayAtHz])[0] ?? Number.NaN) : Number.NaN,
    edgeMagnitudesDb: stated ? edgesHzOf(spec).map((hertz) => magnitudeOf(stated, hertz)) : [],
  }
}

function magnitudeOf(filter: AnyDigital, hertz: number): number {
  const { re, im } = frequencyResponse(filter, [hertz])
  return 20 * Math.log10(Math.hypot(re[0] ?? Number.NaN, im[0] ?? Number.NaN))
}
