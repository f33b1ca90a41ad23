/*
 * exp(A) of a small real matrix by scaling, a diagonal Padé approximant of degree 13, and squaring.
 * Source: N. J. Higham, The Scaling and Squaring Method for the Matrix Exponential Revisited, SIAM J. Matrix Anal. 26(4), 2005,
 * Algorithm 2.3 with m = 13 only: θ₁₃ and the coefficients b of eq. (2.3).
 */

const THETA_13 = 5.371920351148152
const B = [
  64764752532480000, 32382376266240000, 7771770303897600, 1187353796428800, 129060195264000, 10559470521600,
  670442572800, 33522128640, 1323241920, 40840800, 960960, 16380, 182, 1,
] as const

/** out = a·b for n×n matrices in rows. */
function multiplyInto(n: number, a: Float64Array, b: Float64Array, out: Float64Array): Float64Array {
  out.fill(0)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < n; k++) {
      const factor = a[i * n + k]!
      if (factor === 0) continue
      for (let j = 0; j < n; j++) out[i * n + j]! += factor * b[k * n + j]!
    }
  }
  return out
}

const multiply = (n: number, a: Float64Array, b: Float64Array) => multiplyInto(n, a, b, new Float64Array(n * n))

/** Σ weight·matrix + weight₀·I */
function combine(n: number, identity: number, parts: readonly (readonly [number, Float64Array])[]): Float64Array {
  const out = new Float64Array(n * n)
  for (const [weight, matrix] of parts) for (let i = 0; i < out.length; i++) out[i]! += weight * matrix[i]!
  for (let i = 0; i < n; i++) out[i * n + i]! += identity
  return out
}

/** Solves a·x = b for matrices by Gaussian elimination with partial pivoting; a and b are overwritten, the answer is b. */
function solve(n: number, a: Float64Array, b: Float64Array): Float64Array {
  for (let column = 0; column < n; column++) {
    let pivot = column
    for (let row = column + 1; row < n; row++) {
      if (Math.abs(a[row * n + column]!) > Math.abs(a[pivot * n + column]!)) pivot = row
    }
    if (pivot !== column) {
      for (const matrix of [a, b]) {
        for (let j = 0; j < n; j++) {
          const kept = matrix[column * n + j]!
          matrix[column * n + j] = matrix[pivot * n + j]!
          matrix[pivot * n + j] = kept
        }
      }
    }
    const head = a[column * n + column]!
    for (let row = column + 1; row < n; row++) {
      const factor = a[row * n + column]! / head
      if (factor === 0) continue
      for (let j = column; j < n; j++) a[row * n + j]! -= factor * a[column * n + j]!
      for (let j = 0; j < n; j++) b[row * n + j]! -= factor * b[column * n + j]!
    }
  }
  for (let row = n - 1; row >= 0; row--) {
    for (let j = 0; j < n; j++) {
      let sum = b[row * n + j]!
      for (let k = row + 1; k < n; k++) sum -= a[row * n + k]! * b[k * n + j]!
      b[row * n + j] = sum / a[row * n + row]!
    }
  }
  return b
}

function oneNorm(n: number, a: Float64Array): number {
  let norm = 0
  for (let j = 0; j < n; j++) {
    let sum = 0
    for (let i = 0; i < n; i++) sum += Math.abs(a[i * n + j]!)
    norm = Math.max(norm, sum)
  }
  return norm
}

/**
 * exp(A).
 *
 * @param n rows and columns
 * @param a n·n numbers, row by row; not changed
 * @returns n·n numbers, row by row
 */
export function matrixExponential(n: number, a: Float64Array): Float64Array {
  const norm = oneNorm(n, a)
  const squarings = norm > THETA_13 ? Math.ceil(Math.log2(norm / THETA_13)) : 0
  const scaled = a.map((value) => value * 2 ** -squarings)
  const a2 = multiply(n, scaled, scaled)
  const a4 = multiply(n, a2, a2)
  const a6 = multiply(n, a2, a4)
  const [b0, b1, b2, b3, b4, b5, b6, b7, b8, b9, b10, b11, b12, b13] = B
  const high = combine(n, 0, [
    [b13, a6],
    [b11, a4],
    [b9, a2],
  ])
  const odd = multiply(
    n,
    scaled,
    combine(n, b1, [
      [1, multiply(n, a6, high)],
      [b7, a6],
      [b5, a4],
      [b3, a2],
    ]),
  )
  const even = combine(n, b0, [
    [
      1,
      multiply(
        n,
        a6,
        combine(n, 0, [
          [b12, a6],
          [b10, a4],
          [b8, a2],
        ]),
      ),
    ],
    [b6, a6],
    [b4, a4],
    [b2, a2],
  ])
  let result = solve(
    n,
    combine(n, 0, [
      [1, even],
      [-1, odd],
    ]),
    combine(n, 0, [
      [1, even],
      [1, odd],
    ]),
  )
  let spare: Float64Array = new Float64Array(n * n)
  for (let i = 0; i < squarings; i++) {
    multiplyInto(n, result, result, spare)
    ;[result, spare] = [spare, result]
  }
  return result
}
