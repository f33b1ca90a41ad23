import type { Diagnostic } from '../forms/filter'
import { integrationAmplitude } from './closed-forms'
import type { ChainSpec } from './spec'

/** What the rule may take at the top of the kept band before it is worth a word. */
const WORTH_A_WORD_DB = 0.1

/** What the trapezoidal rule takes from the ideal integral (closed-forms.ts), in dB: above 0, and Infinity at half the rate. */
const lossDb = (hertz: number, times: 1 | 2, sampleRateHz: number): number =>
  -20 * Math.log10(Math.abs(integrationAmplitude(hertz, times, sampleRateHz)))

const three = (value: number): string => String(Number(value.toPrecision(3)))
const rateWords = (hertz: number): string =>
  hertz >= 1000 ? `${String(Number((hertz / 1000).toPrecision(6)))} kHz` : `${String(Number(hertz.toPrecision(6)))} Hz`
function levelWords(decibels: number): string {
  if (decibels === Infinity) return 'everything'
  if (decibels < 0.005) return 'less than 0.01 dB'
  return `${decibels < 1 ? decibels.toFixed(2) : three(decibels)} dB`
}

/**
 * A caution for each integrating stage whose rule costs more than 0.1 dB at the top of the kept band, with the cure: the converter's rate
 * where it stands behind a decimation, a higher rate where it doesn't. The kept band ends at half the output rate at most, where the rule
 * leaves nothing. Rates in Hz behind each stage, null ahead of the converter.
 */
export function integrationCautions(spec: ChainSpec, rates: readonly (number | null)[]): readonly Diagnostic[] {
  const { toHz } = spec.kept
  const converterRateHz = rates[spec.stages.findIndex(({ kind }) => kind === 'converter')] ?? null
  return spec.stages.flatMap((stage, index): Diagnostic[] => {
    const rateHz = rates[index - 1] ?? null
    if (stage.kind !== 'shape' || stage.bypassed || stage.filter.type !== 'integrate') return []
    if (rateHz === null || converterRateHz === null) return []
    const { times } = stage.filter
    const loss = lossDb(toHz, times, rateHz)
    if (loss <= WORTH_A_WORD_DB) return []
    const costs = `Integrating by trapezoids at ${rateWords(rateHz)} takes ${levelWords(loss)} at ${rateWords(toHz)}`
    const cure =
      converterRateHz > rateHz
        ? `move it ahead of the decimation: at ${rateWords(converterRateHz)} it would be ${levelWords(lossDb(toHz, times, converterRateHz))}`
        : 'a higher converter rate, with a decimation behind the integration, makes it less'
    const message = `${costs}; ${cure}.`
    return [{ code: 'integration-error', severity: 'caution', field: `stages.${index}.filter.times`, message }]
  })
}
