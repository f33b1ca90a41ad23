import type { ComputedChain } from '@/dsp'

/** Impulse responses of the digital parts of a chain, made by convolution: shares no formula with the responses it is held against. */

function convolved(a: readonly number[], b: readonly number[]): number[] {
  const out = Array.from({ length: a.length + b.length - 1 }, () => 0)
  a.forEach((x, i) => b.forEach((y, k) => (out[i + k] = out[i + k]! + x * y)))
  return out
}

/** N running means of RM samples: what integrators and combs come to. */
export function boxcars(order: number, length: number): number[] {
  const mean = Array.from({ length }, () => 1 / length)
  return Array.from({ length: order }, () => mean).reduce(convolved, [1])
}

/** One FIR filter at the converter's rate that does what all decimations together do ahead of the last taking of samples. */
export function wholeTaps(chain: ComputedChain): number[] {
  let whole = [1]
  for (const { parts } of chain.stages) {
    for (const part of parts) {
      if (part.kind === 'cic') {
        const step = chain.converterRateHz / part.sampleRateHz
        whole = convolved(whole, spread(boxcars(part.order, part.combDelay * part.factor), step))
      } else if (part.kind === 'digital' && 'taps' in part.filter) {
        whole = convolved(whole, spread([...part.filter.taps], chain.converterRateHz / part.filter.sampleRateHz))
      }
    }
  }
  return whole
}

/** Taps at a lower rate as they stand at the higher one: with zeros between. */
function spread(taps: readonly number[], step: number): number[] {
  const out = Array.from({ length: (taps.length - 1) * step + 1 }, () => 0)
  taps.forEach((tap, k) => (out[k * step] = tap))
  return out
}

/** |Σ h[k]·e^{−j2πkf/fs}| by the plain sum. */
export function tapsGain(taps: readonly number[], hertz: number, rateHz: number): number {
  let [re, im] = [0, 0]
  taps.forEach((tap, k) => {
    re += tap * Math.cos((2 * Math.PI * k * hertz) / rateHz)
    im -= tap * Math.sin((2 * Math.PI * k * hertz) / rateHz)
  })
  return Math.hypot(re, im)
}
