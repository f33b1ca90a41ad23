import { show } from '../check'
import { DesignError } from '../errors'
import { kaiserOrder } from '../fir/windows'
import type { Diagnostic, DigitalFilter, Filter, FirFilter } from '../forms/filter'
import type { FirSpec } from '../spec'
import type { ChainPart } from './chain'
import { analogOf, compensationOf, digitalHighPassOf, digitalOf, firOf, originalOf, resonanceOf } from './filters'
import { MOST_EQUIRIPPLE_TAPS } from './limits'
import { checkDigitalCorner } from './ranges'
import type { AnalogStage, ChainStage, DecimateStage, DesignLink, SensorStage, ShapeStage } from './spec'

/*
 * From the statement of a stage to its parts, in signal order, and the refusals that only the making of its filters finds.
 */

export interface StageParts {
  readonly parts: readonly ChainPart[]
  readonly diagnostics: readonly Diagnostic[]
}

const hertz = (value: number): string => `${show(value)} Hz`

/** Whatever a design refuses is said again with the field of the chain that it comes from. */
function named<Result>(toField: (field: string) => string, make: () => Result): Result {
  try {
    return make()
  } catch (thrown) {
    if (!(thrown instanceof DesignError)) throw thrown
    const again = new DesignError(thrown.code, toField(thrown.field), thrown.message, thrown.nearest)
    throw Object.assign(again, { cause: thrown })
  }
}

const under = (field: string, diagnostics: readonly Diagnostic[]): Diagnostic[] =>
  diagnostics.map((one) => ({ ...one, field }))

const analogPart = (filter: Filter<'s'>): ChainPart => ({ kind: 'analog', filter })
const digitalPart = (filter: DigitalFilter | FirFilter): ChainPart => ({ kind: 'digital', filter })

function sensorParts({ resonance, highPass }: SensorStage, path: string): StageParts {
  const parts: ChainPart[] = []
  if (resonance !== null) parts.push(analogPart(resonanceOf(resonance.f0Hz, resonance.q)))
  if (highPass !== null) {
    const { cornerHz, order } = highPass
    const toField = (field: string): string =>
      field.startsWith('analog.edgesHz') ? `${path}.highPass.cornerHz` : `${path}.highPass.order`
    const filter = named(toField, () =>
      analogOf({ family: 'butterworth', response: 'highpass', order, edgesHz: [cornerHz] }),
    )
    parts.push(analogPart(filter))
  }
  return { parts, diagnostics: [] }
}

function analogParts({ source }: AnalogStage, path: string): StageParts {
  if (source.from === 'here') {
    const filter = named(
      (field) => `${path}.source.${field}`,
      () => analogOf(source.analog),
    )
    return { parts: [analogPart(filter)], diagnostics: [] }
  }
  const field = `${path}.source.link`
  const filter = named(
    () => field,
    () => originalOf(source.link.spec),
  )
  if (filter === null) {
    const { title, version } = source.link
    const message = `“${title}”, version ${version}, has no analog original that is known by its roots; a design of a family, or one given by its roots, has.`
    throw new DesignError('no-analog-roots', field, message)
  }
  return { parts: [analogPart(filter)], diagnostics: [] }
}

/** A linked digital filter, which must have been designed for the rate it is to run at. */
function linked(link: DesignLink, rateHz: number, field: string): StageParts {
  const { spec, title, version } = link
  if (Math.abs(spec.sampleRateHz - rateHz) > 1e-9 * rateHz) {
    const message = `“${title}”, version ${version}, is designed for ${hertz(spec.sampleRateHz)}, and this stage runs at ${hertz(rateHz)}; a version of it for that rate works.`
    throw new DesignError('rate-differs', field, message, rateHz)
  }
  const filter = named(
    () => field,
    () => digitalOf(spec),
  )
  return { parts: [digitalPart(filter)], diagnostics: under(field, filter.diagnostics) }
}

type Fir = Extract<DecimateStage['filter'], { type: 'half-band' | 'kaiser' | 'equiripple' }>

