import { DesignError } from '../errors'
import type { FirBand, FirSpec } from '../spec'
import { firBandMagnitudes } from './band-magnitudes'
import { checkFirBands, mostTaps, tapsGrid } from './check'
import { undescribed } from './design-fir'
import { minimumPhaseErrors } from './minimum-phase'
import { kaiserOrder } from './windows'

/** What each band must keep to. */
export interface FirRequirement {
  /** Pass bands (gain other than 0): within ± so many dB of their gain. */
  readonly passWithinDb: number
  /** Stop bands: so many dB down, from a gain of 1. */
  readonly stopAttenuationDb: number
}

interface Errors {
  readonly pass: number
  readonly stop: number
}

function errorsOf({ passWithinDb, stopAttenuationDb }: FirRequirement): Errors {
  if (!(passWithinDb > 0 && passWithinDb < 60)) {
    throw new DesignError('not-positive', 'passWithinDb', 'Pass bands must be allowed some error above 0 dB.', 0.1)
  }
  if (!(stopAttenuationDb > 0 && stopAttenuationDb < 300)) {
    throw new DesignError('not-positive', 'stopAttenuationDb', 'The attenuation must be above 0 dB, below 300 dB.', 60)
  }
  // The lower side of ± so many dB is the nearer one.
  return { pass: 1 - 10 ** (-passWithinDb / 20), stop: 10 ** (-stopAttenuationDb / 20) }
}

/**
 * The weights with which an equiripple filter uses up what it is allowed in all bands at once: each band's weight is the inverse of its error.
 * @returns the same bands, the least weight 1
 */
export function bandsWeightedFor(bands: readonly FirBand[], requirement: FirRequirement): FirBand[] {
  const { pass, stop } = errorsOf(requirement)
  const errors = bands.map(({ gain }) => (gain === 0 ? stop : pass * Math.abs(gain)))
  const largest = Math.max(...errors)
  return bands.map((band, index) => ({ ...band, weight: Math.min(largest / errors[index]!, 1e6) }))
}

/**
 * Whether a filter keeps to a requirement, judged on its true response, refined at its peaks.
 *
 * @param fir its bands, and whether it is a differentiator
 */
export function firMeets(
  fir: Pick<FirSpec, 'bands' | 'response'>,
  filter: Parameters<typeof firBandMagnitudes>[0],
  { passWithinDb, stopAttenuationDb }: FirRequirement,
): boolean {
  const high = 10 ** (passWithinDb / 20)
  const floor = 10 ** (-stopAttenuationDb / 20)
  const magnitudes = firBandMagnitudes(filter, fir.bands, fir.response === 'differentiator')
  return magnitudes.every(({ least, most }, index) => {
    const gain = Math.abs(fir.bands[index]!.gain)
    return gain === 0 ? most <= floor : least >= gain / high && most <= gain * high
  })
}

/**
 * Estimate of the number of taps, not rounded: of an equiripple filter (−20·lg√(δp·δs) − 13)/(14.36·Δf) + 1; of a windowed one Kaiser's, for the
 * lesser of the two errors.
 *
 * Source: J. F. Kaiser, Proc. IEEE ISCAS, 1974, for both; of minimum phase, half of the taps for |H|², O. Herrmann & W. Schuessler, 1970.
 */
function estimateTaps(fir: Omit<FirSpec, 'taps'>, sampleRateHz: number, requirement: FirRequirement): number {
  const { pass, stop } = errorsOf(requirement)
  const { bands, kind } = fir
  const rooms = bands.slice(1).map((band, index) => band.fromHz - bands[index]!.toHz)
  const above = sampleRateHz / 2 - (bands.at(-1)?.toHz ?? 0)
  const room = rooms.length > 0 ? Math.min(...rooms) : Math.max(2 * above, sampleRateHz / 50)
  const least = Math.min(pass, stop)
  const order = (levelDb: number): number => ((levelDb - 13) / 14.36) * (sampleRateHz / room)
  switch (kind) {
    case 'windowed':
      return 1 + kaiserOrder(-20 * Math.log10(least), room, sampleRateHz)
    case 'half-band':
      return 1 + order(-20 * Math.log10(least))
    case 'minimum-phase':
      return 1 + order(-10 * Math.log10((2 * pass * (stop * stop)) / 2)) / 2
    case 'equiripple':
    case 'least-squares':
      return 1 + order(-10 * Math.log10(pass * stop))
  }
}

