'use client'

import { useMemo, useState } from 'react'
import { DesignError, isFir, type DesignSpec, type DigitalFilter } from '@/dsp'
import { Notice } from '@/components/ui/notice'
import { versionLabels } from '@/lib/designs/words'
import { classNames } from '@/lib/format/class-names'
import { formatHz } from '@/lib/format/quantity'
import { statedId, type Versions } from '../../derive'
import { Choice } from '../../stack/choice'
import { useOnPage } from '@/components/ui/use-on-page'
import { useQuiet } from '../chart/use-quiet'
import { CascadeTable } from './cascade-table'
import { CopyButton } from './copy-button'
import { CostTable } from './cost-table'
import { DirectForm } from './direct-form'
import { ParallelTable } from './parallel-table'
import { Part, ToKnow } from './part'
import { StartState } from './start-state'
import { TapsPanel } from './taps-panel'
import { costsOf, ratioOf, structuresOf, usualStructure, type StructureChoice } from './structures'
import { sectionEquation, sectionsAsText } from './written'

const orders = [
  { value: 'peak-last', word: 'peak last', name: 'The most peaked section last' },
  { value: 'peak-first', word: 'peak first', name: 'The most peaked section first' },
] as const
const scales = [
  { value: 'none', word: 'even', name: 'Gain shared evenly' },
  { value: 'l1', word: 'L1', name: 'Each node scaled to an L1 norm of one: no input overflows it' },
  { value: 'l2', word: 'L2', name: 'Each node scaled to an L2 norm of one: white noise keeps its power' },
  { value: 'linf', word: 'L∞', name: 'Each node scaled to a largest gain of one: no sine overflows it' },
] as const

/** The stated version as it would be run: its cascade, the ratio b/a, the parallel form where there is one, and what each costs. */
export function SectionsPanel(props: { spec: DesignSpec; versions: Versions }) {
  const onPage = useOnPage()
  const fir = props.versions.digital.find(({ stated }) => stated)?.filter
  if (!onPage) return null
  return fir && isFir(fir) ? <TapsPanel filter={fir} /> : <StatedStructures {...props} />
}

function StatedStructures({ spec, versions: latest }: { spec: DesignSpec; versions: Versions }) {
  const versions = useQuiet(latest)
  const [choice, setChoice] = useState<StructureChoice>(usualStructure)
  const stated = versions.digital.find((version) => version.stated)
  const filter = stated && !isFir(stated.filter) ? stated.filter : undefined
  const made = useMemo(() => (filter ? structuresOrRefusal(filter, choice) : null), [filter, choice])
  const ratio = useMemo(() => (filter ? ratioOf(filter) : null), [filter])
  if (!stated || !filter || !made || !ratio) {
    const reason = versions.refused.find(({ id }) => id === statedId(spec))?.message
    return (
      <Notice kind="caution">{reason ?? 'The statement makes no digital version, so there is nothing to run.'}</Notice>
    )
  }
  const { structures, refusal } = made
  const { sections, facts, start } = structures
  const count = sections.length === 1 ? 'One section' : `${sections.length} sections`
  return (
    <div className={classNames('flex flex-col gap-7', versions !== latest && 'opacity-50')}>
      <Part
        title={`${count}, ${versionLabels[stated.id]} at ${formatHz(filter.sampleRateHz)}`}
        controls={
          <>
            <span className="inline-flex items-center gap-1 text-[13px] text-pencil">
              order
              <Choice
                label="Order of the sections"
                options={orders}
                value={choice.order}
                onChange={(order) => setChoice({ ...choice, order })}
              />
            </span>
            <span className="inline-flex items-center gap-1 text-[13px] text-pencil">
              scaling
              <Choice
                label="Scaling of the sections"
                options={scales}
                value={choice.scale}
                onChange={(scale) => setChoice({ ...choice, scale })}
              />
            </span>
            <CopyButton text={() => sectionsAsText(sections)}>Copy sections</CopyButton>
          </>
        }
      >
        {refusal ? <Notice kind="caution">{refusal} The usual structure is shown.</Notice> : null}
        <p className="numeric text-[12.5px] text-pencil">
          {sectionEquation}, each section on the output of the one before
        </p>
        <CascadeTable facts={facts} />
      </Part>
      <div className="grid gap-x-10 gap-y-7 lg:grid-cols-2">
        <Part title="Direct form b/a">
          <DirectForm ratio={ratio} sections={sections} />
        </Part>
        <div className="flex min-w-0 flex-col gap-7">
          <Part title="Cost">
            <CostTable costs={costsOf(filter, sections, ratio)} />
          </Part>
          {filter.parallel ? (
            <Part title="Parallel form">
              <ParallelTable parallel={filter.parallel} />
            </Part>
          ) : null}
          <Part title="Steady start">
            <StartState start={start} />
          </Part>
          <ToKnow diagnostics={filter.diagnostics} />
        </div>
      </div>
    </div>
  )
}

/** The chosen structure; where it can't be had, the usual one and the reason. */
function structuresOrRefusal(filter: DigitalFilter, choice: StructureChoice) {
  try {
    return { structures: structuresOf(filter, choice), refusal: null }
  } catch (error) {
    if (!(error instanceof DesignError)) throw error
    return { structures: structuresOf(filter, usualStructure), refusal: error.message }
  }
}
