'use client'

import { useMemo, useState } from 'react'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { useOnPage } from '@/components/ui/use-on-page'
import { csvFile, offerFile } from '@/components/studio/stack/download'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { buildSheet, type BuildSection } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { buildCsv, circuitWords, errorWords, partWords, sectionName, sectionWords } from './build-rows'
import { FiguresRuled } from './chart/figures'
import type { ChainPanelProps } from './props'

const series = [
  { value: 'E24', label: 'E24' },
  { value: 'E96', label: 'E96' },
] as const

/** Each analog section with parts to build it of, and what these come to. */
export function BuildSheetPanel(props: ChainPanelProps) {
  return useOnPage() ? <BuildSheet {...props} /> : null
}

function BuildSheet({ chain }: ChainPanelProps) {
  const [of, setOf] = useState<'E24' | 'E96'>('E96')
  const sections = useMemo(() => buildSheet(chain, { series: of }), [chain, of])
  if (sections.length === 0)
    return (
      <Notice kind="note">
        There is no analog filter ahead of the converter, so that there is nothing to build. Add an analog stage to the
        chain to see its parts here.
      </Notice>
    )
  return (
    <div className="flex min-w-0 flex-col gap-4">
      <Notice kind="caution">
        To be confirmed by a circuit designer: amplifiers, loading, stray capacitance and the spread of the parts are
        not considered here.
      </Notice>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        <ChoiceGroup legend="Resistors from" inline choices={series} value={of} onChange={(next) => setOf(next)} />
        <span className="text-[13px] text-pencil">capacitors from E12</span>
        <Button small onClick={() => offerFile('build-sheet.csv', csvFile(buildCsv(chain, sections)))}>
          Download as CSV
        </Button>
      </div>
      {sections.map((section) => (
        <SectionParts
          key={`${section.stageId} ${section.index}`}
          section={section}
          name={sectionName(chain, section, sections)}
        />
      ))}
    </div>
  )
}

function SectionParts({ section, name }: { section: BuildSection; name: string }) {
  return (
    <section aria-label={name} className="flex min-w-0 flex-col gap-1">
      <h3 className="font-text text-[14px] font-semibold">
        {name} <span className="numeric font-normal text-pencil">{sectionWords(section)}</span>
      </h3>
      {section.circuits.length === 0 ? (
        <p className="text-[13px] text-pencil">No circuit for it: {section.reason}</p>
      ) : (
        <FiguresRuled
          label={`Circuits of ${name}`}
          columns={['circuit', 'parts', 'f0', 'off by', 'Q', 'Q off by', 'note']}
          wordColumns={[1, 6]}
          rows={section.circuits.map((circuit) => ({
            key: circuit.circuit,
            cells: [
              circuitWords[circuit.circuit],
              <ul key="parts" className="numeric whitespace-nowrap">
                {circuit.parts.map((part) => (
                  <li key={part.name}>{partWords(part)}</li>
                ))}
              </ul>,
              formatHz(circuit.f0Hz, 5),
              errorWords(circuit.f0ErrorPercent),
              circuit.q === null ? '—' : formatNumber(circuit.q, 4),
              errorWords(circuit.qErrorPercent),
              <span key="note" className="block min-w-48 text-pencil">
                {circuit.note ?? ''}
              </span>,
            ],
          }))}
        />
      )}
    </section>
  )
}
