import {
  isFamilyDesign,
  isFirDesign,
  isOwnDesign,
  type AnalogSpec,
  type DesignSpec,
  type Family,
  type FamilyDesign,
  type MethodName,
  type OwnDesign,
  type OwnTarget,
  type ResponseKind,
} from '@/dsp'
import { firRescaled } from './fir-edits'
import { commonOf, edgesHzOf, highestEdgeHz, responseOf } from './outline'

/*
 * What happens to the rest of a statement when one word changes: the parts that the new word needs are filled with sensible values,
 * the parts that it has no use for are let go. Whether the result makes a filter is for dsp to say.
 */

export const defaultSpec: FamilyDesign = {
  format: 1,
  analog: { family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [120] },
  sampleRateHz: 1200,
  how: { method: 'bilinear', hold: 'edges' },
  budget: { magnitudeDb: 0.1, phaseDegrees: 1, removeDelay: false },
}

export function withFamily(spec: DesignSpec, family: Family): FamilyDesign {
  const start = asFamilyDesign(spec)
  const { response, order, edgesHz, rippleDb, attenuationDb, normalization } = start.analog
  const ripple = family === 'chebyshev1' || family === 'elliptic' ? { rippleDb: rippleDb ?? 0.5 } : {}
  const attenuation = family === 'chebyshev2' || family === 'elliptic' ? { attenuationDb: attenuationDb ?? 60 } : {}
  const normal = family === 'bessel' ? { normalization: normalization ?? ('magnitude' as const) } : {}
  return { ...start, analog: { family, response, order, edgesHz, ...ripple, ...attenuation, ...normal } }
}

/** Any design as one of a family: the response and the edges stay as far as a family can have them. */
function asFamilyDesign(spec: DesignSpec): FamilyDesign {
  if (isFamilyDesign(spec)) return spec
  const common = commonOf(spec)
  const found = responseOf(spec)
  const response: ResponseKind =
    found === 'own' || found === 'multiband' || found === 'differentiator' ? 'lowpass' : found
  const edges = edgesHzOf(spec)
  const first = edges[0] ?? spec.sampleRateHz / 10
  const last = edges.at(-1) ?? first
  const isBand = response === 'bandpass' || response === 'bandstop'
  // Of the bands that a FIR filter states, the edges of what passes.
  const passes = isFirDesign(spec) ? spec.fir.bands.filter(({ gain }) => gain !== 0) : []
  const [low, high] =
    response === 'bandstop'
      ? [passes[0]?.toHz ?? first, passes.at(-1)?.fromHz ?? last]
      : [passes[0]?.fromHz ?? first, passes[0]?.toHz ?? last]
  const edgesHz = isBand ? [low, high] : [isOwnDesign(spec) ? first : response === 'highpass' ? low : high]
  return {
    ...common,
    analog: { family: 'butterworth', response, order: 4, edgesHz },
    how: isOwnDesign(spec) && spec.own.given !== 'measured' && spec.how.method !== 'bilinear' ? spec.how : usualHow,
  }
}

const usualHow = { method: 'bilinear', hold: 'edges' } as const

export function withResponse(spec: FamilyDesign, response: ResponseKind): FamilyDesign {
  const { analog } = spec
  const wasBand = analog.edgesHz.length === 2
  const isBand = response === 'bandpass' || response === 'bandstop'
  const [first = 1, second = first] = analog.edgesHz
  if (isBand === wasBand) return withAnalog(spec, { response })
  if (isBand) {
    // The one edge there was becomes the upper one, and the band reaches two octaves down.
    return withAnalog(spec, { response, edgesHz: [first / 4, first] })
  }
  return withAnalog(spec, { response, edgesHz: [response === 'lowpass' ? second : first] })
}

export function withMethod(spec: FamilyDesign | OwnDesign, method: MethodName): DesignSpec {
  if (spec.how.method === method) return spec
  switch (method) {
    case 'bilinear':
      return { ...spec, how: { method, hold: isOwnDesign(spec) ? 'none' : 'edges' } }
    case 'fitted':
      return { ...spec, how: { method, upToHz: usualFitHz(spec) } }
    default:
      return { ...spec, how: { method } }
  }
}

export function withHold<Spec extends FamilyDesign | OwnDesign>(spec: Spec, hold: 'edges' | 'none' | number): Spec {
  return { ...spec, how: { method: 'bilinear', hold } }
}

export function withEdge(spec: FamilyDesign, index: 0 | 1, hertz: number): FamilyDesign {
  return withAnalog(spec, { edgesHz: spec.analog.edgesHz.map((edge, at) => (at === index ? hertz : edge)) })
}

export function withAnalog(spec: FamilyDesign, change: Partial<AnalogSpec>): FamilyDesign {
  return { ...spec, analog: { ...spec.analog, ...change } }
}

/** A design of the user's own original; a measured one can only be fitted. */
export function withOwn(spec: DesignSpec, own: OwnTarget): OwnDesign {
  const next: OwnDesign = { ...commonOf(spec), own, how: { method: 'bilinear', hold: 'none' } }
  if (own.given !== 'measured') {
    if (isFirDesign(spec) || (spec.how.method === 'bilinear' && spec.how.hold === 'edges')) return next
    if (spec.how.method !== 'fitted') return { ...next, how: spec.how }
    // A fit stays one, with as many poles as the new original has.
    const { method, upToHz, freeDelay } = spec.how
    return { ...next, how: { method, upToHz, ...(freeDelay === undefined ? {} : { freeDelay }) } }
  }
  const order = isOwnDesign(spec) && spec.how.method === 'fitted' ? (spec.how.order ?? 4) : 4
  return { ...next, how: { method: 'fitted', upToHz: usualFitHz(next), order } }
}

/** At another rate; a band of an FIR filter that reached up to half the old one reaches up to half the new one. */
export function withRate<Spec extends DesignSpec>(spec: Spec, sampleRateHz: number): Spec {
  return isFirDesign(spec) ? { ...spec, sampleRateHz, fir: firRescaled(spec, sampleRateHz) } : { ...spec, sampleRateHz }
}

/** The frequency that a newly chosen "held at a frequency" starts with: the edge, or the geometric centre of the band. */
export function usualHoldHz(spec: DesignSpec): number {
  const edges = edgesHzOf(spec)
  const first = edges[0] ?? 1
  return Math.sqrt(first * (edges.at(-1) ?? first))
}

/** A fit that reaches half as far again as the band costs the band nothing; one that reaches for the fold line does. */
const FIT_REACH = 1.5
/** Of a high-pass, which is in use above its edge alone. */
const HIGHPASS_FIT_REACH = 4
const MOST_OF_FOLD = 0.8

/** Up to where a version is fitted at first: somewhat above the highest edge, but not into the last fifth below the fold line. */
export function usualFitHz(spec: DesignSpec): number {
  const fold = spec.sampleRateHz / 2
  const measuredTo = isOwnDesign(spec) && spec.own.given === 'measured' ? (spec.own.rows.at(-1)?.[0] ?? fold) : fold
  const reach = responseOf(spec) === 'highpass' ? HIGHPASS_FIT_REACH : FIT_REACH
  const wanted = isOwnDesign(spec) && spec.own.given === 'measured' ? highestEdgeHz(spec) : highestEdgeHz(spec) * reach
  return Number(Math.min(wanted, MOST_OF_FOLD * fold, measuredTo).toPrecision(4))
}
