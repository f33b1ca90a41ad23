/*
 * The innermost loops of a cascade: one to four sections at once in transposed direct form II, y = b0·x + s₁, s₁' = b1·x − a1·y + s₂,
 * s₂' = b2·x − a2·y, with coefficients and states in locals. Written out, since a loop over sections costs more than the arithmetic.
 */

export const FUSED = 4
/** Numbers a section: b0 b1 b2 a1 a2. */
export const COEFFICIENTS = 5

/**
 * The states are written back inside the loop, at its last pass: were they used after it, the compiler would store all of them on
 * every pass, which made the loop a third slower (measured on Node 20).
 */
type Kernel = (
  k: Float64Array,
  s: Float64Array,
  at: number,
  input: Float64Array,
  output: Float64Array,
  from: number,
  to: number,
) => void

export const one: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b0 = k[c]!
  const b1 = k[c + 1]!
  const b2 = k[c + 2]!
  const a1 = k[c + 3]!
  const a2 = k[c + 4]!
  let p = s[2 * at]!
  let q = s[2 * at + 1]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y = b0 * x + p
    p = b1 * x + q - a1 * y
    q = b2 * x - a2 * y
    output[n] = y
    if (n === last) {
      s[2 * at] = p
      s[2 * at + 1] = q
    }
  }
}

export const two: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    output[n] = y1
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
    }
  }
}

export const three: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const b20 = k[c + 10]!
  const b21 = k[c + 11]!
  const b22 = k[c + 12]!
  const a21 = k[c + 13]!
  const a22 = k[c + 14]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  let p2 = s[t + 4]!
  let q2 = s[t + 5]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    const y2 = b20 * y1 + p2
    p2 = b21 * y1 + q2 - a21 * y2
    q2 = b22 * y1 - a22 * y2
    output[n] = y2
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
      s[t + 4] = p2
      s[t + 5] = q2
    }
  }
}

export const four: Kernel = (k, s, at, input, output, from, to) => {
  const c = at * COEFFICIENTS
  const b00 = k[c]!
  const b01 = k[c + 1]!
  const b02 = k[c + 2]!
  const a01 = k[c + 3]!
  const a02 = k[c + 4]!
  const b10 = k[c + 5]!
  const b11 = k[c + 6]!
  const b12 = k[c + 7]!
  const a11 = k[c + 8]!
  const a12 = k[c + 9]!
  const b20 = k[c + 10]!
  const b21 = k[c + 11]!
  const b22 = k[c + 12]!
  const a21 = k[c + 13]!
  const a22 = k[c + 14]!
  const b30 = k[c + 15]!
  const b31 = k[c + 16]!
  const b32 = k[c + 17]!
  const a31 = k[c + 18]!
  const a32 = k[c + 19]!
  const t = 2 * at
  let p0 = s[t]!
  let q0 = s[t + 1]!
  let p1 = s[t + 2]!
  let q1 = s[t + 3]!
  let p2 = s[t + 4]!
  let q2 = s[t + 5]!
  let p3 = s[t + 6]!
  let q3 = s[t + 7]!
  const last = to - 1
  for (let n = from; n < to; n++) {
    const x = input[n]!
    const y0 = b00 * x + p0
    p0 = b01 * x + q0 - a01 * y0
    q0 = b02 * x - a02 * y0
    const y1 = b10 * y0 + p1
    p1 = b11 * y0 + q1 - a11 * y1
    q1 = b12 * y0 - a12 * y1
    const y2 = b20 * y1 + p2
    p2 = b21 * y1 + q2 - a21 * y2
    q2 = b22 * y1 - a22 * y2
    const y3 = b30 * y2 + p3
    p3 = b31 * y2 + q3 - a31 * y3
    q3 = b32 * y2 - a32 * y3
    output[n] = y3
    if (n === last) {
      s[t] = p0
      s[t + 1] = q0
      s[t + 2] = p1
      s[t + 3] = q1
      s[t + 4] = p2
      s[t + 5] = q2
      s[t + 6] = p3
      s[t + 7] = q3
    }
  }
}
