import type { Complex } from '../forms/filter'

/*
 * Points on a frequency axis that can't step over a resonance: beside an even net, each root brings points at distances d·2ᵏ on both
 * sides of its own frequency, d being its distance from the axis.
 */

const unique = (points: number[]): number[] =>
  points.sort((a, b) => a - b).filter((value, index, all) => index === 0 || value > (all[index - 1] ?? 0))

function around(centre: number, distance: number, low: number, high: number): number[] {
  const points = centre >= low && centre <= high ? [centre] : []
  for (let step = Math.max(distance, (high - low) * 1e-15) / 4; step < high - low; step *= 2) {
    if (centre - step > low && centre - step < high) points.push(centre - step)
    if (centre + step < high && centre + step > low) points.push(centre + step)
  }
  return points
}

/** Angles from 0 to π, refined near roots on the z-plane. */
export function refinedAngles(roots: readonly Complex[], even = 64): number[] {
  const points = Array.from({ length: even + 1 }, (_, k) => (Math.PI * k) / even)
  for (const root of roots) {
    if (root.im < 0) continue
    const angle = Math.atan2(root.im, root.re)
    points.push(...around(angle, Math.abs(1 - Math.hypot(root.re, root.im)), 0, Math.PI))
  }
  return unique(points)
}

/** Angular frequencies from 0 to far above all roots, refined near roots on the s-plane. */
export function refinedFrequencies(roots: readonly Complex[], perDecade = 24): number[] {
  const sizes = roots.map((root) => Math.hypot(root.re, root.im)).filter((size) => size > 0)
  if (sizes.length === 0) return [0, 1]
  const low = Math.min(...sizes) / 100
  const high = Math.max(...sizes) * 100
  const count = Math.ceil(Math.log10(high / low) * perDecade)
  const points = [0, ...Array.from({ length: count + 1 }, (_, k) => low * (high / low) ** (k / count))]
  for (const root of roots) {
    if (root.im >= 0) points.push(...around(root.im, Math.abs(root.re), 0, 4 * Math.hypot(root.re, root.im)))
  }
  return unique(points)
}
