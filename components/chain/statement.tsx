'use client'

import { Fragment } from 'react'
import { ChoiceWord } from '@/components/studio/statement/choice-word'
import { QuantityWord } from '@/components/studio/statement/quantity-word'
import { RefusalNote } from '@/components/studio/statement/refusal-note'
import { wordLook } from '@/components/studio/statement/word-look'
import { usePacedSpec, type Pace } from '@/components/drafting/use-paced-spec'
import type { Refusal } from '@/components/studio/view'
import { withField } from '@/lib/chains/edits'
import { boundRefusal, chainFieldOf, chainFieldText, parseChainField, withPartAt } from '@/lib/chains/fields'
import { outdatedLinks } from '@/lib/chains/links'
import { nameRefusal } from '@/lib/chains/names'
import { outputRateOf, ratesOf } from '@/lib/chains/outline'
import { chainStatementParts, chainWordOfField, type ChainStatementPart } from '@/lib/chains/statement'
import type { LinkableDesign } from '@/lib/chains/types'
import { nearestNumber, nextValue } from './chain-desk'
import { NameWord } from './name-word'
import { chainOptions } from './statement-options'
import type { ChainStore } from './store'
import { useChain } from './use-chain'

/** A sentence is set anew in its lines; ten times a second it is read, not sixty. */
const PACE: Pace = { everyMs: 100 }

const choiceLabels: Readonly<Record<string, string>> = {
  unit: 'unit of the sensor',
  'source.analog.family': 'family',
  'source.analog.response': 'response',
  source: 'design it is tied to',
  filter: 'design it is tied to',
  'filter.unit': 'unit it integrates to',
  name: 'name of the sensor',
}

/** "Stage 2, order": what a word is called for who can't see where it stands. */
export function chainWordLabel(key: string): string {
  const [, index, part = ''] = /^stages\.(\d+)\.(.+)$/.exec(key) ?? []
  const label = chainFieldOf(key)?.label
  if (index === undefined) return label ?? key
  const words = choiceLabels[part] ?? label ?? part
  return `Stage ${Number(index) + 1}, ${words.charAt(0).toLowerCase()}${words.slice(1)}`
}

/** The sentence that is the chain, every word of it editable where it stands. */
export function ChainStatement({
  store,
  linkable,
  readOnly,
}: {
  store: ChainStore
  linkable: readonly LinkableDesign[]
  readOnly: boolean
}) {
  const spec = usePacedSpec(store, PACE)
  const refusal = useChain(store, (state) => state.refusal)
  const chosen = useChain(store, (state) => state.stageId)
  const parts = chainStatementParts(spec)
  const refusedWord = refusal ? chainWordOfField(refusal.field) : null
  const homeless = refusal !== null && !parts.some((part) => part.kind !== 'text' && part.key === refusedWord)

  return (
    <div>
      <h1
        aria-label="Statement"
        className="font-heading text-[22px] leading-[1.55] font-normal text-ink sm:text-[25px]"
      >
        {parts.map((part, index) => {
          if (part.kind === 'text') {
            const afterWord = index > 0 && parts[index - 1]?.kind !== 'text'
            return <Fragment key={`text-${index}`}>{afterWord ? withoutMark(part.text) : part.text}</Fragment>
          }
          const stage = stageOf(part.key, spec.stages)
          // A full stop, a comma or a closing bracket never begins a line: it stays with its word.
          return (
            <span key={part.key} className={part.kind === 'name' ? undefined : 'whitespace-nowrap'}>
              <span className={stage && stage === chosen ? 'bg-spruce-wash' : undefined}>
                <Word
                  part={part}
                  store={store}
                  linkable={linkable}
                  readOnly={readOnly}
                  refusal={part.key === refusedWord ? refusal : null}
                />
              </span>
              {markOf(parts[index + 1]?.text)}
            </span>
          )
        })}
      </h1>
      {homeless ? <HomelessRefusal store={store} refusal={refusal} /> : null}
    </div>
  )
}

