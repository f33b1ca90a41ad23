import { expect } from 'vitest'
import type { Complex, Filter, Section } from '@/dsp'

/** H of a cascade (or of one section) at e^{jω}, by the difference equation's own coefficients. */
export function cascadeAt(sections: readonly Section[], radians: number): Complex {
  let [re, im] = [1, 0]
  for (const { b0, b1, b2, a1, a2 } of sections) {
    const [c1, s1, c2, s2] = [Math.cos(radians), Math.sin(radians), Math.cos(2 * radians), Math.sin(2 * radians)]
    const [nr, ni] = [b0 + b1 * c1 + b2 * c2, -b1 * s1 - b2 * s2]
    const [dr, di] = [1 + a1 * c1 + a2 * c2, -a1 * s1 - a2 * s2]
    const power = dr * dr + di * di
    const [qr, qi] = [(nr * dr + ni * di) / power, (ni * dr - nr * di) / power]
    ;[re, im] = [re * qr - im * qi, re * qi + im * qr]
  }
  return { re, im }
}

/** H from its roots in the plainest way, factor by factor; enough for tests at moderate order and level. */
export function rootsAt(filter: Filter<'s' | 'z'>, x: Complex): Complex {
  let [re, im] = [filter.gain, 0]
  const length = Math.max(filter.zeros.length, filter.poles.length)
  for (let k = 0; k < length; k += 1) {
    const zero = filter.zeros[k]
    const pole = filter.poles[k]
    if (zero !== undefined) {
      const [fr, fi] = [x.re - zero.re, x.im - zero.im]
      ;[re, im] = [re * fr - im * fi, re * fi + im * fr]
    }
    if (pole !== undefined) {
      const [fr, fi] = [x.re - pole.re, x.im - pole.im]
      const power = fr * fr + fi * fi
      ;[re, im] = [(re * fr + im * fi) / power, (im * fr - re * fi) / power]
    }
  }
  return { re, im }
}

export const analogAt = (filter: Filter<'s'>, hz: number) => rootsAt(filter, { re: 0, im: 2 * Math.PI * hz })

export const digitalAt = (filter: Filter<'z'>, radians: number) =>
  rootsAt(filter, { re: Math.cos(radians), im: Math.sin(radians) })

export const size = ({ re, im }: Complex) => Math.hypot(re, im)

export const decibels = (value: Complex | number) =>
  20 * Math.log10(typeof value === 'number' ? Math.abs(value) : size(value))

/** |a − b|/|b|. */
export const relative = (a: Complex, b: Complex) => Math.hypot(a.re - b.re, a.im - b.im) / size(b)

export const spaced = (from: number, to: number, count: number) =>
  Array.from({ length: count }, (_, k) => from + ((to - from) * k) / (count - 1))

/** Upper-half roots against a table of [re, im] in any order, each to a relative tolerance. */
export function expectRoots(roots: readonly Complex[], table: readonly (readonly number[])[], tolerance: number): void {
  expect(roots.length).toBe(table.length)
  for (const [re = 0, im = 0] of table) {
    const nearest = Math.min(...roots.map((root) => Math.hypot(root.re - re, root.im - im)))
    expect(nearest / Math.hypot(re, im), `a root at ${re} + j${im}`).toBeLessThan(tolerance)
  }
}
