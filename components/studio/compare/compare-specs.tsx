'use client'

import { useMemo, type ReactNode } from 'react'
import { DesignError } from '@/dsp'
import { Notice } from '@/components/ui/notice'
import { orRefusal } from '../or-refusal'
import { sideOf, type ComparedSpec, type Side } from './figures'
import { FiguresTable } from './figures-table'
import { Overlay } from './overlay'
import { RequirementsTable } from './requirements-table'
import { inSentence } from './sides'
import { Statements } from './statements'

/** Two specs beside each other. `left` is the earlier one; differences are right minus left. */
export function CompareSpecs({ left, right }: { left: ComparedSpec; right: ComparedSpec }) {
  const sides = useMemo(() => [left, right], [left, right])
  return <CompareSides sides={sides} />
}

/**
 * Up to four specs beside each other, the first of them the base: its statement in full and the others' with their changed words marked,
 * the figures that follow, every requirement, and the responses overlaid with their differences from the base.
 */
export function CompareSides({
  sides,
  actions,
}: {
  /** Labels no two the same. */
  sides: readonly ComparedSpec[]
  /** What can be done with a side, by its place. */
  actions?: (place: number) => ReactNode
}) {
  const { made, refused } = useMemo(() => computed(sides), [sides])
  return (
    <div className="flex min-w-0 flex-col gap-6">
      <Statements sides={sides} {...(actions ? { actions } : {})} />
      {refused.map(({ label, message }) => (
        <Notice key={label} kind="caution">
          {label} makes no filter with this engine: {message}
        </Notice>
      ))}
      {refused.length > 0 && made[0] && made[0].place > 0 && made.length > 1 ? (
        <Notice kind="note">Differences below are from {inSentence(made[0].label)}.</Notice>
      ) : null}
      {made.length > 0 ? (
        <>
          <section aria-labelledby="compare-figures" className="min-w-0">
            <Heading id="compare-figures">Figures</Heading>
            <FiguresTable sides={made} />
          </section>
          <section aria-labelledby="compare-requirements" className="min-w-0">
            <Heading id="compare-requirements">Every requirement</Heading>
            <RequirementsTable sides={made} />
          </section>
          <Overlay sides={made} />
        </>
      ) : null}
    </div>
  )
}

const Heading = ({ id, children }: { id: string; children: ReactNode }) => (
  <h2 id={id} className="mb-1 font-text text-[13px] font-semibold text-pencil">
    {children}
  </h2>
)

interface Computed {
  readonly made: readonly Side[]
  readonly refused: readonly { readonly label: string; readonly message: string }[]
}

/** The sides that make a filter, each in its place, and why the others make none. */
function computed(sides: readonly ComparedSpec[]): Computed {
  const answers = sides.map((compared, place) => ({ compared, side: orRefusal(() => sideOf(compared, place)) }))
  return {
    made: answers.flatMap(({ side }) => (side instanceof DesignError ? [] : [side])),
    refused: answers.flatMap(({ compared, side }) =>
      side instanceof DesignError ? [{ label: compared.label, message: side.message }] : [],
    ),
  }
}
