import { csvText } from '@/lib/exports/escape'
import { decimalText } from '@/lib/exports/numbers'
import type { BuildCircuit, BuildPart, BuildSection, ComputedChain } from '@/dsp'
import { formatFixed, formatHz, formatNumber, formatQuantity } from '@/lib/format/quantity'
import { chainStageLabel } from './stage-label'

/* The build sheet in words and as a file. */

export const circuitWords: Record<BuildCircuit['circuit'], string> = {
  'sallen-key': 'Sallen–Key',
  'multiple-feedback': 'multiple feedback',
  rc: 'R and C with a buffer',
}

const partValue = ({ ohms, farads }: BuildPart): string =>
  ohms === undefined ? formatQuantity(farads ?? Number.NaN, 'F', 3) : formatQuantity(ohms, 'Ω', 4)

/** R1 12.1 kΩ, input to node */
export const partWords = (part: BuildPart): string => `${part.name} ${partValue(part)}, ${part.place}`

export const errorWords = (percent: number | null): string =>
  percent === null ? '—' : `${percent > 0 ? '+' : ''}${formatFixed(percent, 2)}\u2009%`

export const sectionWords = ({ order, response, f0Hz, q }: BuildSection): string =>
  `${order === 1 ? 'first' : 'second'} order ${response}, f0 ${formatHz(f0Hz, 5)}${q === null ? '' : `, Q ${formatNumber(q, 4)}`}`

/** A section's name: its stage, and which of the stage's sections where there are several. */
export function sectionName(chain: ComputedChain, section: BuildSection, sections: readonly BuildSection[]): string {
  const found = chain.stages.find(({ stage }) => stage.id === section.stageId)
  const stage = found ? chainStageLabel(found.stage) : section.stageId
  const ofStage = sections.filter(({ stageId }) => stageId === section.stageId).length
  return ofStage > 1 ? `${stage}, section ${section.index + 1}` : stage
}

/** One row a part (RFC 4180); text is guarded, numbers are bare. */
export function buildCsv(chain: ComputedChain, sections: readonly BuildSection[]): string {
  const sensor = chain.spec.stages.find((stage) => stage.kind === 'sensor')
  const number = (value: number | null | undefined) =>
    value === null || value === undefined ? '' : decimalText(value, 'double')
  const rows = [
    `sensor,${csvText(sensor?.name ?? '')}`,
    'to be confirmed by a circuit designer',
    [
      'section',
      'response',
      'f0 in Hz',
      'Q',
      'circuit',
      'part',
      'place',
      'ohms',
      'farads',
      'built f0 in Hz',
      'built Q',
      'f0 error in percent',
      'Q error in percent',
      'note',
    ].join(','),
    ...sections.flatMap((section) => {
      const head = [
        csvText(sectionName(chain, section, sections)),
        csvText(section.response),
        number(section.f0Hz),
        number(section.q),
      ]
      if (section.circuits.length === 0)
        return [[...head, 'none', '', '', '', '', '', '', '', '', csvText(section.reason ?? '')].join(',')]
      return section.circuits.flatMap((circuit) =>
        circuit.parts.map((part) =>
          [
            ...head,
            csvText(circuitWords[circuit.circuit]),
            csvText(part.name),
            csvText(part.place),
            number(part.ohms),
            number(part.farads),
            number(circuit.f0Hz),
            number(circuit.q),
            number(circuit.f0ErrorPercent),
            number(circuit.qErrorPercent),
            csvText(circuit.note ?? ''),
          ].join(','),
        ),
      )
    }),
  ]
  return `${rows.join('\r\n')}\r\n`
}
