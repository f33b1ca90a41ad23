import { designAnalog } from '../design-analog'
import { halve } from '../forms/zeros-poles-gain'
import { distance, modulus } from '../numeric/complex'
import type { ComputedChain, ComputedStage } from './chain'
import type { Complex, Filter } from '../forms/filter'

export type SectionResponse = 'low-pass' | 'high-pass' | 'band-pass' | 'notch' | 'other'

/** One first- or second-order factor of an analog stage: H(s) = gain · ∏(s − zeros) / (s + ω₀), or over (s² + s·ω₀/Q + ω₀²). */
export interface AnalogSection {
  readonly stageId: string
  readonly stageIndex: number
  /** Within its stage. */
  readonly index: number
  readonly order: 1 | 2
  readonly response: SectionResponse
  readonly f0Hz: number
  /** Null for order 1. */
  readonly q: number | null
  /** The full list, rad/s. */
  readonly zeros: readonly Complex[]
  readonly gain: number
}

/** Real poles farther apart than this factor are built more simply, and drawn more truly, as two sections of first order. */
const REAL_PAIR_RATIO = 2
/** From here on a band is wide, and its filter a high-pass and a low-pass one after the other (usual rule of the handbooks: an octave). */
const WIDE_BAND_RATIO = 2
/** How near to the poles' f0 the zeros of a notch lie. */
const NOTCH_TOLERANCE = 1e-9

interface Draft {
  readonly order: 1 | 2
  /** Upper one of a pair, or one or two real ones. */
  readonly poles: readonly Complex[]
  readonly omega0: number
  readonly q: number | null
  /** Half list. */
  zeros: Complex[]
}

const isReal = (root: Complex) => root.im === 0

function draftOf(poles: readonly Complex[]): Draft {
  const [first, second] = poles
  const pole = first!
  if (!isReal(pole)) {
    const omega0 = modulus(pole)
    return { order: 2, poles, omega0, q: omega0 / (-2 * pole.re), zeros: [] }
  }
  if (second === undefined) return { order: 1, poles, omega0: -pole.re, q: null, zeros: [] }
  const omega0 = Math.sqrt(-pole.re) * Math.sqrt(-second.re)
  return { order: 2, poles, omega0, q: omega0 / -(pole.re + second.re), zeros: [] }
}

/** Neighbouring real poles two by two; more of them than the ratio allows when zero pairs would otherwise find no place. */
function groupReal(real: readonly Complex[], leastPairs: number): Complex[][] {
  const rising = [...real].sort((a, b) => b.re - a.re)
  const groups: Complex[][] = []
  for (let k = 0; k < rising.length;) {
    const [pole, next] = [rising[k]!, rising[k + 1]]
    const isPair = next !== undefined && next.re / pole.re <= REAL_PAIR_RATIO
    groups.push(isPair ? [pole, next] : [pole])
    k += isPair ? 2 : 1
  }
  while (groups.filter((group) => group.length === 2).length < leastPairs) {
    const [first, second] = groups.filter((group) => group.length === 1)
    if (first === undefined || second === undefined) break
    groups.splice(groups.indexOf(second), 1)
    first.push(second[0]!)
  }
  return groups
}

const room = (draft: Draft) => draft.order - draft.zeros.reduce((count, zero) => count + (isReal(zero) ? 1 : 2), 0)

/** Gives the zero to the draft among those with room whose poles are nearest. */
function giveToNearest(drafts: readonly Draft[], zero: Complex): void {
  const needed = isReal(zero) ? 1 : 2
  const open = drafts.filter((draft) => room(draft) >= needed)
  const from = (draft: Draft) => distance(draft.poles[0]!, zero)
  if (open.length > 0) open.reduce((best, draft) => (from(draft) < from(best) ? draft : best)).zeros.push(zero)
}

/**
 * Zeros at the origin. In a wide band the lowest sections take all they can and become high-passes; in a narrow one every second-order
 * section first takes one, so that none of them has to amplify what another cuts off.
 */
function giveOrigin(drafts: readonly Draft[], count: number): void {
  const rising = drafts.filter((draft) => room(draft) > 0).sort((a, b) => a.omega0 - b.omega0)
  const ratio = (rising.at(-1)?.omega0 ?? 1) / (rising[0]?.omega0 ?? 1)
  let left = count
  const give = (draft: Draft) => {
    if (left === 0 || room(draft) === 0) return
    draft.zeros.push({ re: 0, im: 0 })
    left -= 1
  }
  if (ratio < WIDE_BAND_RATIO) for (const draft of rising) if (draft.order === 2) give(draft)
  for (const draft of rising) for (let k = 0; k < draft.order; k += 1) give(draft)
}

