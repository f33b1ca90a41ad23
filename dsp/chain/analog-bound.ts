import type { Complex, Filter } from '../forms/filter'
import { splitRoots } from '../response/factors'
import type { ChainPart } from './chain'

/*
 * A bound on what an analog part lets through above a frequency, from its roots alone: with u = 1/ω² every factor is a quadratic whose largest
 * or least value over 0 ≤ u ≤ U is known. A bound, not the value: the factors have their extremes at different places.
 */

/** Least of (m·u − 1)² + 4σ²·u over 0 ≤ u ≤ U: a pair over ω², squared. */
function leastPair({ re, im }: Complex, most: number): number {
  const modulus = re * re + im * im
  const at = (u: number): number => (modulus * u - 1) ** 2 + 4 * re * re * u
  const turn = (modulus - 2 * re * re) / (modulus * modulus)
  return at(Math.min(Math.max(turn, 0), most))
}

/** Least of (m − w)² + 4σ²·w over w ≥ W: a pair, squared. */
function leastPairFrom({ re, im }: Complex, from: number): number {
  const modulus = re * re + im * im
  const w = Math.max(from, modulus - 2 * re * re)
  return (modulus - w) ** 2 + 4 * re * re * w
}

const lg = (value: number): number => 10 * Math.log10(value)

/** Most that a filter has anywhere above a frequency, in dB; +Infinity where it has more zeros than poles. */
function analogMostAboveDb(filter: Filter<'s'>, fromHz: number): number {
  if (filter.zeros.length > filter.poles.length) return Infinity
  const square = (2 * Math.PI * fromHz) ** 2
  const most = 1 / square
  const zeros = splitRoots(filter.zeros, 'zeros')
  const poles = splitRoots(filter.poles, 'poles')
  let total = 20 * Math.log10(Math.abs(filter.gain))
  for (const { re, im } of zeros.pairs) {
    // A quadratic that opens upwards is largest at an end.
    const modulus = re * re + im * im
    total += lg(Math.max(1, (modulus * most - 1) ** 2 + 4 * re * re * most))
  }
  for (const re of zeros.reals) total += lg(1 + re * re * most)
  // Each zero has left a factor ω, which the poles nearest 0 take up.
  let powers = filter.zeros.length
  const byModulus = [...poles.pairs, ...poles.reals.map((re) => ({ re, im: 0 }))].sort(
    (a, b) => Math.hypot(a.re, a.im) - Math.hypot(b.re, b.im),
  )
  for (const pole of byModulus) {
    const size = pole.im === 0 ? 1 : 2
    const taken = Math.min(powers, size)
    powers -= taken
    if (pole.im === 0) {
      total -= taken === 1 ? 0 : lg(square + pole.re * pole.re)
      continue
    }
    const over = -lg(leastPair(pole, most))
    const bare = -lg(leastPairFrom(pole, square))
    total += (taken * over + (2 - taken) * bare) / 2
  }
  return total
}

/** Most that a part ahead of the quantiser has anywhere above a frequency, in dB. */
export function partMostAboveDb(part: ChainPart, fromHz: number): number {
  if (part.kind === 'analog') return analogMostAboveDb(part.filter, fromHz)
  if (part.kind !== 'averaging') return 0
  return Math.min(0, -20 * part.order * Math.log10((Math.PI * fromHz) / part.sampleRateHz))
}

/** Highest frequency at which a pair of poles has a peak of its own; 0 where none has. */
export function highestPeakHz(filter: Filter<'s'>): number {
  return (
    filter.poles.reduce((most, { re, im }) => Math.max(most, Math.sqrt(Math.max(0, im * im - re * re))), 0) /
    (2 * Math.PI)
  )
}
