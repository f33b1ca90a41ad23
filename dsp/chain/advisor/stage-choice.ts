import { DesignError } from '../../errors'
import { undescribed } from '../../fir/design-fir'
import { bandsWeightedFor, leastTaps } from '../../fir/least-taps'
import { kaiserOrder } from '../../fir/windows'
import { multipliesPerSample } from '../../forms/cost'
import { magnitudeDb } from '../../response/frequency'
import type { FirBand, FirSpec } from '../../spec'
import { cicAmplitude } from '../closed-forms'
import { compensationOf } from '../filters'
import { MOST_EQUIRIPPLE_TAPS, MOST_STAGE_TAPS } from '../limits'
import type { DecimateStage } from '../spec'

/** What one decimation stage must do. */
export interface StageTask {
  readonly inRateHz: number
  readonly factor: number
  /** Flat up to here, within ± `rippleDb`. */
  readonly passHz: number
  readonly rippleDb: number
  /** Whatever folds to below this is to be `attenuationDb` down; what folds only above it may pass. */
  readonly cleanHz: number
  readonly attenuationDb: number
}

export interface StageChoice {
  readonly filter: DecimateStage['filter']
  /** For each sample behind the stage. */
  readonly multiplies: number
}

export type PlanKind = 'half-band' | 'kaiser' | 'equiripple' | 'cic'

const down = (hertz: number): number => Math.floor(Number((hertz * (1 + 1e-12)).toPrecision(12)) * 1e3) / 1e3
const tidy = (hertz: number): number => (hertz >= 10 ? down(hertz) : hertz)

/** Edges of the stop band: below `factor` times the output rate less what is to be clean, images fold only outside. */
const stopOf = ({ inRateHz, factor, cleanHz }: StageTask): number => inRateHz / factor - cleanHz

/** Attenuation at which the ripple of a filter with equal errors is small enough too. */
const forRipple = (rippleDb: number): number => -20 * Math.log10(1 - 10 ** (-rippleDb / 20))

/** A window's side lobes come out up to half a decibel above what Kaiser's β was chosen for. */
const WINDOW_ROOM_DB = 0.7
const LEAST_DB = 12

/** The least taps of a statement; null where it can't be had with so many as a stage may have. */
function tapsFor(fir: Omit<FirSpec, 'taps'>, task: StageTask): number | null {
  try {
    const requirement = { passWithinDb: task.rippleDb, stopAttenuationDb: task.attenuationDb }
    const taps = leastTaps(fir, task.inRateHz, requirement)
    const most = fir.kind === 'equiripple' ? MOST_EQUIRIPPLE_TAPS : MOST_STAGE_TAPS
    return taps <= most ? taps : null
  } catch (error) {
    if (error instanceof DesignError) return null
    throw error
  }
}

const multipliesOf = (fir: FirSpec, task: StageTask): number => multipliesPerSample(undescribed(fir, task.inRateHz))

function halfBand(task: StageTask): StageChoice | null {
  const { inRateHz, factor } = task
  const edge = Math.max(task.passHz, task.cleanHz)
  if (factor !== 2 || edge >= 0.249 * inRateHz) return null
  const attenuationDb = Math.ceil(10 * (Math.max(task.attenuationDb, forRipple(task.rippleDb)) + WINDOW_ROOM_DB)) / 10
  const bands: FirBand[] = [
    { fromHz: 0, toHz: edge, gain: 1 },
    { fromHz: inRateHz / 2 - edge, toHz: inRateHz / 2, gain: 0 },
  ]
  const statement = { kind: 'half-band', window: 'kaiser', response: 'lowpass', attenuationDb, bands } as const
  const taps = tapsFor(statement, task)
  if (taps === null) return null
  // As many taps as leave something to pass by Kaiser's formula, which the stage's own edges go by.
  let least = taps
  while (kaiserOrder(attenuationDb, inRateHz, inRateHz) / (least - 1) >= 0.5) least += 4
  return {
    filter: { type: 'half-band', taps: least, attenuationDb },
    multiplies: multipliesOf({ ...statement, taps: least }, task),
  }
}

/** Pass and stop edge as the stage will state them; null where there is no room between them. */
function edgesOf(task: StageTask): { passHz: number; stopHz: number } | null {
  const stopHz = tidy(stopOf(task))
  const { passHz, inRateHz } = task
  return stopHz - passHz > 1e-4 * inRateHz && stopHz < 0.4999 * inRateHz ? { passHz, stopHz } : null
}

function kaiser(task: StageTask): StageChoice | null {
  const edges = edgesOf(task)
  if (edges === null) return null
  const { passHz, stopHz } = edges
  const attenuationDb = Math.ceil(10 * (Math.max(task.attenuationDb, forRipple(task.rippleDb)) + WINDOW_ROOM_DB)) / 10
  const bands: FirBand[] = [
    { fromHz: 0, toHz: passHz, gain: 1 },
    { fromHz: stopHz, toHz: task.inRateHz / 2, gain: 0 },
  ]
  const statement = { kind: 'windowed', window: 'kaiser', response: 'lowpass', attenuationDb, bands } as const
  const taps = tapsFor(statement, task)
  if (taps === null) return null
  return {
    filter: { type: 'kaiser', taps, passHz, stopHz, attenuationDb },
    multiplies: multipliesOf({ ...statement, taps }, task),
  }
}

