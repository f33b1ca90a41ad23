import { DesignError } from '../errors'
import type { Section } from '../forms/filter'
import { CHUNK, createCascade, firstNotFinite, refuseSample, runCascade, setState, steadyState } from './cascade'
import type { Cascade } from './cascade'

/**
 * Samples by which a zero-phase run extends the recording at each end: 3·(2·S + 1 − min(sections with b2 = 0, sections with a2 = 0))
 * for S sections, that is three times the number of coefficients of the whole denominator or numerator.
 *
 * The results within this many samples of either end (and, at low corners, within the settling time) rest on the extension.
 */
export function zeroPhasePadLength(sections: readonly Section[]): number {
  const shortB = sections.filter((section) => section.b2 === 0).length
  const shortA = sections.filter((section) => section.a2 === 0).length
  return 3 * (2 * sections.length + 1 - Math.min(shortB, shortA))
}

/** Least number of samples that a zero-phase run takes: one more than it extends by, since the odd extension mirrors that many. */
export function minimumSamplesForZeroPhase(
  sections: readonly Section[],
  padLength = zeroPhasePadLength(sections),
): number {
  return padLength + 1
}

/** Runs `values` from their end to their beginning, in place, by pieces turned round in `scratch`. */
function runBackward(cascade: Cascade, values: Float64Array, scratch: Float64Array): void {
  let end = values.length
  while (end > 0) {
    const count = Math.min(scratch.length, end)
    for (let i = 0; i < count; i++) scratch[i] = values[end - 1 - i]!
    runCascade(cascade, scratch, scratch, 0, count)
    for (let i = 0; i < count; i++) values[end - 1 - i] = scratch[i]!
    end -= count
  }
}

/**
 * Forward, then backward, over the recording extended by odd reflection about its end samples, each pass started in the steady state of
 * its first sample. The extension is held apart, so that only one array of the recording's length is needed.
 */
export function runZeroPhase(
  sections: readonly Section[],
  samples: Float64Array,
  out: Float64Array,
  padLength = zeroPhasePadLength(sections),
): void {
  if (!Number.isInteger(padLength) || padLength < 0) {
    throw new DesignError(
      'pad-length',
      'padLength',
      'The extension must be a whole number of samples, 0 or more.',
      zeroPhasePadLength(sections),
    )
  }
  const least = minimumSamplesForZeroPhase(sections, padLength)
  const count = samples.length
  if (count < least) {
    throw new DesignError(
      'too-short',
      'samples',
      `A zero-phase run of this filter needs at least ${least} samples; the recording has ${count}.`,
      least,
    )
  }
  const bad = firstNotFinite(samples, 0, count)
  if (bad >= 0) refuseSample(samples[bad]!, bad)

  const before = new Float64Array(padLength)
  const after = new Float64Array(padLength)
  for (let i = 0; i < padLength; i++) {
    before[i] = 2 * samples[0]! - samples[padLength - i]!
    after[i] = 2 * samples[count - 1]! - samples[count - 2 - i]!
  }
  const steady = steadyState(sections)
  const cascade = createCascade(sections)
  setState(cascade, steady, padLength > 0 ? before[0]! : samples[0]!)
  runCascade(cascade, before, before, 0, padLength)
  runCascade(cascade, samples, out, 0, count)
  runCascade(cascade, after, after, 0, padLength)

  setState(cascade, steady, padLength > 0 ? after[padLength - 1]! : out[count - 1]!)
  const scratch = new Float64Array(CHUNK)
  runBackward(cascade, after, scratch)
  runBackward(cascade, out, scratch)
}
