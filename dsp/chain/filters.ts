import { designAnalog } from '../design-analog'
import { designFromSpec } from '../design'
import { discretize } from '../discretise/discretize'
import { designFir } from '../fir/design-fir'
import type { AnyDigital, DigitalFilter, Filter, FirFilter } from '../forms/filter'
import type { AnalogSpec, DesignSpec, FirSpec } from '../spec'
import { isFamilyDesign, isFirDesign } from '../spec-kinds'
import { referenceOfTarget } from '../targets/design-own'
import { compensationTaps, type CompensationRequest } from './compensation'

/*
 * Filters that a chain needs, made once for each statement: an edit of one stage leaves the others' filters, and with them their compiled
 * responses, as they are.
 */

/** More than the stages of a few chains and the steps of a drag. */
const MOST_KEPT = 256

const kept = new Map<string, unknown>()

/** The result for a statement, by its written form; what was asked for longest ago goes first. */
function keptFor<Result>(kind: string, statement: unknown, make: () => Result): Result {
  const key = `${kind} ${JSON.stringify(statement)}`
  const known = kept.get(key) as Result | undefined
  if (known !== undefined) {
    kept.delete(key)
    kept.set(key, known)
    return known
  }
  const fresh = make()
  kept.set(key, fresh)
  if (kept.size > MOST_KEPT) kept.delete(kept.keys().next().value as string)
  return fresh
}

/** @throws DesignError as designFir */
export const firOf = (fir: FirSpec, sampleRateHz: number): FirFilter =>
  keptFor('fir', [fir, sampleRateHz], () => designFir(fir, sampleRateHz))

/** @throws DesignError as designAnalog */
export const analogOf = (spec: AnalogSpec): Filter<'s'> => keptFor('analog', spec, () => designAnalog(spec))

/** The digital filter of a design. @throws DesignError as designFromSpec */
export const digitalOf = (spec: DesignSpec): AnyDigital => keptFor('digital', spec, () => designFromSpec(spec).digital)

/** The analog original of a design; null where it is not known by its roots. @throws DesignError as designFromSpec */
export function originalOf(spec: DesignSpec): Filter<'s'> | null {
  if (isFirDesign(spec)) return null
  if (isFamilyDesign(spec)) return analogOf(spec.analog)
  const { reference } = keptFor('original', spec.own, () => referenceOfTarget(spec.own))
  return reference.kind === 'analog' ? reference.filter : null
}

/** Butterworth high-pass at a rate, bilinear and exact at its corner. @throws DesignError as discretize */
export const digitalHighPassOf = (cornerHz: number, order: number, sampleRateHz: number): DigitalFilter =>
  keptFor('high-pass', [cornerHz, order, sampleRateHz], () =>
    discretize({ family: 'butterworth', response: 'highpass', order, edgesHz: [cornerHz] }, sampleRateHz, {
      method: 'bilinear',
      hold: 'edges',
    }),
  )

/** The filter that lifts a CIC filter's droop. */
export const compensationOf = (request: CompensationRequest): FirFilter =>
  keptFor('compensation', request, () => ({
    domain: 'z' as const,
    taps: compensationTaps(request),
    sampleRateHz: request.sampleRateHz,
    symmetry: 'even' as const,
    diagnostics: [],
  }))

/** The resonance of a sensor: H(s) = ω₀²/(s² + s·ω₀/Q + ω₀²), roots in rad/s. */
export const resonanceOf = (f0Hz: number, q: number): Filter<'s'> =>
  keptFor('resonance', [f0Hz, q], () => {
    const w = 2 * Math.PI * f0Hz
    const damping = w / (2 * q)
    const square = 1 - 1 / (4 * q * q)
    if (square > 0) {
      const im = w * Math.sqrt(square)
      const poles = [
        { re: -damping, im },
        { re: -damping, im: -im },
      ]
      return { domain: 's' as const, zeros: [], poles, gain: w * w }
    }
    // Two real poles, the nearer one from their product, which doesn't cancel.
    const far = damping + w * Math.sqrt(-square)
    const poles = [
      { re: -far, im: 0 },
      { re: -(w * w) / far, im: 0 },
    ]
    return { domain: 's' as const, zeros: [], poles, gain: w * w }
  })
