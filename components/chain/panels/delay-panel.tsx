'use client'

import { useMemo } from 'react'
import { DataTable } from '@/components/studio/panels/chart/data-table'
import { useOnPage } from '@/components/ui/use-on-page'
import type { ComputedChain } from '@/dsp'
import { formatHz, formatSeconds } from '@/lib/format/quantity'
import { chainStageLabel } from './stage-label'
import { FigureLine } from './chart/figures'
import { LinesPlot } from './chart/lines-plot'
import type { ChainPanelProps } from './props'
import { responseCurves, responseSpan } from './response-curves'
import { responsePlan, writtenIn } from './response-panel'
import { ShareBar, type Share } from './share-bar'

/** How long a stored sample takes from the sensor, and where that time is spent. */
export function DelayPanel(props: ChainPanelProps) {
  return useOnPage() ? <Delay {...props} /> : null
}

export const delayShares = ({ stages }: ComputedChain): readonly Share[] =>
  stages.map(({ stage, delaySeconds }) => ({
    id: stage.id,
    name: chainStageLabel(stage),
    amount: Math.max(0, delaySeconds),
    text: formatSeconds(delaySeconds, 3),
  }))

/** Delays that are told by a sign: a high-pass hurries a signal a little, and a bar can't show less than nothing. */
const advanceSeconds = ({ stages }: ComputedChain): number =>
  stages.reduce((sum, { delaySeconds }) => sum + Math.min(0, delaySeconds), 0)

function Delay({ chain }: ChainPanelProps) {
  const { kept, sheet } = chain.spec
  const curves = useMemo(() => responseCurves(chain), [chain])
  const plan = useMemo(
    () => responsePlan('delay', curves, responseSpan(chain), [kept.fromHz, kept.toHz], sheet),
    [curves, chain, kept, sheet],
  )
  const total = chain.stages.reduce((sum, { delaySeconds }) => sum + delaySeconds, 0)
  const inKept = curves.groupDelaySeconds.filter((_, n) => {
    const hz = curves.frequenciesHz[n] ?? 0
    return hz >= kept.fromHz && hz <= kept.toHz
  })
  const advance = advanceSeconds(chain)
  return (
    <div className="flex min-w-0 flex-col gap-4">
      <FigureLine
        figures={[
          { name: 'Mid kept band', value: formatSeconds(total, 4) },
          { name: 'Least in it', value: inKept.length > 0 ? formatSeconds(Math.min(...inKept), 4) : '—' },
          { name: 'Most in it', value: inKept.length > 0 ? formatSeconds(Math.max(...inKept), 4) : '—' },
          { name: 'In stored samples', value: (total * chain.outputRateHz).toFixed(2) },
        ]}
      />
      <ShareBar label="Delay by stage" shares={delayShares(chain)} />
      {advance < 0 ? (
        <p className="text-[13px] text-pencil">
          A negative delay, {formatSeconds(advance, 3)} in all, is left out of the bar: there the phase leads.
        </p>
      ) : null}
      <LinesPlot plan={plan} writeValue={(value) => writtenIn('delay', value)} />
      <DataTable
        summary="Delay over frequency as a table"
        columns={['frequency', 'group delay']}
        rows={() =>
          [...curves.frequenciesHz].flatMap((hz, n) =>
            n % 8 === 0 ? [[formatHz(hz, 4), formatSeconds(curves.groupDelaySeconds[n] ?? Number.NaN, 4)]] : [],
          )
        }
      />
    </div>
  )
}