/**
 * The least number of taps with which each pass band keeps within ±`passWithinDb` of its gain and each stop band is `stopAttenuationDb` down,
 * judged on the true response. The weights and window are those of `fir`; {@link bandsWeightedFor} gives an equiripple filter the weights that
 * need fewest taps. Starts from the published estimate and closes in by halving; since parity makes small steps back, the two numbers below
 * the answer are tried too.
 *
 * @param fir a statement without its number of taps
 * @returns taps, among those that such a filter can have
 * @throws DesignError as designFir does; `out-of-reach` with field `fir.taps` when the most taps of its kind don't do
 */
export function leastTaps(fir: Omit<FirSpec, 'taps'>, sampleRateHz: number, requirement: FirRequirement): number {
  checkFirBands(fir, sampleRateHz)
  const { step, remainder } = tapsGrid(fir, sampleRateHz)
  // Numbers of taps are counted as remainder + step·index.
  const lowest = Math.ceil(((fir.kind === 'half-band' ? 7 : 3) - remainder) / step)
  const highest = Math.floor((mostTaps(fir.kind) - remainder) / step)
  const tapsAt = (index: number): number => remainder + step * index
  const known = new Map<number, boolean>()
  const meets = (index: number): boolean => {
    const before = known.get(index)
    if (before !== undefined) return before
    const spec = { ...fir, taps: tapsAt(index) }
    const isClose = fir.kind !== 'minimum-phase' || couldMeet(spec, sampleRateHz, requirement)
    const answer = isClose && meetsWith(spec, sampleRateHz, requirement)
    known.set(index, answer)
    return answer
  }
  const estimate = Math.round((estimateTaps(fir, sampleRateHz, requirement) - remainder) / step)
  let high = Math.min(Math.max(Number.isFinite(estimate) ? estimate : lowest, lowest), highest)
  let low = lowest - 1
  let stride = 1
  if (meets(high)) {
    while (high - stride > low && meets(high - stride)) {
      high -= stride
      stride *= 2
    }
    low = Math.max(low, high - stride)
  } else {
    low = high
    for (;;) {
      if (low >= highest) throw outOfReach(requirement, mostTaps(fir.kind))
      high = Math.min(low + stride, highest)
      if (meets(high)) break
      low = high
      stride *= 2
    }
  }
  while (high - low > 1) {
    const middle = (high + low) >> 1
    if (meets(middle)) high = middle
    else low = middle
  }
  for (;;) {
    const better = [high - 1, high - 2].find((index) => index >= lowest && meets(index))
    if (better === undefined) return tapsAt(high)
    high = better
  }
}

function outOfReach({ passWithinDb, stopAttenuationDb }: FirRequirement, most: number): DesignError {
  return new DesignError(
    'out-of-reach',
    'fir.taps',
    `${most} taps of this kind don’t keep within ${passWithinDb} dB and ${stopAttenuationDb} dB down; more room between the bands helps.`,
    most,
  )
}

/** Whether |H|² of a minimum-phase filter promises enough for its costly factoring. */
function couldMeet(fir: FirSpec, sampleRateHz: number, requirement: FirRequirement): boolean {
  const allowed = errorsOf(requirement)
  const errors = unlessBeyondReach(() => minimumPhaseErrors(fir, sampleRateHz))
  return errors !== null && errors.stop <= 1.001 * allowed.stop && errors.pass <= 1.2 * allowed.pass + 1e-9
}

const meetsWith = (fir: FirSpec, sampleRateHz: number, requirement: FirRequirement): boolean =>
  unlessBeyondReach(() => firMeets(fir, undescribed(fir, sampleRateHz), requirement)) ?? false

/** null for a number of taps that can't be computed: it meets nothing. */
function unlessBeyondReach<T>(compute: () => T): T | null {
  try {
    return compute()
  } catch (error) {
    if (error instanceof DesignError && (error.code === 'not-converged' || error.code === 'not-matched')) return null
    throw error
  }
}