const stageOf = (key: string, stages: readonly { readonly id: string }[]): string | null =>
  stages[Number(/^stages\.(\d+)/.exec(key)?.[1] ?? -1)]?.id ?? null

/** A refusal of something that has no word in the sentence: said under it, with the nearest value that works. */
function HomelessRefusal({ store, refusal }: { store: ChainStore; refusal: Refusal }) {
  const { spec, propose } = store.getState()
  const { nearest, field } = refusal
  return (
    <RefusalNote
      id="chain-refusal"
      message={refusal.message}
      nearestText={typeof nearest === 'number' ? chainFieldText(spec, field, nearest) : undefined}
      onUseNearest={
        typeof nearest === 'number' && chainFieldOf(field)
          ? () => void propose(withField(store.getState().spec, field, nearest), field)
          : undefined
      }
    />
  )
}

function Word({
  part,
  store,
  linkable,
  readOnly,
  refusal,
}: {
  part: Exclude<ChainStatementPart, { kind: 'text' }>
  store: ChainStore
  linkable: readonly LinkableDesign[]
  readOnly: boolean
  refusal: Refusal | null
}) {
  const { key } = part
  const { spec, propose, begin, change, commit, cancel, dismissRefusal, refuse } = store.getState()
  const label = chainWordLabel(key)
  if (part.kind === 'choice') {
    const { current, options } = chainOptions(spec, key, linkable)
    const newest = outdatedLinks(spec, linkable).find(({ field }) => field === `${key}.link`)?.newest
    return (
      <ChoiceWord
        label={label}
        text={part.text}
        current={current}
        options={options}
        refusal={refusal}
        readOnly={readOnly}
        hint={newest && `version ${newest.version} is newer`}
        onPick={(option) => propose(option.apply(store.getState().spec), key)}
      />
    )
  }
  if (part.kind === 'name') {
    if (readOnly) return <strong className="font-semibold">{part.text}</strong>
    return (
      <NameWord
        label={label}
        name={part.text}
        look={wordLook.frame}
        readOnly={false}
        onName={(name) => {
          const reason = nameRefusal(name)
          if (reason === null) propose(withPartAt(store.getState().spec, key, name), key)
          return reason
        }}
      />
    )
  }
  /** A number that is none for its place never becomes a chain: it is refused before one is made of it. */
  const tried = (value: number, put: (value: number) => boolean): boolean => {
    const bound = boundRefusal(store.getState().spec, key, value)
    if (!bound) return put(value)
    refuse({ field: key, ...bound })
    return false
  }
  return (
    <QuantityWord
      label={label}
      text={part.text}
      value={part.value}
      parse={(text) => parseChainField(spec, key, text, nyquistOf(spec, key))}
      written={(value) => chainFieldText(spec, key, value)}
      step={(value, direction, size) => nextValue(key, value, direction, size)}
      refusal={refusal}
      readOnly={readOnly}
      onDismiss={dismissRefusal}
      nearestTo={(refused) =>
        typeof refusal?.nearest === 'number' ? refusal.nearest : nearestNumber(spec, key, refused)
      }
      edit={{
        propose: (value) => tried(value, (good) => propose(withField(store.getState().spec, key, good), key)),
        begin,
        change: (value) => tried(value, (good) => change(withField(store.getState().spec, key, good), key)),
        commit,
        cancel,
      }}
    />
  )
}

/** Half the rate that "0.8 Nyquist" is a part of: the one ahead of a stage, or the output's; null for the converter's own rate. */
export function nyquistOf(spec: Parameters<typeof ratesOf>[0], key: string): number | null {
  if (key.endsWith('sampleRateHz')) return null
  const index = Number(/^stages\.(\d+)/.exec(key)?.[1] ?? Number.NaN)
  const rate = Number.isNaN(index) ? outputRateOf(spec) : (ratesOf(spec)[index]?.inRateHz ?? null)
  return rate === null ? null : rate / 2
}

const MARK = /^[.,)]/
const markOf = (following: string | undefined): string => MARK.exec(following ?? '')?.[0] ?? ''
const withoutMark = (text: string): string => text.replace(MARK, '')
