import type { Complex } from '../forms/filter'

/*
 * The few complex operations that design needs, on plain { re, im } data. Hot loops elsewhere keep re and im in flat arrays.
 */

export const complex = (re: number, im = 0): Complex => ({ re, im })

export const conjugate = (a: Complex): Complex => ({ re: a.re, im: -a.im })

export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im })

export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im })

export const scale = (a: Complex, factor: number): Complex => ({ re: a.re * factor, im: a.im * factor })

export const multiply = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
})

/** a / b without overflow of |b|² (R. L. Smith, Algorithm 116, Comm. ACM 5(8), 1962). */
export function divide(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re
    const denominator = b.re + b.im * ratio
    return { re: (a.re + a.im * ratio) / denominator, im: (a.im - a.re * ratio) / denominator }
  }
  const ratio = b.re / b.im
  const denominator = b.re * ratio + b.im
  return { re: (a.re * ratio + a.im) / denominator, im: (a.im * ratio - a.re) / denominator }
}

export const modulus = (a: Complex): number => Math.hypot(a.re, a.im)

export const distance = (a: Complex, b: Complex): number => Math.hypot(a.re - b.re, a.im - b.im)

/**
 * Principal square root. The smaller component comes from the larger by a division, so that neither loses digits to cancellation
 * (W. Kahan, Branch Cuts for Complex Elementary Functions, 1987, without the treatment of infinities).
 */
export function squareRoot(a: Complex): Complex {
  if (a.re === 0 && a.im === 0) return { re: 0, im: 0 }
  const larger = Math.sqrt((Math.hypot(a.re, a.im) + Math.abs(a.re)) / 2)
  const smaller = a.im / (2 * larger)
  if (a.re >= 0) return { re: larger, im: smaller }
  return a.im >= 0 ? { re: smaller, im: larger } : { re: -smaller, im: -larger }
}

export function exponential(a: Complex): Complex {
  const radius = Math.exp(a.re)
  return { re: radius * Math.cos(a.im), im: a.im === 0 ? 0 : radius * Math.sin(a.im) }
}
