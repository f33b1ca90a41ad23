/** A panel of Simpson's rule: its ends, the values there and in the middle, and what they come to. */
interface Panel {
  readonly from: number
  readonly to: number
  readonly atFrom: number
  readonly atMiddle: number
  readonly atTo: number
  readonly area: number
}

const simpson = (width: number, left: number, middle: number, right: number): number =>
  (width / 6) * (left + 4 * middle + right)

const MOST_ROUNDS = 24
/** Panels still open at a time: past these what is reached is taken. */
const MOST_OPEN = 4096

/**
 * Integral of a function that is nowhere negative, by Simpson's rule halved where it doesn't settle; all open panels are evaluated together.
 *
 * @param values the function, at many places in one call
 * @param panels even panels to begin with
 * @param tolerance part of the integral that may be missed
 * @returns the integral, to about that part of itself for a function that is smooth between its ripples
 * Source: J. N. Lyness, Notes on the adaptive Simpson quadrature routine, J. ACM 16(3), 1969; from memory.
 */
export function integral(
  values: (at: Float64Array) => Float64Array,
  from: number,
  to: number,
  panels: number,
  tolerance = 1e-8,
): number {
  const ends = Float64Array.from({ length: 2 * panels + 1 }, (_, n) => from + ((to - from) * n) / (2 * panels))
  const first = values(ends)
  let open: Panel[] = Array.from({ length: panels }, (_, n) => {
    const [atFrom, atMiddle, atTo] = [first[2 * n]!, first[2 * n + 1]!, first[2 * n + 2]!]
    const [a, b] = [ends[2 * n]!, ends[2 * n + 2]!]
    return { from: a, to: b, atFrom, atMiddle, atTo, area: simpson(b - a, atFrom, atMiddle, atTo) }
  })
  let settled = 0
  for (let round = 0; open.length > 0; round++) {
    const middles = new Float64Array(2 * open.length)
    open.forEach((panel, n) => {
      middles[2 * n] = (3 * panel.from + panel.to) / 4
      middles[2 * n + 1] = (panel.from + 3 * panel.to) / 4
    })
    const found = values(middles)
    const whole = settled + open.reduce((sum, panel) => sum + panel.area, 0)
    const isLast = round === MOST_ROUNDS || open.length > MOST_OPEN
    const next: Panel[] = []
    open.forEach((panel, n) => {
      const [left, right] = [found[2 * n]!, found[2 * n + 1]!]
      const middle = (panel.from + panel.to) / 2
      const width = middle - panel.from
      const leftArea = simpson(width, panel.atFrom, left, panel.atMiddle)
      const rightArea = simpson(width, panel.atMiddle, right, panel.atTo)
      const gained = leftArea + rightArea - panel.area
      const share = (panel.to - panel.from) / (to - from)
      if (isLast || Math.abs(gained) <= 15 * tolerance * whole * share) {
        settled += leftArea + rightArea + gained / 15
        return
      }
      const { atFrom, atMiddle, atTo } = panel
      next.push({ from: panel.from, to: middle, atFrom, atMiddle: left, atTo: atMiddle, area: leftArea })
      next.push({ from: middle, to: panel.to, atFrom: atMiddle, atMiddle: right, atTo, area: rightArea })
    })
    open = next
  }
  return settled
}
