/**
 * Solves (N + λ·diag N)·x = g for a symmetric positive semidefinite N, as damped Gauss–Newton steps need it (D. W. Marquardt, J. SIAM 11,
 * 1963). The equations are first scaled to a unit diagonal, so that the units of the unknowns don't matter.
 *
 * @param normal n × n, row by row; only the lower triangle is read
 * @returns null when the matrix isn't positive definite in double precision
 */
export function solveDamped(normal: Float64Array, gradient: Float64Array, damping: number): Float64Array | null {
  const n = gradient.length
  const scale = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const diagonal = normal[i * n + i]!
    scale[i] = diagonal > 0 ? 1 / Math.sqrt(diagonal) : 0
  }
  const factor = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = i === j ? 1 + damping : normal[i * n + j]! * scale[i]! * scale[j]!
      for (let k = 0; k < j; k++) sum -= factor[i * n + k]! * factor[j * n + k]!
      if (i !== j) factor[i * n + j] = sum / factor[j * n + j]!
      else if (sum > 0) factor[i * n + i] = Math.sqrt(sum)
      else return null
    }
  }
  const x = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    let sum = gradient[i]! * scale[i]!
    for (let k = 0; k < i; k++) sum -= factor[i * n + k]! * x[k]!
    x[i] = sum / factor[i * n + i]!
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i]!
    for (let k = i + 1; k < n; k++) sum -= factor[k * n + i]! * x[k]!
    x[i] = sum / factor[i * n + i]!
  }
  for (let i = 0; i < n; i++) x[i] = x[i]! * scale[i]!
  return x
}
