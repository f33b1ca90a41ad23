import { chainUnits, type ChainSpec, type ChainUnit, type DesignLink, type Family, type ResponseKind } from '@/dsp'
import type { PickedOption } from '@/components/studio/statement/choice-word'
import {
  withAnalogFamily,
  withAnalogLink,
  withAnalogResponse,
  withDigitalLink,
  withSensorUnit,
} from '@/lib/chains/edits'
import { partAt, withPartAt } from '@/lib/chains/fields'
import { unitAfter } from '@/lib/chains/outline'
import { integralUnits } from '@/lib/chains/stage-starts'
import { linkText } from '@/lib/chains/statement'
import type { LinkableDesign } from '@/lib/chains/types'
import { familyWords, responseWords } from '@/lib/designs/words'

export interface ChainOption extends PickedOption {
  readonly apply: (spec: ChainSpec) => ChainSpec
}

export interface ChainOptions {
  readonly current: string
  readonly options: readonly ChainOption[]
}

const entries = <Key extends string>(words: Readonly<Record<Key, string>>) => Object.entries(words) as [Key, string][]
const nothing: ChainOptions = { current: '', options: [] }

/** What a choice of a chain can become, by its path, and what each choice makes of the chain. */
export function chainOptions(spec: ChainSpec, path: string, linkable: readonly LinkableDesign[]): ChainOptions {
  const [, at = '', part = ''] = /^stages\.(\d+)\.(.+)$/.exec(path) ?? []
  const index = Number(at)
  const value = partAt(spec, path)
  const current = typeof value === 'string' ? value : ''
  switch (part) {
    case 'unit':
      return {
        current,
        options: (Object.keys(chainUnits) as ChainUnit[]).map((unit) => ({
          value: unit,
          label: unit,
          apply: (old) => withSensorUnit(old, index, unit),
        })),
      }
    case 'source.analog.family':
      return {
        current,
        options: entries<Family>(familyWords).map(([name, label]) => ({
          value: name,
          label,
          apply: (old) => withAnalogFamily(old, index, name),
        })),
      }
    case 'source.analog.response':
      return {
        current,
        options: entries<ResponseKind>(responseWords).map(([name, label]) => ({
          value: name,
          label,
          apply: (old) => withAnalogResponse(old, index, name),
        })),
      }
    case 'source':
      return {
        current: currentLink(spec, index),
        options: [
          { value: '', label: 'a filter of its own', apply: (old) => withAnalogLink(old, index, null) },
          ...links(
            spec,
            index,
            linkable.filter(({ hasAnalog }) => hasAnalog),
          ).map((link) => ({
            value: link.designId,
            label: linkLabel(link),
            apply: (old: ChainSpec) => withAnalogLink(old, index, link),
          })),
        ],
      }
    case 'filter':
      return {
        current: currentLink(spec, index),
        options: [
          ...(spec.stages[index]?.kind === 'shape'
            ? [{ value: '', label: 'integration', apply: (old: ChainSpec) => withDigitalLink(old, index, null) }]
            : []),
          ...links(spec, index, linkable).map((link) => ({
            value: link.designId,
            label: linkLabel(link),
            apply: (old: ChainSpec) => withDigitalLink(old, index, link),
          })),
        ],
      }
    case 'filter.unit': {
      const times = partAt(spec, `stages.${index}.filter.times`) === 2 ? 2 : 1
      return { current, options: units(integralUnits(unitAfter(spec, index - 1), times), path) }
    }
    default:
      return nothing
  }
}

const units = (names: readonly ChainUnit[], path: string): readonly ChainOption[] =>
  names.map((unit) => ({ value: unit, label: unit, apply: (old) => withPartAt(old, path, unit) }))

const linkLabel = (link: DesignLink): string => `${linkText(link)}, ${link.title}`

function linkAt(spec: ChainSpec, index: number): DesignLink | null {
  const link = partAt(spec, `stages.${index}.source.link`) ?? partAt(spec, `stages.${index}.filter.link`)
  return (link as DesignLink | undefined) ?? null
}

const currentLink = (spec: ChainSpec, index: number): string => linkAt(spec, index)?.designId ?? ''

/** The designs that can be tied to a stage; the one that is tied stays as it is pinned, until it is moved on purpose. */
function links(spec: ChainSpec, index: number, linkable: readonly LinkableDesign[]): readonly DesignLink[] {
  const pinned = linkAt(spec, index)
  const others = linkable.map(({ link }) => link).filter(({ designId }) => designId !== pinned?.designId)
  return pinned ? [pinned, ...others] : others
}
