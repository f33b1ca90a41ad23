import type { BuildPart, Complex } from '@/dsp'

/*
 * A circuit solved from its list of parts, with Kirchhoff's current law at every free node. Knows nothing of f0 and Q.
 */

const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im })
const multiply = (a: Complex, b: Complex): Complex => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re })
const divide = (a: Complex, b: Complex): Complex => {
  const power = b.re ** 2 + b.im ** 2
  return { re: (a.re * b.re + a.im * b.im) / power, im: (a.im * b.re - a.re * b.im) / power }
}
const size = ({ re, im }: Complex) => Math.hypot(re, im)

/** Gaussian elimination with row pivots; each row ends with its right-hand side. */
function solve(rows: Complex[][]): Complex[] {
  const count = rows.length
  for (let k = 0; k < count; k += 1) {
    const pivot = rows.slice(k).reduce((best, row) => (size(row[k]!) > size(best[k]!) ? row : best))
    rows.splice(rows.indexOf(pivot), 1)
    rows.splice(k, 0, pivot)
    for (const row of rows) {
      if (row === pivot) continue
      const factor = divide(row[k]!, pivot[k]!)
      for (let column = k; column <= count; column += 1) {
        row[column] = subtract(row[column]!, multiply(factor, pivot[column]!))
      }
    }
  }
  return rows.map((row, k) => divide(row[count]!, row[k]!))
}

/**
 * Output over input. Where the parts have a node “amplifier input” an ideal follower drives the output from it; where they have an
 * “inverting input” an ideal amplifier drives the output so that it stays at 0 V; else nothing drives it but the parts.
 */
export function transferOf(parts: readonly BuildPart[], hz: number): Complex {
  const nodes = new Set(parts.flatMap(({ place }) => place.split(' to ')))
  const unknown = [...nodes].filter((node) => node !== 'input' && node !== 'ground')
  const zero: Complex = { re: 0, im: 0 }
  const row = () => Array.from({ length: unknown.length + 1 }, () => zero)
  const rows = new Map(unknown.map((node) => [node, row()]))
  const addTo = (node: string, other: string, admittance: Complex) => {
    const equation = rows.get(node)
    if (equation === undefined) return
    const at = (name: string) => unknown.indexOf(name)
    const own = equation[at(node)]!
    equation[at(node)] = { re: own.re + admittance.re, im: own.im + admittance.im }
    if (other === 'ground') return
    // The input is 1 V and goes to the right-hand side.
    const column = other === 'input' ? unknown.length : at(other)
    const sign = other === 'input' ? 1 : -1
    const value = equation[column]!
    equation[column] = { re: value.re + sign * admittance.re, im: value.im + sign * admittance.im }
  }
  for (const { place, ohms, farads } of parts) {
    const [from, to] = place.split(' to ')
    const admittance = ohms === undefined ? { re: 0, im: 2 * Math.PI * hz * farads! } : { re: 1 / ohms, im: 0 }
    addTo(from!, to!, admittance)
    addTo(to!, from!, admittance)
  }
  const one: Complex = { re: 1, im: 0 }
  if (nodes.has('amplifier input')) {
    const follower = row()
    follower[unknown.indexOf('output')] = one
    follower[unknown.indexOf('amplifier input')] = { re: -1, im: 0 }
    rows.set('output', follower)
  } else if (nodes.has('inverting input')) {
    const virtualGround = row()
    virtualGround[unknown.indexOf('inverting input')] = one
    rows.set('output', virtualGround)
  }
  return solve([...rows.values()])[unknown.indexOf('output')]!
}
