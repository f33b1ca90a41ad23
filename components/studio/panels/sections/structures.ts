import {
  DesignError,
  steadyState,
  toSections,
  toTransferFunction,
  type DigitalFilter,
  type Section,
  type SectionOrder,
  type SectionScale,
} from '@/dsp'
import { formatNumber } from '@/lib/format/quantity'
import { cascadeCost, directFormCost, parallelCost, type Cost } from './cost'
import { sectionFacts } from './section-facts'

/** b/a that strays further from the design than this isn't handed out. */
const RATIO_LIMIT_DB = 0.01

export interface StructureChoice {
  readonly order: SectionOrder
  readonly scale: SectionScale
}

export const usualStructure: StructureChoice = { order: 'peak-last', scale: 'none' }

type TransferFunction = ReturnType<typeof toTransferFunction>

/** b/a as far as it may be shown, with its conditioning; or why it may not. */
export type Ratio =
  { readonly kept: true; readonly polynomials: TransferFunction } | { readonly kept: false; readonly reason: string }

/** A digital version in each of its structures, with what each costs a sample. */
export function structuresOf(filter: DigitalFilter, choice: StructureChoice) {
  // The design's own sections are those of the usual structure.
  const isUsual = choice.order === usualStructure.order && choice.scale === usualStructure.scale
  const sections = isUsual ? filter.sections : toSections(filter, choice)
  return { sections, facts: sectionFacts(filter, sections), start: startOf(sections) }
}

export interface NamedCost {
  readonly name: string
  readonly cost: Cost
}

export function costsOf(filter: DigitalFilter, sections: readonly Section[], ratio: Ratio): readonly NamedCost[] {
  return [
    { name: 'cascade', cost: cascadeCost(sections) },
    ...(ratio.kept ? [{ name: 'b/a', cost: directFormCost(ratio.polynomials.b, ratio.polynomials.a) }] : []),
    ...(filter.parallel ? [{ name: 'parallel', cost: parallelCost(filter.parallel) }] : []),
  ]
}

export function ratioOf(filter: DigitalFilter): Ratio {
  try {
    return judged(toTransferFunction(filter))
  } catch (error) {
    if (!(error instanceof DesignError)) throw error
    return { kept: false, reason: error.message }
  }
}

function judged(polynomials: TransferFunction): Ratio {
  const { stable, worstDeviationDb } = polynomials
  if (!stable) {
    return {
      kept: false,
      reason:
        'Rounding its coefficients to doubles puts a pole on or outside the unit circle, so that it would never settle.',
    }
  }
  if (worstDeviationDb <= RATIO_LIMIT_DB) return { kept: true, polynomials }
  const strays = Number.isFinite(worstDeviationDb)
    ? `moves the response by up to ${formatNumber(worstDeviationDb, 3)}\u2009dB`
    : 'leaves no response to speak of at some frequency'
  return {
    kept: false,
    reason: `Rounding its coefficients to doubles ${strays}; more than ${RATIO_LIMIT_DB}\u2009dB isn’t handed out.`,
  }
}

/** Null where a section integrates and has no steady state. */
function startOf(sections: readonly Section[]): Float64Array | null {
  try {
    return steadyState(sections)
  } catch (error) {
    if (error instanceof DesignError && error.code === 'integrator') return null
    throw error
  }
}
