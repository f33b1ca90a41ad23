import { seededNoise } from '@/dsp'

/** Of every filter with feedback, and of taps that are few enough. */
export const testVectorLength = 64
const stepFrom = 16
const noiseFrom = 32
const noiseSeed = 20_161

/** Samples of the test vector of an FIR filter: each tap meets the noise at least once. */
export const tapsTestLength = (taps: number): number => Math.max(testVectorLength, taps + noiseFrom)

/**
 * Input of the test vector: an impulse and its decay, a unit step, then noise from a fixed seed. Every value is a multiple of 1/64
 * below 4 in size, so that it is exact in every number type and short in print.
 */
export function testInput(length = testVectorLength): Float64Array {
  const noise = seededNoise(noiseSeed)
  return Float64Array.from({ length }, (_, n) => {
    if (n === 0) return 1
    if (n < stepFrom) return 0
    if (n < noiseFrom) return 1
    const value = Math.round(noise() * 64) / 64
    return Math.min(Math.max(value, -3.984375), 3.984375) + 0
  })
}

export const testVectorWords = (length = testVectorLength): string =>
  `${length} samples: an impulse at n = 0, a unit step from n = ${stepFrom}, ` +
  `noise in steps of 1/64 from n = ${noiseFrom}; started from zero state`
