import { isFir } from '../forms/filter'
import type { ChainPart, ComputedChain } from './chain'
import { addMagnitudeDb } from './part-response'
import { converterStrips, stripsOver } from './strips'

/*
 * Sum of |H|² of the digital parts over all that folds onto an output frequency. While every part that is followed by a decimation is finite,
 * white noise stays a finite autocorrelation: each part convolves it with its own, each decimation keeps every R-th lag. The sum over all
 * images is then one sum of cosines, however large the factor is.
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., §2.10 (noise through a system), §4.6 (decimation).
 */

/** Lags 0 … L of an even sequence. */
type Lags = Float64Array

/** Autocorrelation of taps. */
function correlationOf(taps: Float64Array): Lags {
  return Float64Array.from(taps, (_, lag) => {
    let sum = 0
    for (let k = lag; k < taps.length; k++) sum += taps[k]! * taps[k - lag]!
    return sum
  })
}

/** Of a CIC filter: `length` ones, scaled to 1 in all, convolved 2·order times with themselves. */
function correlationOfCic(order: number, length: number): Lags {
  let values = Float64Array.of(1)
  for (let turn = 0; turn < 2 * order; turn++) {
    const next = new Float64Array(values.length + length - 1)
    for (let k = 0; k < values.length; k++) {
      const share = values[k]! / length
      next[k] = next[k]! + share
      if (k + length < next.length) next[k + length] = next[k + length]! - share
    }
    for (let k = 1; k < next.length; k++) next[k] = next[k]! + next[k - 1]!
    // Even by nature: the first half, which has gathered the least rounding, stands for both.
    for (let k = 0; 2 * k < next.length; k++) next[next.length - 1 - k] = next[k]!
    values = next
  }
  return values.slice((values.length - 1) / 2)
}

/** Every `factor`-th lag of the convolution of two even sequences, times `factor`. */
function convolved(a: Lags, b: Lags, factor: number): Lags {
  const most = a.length + b.length - 2
  return Float64Array.from({ length: Math.floor(most / factor) + 1 }, (_, n) => {
    const lag = n * factor
    let sum = 0
    for (let k = Math.max(1 - a.length, lag - b.length + 1); k < a.length && k < lag + b.length; k++) {
      sum += a[Math.abs(k)]! * b[Math.abs(lag - k)]!
    }
    return factor * sum
  })
}

function correlationOfPart(part: ChainPart): Lags | null {
  if (part.kind === 'cic') return correlationOfCic(part.order, part.combDelay * part.factor)
  return part.kind === 'digital' && isFir(part.filter) ? correlationOf(part.filter.taps) : null
}

interface Folded {
  readonly lags: Lags
  /** At the output rate. */
  readonly behind: readonly ChainPart[]
}

/** Null where a part that is not finite stands ahead of a decimation. */
function foldedOf(chain: ComputedChain): Folded | null {
  let lags: Lags = Float64Array.of(1)
  const behind: ChainPart[] = []
  for (const { parts, inRateHz, outRateHz, factor } of chain.stages.slice(chain.converterIndex + 1)) {
    let left = factor
    if (factor > 1 && behind.length > 0) return null
    for (const part of parts) {
      const own = correlationOfPart(part)
      if (own === null) {
        if (left > 1) return null
        behind.push(part)
        continue
      }
      const rateHz = part.kind === 'digital' ? part.filter.sampleRateHz : part.kind === 'cic' ? part.sampleRateHz : 0
      const isBehind = left > 1 && rateHz < (inRateHz! + outRateHz!) / 2
      // The filters of a decimation run at its input rate but for a compensation, which follows the folding.
      if (left > 1 && !isBehind) {
        lags = convolved(lags, own, left)
        left = 1
      } else if (isBehind) return null
      else lags = convolved(lags, own, 1)
    }
    if (left > 1) return null
  }
  return { lags, behind }
}

/** Below this part of the whole power its cosines would cancel too many digits. */
const LEAST_PART = 1e-6

function cosineSum(lags: Lags, outputHz: Float64Array, rateHz: number): Float64Array {
  return outputHz.map((hertz) => {
    const twice = 2 * Math.cos((2 * Math.PI * hertz) / rateHz)
    let [next, after] = [0, 0]
    for (let k = lags.length - 1; k > 0; k--) {
      const value = 2 * lags[k]! + twice * next - after
      after = next
      next = value
    }
    return lags[0]! + (twice / 2) * next - after
  })
}

function stripSum(chain: ComputedChain, outputHz: Float64Array): Float64Array {
  const { digitalDb } = stripsOver(chain, outputHz)
  const total = new Float64Array(outputHz.length)
  for (let strip = 0; strip < converterStrips(chain); strip++) {
    const levels = digitalDb(strip)
    for (let n = 0; n < total.length; n++) total[n] = total[n]! + 10 ** (levels[n]! / 10)
  }
  return total
}

/**
 * Power gain of white noise from the converter to the stored samples, by output frequency: all that folds onto it from below half the converter's
 * rate. Taken as one sum of cosines where that keeps its digits, else strip by strip.
 *
 * @returns a function of output frequencies from 0 up to half the output rate
 */
export function noiseGain(chain: ComputedChain): (outputHz: Float64Array) => Float64Array {
  const folded = foldedOf(chain)
  if (folded === null) return (outputHz) => stripSum(chain, outputHz)
  const { lags, behind } = folded
  return (outputHz) => {
    const power = cosineSum(lags, outputHz, chain.outputRateHz)
    if (power.some((value) => !(value > LEAST_PART * lags[0]!))) return stripSum(chain, outputHz)
    const levels = new Float64Array(outputHz.length)
    const scratch = new Float64Array(outputHz.length)
    for (const part of behind) addMagnitudeDb(part, outputHz, levels, scratch)
    return power.map((value, n) => value * 10 ** (levels[n]! / 10))
  }
}
