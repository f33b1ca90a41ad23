import { expand, fromHalf, fullCount, magnitudeAt, repeated, upper, type HalfForm } from '../forms/zeros-poles-gain'
import { exponential } from '../numeric/complex'
import type { Complex } from '../forms/filter'

export interface MatchedForm {
  readonly form: HalfForm
  /** Zeros put at z = −1: those at infinity, and those above half the rate, which e^{sT} would fold into the band. */
  readonly placed: { readonly fromInfinity: number; readonly fromAboveHalfRate: number }
  /** Poles above half the rate, which do fold. */
  readonly foldedPoles: number
}

const foldCount = (roots: readonly Complex[]) => expand(roots).filter((root) => Math.abs(root.im) > Math.PI).length

/**
 * Matched-z version: each finite pole and zero s goes to e^{sT}; zeros at infinity, and zeros above half the rate, go to z = −1, so that
 * a zero moving up through half the rate doesn't jump. The gain is set to the analog one at one frequency.
 * Source: R. M. Golden & J. F. Kaiser, Bell Syst. Tech. J. 43, 1964; zeros at infinity to −1: G. F. Franklin, J. D. Powell & M. Workman,
 * Digital Control of Dynamic Systems, ch. 6.
 *
 * @param form analog filter in rad per sample
 * @param matchAt rad per sample where the gains agree: 0, the centre, or π
 */
export function matchedZ(form: HalfForm, matchAt: number): MatchedForm {
  const excess = fullCount(form.poles) - fullCount(form.zeros)
  const inside = form.zeros.filter((zero) => zero.im < Math.PI)
  const above = fullCount(form.zeros) - fullCount(inside)
  const mapped: HalfForm = {
    zeros: [...inside.map(exponential), ...repeated(-1, excess + above)],
    poles: form.poles.map((pole) => upper(exponential(pole))),
    gain: 1,
  }
  // At DC and at half the rate the circle is met exactly, where cos and sin would leave a residue.
  const point =
    matchAt === 0
      ? { re: 1, im: 0 }
      : matchAt === Math.PI
        ? { re: -1, im: 0 }
        : { re: Math.cos(matchAt), im: Math.sin(matchAt) }
  const wanted = magnitudeAt(fromHalf('s', form), { re: 0, im: matchAt })
  const gain = wanted / magnitudeAt(fromHalf('z', mapped), point)
  return {
    form: { ...mapped, gain },
    placed: { fromInfinity: excess, fromAboveHalfRate: above },
    foldedPoles: foldCount(form.poles),
  }
}
