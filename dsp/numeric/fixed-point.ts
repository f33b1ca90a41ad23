import type { Complex } from '../forms/filter'

/*
 * Fixed-point numbers of any length on BigInt, for the few places where the answer is well defined but a double can't hold the way
 * there: poles that nearly coincide in a partial fraction, coefficients that cancel, a stability test. A number x is the integer
 * x·2^bits, rounded down.
 */

export interface BigComplex {
  readonly re: bigint
  readonly im: bigint
}

const view = new DataView(new ArrayBuffer(8))

/** Integer mantissa and exponent of a finite double: x = mantissa·2^exponent, exactly. */
export function decompose(x: number): { mantissa: bigint; exponent: number } {
  if (!Number.isFinite(x)) throw new RangeError('decompose takes a finite number')
  view.setFloat64(0, x)
  const word = view.getBigUint64(0)
  const biased = Number((word >> 52n) & 0x7ffn)
  const fraction = word & 0xfffffffffffffn
  const magnitude = biased === 0 ? fraction : fraction | 0x10000000000000n
  return { mantissa: x < 0 ? -magnitude : magnitude, exponent: (biased === 0 ? 1 : biased) - 1075 }
}

/** Number of bits of |x|, to within 3. */
export const bitLength = (x: bigint): number => (x === 0n ? 0 : (x < 0n ? -x : x).toString(16).length * 4)

/** x·2^exponent for any exponent, in two steps so that the factor itself stays a double. */
export function timesPowerOfTwo(x: number, exponent: number): number {
  if (exponent < -1000) return x * 2 ** -1000 * 2 ** Math.max(exponent + 1000, -1074)
  if (exponent > 1000) return x * 2 ** 1000 * 2 ** Math.min(exponent - 1000, 1023)
  return x * 2 ** exponent
}

/** Arithmetic at a given number of fractional bits. */
export class FixedPoint {
  readonly bits: number
  readonly one: bigint
  private readonly shift: bigint

  constructor(bits: number) {
    this.bits = bits
    this.shift = BigInt(bits)
    this.one = 1n << this.shift
  }

  fromNumber(x: number): bigint {
    const { mantissa, exponent } = decompose(x)
    const shift = exponent + this.bits
    return shift >= 0 ? mantissa << BigInt(shift) : mantissa >> BigInt(-shift)
  }

  toNumber(x: bigint): number {
    const excess = Math.max(0, bitLength(x) - 68)
    return timesPowerOfTwo(Number(x >> BigInt(excess)), excess - this.bits)
  }

  multiply(a: bigint, b: bigint): bigint {
    return (a * b) >> this.shift
  }

  divide(a: bigint, b: bigint): bigint {
    return (a << this.shift) / b
  }

  complex({ re, im }: Complex): BigComplex {
    return { re: this.fromNumber(re), im: this.fromNumber(im) }
  }

  toComplex({ re, im }: BigComplex): Complex {
    return { re: this.toNumber(re), im: this.toNumber(im) }
  }

  times(a: BigComplex, b: BigComplex): BigComplex {
    return {
      re: (a.re * b.re - a.im * b.im) >> this.shift,
      im: (a.re * b.im + a.im * b.re) >> this.shift,
    }
  }

  reciprocal(a: BigComplex): BigComplex {
    const square = a.re * a.re + a.im * a.im
    const doubled = this.shift * 2n
    return { re: (a.re << doubled) / square, im: (-a.im << doubled) / square }
  }

  /** e^a: Taylor series of a/2^k with |a/2^k| < 2⁻⁸, squared k times. */
  exponential(a: Complex): BigComplex {
    const halvings = Math.max(0, Math.ceil(Math.log2(Math.hypot(a.re, a.im))) + 8)
    const guarded = new FixedPoint(this.bits + 2 * halvings + 32)
    const exact = guarded.complex(a)
    const small = { re: exact.re >> BigInt(halvings), im: exact.im >> BigInt(halvings) }
    let term: BigComplex = { re: guarded.one, im: 0n }
    let sum = term
    for (let k = 1n; term.re !== 0n || term.im !== 0n; k += 1n) {
      const next = guarded.times(term, small)
      // Division truncates towards zero, so that the loop ends; the shift alone would stay at −1.
      term = { re: next.re / k, im: next.im / k }
      if ((term.re === 0n || term.re === -1n) && (term.im === 0n || term.im === -1n)) break
      sum = { re: sum.re + term.re, im: sum.im + term.im }
    }
    for (let k = 0; k < halvings; k += 1) sum = guarded.times(sum, sum)
    const drop = BigInt(guarded.bits - this.bits)
    return { re: sum.re >> drop, im: sum.im >> drop }
  }
}

/**
 * A double-precision point as short integers over one power of two, so that multiplying a long number by it costs little.
 * Parts below 2⁻¹²⁰ of the larger one are dropped.
 */
export interface ShortPoint {
  readonly re: bigint
  readonly im: bigint
  readonly shift: bigint
}

export function shortPoint({ re, im }: Complex): ShortPoint {
  const a = decompose(re)
  const b = decompose(im)
  const least = Math.min(re === 0 ? b.exponent : a.exponent, im === 0 ? a.exponent : b.exponent)
  const most = Math.max(re === 0 ? b.exponent : a.exponent, im === 0 ? a.exponent : b.exponent)
  const exponent = Math.max(least, most - 120)
  const align = (mantissa: bigint, from: number) =>
    from >= exponent ? mantissa << BigInt(from - exponent) : mantissa >> BigInt(exponent - from)
  const scaled = {
    re: align(a.mantissa, re === 0 ? exponent : a.exponent),
    im: align(b.mantissa, im === 0 ? exponent : b.exponent),
  }
  if (exponent <= 0) return { ...scaled, shift: BigInt(-exponent) }
  return { re: scaled.re << BigInt(exponent), im: scaled.im << BigInt(exponent), shift: 0n }
}

/** a·point at the length of a. */
export const timesShort = (a: BigComplex, point: ShortPoint): BigComplex => ({
  re: (a.re * point.re - a.im * point.im) >> point.shift,
  im: (a.re * point.im + a.im * point.re) >> point.shift,
})

/** The ratio of two long complex numbers of one scale, as doubles. */
export function ratio(a: BigComplex, b: BigComplex): Complex {
  const length = Math.max(bitLength(b.re), bitLength(b.im))
  const lengthA = Math.max(bitLength(a.re), bitLength(a.im))
  const drop = BigInt(Math.max(0, length - 80))
  const dropA = BigInt(Math.max(0, lengthA - 80))
  const top = { re: Number(a.re >> dropA), im: Number(a.im >> dropA) }
  const bottom = { re: Number(b.re >> drop), im: Number(b.im >> drop) }
  const square = bottom.re * bottom.re + bottom.im * bottom.im
  const exponent = Number(dropA - drop)
  return {
    re: timesPowerOfTwo((top.re * bottom.re + top.im * bottom.im) / square, exponent),
    im: timesPowerOfTwo((top.im * bottom.re - top.re * bottom.im) / square, exponent),
  }
}
