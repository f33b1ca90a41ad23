'use client'

import { useMemo } from 'react'
import { useOnPage } from '@/components/ui/use-on-page'
import { noiseBudget, type ComputedChain, type NoiseBudget } from '@/dsp'
import { levelText } from '@/lib/chains/fields'
import { unitAfter } from '@/lib/chains/outline'
import { formatDb, formatFixed, formatHz } from '@/lib/format/quantity'
import { FigureLine, FiguresRuled } from './chart/figures'
import { chainStageLabel } from './stage-label'
import type { ChainPanelProps } from './props'
import { ShareBar } from './share-bar'

/** From the converter and the arithmetic to the bits that are left in the kept band. */
export function NoisePanel(props: ChainPanelProps) {
  return useOnPage() ? <Noise {...props} /> : null
}

/** Noise is told where it would have to be felt: in the sensor's unit. */
export function noiseRows(chain: ComputedChain, budget: NoiseBudget) {
  const unit = unitAfter(chain.spec, 0)
  const written = (rms: number) => levelText(rms, unit)
  return [
    ...budget.parts.map(({ stageId, source, rms, words }) => {
      const found = chain.stages.find(({ stage }) => stage.id === stageId)
      return {
        key: `${stageId} ${source}`,
        cells: [found ? chainStageLabel(found.stage) : source, source, words, written(rms)],
      }
    }),
    { key: 'total', strong: true, cells: ['All together', '', 'root of the sum of squares', written(budget.rms)] },
  ]
}

function Noise({ chain }: ChainPanelProps) {
  const budget = useMemo(() => noiseBudget(chain), [chain])
  const unit = unitAfter(chain.spec, 0)
  const { kept } = chain.spec
  return (
    <div className="flex min-w-0 flex-col gap-4">
      <FigureLine
        figures={[
          { name: 'Effective bits', value: formatFixed(budget.effectiveBits, 2) },
          { name: 'Signal to noise', value: formatDb(budget.snrDb, 1) },
          { name: 'Noise in the kept band', value: `${levelText(budget.rms, unit)} rms` },
          { name: 'Density mid band', value: `${levelText(budget.density, unit)}/√Hz` },
          { name: 'Full scale', value: `±${levelText(budget.fullScale, unit, 4)}` },
        ]}
      />
      <ShareBar
        label="Noise power by part"
        shares={budget.parts.map(({ stageId, source, rms }, index) => {
          const found = chain.stages.find(({ stage }) => stage.id === stageId)
          return {
            id: `${stageId} ${index}`,
            name: found ? chainStageLabel(found.stage) + (source === 'converter' ? '' : `, ${source}`) : source,
            amount: rms * rms,
            text: levelText(rms, unit),
          }
        })}
      />
      <FiguresRuled
        label="Noise budget"
        columns={['stage', 'source', 'how it is counted', 'rms in the kept band']}
        wordColumns={[1, 2]}
        rows={noiseRows(chain, budget)}
      />
      <p className="max-w-prose text-[13px] text-pencil">
        All of it is told at the sensor, in {unit}, over {formatHz(kept.fromHz)} to {formatHz(kept.toHz)}. Effective
        bits are those of an ideal converter with the same ratio of a sine that just fills it to the noise kept; the
        sensor’s own noise is not counted.
      </p>
    </div>
  )
}
