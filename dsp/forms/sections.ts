import { distance, modulus } from '../numeric/complex'
import { halve } from './zeros-poles-gain'
import { shareGain, scaleSections, type SectionScale } from './section-scaling'
import type { Complex, Filter, Section } from './filter'

export type SectionOrder = 'peak-last' | 'peak-first'

export interface SectionOptions {
  readonly order?: SectionOrder
  readonly scale?: SectionScale
}

/** The zeros and poles of one section; a pair stands as its upper member, so two entries are two real roots. */
interface Group {
  readonly poles: readonly Complex[]
  readonly zeros: readonly Complex[]
}

const isReal = (root: Complex) => root.im === 0

/** Distance from the unit circle, which tells how peaked a section is. */
const fromCircle = (poles: readonly Complex[]) => Math.min(...poles.map((pole) => Math.abs(1 - modulus(pole))))

/** Pole pairs, then real poles two by two from the circle inward; an odd one stays alone, in a first-order section. */
function polesBySection(half: readonly Complex[]): Complex[][] {
  const groups = half.filter((pole) => !isReal(pole)).map((pole) => [pole])
  const real = half.filter(isReal).sort((a, b) => fromCircle([a]) - fromCircle([b]))
  for (let k = 0; k < real.length; k += 2) groups.push(real.slice(k, k + 2))
  return groups.sort((a, b) => fromCircle(a) - fromCircle(b))
}

const isFirstOrder = (poles: readonly Complex[]) => poles.length === 1 && poles.every(isReal)

function takeNearest(pool: Complex[], pole: Complex): Complex | undefined {
  let best = -1
  for (let k = 0; k < pool.length; k += 1) {
    const candidate = pool[k]
    const leader = pool[best]
    if (candidate !== undefined && (leader === undefined || distance(candidate, pole) < distance(leader, pole)))
      best = k
  }
  return best < 0 ? undefined : pool.splice(best, 1)[0]
}

/**
 * Poles nearest the circle choose first and take the nearest zeros (L. B. Jackson 1970; Oppenheim & Schafer 6.9). A first-order
 * section gets a zero only when the real zeros are odd in number, so that the others always come out even.
 */
function pair(zeros: readonly Complex[], poles: readonly Complex[]): Group[] {
  const pool = [...zeros]
  const groups = polesBySection(poles)
  const oddReals = pool.filter(isReal).length % 2 === 1
  const single = groups.find(isFirstOrder)
  const reserved: Complex[] = []
  if (single?.[0] !== undefined && oddReals) {
    const real = pool.filter(isReal)
    const taken = takeNearest(real, single[0])
    if (taken !== undefined) {
      reserved.push(taken)
      pool.splice(pool.indexOf(taken), 1)
    }
  }
  return groups.map((group) => {
    const pole = group[0]
    if (pole === undefined || group === single) return { poles: group, zeros: group === single ? reserved : [] }
    const first = takeNearest(pool, pole)
    if (first === undefined || !isReal(first)) return { poles: group, zeros: first === undefined ? [] : [first] }
    const reals = pool.filter(isReal)
    const second = takeNearest(reals, group[1] ?? pole)
    if (second === undefined) return { poles: group, zeros: [first] }
    pool.splice(pool.indexOf(second), 1)
    return { poles: group, zeros: [first, second] }
  })
}

/** Monic polynomial of the roots of one section, highest power first. */
function quadratic(roots: readonly Complex[]): readonly number[] {
  const [first, second] = roots
  if (first === undefined) return [1]
  // 0 − x, so that a root at the origin doesn't leave a −0 in print.
  if (!isReal(first)) return [1, 0 - 2 * first.re, first.re * first.re + first.im * first.im]
  if (second === undefined) return [1, 0 - first.re]
  return [1, 0 - (first.re + second.re), first.re * second.re]
}

/** In powers of z⁻¹ the numerator is delayed by as many samples as the section has more poles than zeros. */
function toSection(group: Group): Section {
  const denominator = quadratic(group.poles)
  const numerator = quadratic(group.zeros)
  const delayed = [...Array.from({ length: denominator.length - numerator.length }, () => 0), ...numerator]
  const [b0 = 0, b1 = 0, b2 = 0] = delayed
  const [, a1 = 0, a2 = 0] = denominator
  return { b0, b1, b2, a1, a2 }
}

/**
 * Cascade of second-order sections whose product is the filter.
 *
 * Steps: 1. pair poles nearest the circle with their nearest zeros; 2. order the sections, by default the most peaked last, so that
 * round-off of the earlier ones isn't amplified; 3. share the gain out: by default every section has the same gain at the filter's
 * strongest frequency, on request each partial cascade is scaled to a norm of one (see section-scaling).
 *
 * @returns sections with y = b0·x + b1·x₁ + b2·x₂ − a1·y₁ − a2·y₂; a first-order section has b2 = a2 = 0
 * @throws DesignError `too-slow-for-l1` when the L1 norm was asked of a filter that rings for millions of samples
 */
export function toSections(filter: Filter<'z'>, options: SectionOptions = {}): readonly Section[] {
  const groups = pair(halve(filter.zeros), halve(filter.poles))
  if (options.order !== 'peak-first') groups.reverse()
  const monic = groups.map(toSection)
  if (monic.length === 0) return [{ b0: filter.gain, b1: 0, b2: 0, a1: 0, a2: 0 }]
  const shared = shareGain(monic, filter)
  return scaleSections(shared, filter.poles, options.scale ?? 'none')
}
