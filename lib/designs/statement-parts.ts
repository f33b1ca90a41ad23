import { formatHz, formatNumber } from '@/lib/format/quantity'

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
  | 'fir.response'
  | 'fir.kind'
  | 'fir.taps'
  | 'fir.attenuationDb'
  | `fir.bands.${number}.${'fromHz' | 'toHz' | 'gain' | 'weight'}`
  | 'own.given'
  | 'sampleRateHz'
  | 'how.method'
  | 'how.hold'
  | 'how.holdHz'
  | 'how.options'
  | 'how.upToHz'
  | 'how.order'

export type QuantityUnit = 'Hz' | 'dB' | 'order' | 'taps' | 'poles' | 'factor'

/** The statement, cut into plain text and the words that carry the design. */
export type StatementPart =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'choice'; readonly key: WordKey; readonly text: string }
  | {
      readonly kind: 'quantity'
      readonly key: WordKey
      readonly text: string
      readonly value: number
      readonly unit: QuantityUnit
    }

export const text = (words: string): StatementPart => ({ kind: 'text', text: words })
export const choice = (key: WordKey, words: string): StatementPart => ({ kind: 'choice', key, text: words })

const quantity =
  (unit: QuantityUnit, written: (value: number) => string) =>
  (key: WordKey, value: number): StatementPart => ({ kind: 'quantity', key, value, unit, text: written(value) })

export const hertz = quantity('Hz', (value) => formatHz(value, 6))
export const decibels = quantity('dB', (value) => `${formatNumber(value, 5)}\u2009dB`)
export const order = quantity('order', (value) => `order ${value}`)
export const taps = quantity('taps', (value) => `${value} taps`)
export const poles = quantity('poles', (value) => `${value} ${value === 1 ? 'pole' : 'poles'}`)
export const factor = quantity('factor', (value) => formatNumber(value, 5))
