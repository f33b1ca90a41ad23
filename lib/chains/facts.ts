import type { ChainSpec } from '@/dsp'
import { familyWords, responseWords } from '@/lib/designs/words'
import { chainFieldOf, chainFieldText, partAt } from './fields'
import { unitAfter } from './outline'
import { sensitivityText } from './statement'
import { decimateWords } from './words'

/* Everything that is stated of a part of a chain, one fact a field, so that a version can be read and two be compared without a gap. */

export interface ChainFact {
  /** Within the part, as in `filter.taps`. */
  readonly path: string
  readonly label: string
  readonly text: string
  /** Says that something is not there; no difference by itself from what is. */
  readonly isAbsence?: boolean
}

/** What can't be typed, or is not among the chain's fields. */
const labels: Readonly<Record<string, string>> = {
  name: 'Name',
  bypassed: 'In use',
  unit: 'Unit',
  resonance: 'Resonance',
  highPass: 'High-pass',
  'source.from': 'Stated',
  'source.link': 'Design',
  'source.analog.family': 'Family',
  'source.analog.response': 'Response',
  'source.analog.normalization': 'Corner counts by',
  'resolution.by': 'Resolution by',
  averaging: 'Averaging',
  'filter.type': 'Filter',
  'filter.link': 'Design',
  'filter.times': 'Integrals',
  'filter.unit': 'Unit of the result',
  'filter.compensation': 'Compensation',
  kind: 'Kind',
  'spread.of': 'Spread of',
  'spread.percent': 'Spread',
  'spread.f0Percent': 'Spread of the frequencies',
  'spread.qPercent': 'Spread of the Qs',
  channels: 'Channels',
  seed: 'Seed',
}

const words: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  'source.from': { here: 'in the chain', design: 'by a design' },
  'source.analog.family': familyWords,
  'source.analog.response': responseWords,
  'resolution.by': { bits: 'its bits', noise: 'its noise' },
  'filter.type': { ...decimateWords, integrate: 'Integration' },
  bypassed: { true: 'bypassed', false: 'yes' },
  'spread.of': { parts: 'resistors and capacitors', sections: 'frequencies and Qs of the sections' },
}

/** Told elsewhere, or by everything else. */
const untold = new Set(['id', 'format'])

const isRecord = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null

/** `cornerHz` → `Corner`, for a field that has no name yet: shown rather than left out. */
const spelled = (path: string): string => {
  const text = path.replace(/^.*\./, '').replace(/([A-Z])/g, (letter) => ` ${letter.toLowerCase()}`)
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** All that is stated at a path of a chain, as in `stages.3` or `tolerance`; none where nothing is. */
export function factsAt(spec: ChainSpec, path: string): readonly ChainFact[] {
  const facts = (value: unknown, own: string): ChainFact[] => {
    const full = own === '' ? path : `${path}.${own}`
    const label = chainFieldOf(full)?.label ?? labels[own] ?? spelled(full)
    const named = label.charAt(0).toUpperCase() + label.slice(1)
    const told = (text: string): ChainFact[] => [{ path: own, label: named, text }]
    if (value === undefined) return []
    if (value === null) return [{ path: own, label: named, text: 'none', isAbsence: true }]
    if (typeof value === 'number') return told(numberText(spec, full, own, value))
    if (!isRecord(value)) return told(words[own]?.[String(value)] ?? String(value))
    if (typeof value.drawing === 'string') return told(`${value.drawing}, version ${String(value.version)}`)
    return Object.entries(value).flatMap(([key, inner]) =>
      untold.has(key) || (own === '' && key === 'kind' && path.startsWith('stages'))
        ? []
        : facts(inner, own === '' ? key : `${own}.${key}`),
    )
  }
  return facts(partAt(spec, path), '')
}

function numberText(spec: ChainSpec, full: string, own: string, value: number): string {
  if (own === 'sensitivity') return sensitivityText(value, unitAfter(spec, 0))
  if (own === 'seed') return String(value)
  if (/percent$/i.test(own)) return `± ${value}\u2009%`
  return chainFieldText(spec, full, value)
}

export interface ChainChange {
  readonly label: string
  /** Null where it isn't stated on that side. */
  readonly before: string | null
  readonly after: string | null
}

/** "Corner 4 kHz → 5 kHz" */
export const changeText = ({ label, before, after }: ChainChange): string =>
  `${label} ${before ?? '—'} → ${after ?? '—'}`

/** What differs between a part of one chain and a part of another, in the order of the second's fields. */
export function changesBetween(
  left: ChainSpec,
  leftPath: string,
  right: ChainSpec,
  rightPath: string,
): readonly ChainChange[] {
  const [before, after] = [factsAt(left, leftPath), factsAt(right, rightPath)].map((facts) =>
    facts.filter(({ isAbsence }) => !isAbsence),
  )
  const paths = [...new Set([...(after ?? []), ...(before ?? [])].map(({ path }) => path))]
  return paths.flatMap((path): ChainChange[] => {
    const [one, other] = [before, after].map((facts) => facts?.find((fact) => fact.path === path))
    const label = other?.label ?? one?.label ?? path
    // Texts are rounded; where they are alike the numbers still differ, and all their digits are said.
    const [was, is] = [partAt(left, `${leftPath}.${path}`), partAt(right, `${rightPath}.${path}`)]
    if (one?.text !== other?.text) return [{ label, before: one?.text ?? null, after: other?.text ?? null }]
    if (typeof was === 'number' && typeof is === 'number' && was !== is)
      return [{ label, before: String(was), after: String(is) }]
    return []
  })
}
