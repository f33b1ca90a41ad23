import { DesignError } from '../errors'
import { spectralWindow } from '../signal/windows'
import type { FirWindow } from '../spec'
import { mirrored, tapsFromAmplitude } from './linear-phase'

/*
 * Windows for filters, in their symmetric form: w[n] = w[N−1−n] to the last bit, the largest value 1.
 */

/**
 * Kaiser's β for an attenuation: 0 below 21 dB; 0.5842·(A−21)^0.4 + 0.07886·(A−21) to 50 dB; 0.1102·(A−8.7) above.
 *
 * @param attenuationDb how far down the stop band is to be; the pass-band error is as large
 * Source: J. F. Kaiser, Nonrecursive digital filter design using the I₀-sinh window function, Proc. IEEE ISCAS, 1974.
 */
export function kaiserBeta(attenuationDb: number): number {
  if (attenuationDb > 50) return 0.1102 * (attenuationDb - 8.7)
  if (attenuationDb < 21) return 0
  return 0.5842 * (attenuationDb - 21) ** 0.4 + 0.07886 * (attenuationDb - 21)
}

/**
 * Kaiser's estimate of the order N − 1, not rounded: (A − 7.95)/(14.36·Δf), and 0.9222/Δf below 21 dB.
 *
 * @param roomHz width of the room between two bands
 * @throws DesignError `not-positive`
 * Source: as {@link kaiserBeta}.
 */
export function kaiserOrder(attenuationDb: number, roomHz: number, sampleRateHz: number): number {
  if (!(roomHz > 0)) throw new DesignError('not-positive', 'roomHz', 'The room between two bands must be above 0 Hz.')
  const d = attenuationDb > 21 ? (attenuationDb - 7.95) / 14.36 : 0.9222
  return (d * sampleRateHz) / roomHz
}

/** I₀(x) by its power series, every term positive (Abramowitz & Stegun, 9.6.12). */
function besselI0(x: number): number {
  const quarter = (x * x) / 4
  let term = 1
  let sum = 1
  for (let k = 1; term > sum * 1e-17; k++) {
    term *= quarter / (k * k)
    sum += term
  }
  return sum
}

/** w[n] = I₀(β·√(1 − (2n/(N−1) − 1)²)) / I₀(β) for a given β. */
function kaiserWindow(taps: number, beta: number): Float64Array {
  const peak = besselI0(beta)
  const last = taps - 1
  return mirrored(
    Float64Array.from({ length: taps }, (_, n) =>
      Math.min(besselI0((2 * beta * Math.sqrt(n * (last - n))) / last) / peak, 1),
    ),
    'even',
  )
}

/**
 * The Dolph–Chebyshev window: the narrowest main lobe for side lobes all `attenuationDb` down. Its transform is T_{N−1}(x₀·cos(ω/2)) with
 * T_{N−1}(x₀) = 10^{A/20}.
 *
 * Source: C. L. Dolph, A current distribution for broadside arrays …, Proc. IRE 34, 1946; F. J. Harris, Proc. IEEE 66(1), 1978, §V.E.
 */
function dolphChebyshevWindow(taps: number, attenuationDb: number): Float64Array {
  const degree = taps - 1
  const x0 = Math.cosh(Math.acosh(10 ** (attenuationDb / 20)) / degree)
  const samples = Float64Array.from({ length: Math.floor(taps / 2) + 1 }, (_, k) => {
    const x = 2 * k === taps ? 0 : x0 * Math.cos((Math.PI * k) / taps)
    const value = x > 1 ? Math.cosh(degree * Math.acosh(x)) : Math.cos(degree * Math.acos(Math.max(x, 0)))
    return value * 10 ** (-attenuationDb / 20)
  })
  const window = tapsFromAmplitude(samples, taps, 'even')
  const peak = window.reduce((most, value) => Math.max(most, value), 0)
  return window.map((value) => value / peak)
}

/** Where the side lobes would no longer be told from rounding. */
const WINDOW_ATTENUATION_DB = [5, 250] as const

/**
 * A window of N values, symmetric.
 *
 * @param attenuationDb needed by the Kaiser window (attenuation of a filter made with it) and by the Dolph–Chebyshev window (how far its
 *   side lobes are down); the others have none
 * @throws DesignError `missing-attenuation`, `attenuation-out-of-range`, `taps-out-of-range`, `window`
 * Source: F. J. Harris, On the use of windows for harmonic analysis with the DFT, Proc. IEEE 66(1), 1978, in its symmetric form.
 */
export function firWindow(name: FirWindow, taps: number, attenuationDb?: number): Float64Array {
  if (!Number.isInteger(taps) || taps < 3) {
    throw new DesignError('taps-out-of-range', 'fir.taps', `A window has at least 3 values; ${taps} was given.`, 3)
  }
  switch (name) {
    case 'hann':
    case 'hamming':
    case 'blackman': {
      const window = new Float64Array(taps)
      // The symmetric form is one period of N − 1 and the value that begins the next; ends are 0 and the middle 1 but for rounding.
      window.set(spectralWindow(name, taps - 1).values.map((value) => Math.min(Math.max(value, 0), 1)))
      return mirrored(window, 'even')
    }
    case 'kaiser':
      return kaiserWindow(taps, kaiserBeta(checkedAttenuation(attenuationDb)))
    case 'dolph-chebyshev':
      return dolphChebyshevWindow(taps, checkedAttenuation(attenuationDb))
    default:
      throw new DesignError('window', 'fir.window', `There is no window named “${String(name)}”.`, 'kaiser')
  }
}

const USUAL_ATTENUATION_DB = 60

export function checkedAttenuation(attenuationDb: number | undefined): number {
  const [least, most] = WINDOW_ATTENUATION_DB
  if (attenuationDb === undefined) {
    throw new DesignError(
      'missing-attenuation',
      'fir.attenuationDb',
      `This window needs an attenuation in dB; ${USUAL_ATTENUATION_DB} dB is usual.`,
      USUAL_ATTENUATION_DB,
    )
  }
  if (attenuationDb >= least && attenuationDb <= most) return attenuationDb
  throw new DesignError(
    'attenuation-out-of-range',
    'fir.attenuationDb',
    `${least} dB ≤ attenuation ≤ ${most} dB for this window; ${attenuationDb} dB was given.`,
    Number.isNaN(attenuationDb) ? USUAL_ATTENUATION_DB : Math.min(Math.max(attenuationDb, least), most),
  )
}
