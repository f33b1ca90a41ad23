import { cosHalfTurns, foldedTurns, sinHalfTurns } from '../response/axis'

/*
 * Real amplitudes of the parts that are known in closed form. Each comes with an exact delay: averaging N/(2·fs), a CIC filter N·(RM − 1)/2
 * samples, the integrator none against the ideal one.
 */

/** Below this part of the rate each of them is 1 to the last bit or nearly, and their quotients may no longer be formed. */
const NEAR_ZERO = 1e-12

/** (sin(πf/fs) / (πf/fs))^N; exactly 0 at multiples of the rate. */
export function averagingAmplitude(frequencyHz: number, order: number, sampleRateHz: number): number {
  const turns = frequencyHz / sampleRateHz
  if (Math.abs(turns) < NEAR_ZERO) return 1
  const folded = foldedTurns(frequencyHz, sampleRateHz)
  const sign = Math.round(turns - folded) % 2 === 0 ? 1 : -1
  return ((sign * sinHalfTurns(folded)) / (Math.PI * turns)) ** order
}

/**
 * [sin(πRMf/fs) / (RM·sin(πf/fs))]^N at any frequency; exactly 0 at its nulls, 1 at DC.
 *
 * Source: E. B. Hogenauer, An economical class of digital filters for decimation and interpolation, IEEE Trans. ASSP 29(2), 1981.
 */
export function cicAmplitude(frequencyHz: number, order: number, length: number, sampleRateHz: number): number {
  const turns = foldedTurns(frequencyHz, sampleRateHz)
  if (Math.abs(turns) < NEAR_ZERO) return 1
  const below = length * sinHalfTurns(turns)
  const folded = foldedTurns(frequencyHz * length, sampleRateHz)
  // Half turns that the two foldings took away, each of which turns the sign of its sine.
  const halves =
    Math.round((frequencyHz * length) / sampleRateHz - folded) - Math.round(frequencyHz / sampleRateHz - turns)
  const sign = halves % 2 === 0 ? 1 : -1
  return ((sign * sinHalfTurns(folded)) / below) ** order
}

/** The trapezoidal rule over the ideal integral, (x·cot x)^n with x = πf/fs folded to half the rate; exactly 0 there, 1 at DC. */
export function integrationAmplitude(frequencyHz: number, times: number, sampleRateHz: number): number {
  const turns = foldedTurns(frequencyHz, sampleRateHz)
  if (Math.abs(turns) < NEAR_ZERO) return 1
  return ((Math.PI * turns * cosHalfTurns(turns)) / sinHalfTurns(turns)) ** times
}
