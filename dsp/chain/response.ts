import { DesignError } from '../errors'
import type { ChainResponse, ComputedChain } from './chain'
import { addGroupDelay, addMagnitudeDb, addPhase } from './part-response'

/**
 * Magnitude, phase and group delay from the sensor to the stored sample: sums over the parts, each from its roots, its taps or its closed form.
 * A digital part is taken at the frequency itself, which up to half the output rate is where it runs.
 *
 * @param frequenciesHz N frequencies in Hz, from 0 up to half the output rate
 * @returns N levels in dB (−Infinity at an exact zero), N unwrapped phases in radians, N delays in seconds
 * @throws DesignError `not-finite` for a frequency that is no finite number
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §4.8 (sampling chains), §5.3 (phase and delay add up).
 */
export function chainResponse(chain: ComputedChain, frequenciesHz: Float64Array): ChainResponse {
  const count = frequenciesHz.length
  const magnitudeDb = new Float64Array(count)
  const phaseRadians = new Float64Array(count)
  const groupDelaySeconds = new Float64Array(count)
  const scratch = new Float64Array(count)
  for (const { parts } of chain.stages) {
    for (const part of parts) {
      addMagnitudeDb(part, frequenciesHz, magnitudeDb, scratch)
      addPhase(part, frequenciesHz, phaseRadians, scratch)
      addGroupDelay(part, frequenciesHz, groupDelaySeconds, scratch)
    }
  }
  return { frequenciesHz, magnitudeDb, phaseRadians, groupDelaySeconds }
}

/**
 * Level of one stage alone, at the rate it runs at; beyond half of that rate a digital stage repeats itself.
 *
 * @param frequenciesHz N frequencies in Hz, any
 * @returns N levels in dB, all 0 for a stage that has no filter or is bypassed
 * @throws DesignError `no-stage`, `not-finite`
 */
export function stageMagnitudeDb(chain: ComputedChain, stageIndex: number, frequenciesHz: Float64Array): Float64Array {
  const stage = chain.stages[stageIndex]
  if (stage === undefined) {
    const most = chain.stages.length - 1
    const message = `The chain has stages 0 to ${most}; ${stageIndex} was asked for.`
    throw new DesignError('no-stage', 'stageIndex', message, Math.min(Math.max(0, stageIndex), most))
  }
  const out = new Float64Array(frequenciesHz.length)
  const scratch = new Float64Array(frequenciesHz.length)
  for (const part of stage.parts) addMagnitudeDb(part, frequenciesHz, out, scratch)
  return out
}
