'use client'

import { useMemo, useState } from 'react'
import { ChoiceGroup } from '@/components/handover/choice-group'
import { DataTable } from '@/components/studio/panels/chart/data-table'
import { useOnPage } from '@/components/ui/use-on-page'
import { csvFile, offerFile } from '@/components/studio/stack/download'
import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import type { ChainSpec, ToleranceResult } from '@/dsp'
import { sameValue } from '@/lib/designs/same-value'
import { formatFixed } from '@/lib/format/quantity'
import { LinesPlot } from './chart/lines-plot'
import type { ChainPanelProps } from './props'
import {
  matchVerdicts,
  toleranceColumns,
  toleranceCsv,
  tolerancePlan,
  toleranceRows,
  toleranceViews,
  unitOf,
  type ToleranceView,
} from './tolerance-curves'
import { ToleranceForm } from './tolerance-settings'
import { useWork } from './work/use-work'
import { runTolerance } from './work/work-client'
import { WorkLine } from './work/work-line'

export interface HeldTolerance {
  readonly spec: ChainSpec
  readonly result: ToleranceResult
}

export interface TolerancePanelProps extends ChainPanelProps {
  /** The last run, and what it was of. */
  readonly held: HeldTolerance | null
  onResult(result: ToleranceResult, spec: ChainSpec): void
}

/** How far channels built from real parts differ from nominal and from each other. */
export function TolerancePanel(props: TolerancePanelProps) {
  return useOnPage() ? <Tolerance {...props} /> : null
}

/** A run speaks for the same stages, kept band and settings. */
export const isOlder = ({ spec: of }: HeldTolerance, spec: ChainSpec): boolean =>
  !sameValue([of.stages, of.kept, of.tolerance], [spec.stages, spec.kept, spec.tolerance])

function Tolerance({ spec, propose, readOnly, held, onResult }: TolerancePanelProps) {
  const work = useWork(runTolerance)
  const [view, setView] = useState<ToleranceView>('phase-match')
  const older = held !== null && isOlder(held, spec)
  const plan = useMemo(
    () => (held === null ? null : tolerancePlan(view, held.result, spec, older)),
    [held, view, spec, older],
  )
  return (
    <div className="flex min-w-0 flex-col gap-3">
      <ToleranceForm
        settings={spec.tolerance}
        disabled={readOnly}
        onChange={(tolerance) => propose({ ...spec, tolerance })}
      />
      <WorkLine
        work={work}
        what="The tolerance run"
        startWords={held === null ? 'Run the channels' : 'Run again'}
        againWords="Run again"
        stopWords="Stop the run"
        onStart={() => work.run(spec, (result) => onResult(result, spec))}
        onStop={work.stop}
      />
      {held === null || plan === null ? (
        work.state === 'working' ? null : (
          <p className="max-w-prose text-[14px] text-pencil">
            Each channel draws its own parts for every analog section, from the seed; what comes out says how far apart
            two channels may be, and answers the channel-match lines of the sheet.
          </p>
        )
      ) : (
        <>
          {older ? (
            <Notice kind="note">This run is of an older chain or of other settings; run again to be sure.</Notice>
          ) : null}
          {older
            ? null
            : matchVerdicts(held.result, spec).map(({ met, words }) => (
                <p key={words} role="status" className={met ? 'text-[14px] text-moss' : 'text-[14px] text-vermilion'}>
                  {words}
                </p>
              ))}
          <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2">
            <ChoiceGroup
              legend="Show"
              inline
              choices={toleranceViews}
              value={view}
              onChange={(next) => setView(next)}
            />
            <Button small onClick={() => offerFile('tolerance.csv', csvFile(toleranceCsv(held.result, held.spec)))}>
              Download as CSV
            </Button>
          </div>
          <LinesPlot plan={plan} writeValue={(value) => `${formatFixed(value, 4)}${unitOf(view)}`} />
          <DataTable
            summary="Percentiles as a table"
            columns={toleranceColumns(held.result)}
            rows={() => toleranceRows(held.result)}
          />
        </>
      )}
    </div>
  )
}
