/*
 * Random numbers that are the same every time: the generator is xoshiro128++ (Blackman & Vigna, Scrambled Linear Pseudorandom Number
 * Generators, ACM Trans. Math. Softw. 47(4), 2021), its state filled from the seed by a SplitMix-type hash.
 */

/** Uniform in [0, 1) with 53 bits; every seed is its own stream. */
export function seededUniform(seed: number): () => number {
  let hash = (seed ^ Math.floor(seed / 2 ** 32)) | 0
  const next = (): number => {
    hash = (hash + 0x9e3779b9) | 0
    let z = hash
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad)
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97)
    return (z ^ (z >>> 15)) | 0
  }
  let a = next()
  let b = next()
  let c = next()
  let d = next() | 1
  const word = (): number => {
    const sum = (a + d) | 0
    const result = (((sum << 7) | (sum >>> 25)) + a) >>> 0
    const t = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= t
    d = (d << 11) | (d >>> 21)
    return result
  }
  return () => ((word() >>> 5) * 2 ** 26 + (word() >>> 6)) / 2 ** 53
}

/**
 * Gaussian noise of zero mean and unit variance, the same for the same seed.
 *
 * @param seed any finite number; whole numbers up to 2⁵³ give different streams
 * @returns a function that gives the next value
 * Source: G. Marsaglia & T. A. Bray, A Convenient Method for Generating Normal Variables, SIAM Review 6(3), 1964 (polar method).
 */
export function seededNoise(seed: number): () => number {
  const uniform = seededUniform(seed)
  let spare: number | null = null
  return () => {
    if (spare !== null) {
      const value = spare
      spare = null
      return value
    }
    for (;;) {
      const u = 2 * uniform() - 1
      const v = 2 * uniform() - 1
      const square = u * u + v * v
      if (square > 0 && square < 1) {
        const factor = Math.sqrt((-2 * Math.log(square)) / square)
        spare = v * factor
        return u * factor
      }
    }
  }
}
