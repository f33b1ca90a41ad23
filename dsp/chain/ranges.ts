import { show } from '../check'
import { DesignError } from '../errors'
import type { ChainRequirement } from './requirement'
import type { ChainSpec, ChainStage, Interferer } from './spec'

/*
 * What a chain's values may be for every figure of it to be a finite number: wider than any instrument, and far inside a double's range. The
 * schema is wider still, so that whatever was stored can be read and is then refused here, beside its field.
 */

type Range = readonly [least: number, most: number]

const HERTZ: Range = [1e-6, 1e9]
const SENSITIVITY: Range = [1e-9, 1e9]
const FULL_SCALE: Range = [1e-6, 1e6]
const NOISE_DENSITY: Range = [1e-12, 1]
const QUALITY: Range = [1e-3, 1e4]
const LEVEL: Range = [1e-15, 1e9]
/** Of the stored samples: half of it, and the kept band below, are still frequencies that a chain may name. */
const LEAST_OUTPUT_RATE_HZ = 4e-6

function check(value: number, [least, most]: Range, field: string, what: string, unit: string): void {
  if (value >= least && value <= most) return
  const message = `${show(least)}${unit} ≤ ${what} ≤ ${show(most)}${unit}; ${show(value)}${unit} was given.`
  throw new DesignError('out-of-range', field, message, value > most ? most : least)
}

const checkHz = (value: number, field: string, what: string): void => check(value, HERTZ, field, what, ' Hz')

/** The lower edge of a band, which may be 0. */
function checkFromHz(value: number, field: string): void {
  const [least, most] = HERTZ
  if (value === 0 || (value >= least && value <= most)) return
  const message = `A band begins at 0 Hz, or from ${show(least)} Hz to ${show(most)} Hz; ${show(value)} Hz was given.`
  throw new DesignError('out-of-range', field, message, value > most ? most : value < least / 2 ? 0 : least)
}

function checkStage(stage: ChainStage, path: string): void {
  switch (stage.kind) {
    case 'sensor':
      check(stage.sensitivity, SENSITIVITY, `${path}.sensitivity`, 'sensitivity', ' V/unit')
      if (stage.resonance !== null) {
        checkHz(stage.resonance.f0Hz, `${path}.resonance.f0Hz`, 'resonance')
        check(stage.resonance.q, QUALITY, `${path}.resonance.q`, 'Q', '')
      }
      if (stage.highPass !== null) checkHz(stage.highPass.cornerHz, `${path}.highPass.cornerHz`, 'corner')
      return
    case 'analog':
      // Its edges are refused where it is designed, by the same range.
      return
    case 'converter':
      check(stage.fullScaleVolts, FULL_SCALE, `${path}.fullScaleVolts`, 'full scale', ' V')
      if (stage.resolution.by === 'noise') {
        const { voltsPerRootHz } = stage.resolution
        check(voltsPerRootHz, NOISE_DENSITY, `${path}.resolution.voltsPerRootHz`, 'noise density', ' V/√Hz')
      }
      return
    case 'decimate': {
      const { filter } = stage
      if (filter.type === 'kaiser' || filter.type === 'equiripple') {
        checkHz(filter.passHz, `${path}.filter.passHz`, 'pass edge')
        checkHz(filter.stopHz, `${path}.filter.stopHz`, 'stop edge')
      }
      if (filter.type !== 'cic' || filter.compensation === null) return
      return checkHz(filter.compensation.passHz, `${path}.filter.compensation.passHz`, 'pass edge')
    }
    case 'shape':
      // Its corner is looked at against the rate it runs at, by checkDigitalCorner.
      return
  }
}

function checkLine(line: ChainRequirement, path: string): void {
  if (line.kind === 'effective-bits') return
  if (line.kind === 'delay') return checkHz(line.atHz, `${path}.atHz`, 'frequency')
  if (line.kind === 'flatness' || line.kind === 'phase') checkFromHz(line.fromHz, `${path}.fromHz`)
  checkHz(line.toHz, `${path}.toHz`, 'end of the band')
}

function checkInterferer(one: Interferer, path: string): void {
  if (one.kind === 'tone') checkHz(one.hz, `${path}.hz`, 'frequency')
  else {
    checkHz(one.fromHz, `${path}.fromHz`, 'start of the band')
    checkHz(one.toHz, `${path}.toHz`, 'end of the band')
  }
  check(one.level, LEVEL, `${path}.level`, 'level', '')
}

/**
 * Whether every value of a chain lies in a range that its figures are finite in: frequencies from 1 µHz to 1 GHz, sensitivity from 1 nV to 1 GV
 * per unit, full scale from 1 µV to 1 MV, a noise density from 1 pV/√Hz to 1 V/√Hz. Looked at before any filter is made, so that the value that
 * is out of range is the one named.
 *
 * @throws DesignError `out-of-range` with the field and the nearest value in range
 */
export function checkRanges({ stages, kept, sheet, interferers }: ChainSpec): void {
  stages.forEach((stage, index) => checkStage(stage, `stages.${index}`))
  checkFromHz(kept.fromHz, 'kept.fromHz')
  checkHz(kept.toHz, 'kept.toHz', 'end of the kept band')
  sheet.forEach((line, index) => checkLine(line, `sheet.${index}`))
  interferers.forEach((one, index) => checkInterferer(one, `interferers.${index}`))
}

/** The least corner of a digital filter as part of its rate, a little above what its design asks for. */
const LEAST_PART_OF_RATE = 1.000001e-6

/**
 * The corner of a digital high-pass against the rate it runs at.
 *
 * @throws DesignError `out-of-range` with the field and the nearest corner that works
 */
export function checkDigitalCorner(cornerHz: number, sampleRateHz: number, field: string): void {
  const [least, most] = HERTZ
  check(cornerHz, [Math.max(least, LEAST_PART_OF_RATE * sampleRateHz), most], field, 'corner', ' Hz')
}

/**
 * The converter's rate, against the factor of the whole chain: the stored samples' rate is a frequency too.
 *
 * @throws DesignError `out-of-range` with field `stages.<index>.sampleRateHz`
 */
export function checkConverterRate(sampleRateHz: number, outputRateHz: number, index: number): void {
  const field = `stages.${index}.sampleRateHz`
  const total = Math.round(sampleRateHz / outputRateHz)
  const least = LEAST_OUTPUT_RATE_HZ * (Number.isFinite(total) && total > 1 ? total : 1)
  check(sampleRateHz, [least, HERTZ[1]], field, 'sampling rate', ' Hz')
}
