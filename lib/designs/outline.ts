import { isFamilyDesign, isFirDesign, type DesignSpec, type OwnTarget } from '@/dsp'

/*
 * What every design has, whichever of its three kinds it is: the frequencies that it turns on, and the band that it passes.
 */

/** What every kind of design has, kept when one kind becomes another. */
export const commonOf = ({ format, sampleRateHz, budget, sheet }: DesignSpec) => ({
  format,
  sampleRateHz,
  budget,
  ...(sheet === undefined ? {} : { sheet }),
})

export type ResponseName = 'lowpass' | 'highpass' | 'bandpass' | 'bandstop' | 'multiband' | 'differentiator' | 'own'

export function responseOf(spec: DesignSpec): ResponseName {
  if (isFamilyDesign(spec)) return spec.analog.response
  return isFirDesign(spec) ? spec.fir.response : 'own'
}

/** The frequencies between bands, rising; for a response of the user's own the lowest and highest that it says anything about. */
export function edgesHzOf(spec: DesignSpec): readonly number[] {
  if (isFamilyDesign(spec)) return spec.analog.edgesHz
  const fold = spec.sampleRateHz / 2
  if (isFirDesign(spec)) {
    const inside = spec.fir.bands.flatMap(({ fromHz, toHz }) => [fromHz, toHz]).filter((hz) => hz > 0 && hz < fold)
    return inside.length > 0 ? inside : [fold / 2]
  }
  return spanOf(spec.own, fold)
}

function spanOf(own: OwnTarget, fold: number): readonly [number, number] {
  const found =
    own.given === 'measured'
      ? own.rows.map(([hz]) => hz)
      : own.given === 'roots'
        ? [...own.poles, ...own.zeros].map(({ re, im }) => Math.hypot(re, im) / (2 * Math.PI))
        : [rootScale(own.denominator) / (2 * Math.PI)]
  const telling = found.filter((hz) => hz > 0 && Number.isFinite(hz))
  if (telling.length === 0) return [fold / 20, fold / 2]
  return [Math.min(...telling), Math.max(...telling)]
}

/** Geometric mean of the roots' moduli, from the first and the last coefficient. */
function rootScale(denominator: readonly number[]): number {
  const first = denominator.findIndex((value) => value !== 0)
  const last = denominator.findLastIndex((value) => value !== 0)
  if (first < 0 || last <= first) return 0
  return Math.abs((denominator[last] ?? 0) / (denominator[first] ?? 1)) ** (1 / (last - first))
}

export const lowestEdgeHz = (spec: DesignSpec): number => Math.min(...edgesHzOf(spec))
export const highestEdgeHz = (spec: DesignSpec): number => Math.max(...edgesHzOf(spec))

/** The pass band, as far as there is one below the fold line: over it the best constant delay is fitted, in it delay is read. */
export function passBandOf(spec: DesignSpec): readonly [number, number] {
  const fold = spec.sampleRateHz / 2
  if (isFirDesign(spec)) {
    const kept = spec.fir.bands.find(({ gain }) => gain !== 0)
    return kept ? [kept.fromHz, Math.min(kept.toHz, fold)] : [0, fold / 2]
  }
  const [first = 1, second = first] = edgesHzOf(spec)
  if (!isFamilyDesign(spec)) return [spec.own.given === 'measured' ? first : 0, Math.min(second, 0.9 * fold)]
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

/** Where one delay is read to stand for the design: at DC, an octave into a high-pass band, or in the middle of a band. */
export function delayReadAtHz(spec: DesignSpec): number {
  const response = responseOf(spec)
  if (response === 'highpass') return Math.min(2 * highestEdgeHz(spec), spec.sampleRateHz * 0.45)
  const [from, to] = passBandOf(spec)
  return from === 0 ? 0 : Math.sqrt(from * to)
}
