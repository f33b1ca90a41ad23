import { isFir, type AnyDigital } from './filter'

const isWork = (factor: number): boolean => factor !== 0 && Math.abs(factor) !== 1

/**
 * Multiplies per sample, counting neither zeros nor ones, as a firmware that knows its constants would run it.
 *
 * A full second-order section takes five. Of a symmetric FIR filter of N taps the two samples that share a tap are added first, so that
 * (N + 1)/2 are left when N is odd and N/2 when it is even; the zeros of a half-band filter take none.
 */
export function multipliesPerSample(filter: AnyDigital): number {
  if (!isFir(filter)) {
    return filter.sections.reduce(
      (count, { b0, b1, b2, a1, a2 }) => count + [b0, b1, b2, a1, a2].filter(isWork).length,
      0,
    )
  }
  const { taps, symmetry } = filter
  const own = symmetry === 'none' ? taps.length : Math.ceil(taps.length / 2)
  let count = 0
  for (let k = 0; k < own; k++) if (isWork(taps[k]!)) count += 1
  return count
}
