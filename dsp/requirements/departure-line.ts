import type { Design } from '../design'
import { isFir, type DigitalFilter, type Filter } from '../forms/filter'
import { departure, worstDeparture } from '../response/departure'
import { departureFrom } from '../response/departure-from-reference'
import { magnitudeDb } from '../response/frequency'
import { referenceMagnitudeDb } from '../response/reference'
import { USE_DEPTH_DB, useBandOf } from '../response/use-band'
import { bandGrid, largest, type Extreme } from './extremes'
import { hertz } from './line-words'
import type { Requirement } from './requirement'

/** What evaluation needs of a design. */
export type Judged = Pick<Design, 'reference' | 'digital'>

type DepartureLine = Extract<Requirement, { kind: 'magnitude-departure' | 'phase-departure' }>

/** Half-width of what is looked at again around the worst point, as a part of the band. */
const AROUND = 1 / 256

/** The worst departure from an analog original, closed in on where it was found. */
function fromAnalog(analog: Filter<'s'>, digital: DigitalFilter, line: DepartureLine): Extreme | string {
  const { fromHz, toHz, peakDb } = useBandOf(analog)
  if (line.upToHz <= fromHz) return `The analog original comes into use only at ${hertz(fromHz)}.`
  const removeDelay = line.kind === 'phase-departure' && line.removeDelay
  const worst = worstDeparture(analog, digital, line.upToHz, { removeDelay })
  const isLevel = line.kind === 'magnitude-departure'
  const found = isLevel ? { value: worst.db, hz: worst.atHz.db } : { value: worst.degrees, hz: worst.atHz.degrees }
  if (!Number.isFinite(found.value)) return found
  const width = (line.upToHz - fromHz) * AROUND
  const [low, high] = [Math.max(found.hz - width, fromHz), Math.min(found.hz + width, line.upToHz)]
  const closer = largest(
    (at) => {
      const { db, degrees } = departure(analog, digital, at)
      const analogDb = magnitudeDb(analog, at)
      // Deep notches don't count, as in worstDeparture.
      const counts = (n: number) => analogDb[n]! >= peakDb - USE_DEPTH_DB || at[n]! > toHz
      if (isLevel) return db.map((value, n) => (counts(n) ? Math.abs(value) : 0))
      return degrees.map((value, n) => (counts(n) ? Math.abs(value + 360 * at[n]! * worst.delaySeconds) : 0))
    },
    Float64Array.of(low, found.hz, high),
  )
  return closer.value > found.value ? closer : found
}

/** The worst departure from a measured table, or of or from what has no roots to compare by. */
function fromOther({ reference, digital }: Judged, line: DepartureLine): Extreme | string {
  const isLevel = line.kind === 'magnitude-departure'
  const band = [0, line.upToHz] as const
  const options = line.kind === 'phase-departure' && line.removeDelay ? { removeDelayOver: band } : {}
  const { delaySeconds } = departureFrom(reference, digital, [0], options)
  const rows = reference.kind === 'measured' ? [...reference.table.frequenciesHz] : []
  const inside = rows.filter((hz) => hz <= line.upToHz)
  const grid = Float64Array.from(new Set([...bandGrid(digital, ...band), ...inside])).sort()
  const sizes = (at: Float64Array): Float64Array => {
    const { db, degrees } = departureFrom(reference, digital, at)
    const wanted = referenceMagnitudeDb(reference, at)
    return Float64Array.from(at, (hz, n) => {
      const off = isLevel ? db[n]! : degrees[n]! + 360 * hz * delaySeconds
      // Where the reference says nothing or passes nothing, nothing departs from it.
      return Number.isNaN(off) || wanted[n] === -Infinity ? 0 : Math.abs(off)
    })
  }
  if (referenceMagnitudeDb(reference, grid).every((level) => Number.isNaN(level) || level === -Infinity)) {
    return `Up to ${hertz(line.upToHz)} nothing is stated to hold it against.`
  }
  return largest(sizes, grid)
}

/**
 * The worst departure that a line speaks of, from where the reference comes into use up to the line's frequency.
 * @returns value in dB or degrees and where it is; a sentence when it can't be judged
 */
export function departureExtreme(design: Judged, line: DepartureLine): (Extreme & { readonly note?: string }) | string {
  const { reference, digital } = design
  if (reference.kind === 'analog' && !isFir(digital)) return fromAnalog(reference.filter, digital, line)
  const found = fromOther(design, line)
  if (typeof found === 'string' || reference.kind !== 'ideal') return found
  return { ...found, note: 'Held against the stated ideal, there being no analog original.' }
}