/** Fields of an FIR filter's statement as the stage calls them. */
const firFields: Readonly<Record<string, string>> = {
  'fir.taps': 'taps',
  'fir.attenuationDb': 'attenuationDb',
  attenuationDb: 'attenuationDb',
  'fir.bands.0.fromHz': 'passHz',
  'fir.bands.0.toHz': 'passHz',
  'fir.bands.1.fromHz': 'stopHz',
  'fir.bands.1.toHz': 'stopHz',
  'fir.bands.0.weight': 'stopWeight',
  'fir.bands.1.weight': 'stopWeight',
}

/** Room between the bands that a Kaiser window of so many taps leaves, kept below half the rate. */
function halfBandRoom(taps: number, attenuationDb: number, rateHz: number, path: string): number {
  const room = (count: number): number => kaiserOrder(attenuationDb, rateHz, rateHz) * (rateHz / (count - 1))
  if (room(taps) < rateHz / 2) return room(taps)
  let enough = 7
  while (room(enough) >= rateHz / 2) enough += 4
  const message = `${show(attenuationDb)} dB takes ${enough} taps or more in a half-band filter; with ${taps} nothing is left to pass.`
  throw new DesignError('too-few-taps', `${path}.filter.taps`, message, enough)
}

function checkEdges(passHz: number, stopHz: number, rateHz: number, path: string): void {
  const half = rateHz / 2
  if (passHz >= half) {
    const message = `The pass edge lies below ${hertz(half)} (half the rate ahead of this stage); ${hertz(passHz)} was given.`
    throw new DesignError('edge-above-half-rate', `${path}.filter.passHz`, message, Math.min(stopHz, half) * 0.9)
  }
  if (stopHz >= half) {
    const message = `The stop edge lies below ${hertz(half)} (half the rate ahead of this stage); ${hertz(stopHz)} was given.`
    throw new DesignError('edge-above-half-rate', `${path}.filter.stopHz`, message, (passHz + half) / 2)
  }
  if (passHz < stopHz) return
  const message = `The stop edge lies above the pass edge, ${hertz(passHz)}; ${hertz(stopHz)} was given.`
  throw new DesignError(
    'edges-out-of-order',
    `${path}.filter.stopHz`,
    message,
    Math.min(1.1 * passHz, (passHz + half) / 2),
  )
}

function firSpecOf(filter: Fir, rateHz: number, path: string): FirSpec {
  const { taps } = filter
  const bands = (passHz: number, stopHz: number, weight?: number): FirSpec['bands'] => [
    { fromHz: 0, toHz: passHz, gain: 1 },
    { fromHz: stopHz, toHz: rateHz / 2, gain: 0, ...(weight === undefined ? {} : { weight }) },
  ]
  if (filter.type === 'half-band') {
    const { attenuationDb } = filter
    const halfRoom = halfBandRoom(Math.max(taps, 7), attenuationDb, rateHz, path) / 2
    const edges = bands(rateHz / 4 - halfRoom, rateHz / 4 + halfRoom)
    return { kind: 'half-band', window: 'kaiser', response: 'lowpass', taps, attenuationDb, bands: edges }
  }
  checkEdges(filter.passHz, filter.stopHz, rateHz, path)
  if (filter.type === 'kaiser') {
    const { passHz, stopHz, attenuationDb } = filter
    return {
      kind: 'windowed',
      window: 'kaiser',
      response: 'lowpass',
      taps,
      attenuationDb,
      bands: bands(passHz, stopHz),
    }
  }
  const { passHz, stopHz, stopWeight } = filter
  return { kind: 'equiripple', response: 'lowpass', taps, bands: bands(passHz, stopHz, stopWeight) }
}

type Cic = Extract<DecimateStage['filter'], { type: 'cic' }>

