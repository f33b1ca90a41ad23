import { groupDelayInto, phaseResponseInto } from '../response/delay'
import { magnitudeDbInto } from '../response/frequency'
import type { ChainPart } from './chain'
import { averagingAmplitude, cicAmplitude, integrationAmplitude } from './closed-forms'

const decibels = (amplitude: number): number => 20 * Math.log10(Math.abs(amplitude))

/** Amplitude of a part known in closed form, with its sign. */
function amplitudeOf(part: Exclude<ChainPart, { filter: unknown }>, hertz: number): number {
  switch (part.kind) {
    case 'averaging':
      return averagingAmplitude(hertz, part.order, part.sampleRateHz)
    case 'cic':
      return cicAmplitude(hertz, part.order, part.combDelay * part.factor, part.sampleRateHz)
    case 'integration':
      return integrationAmplitude(hertz, part.times, part.sampleRateHz)
  }
}

/** Its exact delay in seconds. */
function delayOf(part: Exclude<ChainPart, { filter: unknown }>): number {
  switch (part.kind) {
    case 'averaging':
      return part.order / (2 * part.sampleRateHz)
    case 'cic':
      return (part.order * (part.combDelay * part.factor - 1)) / (2 * part.sampleRateHz)
    case 'integration':
      return 0
  }
}

/** Adds the level of a part in dB to what is there; −Infinity at an exact zero. */
export function addMagnitudeDb(
  part: ChainPart,
  frequenciesHz: Float64Array,
  out: Float64Array,
  scratch: Float64Array,
): void {
  const count = frequenciesHz.length
  if ('filter' in part) {
    magnitudeDbInto(part.filter, frequenciesHz, scratch)
    for (let n = 0; n < count; n++) out[n] = out[n]! + scratch[n]!
    return
  }
  for (let n = 0; n < count; n++) out[n] = out[n]! + decibels(amplitudeOf(part, frequenciesHz[n]!))
}

/** Adds the phase of a part in radians, continuous, with a step of +π where its amplitude changes its sign. */
export function addPhase(part: ChainPart, frequenciesHz: Float64Array, out: Float64Array, scratch: Float64Array): void {
  const count = frequenciesHz.length
  if ('filter' in part) {
    phaseResponseInto(part.filter, frequenciesHz, scratch)
    for (let n = 0; n < count; n++) out[n] = out[n]! + scratch[n]!
    return
  }
  const delay = delayOf(part)
  for (let n = 0; n < count; n++) {
    const hertz = frequenciesHz[n]!
    const side = hertz < 0 ? -Math.PI : Math.PI
    out[n] = out[n]! - 2 * Math.PI * hertz * delay + (amplitudeOf(part, hertz) < 0 ? side : 0)
  }
}

/** Adds the group delay of a part in seconds. */
export function addGroupDelay(
  part: ChainPart,
  frequenciesHz: Float64Array,
  out: Float64Array,
  scratch: Float64Array,
): void {
  const count = frequenciesHz.length
  if ('filter' in part) {
    groupDelayInto(part.filter, frequenciesHz, scratch)
    for (let n = 0; n < count; n++) out[n] = out[n]! + scratch[n]!
    return
  }
  const delay = delayOf(part)
  for (let n = 0; n < count; n++) out[n] = out[n]! + delay
}
