'use client'

import { useState } from 'react'
import { isOwnDesign, ownTargetSchema, type DesignSpec, type OwnTarget } from '@/dsp'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { Notice } from '@/components/ui/notice'
import { withOwn } from '@/lib/designs/edits'
import { ownWords } from '@/lib/designs/words'
import { useOnPage } from '@/components/ui/use-on-page'
import type { Settled } from '../shell/use-derived'
import type { StudioStore } from '../store'
import { FitReport } from './fit-report'
import { MeasuredForm } from './measured-form'
import { PolynomialsForm } from './polynomials-form'
import { RootsForm } from './roots-form'

type Given = OwnTarget['given']

const ways = [
  { value: 'roots', label: 'Poles and zeros' },
  { value: 'polynomials', label: 'Polynomials in s' },
  { value: 'measured', label: 'A measured table' },
] as const

/** An analog response of the user's own in place of a family: given by roots, by polynomials or as measured; and how well it is met. */
export function OriginalPanel({
  store,
  spec,
  settled,
  readOnly,
}: {
  store: StudioStore
  spec: DesignSpec
  settled: Settled | null
  readOnly: boolean
}) {
  const own = isOwnDesign(spec) ? spec.own : null
  const [way, setWay] = useState<Given>(own?.given ?? 'roots')
  const [problem, setProblem] = useState<string | null>(null)
  const onPage = useOnPage()
  if (!onPage) return null
  const take = (next: OwnTarget) => {
    const shape = ownTargetSchema.safeParse(next)
    if (!shape.success) {
      setProblem(shape.error.issues[0]?.message ?? 'This response can’t be kept.')
      return
    }
    const { propose, dismissRefusal } = store.getState()
    if (propose(withOwn(store.getState().spec, next))) {
      setProblem(null)
      return
    }
    // Said here, where it was given, and not a page further up.
    setProblem(store.getState().refusal?.message ?? 'This response makes no filter.')
    dismissRefusal()
  }
  const form = { readOnly, onTake: take }
  return (
    <div className="grid gap-x-10 gap-y-7 lg:grid-cols-[minmax(0,1fr)_minmax(0,29rem)]">
      <section aria-label="A response of your own" className="flex min-w-0 flex-col gap-4">
        <p className="max-w-prose text-[14px] text-pencil">
          {own
            ? `The design is held against “${own.name}”, ${ownWords[own.given]}.`
            : 'Besides the families, a design may be held against an analog response of your own.'}
        </p>
        <ChoiceGroup
          legend="Given as"
          inline
          choices={ways}
          value={way}
          onChange={(next) => {
            setWay(next)
            setProblem(null)
          }}
        />
        {problem ? <Notice kind="caution">{problem}</Notice> : null}
        {way === 'roots' ? <RootsForm {...form} given={own?.given === 'roots' ? own : null} /> : null}
        {way === 'polynomials' ? <PolynomialsForm {...form} given={own?.given === 'polynomials' ? own : null} /> : null}
        {way === 'measured' ? <MeasuredForm {...form} given={own?.given === 'measured' ? own : null} /> : null}
      </section>
      {settled ? <FitReport settled={settled} /> : null}
    </div>
  )
}