function cicParts({ order, combDelay, compensation }: Cic, factor: number, rateHz: number, path: string): StageParts {
  const cic: ChainPart = { kind: 'cic', order, combDelay, factor, sampleRateHz: rateHz }
  if (compensation === null) return { parts: [cic], diagnostics: [] }
  const outRate = rateHz / factor
  const field = `${path}.filter.compensation`
  // A comb of two delays has its first null at half the output rate already.
  const most = combDelay === 2 ? 0.45 * outRate : 0.5 * outRate
  const { taps, passHz } = compensation
  if (passHz >= most) {
    const end = combDelay === 2 ? 'its first null' : 'half the rate behind this stage'
    const message = `The droop can be lifted up to a frequency below ${hertz(most)} (${end}); ${hertz(passHz)} was given.`
    throw new DesignError('edge-above-half-rate', `${field}.passHz`, message, 0.8 * most)
  }
  const filter = named(
    () => `${field}.taps`,
    () => compensationOf({ taps, passHz, sampleRateHz: outRate, order, combDelay, factor }),
  )
  return { parts: [cic, digitalPart(filter)], diagnostics: [] }
}

function decimateParts({ factor, filter }: DecimateStage, rateHz: number, path: string): StageParts {
  if (filter.type === 'design') return linked(filter.link, rateHz, `${path}.filter.link`)
  if (filter.type === 'cic') return cicParts(filter, factor, rateHz, path)
  if (filter.type === 'half-band' && factor !== 2) {
    const message = `A half-band filter decimates by 2; the factor given is ${factor}. An equiripple filter takes any.`
    throw new DesignError('factor-of-half-band', `${path}.factor`, message, 2)
  }
  if (filter.type === 'equiripple' && filter.taps > MOST_EQUIRIPPLE_TAPS) {
    const message = `An equiripple filter of a chain has ${MOST_EQUIRIPPLE_TAPS} taps at most; ${filter.taps} were given. A Kaiser window takes more.`
    throw new DesignError('too-many-taps', `${path}.filter.taps`, message, MOST_EQUIRIPPLE_TAPS)
  }
  const fir = firSpecOf(filter, rateHz, path)
  const made = named(
    (field) => `${path}.filter.${firFields[field] ?? 'taps'}`,
    () => firOf(fir, rateHz),
  )
  return { parts: [digitalPart(made)], diagnostics: under(`${path}.filter`, made.diagnostics) }
}

function shapeParts({ filter }: ShapeStage, rateHz: number, path: string): StageParts {
  if (filter.type === 'design') return linked(filter.link, rateHz, `${path}.filter.link`)
  const { times, highPass } = filter
  const field = `${path}.filter.highPass`
  if (highPass.order < times) {
    const message = `Integrating ${times === 1 ? 'once' : 'twice'} takes a high-pass of order ${times} at least, else an offset grows without bound.`
    throw new DesignError('high-pass-order', `${field}.order`, message, times)
  }
  checkDigitalCorner(highPass.cornerHz, rateHz, `${field}.cornerHz`)
  const toField = (from: string): string => (from === 'analog.order' ? `${field}.order` : `${field}.cornerHz`)
  const made = named(toField, () => digitalHighPassOf(highPass.cornerHz, highPass.order, rateHz))
  return {
    parts: [digitalPart(made), { kind: 'integration', times, sampleRateHz: rateHz }],
    diagnostics: under(field, made.diagnostics),
  }
}

/**
 * Parts of a stage at the rate that runs ahead of it.
 *
 * @param rateHz null ahead of the converter
 * @throws DesignError with field `stages.<index>.…` and the nearest value that works
 */
export function partsOf(stage: ChainStage, index: number, rateHz: number | null): StageParts {
  const path = `stages.${index}`
  if (stage.bypassed) return { parts: [], diagnostics: [] }
  switch (stage.kind) {
    case 'sensor':
      return sensorParts(stage, path)
    case 'analog':
      return analogParts(stage, path)
    case 'converter': {
      const { averaging, sampleRateHz } = stage
      if (averaging === null) return { parts: [], diagnostics: [] }
      return { parts: [{ kind: 'averaging', order: averaging.order, sampleRateHz }], diagnostics: [] }
    }
    case 'decimate':
      return decimateParts(stage, rateHz ?? 0, path)
    case 'shape':
      return shapeParts(stage, rateHz ?? 0, path)
  }
}
