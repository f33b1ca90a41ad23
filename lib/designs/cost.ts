import type { DigitalFilter } from '@/dsp'

/** Multiplies per sample of a cascade, counting neither zeros nor ones, as a firmware that knows its constants would run it. */
export function multipliesPerSample(filter: DigitalFilter): number {
  let count = 0
  for (const { b0, b1, b2, a1, a2 } of filter.sections) {
    for (const factor of [b0, b1, b2, a1, a2]) if (factor !== 0 && Math.abs(factor) !== 1) count += 1
  }
  return count
}
