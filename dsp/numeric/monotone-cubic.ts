/** Values and slopes of a curve through points, ready to be asked between them. */
export interface MonotoneCubic {
  readonly x: Float64Array
  readonly y: Float64Array
  readonly slope: Float64Array
}

/** The slope at an end: a parabola through three points, held back where it would overshoot. */
function endSlope(h0: number, h1: number, d0: number, d1: number): number {
  const slope = ((2 * h0 + h1) * d0 - h0 * d1) / (h0 + h1)
  if (Math.sign(slope) !== Math.sign(d0)) return 0
  return Math.sign(d0) !== Math.sign(d1) && Math.abs(slope) > Math.abs(3 * d0) ? 3 * d0 : slope
}

/**
 * A cubic through each pair of points that never overshoots them: slopes by the weighted harmonic mean (F. N. Fritsch & R. E. Carlson,
 * SIAM J. Numer. Anal. 17, 1980; F. N. Fritsch & J. Butland, SIAM J. Sci. Stat. Comput. 5, 1984).
 *
 * @param x N ≥ 2 rising values
 * @param y N values
 */
export function monotoneCubic(x: Float64Array, y: Float64Array): MonotoneCubic {
  const count = x.length
  const step = (k: number) => x[k + 1]! - x[k]!
  const secant = (k: number) => (y[k + 1]! - y[k]!) / step(k)
  const slope = new Float64Array(count)
  if (count === 2) return { x, y, slope: slope.fill(secant(0)) }
  for (let k = 1; k + 1 < count; k++) {
    const [before, after] = [secant(k - 1), secant(k)]
    if (before * after <= 0) continue
    const [w1, w2] = [2 * step(k) + step(k - 1), step(k) + 2 * step(k - 1)]
    slope[k] = (w1 + w2) / (w1 / before + w2 / after)
  }
  slope[0] = endSlope(step(0), step(1), secant(0), secant(1))
  slope[count - 1] = endSlope(step(count - 2), step(count - 3), secant(count - 2), secant(count - 3))
  return { x, y, slope }
}

/**
 * Value and slope at one place.
 *
 * @returns null outside the points
 */
export function cubicAt({ x, y, slope }: MonotoneCubic, at: number): { value: number; slope: number } | null {
  const last = x.length - 1
  if (!(at >= x[0]! && at <= x[last]!)) return null
  let low = 0
  let high = last
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (x[middle]! <= at) low = middle
    else high = middle
  }
  const h = x[high]! - x[low]!
  const t = (at - x[low]!) / h
  const u = 1 - t
  const rise = y[high]! - y[low]!
  const [a, b] = [slope[low]! * h - rise, rise - slope[high]! * h]
  return {
    value: y[low]! * u + y[high]! * t + t * u * (a * u + b * t),
    slope: (rise + (1 - 2 * t) * (a * u + b * t) + t * u * (b - a)) / h,
  }
}