function equiripple(task: StageTask): StageChoice | null {
  const edges = edgesOf(task)
  if (edges === null) return null
  const { passHz, stopHz } = edges
  const plain: FirBand[] = [
    { fromHz: 0, toHz: passHz, gain: 1 },
    { fromHz: stopHz, toHz: task.inRateHz / 2, gain: 0 },
  ]
  const [pass, stop] = bandsWeightedFor(plain, { passWithinDb: task.rippleDb, stopAttenuationDb: task.attenuationDb })
  const stopWeight = Number(((stop?.weight ?? 1) / (pass?.weight ?? 1)).toPrecision(4))
  const bands = plain.map((band) => (band.gain === 0 ? { ...band, weight: stopWeight } : band))
  const statement = { kind: 'equiripple', response: 'lowpass', bands } as const
  const taps = tapsFor(statement, task)
  if (taps === null) return null
  return {
    filter: { type: 'equiripple', taps, passHz, stopHz, stopWeight },
    multiplies: multipliesOf({ ...statement, taps }, task),
  }
}

/** Below this a CIC filter drops too much of the band that is to be kept. */
const LEAST_CIC_FACTOR = 4
const MOST_CIC_ORDER = 8
const COMPENSATION_TAPS = Array.from({ length: 31 }, (_, k) => 2 * k + 3)
const POINTS = 33

/** How far down a CIC filter holds what would fold to below `cleanHz`: Hogenauer 1981, eq. (2), at the edges of its nulls. */
function cicAttenuation({ inRateHz, factor, cleanHz }: StageTask, order: number): number {
  let least = Infinity
  for (let k = 1; k <= factor / 2; k++) {
    for (const hertz of [(k * inRateHz) / factor - cleanHz, (k * inRateHz) / factor + cleanHz]) {
      if (hertz > inRateHz / 2) continue
      least = Math.min(least, -20 * Math.log10(Math.abs(cicAmplitude(hertz, order, factor, inRateHz))))
    }
  }
  return least
}

function cic(task: StageTask): StageChoice | null {
  const { inRateHz, factor, passHz, rippleDb } = task
  const outRateHz = inRateHz / factor
  if (factor < LEAST_CIC_FACTOR || passHz >= 0.45 * outRateHz) return null
  const orders = Array.from({ length: MOST_CIC_ORDER }, (_, k) => k + 1)
  const order = orders.find((candidate) => cicAttenuation(task, candidate) >= task.attenuationDb)
  if (order === undefined) return null
  const grid = Float64Array.from({ length: POINTS }, (_, n) => (n / (POINTS - 1)) * passHz)
  const droop = grid.map((hertz) => 20 * Math.log10(Math.abs(cicAmplitude(hertz, order, factor, inRateHz))))
  const scale = Number.isInteger(Math.log2(factor)) ? 0 : 1
  if (-droop.at(-1)! <= rippleDb) {
    return { filter: { type: 'cic', order, combDelay: 1, compensation: null }, multiplies: scale }
  }
  for (const taps of COMPENSATION_TAPS) {
    const filter = compensationOf({ taps, passHz, sampleRateHz: outRateHz, order, combDelay: 1, factor })
    const lifted = magnitudeDb(filter, grid)
    if (!lifted.every((value, n) => Math.abs(value + droop[n]!) <= rippleDb)) continue
    return {
      filter: { type: 'cic', order, combDelay: 1, compensation: { taps, passHz } },
      multiplies: scale + multipliesPerSample(filter),
    }
  }
  return null
}

const makers: Readonly<Record<PlanKind, (task: StageTask) => StageChoice | null>> = {
  'half-band': halfBand,
  kaiser,
  equiripple,
  cic,
}

/** Stage choices by what they must do, made once in a search. */
export type StageBook = Map<string, StageChoice | null>

/**
 * The shortest filter of a kind that does a stage's task; null where the kind can't.
 *
 * Sources: R. E. Crochiere & L. R. Rabiner, Multirate Digital Signal Processing, 1983, §5.3 (bands of a stage that fold only outside the
 * pass band need not be held back); J. F. Kaiser 1974; E. B. Hogenauer 1981.
 */
export function chooseStage(kind: PlanKind, task: StageTask, book: StageBook): StageChoice | null {
  const needed = { ...task, attenuationDb: Math.max(task.attenuationDb, LEAST_DB) }
  const key = JSON.stringify([kind, needed])
  const known = book.get(key)
  if (known !== undefined) return known
  const choice = makers[kind](needed)
  book.set(key, choice)
  return choice
}

/** Multiplies for each sample behind a stage, by the published estimates alone. */
export function estimateStage(kinds: readonly PlanKind[], task: StageTask): number {
  const { inRateHz, factor, passHz, rippleDb } = task
  const attenuationDb = Math.max(task.attenuationDb, LEAST_DB)
  const room = stopOf(task) - passHz
  if (room <= 0) return Infinity
  const passError = 1 - 10 ** (-rippleDb / 20)
  const both = Math.max(attenuationDb, forRipple(rippleDb))
  let least = Infinity
  if (kinds.includes('equiripple')) {
    const order = (-10 * Math.log10(passError) + attenuationDb / 2 - 13) / (14.36 * (room / inRateHz))
    least = Math.min(least, (Math.max(order, 2) + 1) / 2)
  }
  if (kinds.includes('kaiser')) least = Math.min(least, (kaiserOrder(both, room, inRateHz) + 1) / 2)
  const edge = Math.max(passHz, task.cleanHz)
  if (kinds.includes('half-band') && factor === 2 && edge < 0.249 * inRateHz) {
    least = Math.min(least, (kaiserOrder(both, inRateHz / 2 - 2 * edge, inRateHz) + 1) / 4)
  }
  if (kinds.includes('cic') && factor >= LEAST_CIC_FACTOR && cicAttenuation(task, MOST_CIC_ORDER) >= attenuationDb) {
    least = Math.min(least, 6)
  }
  return least
}
