import {
  multipleFeedbackLowPass,
  rcFigures,
  sallenKeyHighPass,
  sallenKeyLowPass,
  type PoleFigures,
} from './build-sheet-circuits'
import { neighbours } from './e-series'

/*
 * Standard values for a wanted f0 and Q. For every pair of capacitors the two resistors follow exactly from f0 and Q; each is then taken to
 * its neighbours in the series, and the figures are computed anew from what was chosen.
 */

export interface Wanted {
  readonly f0Hz: number
  readonly q: number
}

/** The values there are, rising. */
export interface Stock {
  readonly ohms: readonly number[]
  readonly farads: readonly number[]
}

export interface Chosen extends PoleFigures {
  readonly ohms: readonly number[]
  readonly farads: readonly number[]
}

/** Circuits this little worse than the best (0.05 %, far below what parts of 1 % do) are chosen among by how ordinary their values are. */
const SLACK = 5e-4
/** A resistor that amplifiers drive, and bias currents don't disturb, without a second thought. */
const USUAL_OHMS = 1e4
/** How much nearer than a real solution allows two capacitors may lie: equal resistors then miss Q by half as much. */
const RATIO_SLACK = 0.98
/** Capacitors of a high-pass farther apart than this aren't tried; any ratio would do. */
const MOST_HIGH_PASS_RATIO = 10

interface Tried extends Chosen {
  readonly error: number
}

const spreadOf = (values: readonly number[]) => Math.log(Math.max(...values) / Math.min(...values))

/** How far from ordinary the values are: spread among themselves, and off what resistors usually are. */
function oddity({ ohms, farads }: Chosen): number {
  const middle = ohms.reduce((sum, value) => sum + Math.log(value), 0) / ohms.length
  return spreadOf(farads) + spreadOf(ohms) + 0.5 * Math.abs(middle - Math.log(USUAL_OHMS))
}

/** Keeps what may yet be chosen: the least error √(f0 error² + Q error²) so far, and all within the slack of it. */
class Shortlist {
  private readonly wanted: Wanted
  private least = Infinity
  private good: Tried[] = []

  constructor(wanted: Wanted) {
    this.wanted = wanted
  }

  offer({ f0Hz, q }: PoleFigures, ohms: readonly number[], farads: readonly number[]): void {
    const error = Math.hypot(f0Hz / this.wanted.f0Hz - 1, q === null ? 0 : q / this.wanted.q - 1)
    if (error > this.least + SLACK) return
    this.least = Math.min(this.least, error)
    this.good.push({ f0Hz, q, ohms, farads, error })
  }

  /** The most ordinary of the good ones; null when nothing was offered. */
  chosen(): Chosen | null {
    const good = this.good.filter(({ error }) => error <= this.least + SLACK)
    if (good.length === 0) return null
    const { f0Hz, q, ohms, farads } = good.reduce((best, one) => (oddity(one) < oddity(best) ? one : best))
    return { f0Hz, q, ohms, farads }
  }
}

type Solve = (c1: number, c2: number) => readonly (readonly [number, number])[]
type Evaluate = (first: number, second: number, c1: number, c2: number) => PoleFigures

function search(stock: Stock, wanted: Wanted, solve: Solve, evaluate: Evaluate): Chosen | null {
  const shortlist = new Shortlist(wanted)
  for (const c1 of stock.farads) {
    for (const c2 of stock.farads) {
      for (const [exactFirst, exactSecond] of solve(c1, c2)) {
        for (const first of neighbours(stock.ohms, exactFirst)) {
          for (const second of neighbours(stock.ohms, exactSecond)) {
            shortlist.offer(evaluate(first, second, c1, c2), [first, second], [c1, c2])
          }
        }
      }
    }
  }
  return shortlist.chosen()
}

/** Both roots of x² − sum·x + product = 0 where they are real, or nearly; null elsewhere. */
function splitSum(sum: number, product: number): readonly [number, number] | null {
  const part = (4 * product) / (sum * sum)
  if (part > 1 / RATIO_SLACK) return null
  const larger = (sum / 2) * (1 + Math.sqrt(Math.max(0, 1 - part)))
  return [part > 1 ? larger : product / larger, larger]
}

/** R1, R2, C1, C2; real for C1/C2 ≥ 4Q². Null where nothing in stock reaches the values. */
export function chooseSallenKeyLowPass(stock: Stock, wanted: Wanted): Chosen | null {
  const seconds = 1 / (2 * Math.PI * wanted.f0Hz)
  const solve: Solve = (c1, c2) => {
    const split = splitSum(seconds / (wanted.q * c2), (seconds / c1) * (seconds / c2))
    return split === null ? [] : [split]
  }
  return search(stock, wanted, solve, sallenKeyLowPass)
}

/** R1 (node to output), R2 (to ground), C1, C2. Null where nothing in stock reaches the values. */
export function chooseSallenKeyHighPass(stock: Stock, wanted: Wanted): Chosen | null {
  const seconds = 1 / (2 * Math.PI * wanted.f0Hz)
  const solve: Solve = (c1, c2) => {
    if (Math.max(c1 / c2, c2 / c1) > MOST_HIGH_PASS_RATIO) return []
    const r1 = seconds / (wanted.q * (c1 + c2))
    return [[r1, ((seconds / c1) * (seconds / c2)) / r1]]
  }
  return search(stock, wanted, solve, sallenKeyHighPass)
}

/** R1 = R2, R3, C1, C2; real for C1/C2 ≥ 8Q². Null where nothing in stock reaches the values. */
export function chooseMultipleFeedback(stock: Stock, wanted: Wanted): Chosen | null {
  const seconds = 1 / (2 * Math.PI * wanted.f0Hz)
  const solve: Solve = (c1, c2) => {
    // R1 + 2·R3 and R1·2·R3 are given, either of the two roots may be R1.
    const split = splitSum(seconds / (wanted.q * c2), 2 * (seconds / c1) * (seconds / c2))
    if (split === null) return []
    const [smaller, larger] = split
    return [
      [smaller, larger / 2],
      [larger, smaller / 2],
    ]
  }
  return search(stock, wanted, solve, multipleFeedbackLowPass)
}

/** R and C. Null where nothing in stock reaches the values. */
export function chooseRc(stock: Stock, f0Hz: number): Chosen | null {
  const shortlist = new Shortlist({ f0Hz, q: 1 })
  for (const farads of stock.farads) {
    for (const ohms of neighbours(stock.ohms, 1 / (2 * Math.PI * f0Hz * farads))) {
      shortlist.offer(rcFigures(ohms, farads), [ohms], [farads])
    }
  }
  return shortlist.chosen()
}
