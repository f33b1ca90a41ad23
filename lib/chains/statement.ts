import type { AnalogSpec, ChainSpec, ChainStage, DesignLink } from '@/dsp'
import { familyWords, responseWords } from '@/lib/designs/words'
import { formatQuantity } from '@/lib/format/quantity'
import { chainFieldText, hertzText } from './fields'

/*
 * The chain as a sentence. A word's key is its path in the spec, the same that a DesignError names, but for words that stand for more than
 * one value: `stages.<i>.source` and `stages.<i>.filter` for what a stage is made of.
 */

export type ChainStatementPart =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'choice'; readonly key: string; readonly text: string }
  | { readonly kind: 'name'; readonly key: string; readonly text: string }
  | { readonly kind: 'quantity'; readonly key: string; readonly text: string; readonly value: number }

/** The chain as a sentence, in parts. */
export function chainStatementParts(spec: ChainSpec): readonly ChainStatementPart[] {
  const parts: ChainStatementPart[] = []
  spec.stages.forEach((stage, index) => {
    parts.push(...linking(spec, index), ...phrase(spec, stage, index))
    if (stage.bypassed) parts.push(text(' (bypassed)'))
  })
  return [...parts, ...keptPhrase(spec), text('.')]
}

/** The same sentence as one string. */
export const chainText = (spec: ChainSpec): string =>
  chainStatementParts(spec)
    .map((part) => part.text)
    .join('')

const text = (words: string): ChainStatementPart => ({ kind: 'text', text: words })
const choice = (key: string, words: string): ChainStatementPart => ({ kind: 'choice', key, text: words })

/** The words between a stage and the one before it; several decimations in a row share theirs: "down by 4 and 2". */
function linking({ stages }: ChainSpec, index: number): ChainStatementPart[] {
  const [stage, before, after] = [stages[index], stages[index - 1], stages[index + 1]]
  const isRun = before?.kind === stage?.kind
  switch (stage?.kind) {
    case 'sensor':
      return [text(index === 0 ? 'From a ' : ', then a ')]
    case 'analog':
      return [text(isRun ? ' and ' : ' through ')]
    case 'converter':
      return [text(' into ')]
    case 'decimate':
      return [text(!isRun ? ', down by ' : after?.kind === 'decimate' ? ', ' : ' and ')]
    case 'shape':
      return [text(', ')]
    case undefined:
      return []
  }
}

function phrase(spec: ChainSpec, stage: ChainStage, index: number): ChainStatementPart[] {
  const at = `stages.${index}`
  const quantity = (path: string, value: number, words?: string): ChainStatementPart => {
    const key = `${at}.${path}`
    return { kind: 'quantity', key, value, text: words ?? chainFieldText(spec, key, value) }
  }
  switch (stage.kind) {
    case 'sensor':
      return [
        quantity('sensitivity', stage.sensitivity),
        text(isQuotient(stage.unit) ? '/(' : '/'),
        choice(`${at}.unit`, stage.unit),
        text(isQuotient(stage.unit) ? ') ' : ' '),
        { kind: 'name', key: `${at}.name`, text: stage.name },
      ]
    case 'analog':
      return stage.source.from === 'design'
        ? [choice(`${at}.source`, linkText(stage.source.link))]
        : analogPhrase(stage.source.analog, at, quantity)
    case 'converter': {
      const { resolution } = stage
      return [
        resolution.by === 'bits'
          ? quantity('resolution.bits', resolution.bits)
          : quantity('resolution.voltsPerRootHz', resolution.voltsPerRootHz),
        text(resolution.by === 'bits' ? ' at ' : ' of noise at '),
        quantity('sampleRateHz', stage.sampleRateHz),
      ]
    }
    case 'decimate':
      return [quantity('factor', stage.factor)]
    case 'shape':
      return stage.filter.type === 'design'
        ? [text('shaped by '), choice(`${at}.filter`, linkText(stage.filter.link))]
        : [
            text(`integrated ${stage.filter.times === 2 ? 'twice ' : ''}to `),
            choice(`${at}.filter.unit`, stage.filter.unit),
            text(' above '),
            quantity('filter.highPass.cornerHz', stage.filter.highPass.cornerHz),
          ]
  }
}

/** Volts for each m/s² need brackets: V/(m/s²). */
const isQuotient = (unit: string): boolean => unit.includes('/')

/** What a sensor gives for each unit that it measures: 100 mV/(m/s²). */
export const sensitivityText = (volts: number, unit: string): string =>
  `${formatQuantity(volts, 'V')}/${isQuotient(unit) ? `(${unit})` : unit}`

/** A pinned design as a word: which drawing, and which version of it. */
export const linkText = ({ drawing, version }: DesignLink): string => `${drawing} version ${version}`

function analogPhrase(
  analog: AnalogSpec,
  at: string,
  quantity: (path: string, value: number, words?: string) => ChainStatementPart,
): ChainStatementPart[] {
  const { family, response, order, edgesHz, rippleDb, attenuationDb } = analog
  const [low = 0, high] = edgesHz
  const field = (name: string) => `source.analog.${name}`
  const ripple =
    rippleDb === undefined ? [] : [text(' with '), quantity(field('rippleDb'), rippleDb), text(' of ripple')]
  const lost =
    attenuationDb === undefined
      ? []
      : [
          text(rippleDb === undefined ? ' with ' : ' and '),
          quantity(field('attenuationDb'), attenuationDb),
          text(' down'),
        ]
  return [
    choice(`${at}.source.analog.family`, familyWords[family]),
    text(' '),
    ...(response === 'lowpass' ? [] : [choice(`${at}.source.analog.response`, responseWords[response]), text(' ')]),
    quantity(field('order'), order, `order ${order}`),
    text(' at '),
    quantity(field('edgesHz.0'), low),
    ...(high === undefined ? [] : [text(' and '), quantity(field('edgesHz.1'), high)]),
    ...ripple,
    ...lost,
  ]
}

function keptPhrase({ kept: { fromHz, toHz } }: ChainSpec): ChainStatementPart[] {
  // "0.5 to 90 Hz": the unit is said once, where it is the one that a bare number is read in.
  const [from, to] = [hertzText(fromHz, 6), hertzText(toHz, 6)]
  const isPlain = from.endsWith('\u2009Hz') && to.endsWith('\u2009Hz')
  return [
    text(', kept from '),
    { kind: 'quantity', key: 'kept.fromHz', value: fromHz, text: isPlain ? from.slice(0, -3) : from },
    text(' to '),
    { kind: 'quantity', key: 'kept.toHz', value: toHz, text: to },
  ]
}

/** The word of the sentence that a refused field belongs to; the field itself where it is a word of its own. */
export function chainWordOfField(field: string): string {
  const [, at, part = ''] = /^(stages\.\d+)\.(.+)$/.exec(field) ?? []
  if (at === undefined) return field
  if (part === 'source.analog.edgesHz') return `${at}.source.analog.edgesHz.0`
  if (part.startsWith('source.link')) return `${at}.source`
  if (part.startsWith('filter.link')) return `${at}.filter`
  return field
}
