import { fullCount, modulusRatio, repeated, upper, type HalfForm, type HalfRoots } from '../forms/zeros-poles-gain'
import { add, complex, divide, scale, squareRoot, subtract } from '../numeric/complex'
import type { Complex } from '../forms/filter'
import type { Prototype } from '../prototypes/prototype'

/*
 * Low-pass prototype (edge 1 rad/s) to the four responses, on the roots (A. G. Constantinides 1970; L. Weinberg 1962; Oppenheim &
 * Schafer 7.1). Frequencies may be in any unit, as long as all of them are in the same one.
 */

/** Where the band lies. `bandwidth` is given apart since high − low would lose digits for a narrow warped band. */
export interface Band {
  readonly low: number
  readonly high: number
  readonly bandwidth: number
}

/** Gain factor of the prototype itself: dcGain · ∏|poles| / ∏|zeros|. */
const leadingGain = (prototype: Prototype): number => prototype.dcGain * modulusRatio(prototype.poles, prototype.zeros)

/** s → s/edge. */
export function toLowpass(prototype: Prototype, edge: number): HalfForm {
  const zeros = prototype.zeros.map((root) => scale(root, edge))
  const poles = prototype.poles.map((root) => scale(root, edge))
  return { zeros, poles, gain: prototype.dcGain * modulusRatio(poles, zeros) }
}

/** s → edge/s. Zeros at infinity come to the origin; the gain at infinity is the prototype's gain at DC. */
export function toHighpass(prototype: Prototype, edge: number): HalfForm {
  const invert = (root: Complex) => upper(divide(complex(edge), root))
  const excess = fullCount(prototype.poles) - fullCount(prototype.zeros)
  return {
    zeros: [...prototype.zeros.map(invert), ...repeated(0, excess)],
    poles: prototype.poles.map(invert),
    gain: prototype.dcGain,
  }
}

/**
 * Both solutions of s² − 2·w·s + centre² = 0, in half form. The larger is found without cancellation and the other by
 * centre²/larger, which keeps the relative accuracy of the small real parts of a narrow band.
 */
function splitRoot(w: Complex, centre: number): Complex[] {
  const centreSquared = centre * centre
  if (w.im === 0) {
    const square = (w.re - centre) * (w.re + centre)
    if (square < 0) return [complex(w.re, Math.sqrt(-square))]
    const larger = w.re + (w.re < 0 ? -1 : 1) * Math.sqrt(square)
    return [complex(larger), complex(centreSquared / larger)]
  }
  // w² − centre², part by part: each keeps its digits for narrow bands and near |w| = centre alike.
  const root = squareRoot(complex((w.re - centre) * (w.re + centre) - w.im * w.im, 2 * w.re * w.im))
  const sameWay = root.re * w.re + root.im * w.im >= 0
  const larger = sameWay ? add(w, root) : subtract(w, root)
  return [upper(larger), upper(divide(complex(centreSquared), larger))]
}

const splitAll = (roots: HalfRoots, half: (root: Complex) => Complex, centre: number): Complex[] =>
  roots.flatMap((root) => splitRoot(half(root), centre))

/** s → (s² + centre²)/(bandwidth·s) with centre² = low·high. Zeros at infinity split between the origin and infinity. */
export function toBandpass(prototype: Prototype, band: Band): HalfForm {
  const centre = Math.sqrt(band.low) * Math.sqrt(band.high)
  const widen = (root: Complex) => scale(root, band.bandwidth / 2)
  const excess = fullCount(prototype.poles) - fullCount(prototype.zeros)
  return {
    zeros: [...splitAll(prototype.zeros, widen, centre), ...repeated(0, excess)],
    poles: splitAll(prototype.poles, widen, centre),
    gain: leadingGain(prototype) * band.bandwidth ** excess,
  }
}

/** s → bandwidth·s/(s² + centre²). Zeros at infinity come to ±j·centre. */
export function toBandstop(prototype: Prototype, band: Band): HalfForm {
  const centre = Math.sqrt(band.low) * Math.sqrt(band.high)
  const invert = (root: Complex) => upper(divide(complex(band.bandwidth / 2), root))
  const excess = fullCount(prototype.poles) - fullCount(prototype.zeros)
  return {
    zeros: [...splitAll(prototype.zeros, invert, centre), ...Array.from({ length: excess }, () => complex(0, centre))],
    poles: splitAll(prototype.poles, invert, centre),
    gain: prototype.dcGain,
  }
}
