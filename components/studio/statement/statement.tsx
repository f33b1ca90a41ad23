'use client'

import { Fragment } from 'react'
import { statementParts, type StatementPart, type WordKey } from '@/lib/designs/statement'
import { usePacedSpec, type Pace } from '@/components/drafting/use-paced-spec'
import type { StudioStore } from '../store'
import { useStudio } from '../use-studio'
import { optionsFor, parseQuantity, stepped, withQuantity, wordOfField, writtenIn } from './apply'
import { ChoiceWord } from './choice-word'
import { nearestThatWorks } from './nearest'
import { QuantityWord } from './quantity-word'

const labels: Readonly<Record<string, string>> = {
  'analog.response': 'Response',
  'analog.family': 'Family',
  'analog.order': 'Order',
  'analog.normalization': 'What the frequency means',
  'analog.rippleDb': 'Ripple',
  'analog.attenuationDb': 'Attenuation',
  'analog.edgesHz.0': 'Edge',
  'analog.edgesHz.1': 'Upper edge',
  sampleRateHz: 'Sampling rate',
  'how.method': 'Method',
  'how.hold': 'Held frequency',
  'how.holdHz': 'Frequency held exactly',
  'how.options': 'Options of the method',
  'how.upToHz': 'Fitted up to',
  'how.order': 'Poles of the fitted version',
  'fir.response': 'Response',
  'fir.kind': 'Kind of filter',
  'fir.taps': 'Number of taps',
  'fir.attenuationDb': 'Side lobes down',
  'own.given': 'How the response is given',
}

const bandLabels: Readonly<Record<string, string>> = {
  fromHz: 'begins at',
  toHz: 'ends at',
  gain: 'gain',
  weight: 'weight',
}

function labelOf(key: WordKey): string {
  const [, , index, part = ''] = key.startsWith('fir.bands.') ? key.split('.') : []
  return index === undefined ? (labels[key] ?? key) : `Band ${Number(index) + 1} ${bandLabels[part] ?? part}`
}

/** A sentence is set anew in its lines; ten times a second it is read, not sixty. */
const PACE: Pace = { everyMs: 100 }

/** The sentence that is the design, every word of it editable where it stands. */
export function Statement({ store, readOnly }: { store: StudioStore; readOnly: boolean }) {
  const atRest = useStudio(store, (state) => (state.gestureMark === null ? state.spec : null))
  const inMotion = usePacedSpec(store, PACE)
  const spec = atRest ?? inMotion
  const refusal = useStudio(store, (state) => state.refusal)
  const parts = statementParts(spec)
  const refusedWord = refusal ? wordOfField(refusal.field, spec) : null
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
          // A full stop or a comma never begins a line: it stays with its word.
          return (
            <span key={part.key} className="whitespace-nowrap">
              <Word part={part} store={store} readOnly={readOnly} refusal={part.key === refusedWord ? refusal : null} />
              {markOf(parts[index + 1]?.text)}
            </span>
          )
        })}
      </h1>
      {homeless ? (
        <p role="alert" className="border-l-2 border-vermilion pl-2 text-[14px] text-vermilion">
          {refusal.message}
        </p>
      ) : null}
    </div>
  )
}

function Word({
  part,
  store,
  readOnly,
  refusal,
}: {
  part: Exclude<StatementPart, { kind: 'text' }>
  store: StudioStore
  readOnly: boolean
  refusal: { readonly message: string; readonly nearest?: number | string } | null
}) {
  const { key } = part
  const { spec, propose, begin, change, commit, cancel, dismissRefusal } = store.getState()
  if (part.kind === 'choice') {
    const { current, options } = optionsFor(key, spec)
    return (
      <ChoiceWord
        label={labelOf(key)}
        text={part.text}
        current={current}
        options={options}
        refusal={refusal}
        readOnly={readOnly}
        onPick={(option) => propose(option.apply(store.getState().spec), key)}
      />
    )
  }
  const withValue = (value: number) => withQuantity(store.getState().spec, key, value)
  // A bound is the number's own; the refusal of an edited word stands beside that word, whatever else it would have broken.
  return (
    <QuantityWord
      label={labelOf(key)}
      text={part.text}
      value={part.value}
      parse={(text) => parseQuantity(part.unit, text, key === 'sampleRateHz' ? null : spec.sampleRateHz / 2)}
      written={(value) => writtenIn(part.unit, value)}
      step={(value, direction, size) => stepped(part.unit, value, direction, size)}
      refusal={refusal}
      readOnly={readOnly}
      onDismiss={dismissRefusal}
      nearestTo={(refused) => nearestThatWorks(spec, key, part.value, refused)}
      edit={{
        propose: (value) => propose(withValue(value), fieldOf(key)),
        begin,
        change: (value) => change(withValue(value), fieldOf(key)),
        commit,
        cancel,
      }}
    />
  )
}

const MARK = /^[.,]/
const markOf = (following: string | undefined): string => MARK.exec(following ?? '')?.[0] ?? ''
const withoutMark = (text: string): string => text.replace(MARK, '')

/** The field that dsp would name for a word. */
function fieldOf(key: WordKey): string {
  return key === 'how.holdHz' ? 'how.hold' : key
}
