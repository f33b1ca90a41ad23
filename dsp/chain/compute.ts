import { DesignError } from '../errors'
import type { Diagnostic } from '../forms/filter'
import type { ChainPart, ComputedChain, ComputedStage } from './chain'
import { checkBands, checkOrder, ratesOf } from './check'
import { costOf } from './cost'
import { integrationCautions } from './integration-caution'
import { addGroupDelay } from './part-response'
import { partsOf } from './parts'
import { checkConverterRate, checkRanges } from './ranges'
import type { ChainSpec, ChainUnit } from './spec'
import { checkToleranceWork } from './tolerance-bound'
import { chainUnits, integralOf, type ChainQuantity } from './units'

const usualUnits: Readonly<Partial<Record<ChainQuantity, ChainUnit>>> = { velocity: 'mm/s', displacement: 'µm' }

/** Unit behind an integrating stage. */
function integratedUnit(from: ChainUnit, times: 1 | 2, to: ChainUnit, path: string): ChainUnit {
  const { quantity } = chainUnits[from]
  const wanted = integralOf(quantity, times)
  if (wanted === null) {
    const once = integralOf(quantity, 1)
    if (once !== null) {
      const message = `Integrating a ${quantity} twice comes to nothing that has a unit here; once comes to a ${once}.`
      throw new DesignError('no-integral', `${path}.filter.times`, message, 1)
    }
    const message = `The samples hold a ${quantity} in ${from}, whose integral has no unit here; acceleration and velocity can be integrated.`
    throw new DesignError('no-integral', `${path}.filter.type`, message, 'design')
  }
  if (chainUnits[to].quantity === wanted) return to
  const often = times === 1 ? 'once' : 'twice'
  const message = `Integrated ${often}, ${from} becomes a ${wanted}; ${to} is a unit of ${chainUnits[to].quantity}.`
  throw new DesignError('unit-of-integral', `${path}.filter.unit`, message, usualUnits[wanted] ?? 'mm/s')
}

function delayAt(parts: readonly ChainPart[], hertz: number): number {
  const at = Float64Array.of(hertz)
  const total = new Float64Array(1)
  const scratch = new Float64Array(1)
  for (const part of parts) addGroupDelay(part, at, total, scratch)
  return total[0]!
}

function cautionsOf(spec: ChainSpec): Diagnostic[] {
  return spec.stages.flatMap((stage, index): Diagnostic[] => {
    if (stage.kind === 'sensor' && stage.resonance !== null && stage.resonance.f0Hz <= 2 * spec.kept.toHz) {
      const message = 'The sensor’s resonance lies within twice the kept band, and raises its upper end.'
      return [{ code: 'resonance-near-band', severity: 'caution', field: `stages.${index}.resonance.f0Hz`, message }]
    }
    return []
  })
}

/**
 * Spec in, chain out: the stages checked, their filters made, rates, units, cost and delay counted.
 *
 * Filters are kept by their statements, so that an edit of one stage makes only that stage's again.
 *
 * @throws DesignError with field `stages.<i>.…`, `kept.toHz`, `sheet.<i>.toHz`, `interferers.<i>.toHz`, `tolerance.channels` and, where there
 *   is one, the nearest value that works
 */
export function computeChain(spec: ChainSpec): ComputedChain {
  const converterIndex = checkOrder(spec)
  const rates = ratesOf(spec)
  const converterRateHz = rates[converterIndex]!
  const outputRateHz = rates.at(-1)!
  checkConverterRate(converterRateHz, outputRateHz, converterIndex)
  checkRanges(spec)
  const [sensor] = spec.stages
  let unit: ChainUnit = sensor?.kind === 'sensor' ? sensor.unit : 'V'
  const middle = (spec.kept.fromHz + spec.kept.toHz) / 2
  const stages = spec.stages.map((stage, index): ComputedStage => {
    const inRateHz = rates[index - 1] ?? null
    const outRateHz = rates[index] ?? null
    if (stage.kind === 'shape' && !stage.bypassed && stage.filter.type === 'integrate') {
      unit = integratedUnit(unit, stage.filter.times, stage.filter.unit, `stages.${index}`)
    }
    const { parts, diagnostics } = partsOf(stage, index, inRateHz)
    const costs = parts.map((part) => costOf(part, inRateHz ?? 0, outRateHz ?? 0))
    return {
      stage,
      index,
      parts,
      inRateHz,
      outRateHz,
      factor: stage.kind === 'decimate' && !stage.bypassed ? stage.factor : 1,
      unit,
      multipliesPerStoredSample: costs.reduce((sum, cost) => sum + cost.multipliesPerSecond, 0) / outputRateHz,
      words: costs.reduce((sum, cost) => sum + cost.words, 0),
      delaySeconds: delayAt(parts, middle),
      diagnostics,
    }
  })
  checkBands(spec, outputRateHz)
  checkToleranceWork(spec, stages)
  const diagnostics = [
    ...cautionsOf(spec),
    ...integrationCautions(spec, rates),
    ...stages.flatMap((stage) => stage.diagnostics),
  ]
  return { spec, stages, converterIndex, converterRateHz, outputRateHz, unit, diagnostics }
}
