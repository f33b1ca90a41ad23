import type { ParallelForm, Section } from '@/dsp'

/** Work and memory of one sample through a structure, counting neither products with zero nor with one. */
export interface Cost {
  readonly multiplies: number
  readonly adds: number
  readonly stateWords: number
}

const none: Cost = { multiplies: 0, adds: 0, stateWords: 0 }

const plus = (left: Cost, right: Cost): Cost => ({
  multiplies: left.multiplies + right.multiplies,
  adds: left.adds + right.adds,
  stateWords: left.stateWords + right.stateWords,
})

/** A direct form of any order: `b` and `a` in powers of z⁻¹, a[0] = 1. State is kept in its canonic form, one word per delay. */
export function directFormCost(b: ArrayLike<number>, a: ArrayLike<number>): Cost {
  const factors = [...Array.from(b), ...Array.from(a).slice(1)].filter((factor) => factor !== 0)
  const delays = Math.max(lastNonZero(b), lastNonZero(a))
  return {
    multiplies: factors.filter((factor) => Math.abs(factor) !== 1).length,
    adds: Math.max(0, factors.length - 1),
    stateWords: Math.max(0, delays),
  }
}

const sectionCost = ({ b0, b1, b2, a1, a2 }: Section): Cost => directFormCost([b0, b1, b2], [1, a1, a2])

export const cascadeCost = (sections: readonly Section[]): Cost => sections.map(sectionCost).reduce(plus, none)

/** Every term is a section of its own; their outputs, and the direct path where there is one, are added up. */
export function parallelCost({ direct, terms }: ParallelForm): Cost {
  const paths = terms.length + (direct === 0 ? 0 : 1)
  const joining: Cost = {
    multiplies: direct === 0 || Math.abs(direct) === 1 ? 0 : 1,
    adds: Math.max(0, paths - 1),
    stateWords: 0,
  }
  return terms.map(sectionCost).reduce(plus, joining)
}

function lastNonZero(values: ArrayLike<number>): number {
  for (let index = values.length - 1; index >= 0; index--) if (values[index] !== 0) return index
  return -1
}
