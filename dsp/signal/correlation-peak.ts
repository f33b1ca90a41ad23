/*
 * The peak of C(τ) = Σ Re[(re + j·im)·e^{jωτ}], a sum over spectral lines: what a cross-correlation is between its samples too.
 */

export interface CorrelationLines {
  readonly re: Float64Array
  readonly im: Float64Array
  /** Angular frequency of each line, per unit of τ. */
  readonly omega: Float64Array
}

export function correlationAt(lines: CorrelationLines, delay: number): number {
  const { re, im, omega } = lines
  let sum = 0
  for (let k = 0; k < omega.length; k++) {
    const angle = omega[k]! * delay
    sum += re[k]! * Math.cos(angle) - im[k]! * Math.sin(angle)
  }
  return sum
}

/** First and second derivative of C. */
function slopes(lines: CorrelationLines, delay: number): readonly [number, number] {
  const { re, im, omega } = lines
  let first = 0
  let second = 0
  for (let k = 0; k < omega.length; k++) {
    const w = omega[k]!
    const angle = w * delay
    const c = Math.cos(angle)
    const s = Math.sin(angle)
    first -= w * (re[k]! * s + im[k]! * c)
    second -= w * w * (re[k]! * c - im[k]! * s)
  }
  return [first, second]
}

/**
 * The peak near `start`, by Newton's method on the slope, kept inside `start ± reach`; `start` itself where the curve isn't a hump.
 */
export function refinePeak(lines: CorrelationLines, start: number, reach: number): number {
  let delay = start
  for (let round = 0; round < 20; round++) {
    const [first, second] = slopes(lines, delay)
    if (!(second < 0)) break
    const next = Math.min(start + reach, Math.max(start - reach, delay - first / second))
    const moved = Math.abs(next - delay)
    delay = next
    if (moved <= 1e-12 * reach) break
  }
  return correlationAt(lines, delay) >= correlationAt(lines, start) ? delay : start
}
