import { designAnalog } from '../design-analog'
import { DesignError } from '../errors'
import { toHalf } from '../forms/zeros-poles-gain'
import { departureCurve, analogCurve, bestDelay } from '../response/departure-curve'
import { departureGrid } from '../response/departure-grid'
import { useBandOf } from '../response/use-band'
import type { FamilyDesign, Method, OwnDesign } from '../spec'
import { isFamilyDesign } from '../spec-kinds'
import { referenceOfTarget, designOwn } from '../targets/design-own'
import { discretize } from './discretize'
import { judged } from './fitted'
import { targetOf } from './fitted-target'
import { originalOfFamily, originalOfRoots } from './original'
import { fromHalf } from '../forms/zeros-poles-gain'
import type { DigitalFilter, Filter } from '../forms/filter'

export type Rival = 'fitted' | 'bilinear' | 'matched-z'

/** The worst departures of one version inside the band of the fit. */
export interface RivalDeparture {
  readonly method: Rival
  readonly db: number
  readonly degrees: number
  /** Largest error as the fit weighs it; 0.01 is about 0.09 dB or 0.6° where the filter is in use. */
  readonly error: number
  readonly atHz: { readonly db: number; readonly degrees: number }
  readonly delaySeconds: number
}

export interface FittedAdvantage {
  readonly fromHz: number
  readonly upToHz: number
  /** Whether the best constant delay of each version was taken off. */
  readonly removeDelay: boolean
  /** Departures are judged where the original is within this many dB of its peak. */
  readonly depthDb: number
  /** Fitted, bilinear (held at the edges where there are any), matched-z, in this order. */
  readonly versions: readonly RivalDeparture[]
  /** The method with the least of each. */
  readonly best: { readonly db: Rival; readonly degrees: Rival; readonly error: Rival }
  /** Whether the fitted version has the least error by a hundredth at least. */
  readonly isAdvantage: boolean
}

const DEPTH_DB = 60
const EVEN_POINTS = 256
const DEGREES = 180 / Math.PI
const TURN = 2 * Math.PI
const NOTICED = 0.99

type Fitted = Extract<Method, { method: 'fitted' }>

function worstOf(analog: Filter<'s'>, digital: DigitalFilter, fromHz: number, upToHz: number, removeDelay: boolean) {
  const grid = departureGrid(fromHz, upToHz, analog, digital, EVEN_POINTS)
  const curve = analogCurve(analog, grid)
  const floor = useBandOf(analog).peakDb - DEPTH_DB
  const counts = curve.counts.map((one, n) => (curve.db[n]! >= floor ? one : 0))
  const { db, radians } = departureCurve(analog, curve, { by: 'roots', filter: digital })
  const delaySeconds = removeDelay ? bestDelay(grid, radians, counts) : 0
  const worst = { db: 0, degrees: 0, atHz: { db: fromHz, degrees: fromHz }, delaySeconds }
  counts.forEach((one, n) => {
    if (one !== 1) return
    const level = Math.abs(db[n]!)
    const angle = Math.abs(radians[n]! + TURN * grid[n]! * delaySeconds) * DEGREES
    if (level > worst.db) [worst.db, worst.atHz.db] = [level, grid[n]!]
    if (angle > worst.degrees) [worst.degrees, worst.atHz.degrees] = [angle, grid[n]!]
  })
  return worst
}

/**
 * What the fitted version is worth: its worst departures inside the band of its fit beside those of the bilinear and the matched-z version.
 *
 * @param spec a design by a family or by roots or polynomials of the user's own; its own method doesn't matter
 * @param fit the fit; by default that of the design
 * @throws DesignError as for the fitted version; `no-rivals` for a measured original, which has no other version
 */
export function fittedAdvantage(spec: FamilyDesign | OwnDesign, fit?: Fitted): FittedAdvantage {
  const how = fit ?? (spec.how.method === 'fitted' ? spec.how : undefined)
  if (how === undefined)
    throw new DesignError('no-fit', 'how.method', 'This design is not fitted; say how it would be.', 'fitted')
  const { sampleRateHz } = spec
  const made = (method: Method): DigitalFilter =>
    isFamilyDesign(spec)
      ? discretize(spec.analog, sampleRateHz, method)
      : designOwn(spec.own, sampleRateHz, method).digital
  const analog = analogOf(spec)
  const removeDelay = spec.budget.removeDelay || how.freeDelay === true
  const fromHz = useBandOf(analog).fromHz
  const original = isFamilyDesign(spec) ? originalOfFamily(spec.analog) : originalOfRoots(analog)
  const unit = TURN / sampleRateHz
  const target = targetOf(fromHalf('s', original.scaled(unit)), how.upToHz * unit, false, 0)
  const methods: readonly (readonly [Rival, Method])[] = [
    ['fitted', how],
    ['bilinear', { method: 'bilinear', hold: isFamilyDesign(spec) ? 'edges' : 'none' }],
    ['matched-z', { method: 'matched-z' }],
  ]
  const versions = methods.map(([method, which]): RivalDeparture => {
    const digital = made(which)
    const worst = worstOf(analog, digital, Math.min(fromHz, how.upToHz / 2), how.upToHz, removeDelay)
    return { method, ...worst, error: judged(toHalf(digital), target, worst.delaySeconds * sampleRateHz, true).worst }
  })
  const least = (name: 'db' | 'degrees' | 'error') =>
    versions.reduce((best, version) => (version[name] < best[name] ? version : best)).method
  const [fitted, ...rivals] = versions
  return {
    fromHz,
    upToHz: how.upToHz,
    removeDelay,
    depthDb: DEPTH_DB,
    versions,
    best: { db: least('db'), degrees: least('degrees'), error: least('error') },
    isAdvantage: rivals.every(({ error }) => fitted!.error <= NOTICED * error),
  }
}

function analogOf(spec: FamilyDesign | OwnDesign): Filter<'s'> {
  if (isFamilyDesign(spec)) return designAnalog(spec.analog)
  const { reference } = referenceOfTarget(spec.own)
  if (reference.kind === 'analog') return reference.filter
  throw new DesignError(
    'no-rivals',
    'own',
    'A measured response has no other version that its fitted one could be held against.',
  )
}
