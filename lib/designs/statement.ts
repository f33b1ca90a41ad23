import type { DesignSpec } from '@/dsp'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { familyWords, methodWords, responseWords } from './words'

/** Where a word stands in the spec; the same paths that a DesignError names in `field`. */
export type WordKey =
  | 'analog.response'
  | 'analog.family'
  | 'analog.order'
  | 'analog.normalization'
  | 'analog.rippleDb'
  | 'analog.attenuationDb'
  | 'analog.edgesHz.0'
  | 'analog.edgesHz.1'
  | 'sampleRateHz'
  | 'how.method'
  | 'how.hold'
  | 'how.holdHz'
  | 'how.options'

/** The statement, cut into plain text and the words that carry the design. */
export type StatementPart =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'choice'; readonly key: WordKey; readonly text: string }
  | {
      readonly kind: 'quantity'
      readonly key: WordKey
      readonly text: string
      readonly value: number
      readonly unit: 'Hz' | 'dB' | 'order'
    }

const text = (words: string): StatementPart => ({ kind: 'text', text: words })
const choice = (key: WordKey, words: string): StatementPart => ({ kind: 'choice', key, text: words })
const hertz = (key: WordKey, value: number): StatementPart => ({
  kind: 'quantity',
  key,
  value,
  unit: 'Hz',
  text: formatHz(value, 6),
})
const decibels = (key: WordKey, value: number): StatementPart => ({
  kind: 'quantity',
  key,
  value,
  unit: 'dB',
  text: `${formatNumber(value, 5)}\u2009dB`,
})

/** The design as a sentence, in parts. */
export function statementParts(spec: DesignSpec): readonly StatementPart[] {
  return [
    ...opening(spec),
    ...edgePhrase(spec),
    text(', run at '),
    hertz('sampleRateHz', spec.sampleRateHz),
    text(' by the '),
    ...methodPhrase(spec),
    text('.'),
  ]
}

/** The same sentence as one string. */
export function statementText(spec: DesignSpec): string {
  return statementParts(spec)
    .map((part) => part.text)
    .join('')
}

function opening({ analog }: DesignSpec): StatementPart[] {
  return [
    text('A '),
    choice('analog.response', responseWords[analog.response]),
    text(' '),
    choice('analog.family', familyWords[analog.family]),
    text(' of '),
    {
      kind: 'quantity',
      key: 'analog.order',
      value: analog.order,
      unit: 'order',
      text: `order ${analog.order}`,
    },
  ]
}

function edgePhrase({ analog }: DesignSpec): StatementPart[] {
  const [first = 0, second] = analog.edgesHz
  const ripple = decibels('analog.rippleDb', analog.rippleDb ?? 0)
  const attenuation = decibels('analog.attenuationDb', analog.attenuationDb ?? 0)
  const low = hertz('analog.edgesHz.0', first)
  const both = second === undefined ? [low] : [low, text(' and '), hertz('analog.edgesHz.1', second)]
  const reach = passBandReach(analog.response, low, second)

  switch (analog.family) {
    case 'chebyshev1':
      return [text(', with '), ripple, text(' of ripple '), ...reach]
    case 'elliptic':
      return [
        text(', with '),
        ripple,
        text(' of ripple '),
        ...reach,
        text(' and '),
        attenuation,
        text(analog.response === 'bandstop' ? ' down between them' : ' down beyond'),
      ]
    case 'chebyshev2':
      return [text(', '), attenuation, text(` down from `), ...both]
    case 'bessel':
      return [
        text(', '),
        choice('analog.normalization', besselWords[analog.normalization ?? 'magnitude']),
        text(' '),
        ...both,
      ]
    default:
      return [text(', down 3\u2009dB at '), ...both]
  }
}

export const besselWords = {
  magnitude: 'down 3\u2009dB at',
  delay: 'delay-normalised at',
  phase: 'phase-matched at',
} as const

function passBandReach(
  response: DesignSpec['analog']['response'],
  low: StatementPart,
  second?: number,
): StatementPart[] {
  const high = hertz('analog.edgesHz.1', second ?? 0)
  switch (response) {
    case 'lowpass':
      return [text('to '), low]
    case 'highpass':
      return [text('from '), low]
    case 'bandpass':
      return [text('from '), low, text(' to '), high]
    case 'bandstop':
      return [text('to '), low, text(' and from '), high]
  }
}

function methodPhrase({ how, analog }: DesignSpec): StatementPart[] {
  const method = choice('how.method', methodWords[how.method])
  switch (how.method) {
    case 'bilinear': {
      if (how.hold === 'none') return [method, text(', '), choice('how.hold', 'not held')]
      if (how.hold === 'edges')
        return [
          method,
          text(' '),
          choice('how.hold', analog.edgesHz.length > 1 ? 'held at both edges' : 'held at its edge'),
        ]
      return [method, text(' '), choice('how.hold', 'held at'), text(' '), hertz('how.holdHz', how.hold)]
    }
    case 'impulse-invariant':
      return [method, text(', '), choice('how.options', impulseWords(how))]
    default:
      return [method]
  }
}

export function impulseWords(how: {
  halfFirstSample?: boolean | undefined
  restoreGain?: boolean | undefined
}): string {
  if (how.halfFirstSample && how.restoreGain) return 'first sample halved, gain restored'
  if (how.halfFirstSample) return 'first sample halved'
  if (how.restoreGain) return 'gain restored'
  return 'as sampled'
}
