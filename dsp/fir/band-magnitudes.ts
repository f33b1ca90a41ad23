import type { FirFilter } from '../forms/filter'
import { firMagnitudeDbInto } from '../response/fir'
import type { FirBand } from '../spec'

/** The least and the most |H| in a band, true to the response between the points of any grid. */
export interface BandMagnitude {
  /** As factors; of a differentiator, relative to the slope it is to have. */
  readonly least: number
  readonly most: number
  readonly leastHz: number
  readonly mostHz: number
}

/** Points to each swing that the filter can make; a parabola through three of them finds the peak between. */
const POINTS_PER_TAP = 6
const LEAST_POINTS = 24
/** Peaks that reach this part of the extreme may be it. */
const NEARLY = 0.8

/**
 * Extreme magnitudes of a filter in each of some bands: looked at closely enough that no ripple is missed, then refined at its peaks.
 *
 * @param isSlope whether |H| is taken relative to 2πf, as a differentiator is judged
 * @returns one entry a band
 */
export function firBandMagnitudes(
  filter: FirFilter,
  bands: readonly Pick<FirBand, 'fromHz' | 'toHz'>[],
  isSlope = false,
): BandMagnitude[] {
  return bands.map(({ fromHz, toHz }) => {
    const width = toHz - fromHz
    const swings = (width / filter.sampleRateHz) * filter.taps.length
    const count = Math.max(LEAST_POINTS, Math.ceil(swings * POINTS_PER_TAP)) + 1
    const hertz = Float64Array.from({ length: count }, (_, k) =>
      k === count - 1 ? toHz : fromHz + (width * k) / (count - 1),
    )
    // The quotient by 2πf has its limit at 0 Hz, and the next point is as good as it.
    if (isSlope && hertz[0] === 0) hertz[0] = hertz[1]! / 1024
    const values = magnitudes(filter, hertz, isSlope)
    const found = { least: Infinity, most: 0, leastHz: fromHz, mostHz: fromHz }
    const note = (value: number, at: number): void => {
      if (value < found.least) Object.assign(found, { least: value, leastHz: at })
      if (value > found.most) Object.assign(found, { most: value, mostHz: at })
    }
    hertz.forEach((at, k) => note(values[k]!, at))
    const vertices = turningPoints(hertz, values)
    const tops = magnitudes(filter, vertices, isSlope)
    tops.forEach((value, k) => note(value, vertices[k]!))
    // Beside a steep slope a ripple leans, and one parabola misses its top: those that may be the extreme get a narrower second one.
    const near = vertices.filter((_, k) => tops[k]! >= NEARLY * found.most || tops[k]! * NEARLY <= found.least)
    const aside = width / (count - 1) / 3
    const close = near.map((at) => Math.min(Math.max(at, fromHz + aside), toHz - aside))
    const triples = Float64Array.from(
      { length: 3 * close.length },
      (_, k) => close[Math.floor(k / 3)]! + ((k % 3) - 1) * aside,
    )
    const around = magnitudes(filter, triples, isSlope)
    around.forEach((value, k) => note(value, triples[k]!))
    const closer = Float64Array.from(
      close,
      (at, k) => at + aside * vertexOf(around[3 * k]!, around[3 * k + 1]!, around[3 * k + 2]!),
    )
    magnitudes(filter, closer, isSlope).forEach((value, k) => note(value, closer[k]!))
    return found
  })
}

function magnitudes(filter: FirFilter, hertz: Float64Array, isSlope: boolean): Float64Array {
  const out = new Float64Array(hertz.length)
  firMagnitudeDbInto(filter, hertz, out)
  return out.map((db, k) => 10 ** (db / 20) / (isSlope ? 2 * Math.PI * hertz[k]! : 1))
}

/** Vertices of the parabolas through each extreme and its neighbours. */
function turningPoints(hertz: Float64Array, values: Float64Array): Float64Array {
  const found: number[] = []
  for (let k = 1; k + 1 < values.length; k++) {
    const [left, here, right] = [values[k - 1]!, values[k]!, values[k + 1]!]
    if ((here - left) * (right - here) > 0) continue
    found.push(hertz[k]! + (vertexOf(left, here, right) * (hertz[k + 1]! - hertz[k - 1]!)) / 2)
  }
  return Float64Array.from(found)
}

/** Where the parabola through three values turns, −1 at the first, 1 at the last, and not beyond them. */
function vertexOf(left: number, here: number, right: number): number {
  const curve = left - 2 * here + right
  return curve === 0 ? 0 : Math.min(Math.max((left - right) / (2 * curve), -1), 1)
}