function responseOf({ order, zeros, omega0 }: Draft): SectionResponse {
  const [first, second] = zeros
  if (first === undefined) return 'low-pass'
  const atOrigin = zeros.filter((zero) => modulus(zero) === 0).length
  if (atOrigin === order) return 'high-pass'
  if (atOrigin === 1 && second === undefined) return 'band-pass'
  const isNotch = first.re === 0 && first.im > 0 && Math.abs(first.im / omega0 - 1) <= NOTCH_TOLERANCE
  return isNotch ? 'notch' : 'other'
}

/** Leading coefficient that makes a section plain: unity at 0 Hz, or far above f0 of a high-pass, or at f0 of a band-pass. */
export function plainGain(section: Pick<AnalogSection, 'order' | 'response' | 'f0Hz' | 'q' | 'zeros'>): number {
  const omega0 = 2 * Math.PI * section.f0Hz
  if (section.response === 'high-pass') return 1
  if (section.response === 'band-pass') return omega0 / (section.q ?? 1)
  if (section.zeros.some((zero) => modulus(zero) === 0)) return 1
  return section.zeros.reduce((gain, zero) => gain / modulus(zero), omega0 ** section.order)
}

/**
 * An analog filter as a cascade of sections, first-order ones first and then in ascending Q. Every section is plain (see plainGain) but for
 * the first, which takes what is left of the filter's gain: a factor other than 1 where the filter isn't unity in its pass band, as an
 * even Chebyshev filter at 0 Hz.
 *
 * f0 = |p|/2π and Q = |p|/(−2·Re p) of a pole pair (textbook; U. Tietze & C. Schenk, Electronic Circuits, active filters). Zero pairs go to
 * the nearest poles, the most peaked choosing first; real poles no more than a factor of 2 apart form a section with Q ≤ 1/2.
 */
export function splitAnalog(filter: Filter<'s'>): readonly Omit<AnalogSection, 'stageId' | 'stageIndex'>[] {
  const half = halve(filter.poles)
  const zeros = halve(filter.zeros)
  const [pairs, reals] = [half.filter((pole) => !isReal(pole)), half.filter(isReal)]
  const zeroPairs = zeros.filter((zero) => !isReal(zero))
  const groups = [...pairs.map((pole) => [pole]), ...groupReal(reals, zeroPairs.length - pairs.length)]
  const drafts = groups.map(draftOf).sort((a, b) => (a.q ?? 0) - (b.q ?? 0) || a.omega0 - b.omega0)
  const peakedFirst = [...drafts].reverse()
  const openPairs = [...zeroPairs]
  for (const draft of peakedFirst) {
    if (draft.order === 1 || openPairs.length === 0) continue
    const from = (zero: Complex) => distance(zero, draft.poles[0]!)
    const nearest = openPairs.reduce((best, zero) => (from(zero) < from(best) ? zero : best))
    openPairs.splice(openPairs.indexOf(nearest), 1)
    draft.zeros.push(nearest)
  }
  for (const zero of zeros) if (isReal(zero) && zero.re !== 0) giveToNearest(drafts, zero)
  giveOrigin(drafts, zeros.filter((zero) => modulus(zero) === 0).length)

  const plain = drafts.map((draft, index) => {
    const shape = {
      index,
      order: draft.order,
      response: responseOf(draft),
      f0Hz: draft.omega0 / (2 * Math.PI),
      q: draft.q,
      zeros: draft.zeros.flatMap((zero) => (isReal(zero) ? [zero] : [zero, { re: zero.re, im: -zero.im }])),
    }
    return { ...shape, gain: plainGain(shape) }
  })
  // One by one: the product of 24 squares may leave the range of double precision.
  const left = plain.reduce((gain, section) => gain / section.gain, filter.gain)
  return plain.map((section, index) => (index === 0 ? { ...section, gain: section.gain * left } : section))
}

function filtersOf({ stage, parts }: ComputedStage): readonly Filter<'s'>[] {
  switch (stage.kind) {
    case 'sensor':
      return stage.highPass === null
        ? []
        : [
            designAnalog({
              family: 'butterworth',
              response: 'highpass',
              order: stage.highPass.order,
              edgesHz: [stage.highPass.cornerHz],
            }),
          ]
    case 'analog':
      return parts.flatMap((part) => (part.kind === 'analog' ? [part.filter] : []))
    case 'converter':
    case 'decimate':
    case 'shape':
      return []
  }
}

/**
 * The sections that a chain's analog stages are built of, in signal order and in ascending Q within a stage; bypassed stages have none. The
 * high-pass of the sensor's charge amplifier or AC-coupled input counts, its mechanical resonance does not: that isn't made of parts.
 */
export function analogSections(chain: Pick<ComputedChain, 'stages'>): readonly AnalogSection[] {
  return chain.stages.flatMap((computed) =>
    filtersOf(computed).flatMap((filter) =>
      splitAnalog(filter).map((section) => ({
        stageId: computed.stage.id,
        stageIndex: computed.index,
        ...section,
      })),
    ),
  )
}
