import { show } from '../check'
import { DesignError } from '../errors'
import { MOST_TOTAL_DECIMATION } from './limits'
import type { ChainSpec, ChainStage, ChainStageKind } from './spec'

/*
 * Every refusal of a chain that needs no filter designed: a code, the field, the reason and the nearest value that works.
 */

const hertz = (value: number): string => `${show(value)} Hz`

const names: Readonly<Record<ChainStageKind, string>> = {
  sensor: 'a sensor',
  analog: 'an analog filter',
  converter: 'a converter',
  decimate: 'a decimation',
  shape: 'digital shaping',
}

/** Ids and bypassing of one stage. */
function checkStage(stage: ChainStage, index: number, seen: Set<string>): void {
  if (seen.has(stage.id)) {
    const taken = `Another stage is named ${stage.id} already; each has its own.`
    let free = index
    while (seen.has(`s${free}`)) free += 1
    throw new DesignError('stage-id', `stages.${index}.id`, taken, `s${free}`)
  }
  seen.add(stage.id)
  if (stage.bypassed && (stage.kind === 'sensor' || stage.kind === 'converter')) {
    const message = `A chain can’t do without its ${stage.kind}; only filters and decimations can be bypassed.`
    throw new DesignError('bypassed', `stages.${index}.bypassed`, message, 'false')
  }
}

/**
 * Whether the stages stand in an order that makes a chain: sensor, analog filters, converter, decimations and digital shaping.
 *
 * @returns index of the converter
 * @throws DesignError `stage-order`, `missing-stage`, `stage-id` or `bypassed` with field `stages` or `stages.<i>.kind`, `.id`, `.bypassed`
 */
export function checkOrder({ stages }: ChainSpec): number {
  const refuse = (index: number, message: string, nearest: ChainStageKind): never => {
    throw new DesignError('stage-order', `stages.${index}.kind`, message, nearest)
  }
  const converters = stages.flatMap(({ kind }, index) => (kind === 'converter' ? [index] : []))
  const [first] = stages
  if (first?.kind !== 'sensor') {
    const given = first === undefined ? 'no stage was given' : `it begins with ${names[first.kind]}`
    refuse(0, `A chain begins with a sensor; ${given}.`, 'sensor')
  }
  const [at, second] = converters
  if (at === undefined) {
    throw new DesignError(
      'missing-stage',
      'stages',
      'A chain has one converter, between the analog and the digital stages; there is none.',
      'converter',
    )
  }
  if (second !== undefined) refuse(second, 'A chain has one converter; this is a second one.', 'decimate')
  const seen = new Set<string>()
  stages.forEach((stage, index) => {
    checkStage(stage, index, seen)
    const { kind } = stage
    if (kind === 'sensor' && index > 0) refuse(index, 'A chain has one sensor, its first stage.', 'analog')
    if (kind === 'analog' && index > at) {
      refuse(index, 'An analog filter stands ahead of the converter; behind it digital shaping works.', 'shape')
    }
    if ((kind === 'decimate' || kind === 'shape') && index < at) {
      const name = kind === 'decimate' ? 'A decimation' : 'Digital shaping'
      refuse(index, `${name} stands behind the converter; ahead of it an analog filter works.`, 'analog')
    }
  })
  return at
}

/**
 * Rate behind each stage, null ahead of the converter.
 *
 * @throws DesignError `total-factor` with field `stages.<i>.factor`
 */
export function ratesOf({ stages }: ChainSpec): readonly (number | null)[] {
  let converterRate: number | null = null
  let total = 1
  return stages.map((stage, index) => {
    if (stage.kind === 'converter') converterRate = stage.sampleRateHz
    if (stage.kind === 'decimate' && !stage.bypassed) {
      const most = Math.floor(MOST_TOTAL_DECIMATION / total)
      if (stage.factor > most) {
        const message = `The factors of a chain multiply to ${MOST_TOTAL_DECIMATION} at most; with ${stage.factor} they come to ${total * stage.factor}.`
        const remedy = most < 2 ? `${message} This stage must go, or an earlier factor be less.` : message
        throw new DesignError('total-factor', `stages.${index}.factor`, remedy, Math.max(2, most))
      }
      total *= stage.factor
    }
    return converterRate === null ? null : converterRate / total
  })
}

function checkBand(field: string, fromHz: number, toHz: number, halfHz: number | null): void {
  if (halfHz !== null && fromHz >= halfHz) {
    const message = `The band starts below half the output rate, ${hertz(halfHz)}; ${hertz(fromHz)} was given.`
    const nearest = toHz < halfHz ? toHz / 2 : halfHz / 2
    throw new DesignError('band-above-half-rate', `${field}.fromHz`, message, nearest)
  }
  if (halfHz !== null && toHz > halfHz) {
    const message = `The band ends at ${hertz(halfHz)} (half the output rate) or below; ${hertz(toHz)} was given.`
    throw new DesignError('band-above-half-rate', `${field}.toHz`, message, halfHz)
  }
  if (toHz > fromHz) return
  const nearest = Math.min(fromHz === 0 ? 1 : 1.01 * fromHz, halfHz ?? Infinity)
  const message = `The band ends above its start, ${hertz(fromHz)}; ${hertz(toHz)} was given.`
  throw new DesignError('band-out-of-order', `${field}.toHz`, message, nearest)
}

/**
 * Whether the kept band, the lines of the sheet and the interferers fit the rate that the samples are stored at.
 *
 * @throws DesignError `band-above-half-rate` or `band-out-of-order` with field `kept.toHz`, `sheet.<i>.toHz`, `interferers.<i>.toHz` …
 */
export function checkBands({ kept, sheet, interferers }: ChainSpec, outputRateHz: number): void {
  const half = outputRateHz / 2
  checkBand('kept', kept.fromHz, kept.toHz, half)
  sheet.forEach((line, index) => {
    const field = `sheet.${index}`
    switch (line.kind) {
      case 'flatness':
      case 'phase':
        return checkBand(field, line.fromHz, line.toHz, half)
      case 'usable-band':
        return checkBand(field, kept.fromHz, line.toHz, half)
      case 'alias-floor':
      case 'channel-match':
        return checkBand(field, 0, line.toHz, half)
      case 'delay': {
        if (line.atHz <= half) return
        const message = `The delay is asked for at ${hertz(half)} (half the output rate) or below; ${hertz(line.atHz)} was given.`
        throw new DesignError('band-above-half-rate', `${field}.atHz`, message, half)
      }
      case 'effective-bits':
        return
    }
  })
  interferers.forEach((one, index) => {
    if (one.kind === 'band') checkBand(`interferers.${index}`, one.fromHz, one.toHz, null)
  })
}
