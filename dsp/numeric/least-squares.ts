/**
 * The x that makes |A·x − b| least, by Householder reflections on columns scaled to one (G. H. Golub, Numer. Math. 7, 1965). A column that the
 * others make up to thirteen digits gets the coefficient 0.
 *
 * @param a rows × columns, row by row, rows ≥ columns; overwritten
 * @param b `rows` values; overwritten
 */
export function leastSquares(a: Float64Array, b: Float64Array, columns: number): Float64Array {
  const rows = b.length
  const scale = new Float64Array(columns)
  for (let j = 0; j < columns; j++) {
    let sum = 0
    for (let i = 0; i < rows; i++) sum += a[i * columns + j]! ** 2
    scale[j] = sum > 0 ? 1 / Math.sqrt(sum) : 0
    for (let i = 0; i < rows; i++) a[i * columns + j] = a[i * columns + j]! * scale[j]!
  }
  const diagonal = new Float64Array(columns)
  for (let j = 0; j < columns; j++) {
    let norm = 0
    for (let i = j; i < rows; i++) norm += a[i * columns + j]! ** 2
    norm = Math.sqrt(norm)
    if (norm < 1e-13) continue
    const alpha = a[j * columns + j]! > 0 ? -norm : norm
    a[j * columns + j] = a[j * columns + j]! - alpha
    diagonal[j] = alpha
    // Twice over the square of the reflecting vector.
    const factor = -1 / (alpha * a[j * columns + j]!)
    for (let k = j + 1; k <= columns; k++) {
      let dot = 0
      for (let i = j; i < rows; i++) dot += a[i * columns + j]! * (k < columns ? a[i * columns + k]! : b[i]!)
      dot *= factor
      for (let i = j; i < rows; i++) {
        if (k < columns) a[i * columns + k] = a[i * columns + k]! - dot * a[i * columns + j]!
        else b[i] = b[i]! - dot * a[i * columns + j]!
      }
    }
  }
  const x = new Float64Array(columns)
  for (let j = columns - 1; j >= 0; j--) {
    if (diagonal[j] === 0) continue
    let sum = b[j]!
    for (let k = j + 1; k < columns; k++) sum -= a[j * columns + k]! * x[k]!
    x[j] = sum / diagonal[j]!
  }
  return x.map((value, j) => value * scale[j]!)
}
