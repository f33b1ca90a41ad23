import type { ChainSpec, ComputedStage } from '@/dsp'
import { hertzText } from '@/lib/chains/fields'
import { unitAfter } from '@/lib/chains/outline'
import { sensitivityText } from '@/lib/chains/statement'
import { formatHz, formatNumber, formatQuantity, formatSeconds } from '@/lib/format/quantity'

/** Figures of a stage as its cell on the strip shows them, three at most; of a stage that isn't computed only what is written. */
export function stageFacts(spec: ChainSpec, index: number, computed: ComputedStage | null): readonly string[] {
  const stage = spec.stages[index]
  const delay = computed && computed.delaySeconds !== 0 ? [formatSeconds(computed.delaySeconds, 2)] : []
  const cost =
    computed && computed.multipliesPerStoredSample > 0
      ? [`${formatNumber(computed.multipliesPerStoredSample, 3)} mult`]
      : []
  switch (stage?.kind) {
    case 'sensor':
      return [
        sensitivityText(stage.sensitivity, stage.unit),
        ...(stage.highPass ? [`from ${hertzText(stage.highPass.cornerHz, 3)}`] : []),
        ...(stage.resonance ? [`f0 ${formatHz(stage.resonance.f0Hz, 3)}`] : []),
      ]
    case 'analog':
      return [
        ...(stage.source.from === 'here'
          ? [stage.source.analog.edgesHz.map((hz) => formatHz(hz, 3)).join(', ')]
          : [stage.source.link.title]),
        ...delay,
      ]
    case 'converter':
      return [
        formatHz(stage.sampleRateHz),
        `±${formatQuantity(stage.fullScaleVolts, 'V')}`,
        ...(stage.averaging ? [`averages, ${stage.averaging.order}`] : []),
      ]
    case 'decimate':
      return [...(computed?.outRateHz ? [`→ ${formatHz(computed.outRateHz)}`] : []), ...delay, ...cost]
    case 'shape':
      return [
        stage.filter.type === 'design' ? stage.filter.link.title : `to ${unitAfter(spec, index)}`,
        ...delay,
        ...cost,
      ]
    case undefined:
      return []
  }
}
