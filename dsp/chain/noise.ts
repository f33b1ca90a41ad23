import { show } from '../check'
import type { ComputedChain, NoiseBudget } from './chain'
import { ripplesOver } from './band-grid'
import { noiseGain } from './noise-gain'
import { addMagnitudeDb } from './part-response'
import { integral } from './quadrature'
import type { ConverterStage, SensorStage } from './spec'
import { keptForPath } from './same-path'
import { partsAhead, stripsOver } from './strips'

const TOLERANCE = 1e-6
/** Past this nothing is left of a signal, or of the noise, that a double still tells from 0. */
const MOST_RATIO_DB = 400

/** Noise of a converter at its input, V²/Hz, even from 0 Hz to half its rate. */
function voltsSquaredPerHz({ resolution, fullScaleVolts, sampleRateHz }: ConverterStage): number {
  if (resolution.by === 'noise') return resolution.voltsPerRootHz ** 2
  const step = (2 * fullScaleVolts) / 2 ** resolution.bits
  return (step * step) / 12 / (sampleRateHz / 2)
}

function wordsOf({ resolution, fullScaleVolts }: ConverterStage): string {
  return resolution.by === 'bits'
    ? `Ideal quantiser of ${resolution.bits} bits over ± ${show(fullScaleVolts)} V, even up to half its rate`
    : `Measured density of ${show(resolution.voltsPerRootHz)} V/√Hz, even up to half the converter’s rate`
}

/** A ratio in dB that stays finite where a shaping filter leaves nothing of the signal, or of either. */
function ratioDb(signal: number, noise: number): number {
  if (!(signal > 0)) return -MOST_RATIO_DB
  return Math.min(Math.max(20 * (Math.log10(signal) - Math.log10(noise)), -MOST_RATIO_DB), MOST_RATIO_DB)
}

/**
 * Noise of the stored samples over the kept band. The converter's noise (Δ²/12 of an ideal quantiser with steps of Δ = 2·full scale/2^bits, or
 * the measured density) is white up to half its rate; it goes through the digital parts, what each decimation folds down included, and is
 * counted in the sensor's unit by the sensitivity alone, as the samples are. An integrating part counts against the ideal integral.
 *
 * The full scale is the amplitude at the sensor, in the middle of the kept band, that just fills the converter, so that gain ahead of it counts;
 * the ratio compares that sine as it shows in the samples with the noise there.
 *
 * Source: W. R. Bennett, Spectra of quantized signals, Bell Syst. Tech. J. 27, 1948; effective bits: IEEE Std 1241.
 */
export function noiseBudget(chain: ComputedChain): NoiseBudget {
  const converter = chain.stages[chain.converterIndex]!.stage as ConverterStage
  const { sensitivity } = chain.stages[0]!.stage as SensorStage
  const { fromHz, toHz } = chain.spec.kept
  const perHz = voltsSquaredPerHz(converter) / (sensitivity * sensitivity)
  const middle = Float64Array.of((fromHz + toHz) / 2)
  const panels = Math.ceil(ripplesOver(chain, fromHz, toHz)) + 4
  const [power, gain] = keptForPath(chain, ['noise', fromHz, toHz], () => {
    const gainAt = noiseGain(chain)
    return [integral(gainAt, fromHz, toHz, panels, TOLERANCE), gainAt(middle)[0]!] as const
  })
  const rms = Math.sqrt(perHz * power)
  const ahead = new Float64Array(1)
  const scratch = new Float64Array(1)
  for (const part of partsAhead(chain)) addMagnitudeDb(part, middle, ahead, scratch)
  const [behindDb = 0] = stripsOver(chain, middle).digitalDb(0)
  const inSamples = (converter.fullScaleVolts / sensitivity) * 10 ** (behindDb / 20)
  const snrDb = ratioDb(inSamples / Math.SQRT2, rms)
  return {
    parts: [{ stageId: converter.id, source: 'converter', rms, words: wordsOf(converter) }],
    rms,
    density: Math.sqrt(perHz * gain),
    fullScale: (converter.fullScaleVolts / sensitivity) * 10 ** (-ahead[0]! / 20),
    snrDb,
    effectiveBits: (snrDb - 10 * Math.log10(1.5)) / (20 * Math.log10(2)),
  }
}
