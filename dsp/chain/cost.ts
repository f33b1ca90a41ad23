import { multipliesPerSample } from '../forms/cost'
import { isFir } from '../forms/filter'
import type { ChainPart } from './chain'

export interface PartCost {
  readonly multipliesPerSecond: number
  readonly words: number
}

const isPowerOfTwo = (value: number): boolean => Number.isInteger(Math.log2(value))

/**
 * What a part costs. An FIR filter ahead of a decimation computes only the samples that are kept, one with poles all of them. A CIC filter
 * adds and multiplies once for each kept sample, to bring (RM)^N back to 1, unless a shift does it; the trapezoidal rule multiplies once for
 * each integral. Words are coefficients that differ, and state.
 *
 * @param inRateHz the rate ahead of the stage
 * @param outRateHz the rate behind it
 */
export function costOf(part: ChainPart, inRateHz: number, outRateHz: number): PartCost {
  switch (part.kind) {
    case 'analog':
    case 'averaging':
      return { multipliesPerSecond: 0, words: 0 }
    case 'cic': {
      const multiplies = isPowerOfTwo(part.combDelay * part.factor) ? 0 : 1
      return { multipliesPerSecond: multiplies * outRateHz, words: part.order * (1 + part.combDelay) + multiplies }
    }
    case 'integration':
      return { multipliesPerSecond: part.times * inRateHz, words: 2 * part.times }
    case 'digital': {
      const { filter } = part
      const multiplies = multipliesPerSample(filter)
      if (isFir(filter)) {
        return { multipliesPerSecond: multiplies * outRateHz, words: multiplies + filter.taps.length }
      }
      const state = filter.sections.reduce((sum, { b2, a2 }) => sum + (b2 === 0 && a2 === 0 ? 1 : 2), 0)
      return { multipliesPerSecond: multiplies * inRateHz, words: multiplies + state }
    }
  }
}
