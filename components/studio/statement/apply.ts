import type { DesignSpec, Family, MethodName, ResponseKind } from '@/dsp'
import { usualHoldHz, withAnalog, withEdge, withFamily, withHold, withMethod, withResponse } from '@/lib/designs/edits'
import { besselWords, impulseWords, type WordKey } from '@/lib/designs/statement'
import { familyWords, methodWords, responseWords } from '@/lib/designs/words'
import { type Parsed, parseDecibels, parseFrequency, parseOrder } from '@/lib/units/parse'

export interface WordOption {
  readonly value: string
  readonly label: string
  readonly apply: (spec: DesignSpec) => DesignSpec
}

const entries = <Key extends string>(words: Record<Key, string>) => Object.entries(words) as [Key, string][]

/** What a choice word can be changed to, and what each choice makes of the spec. */
export function optionsFor(
  key: WordKey,
  spec: DesignSpec,
): { readonly current: string; readonly options: readonly WordOption[] } {
  const { analog, how } = spec
  switch (key) {
    case 'analog.response':
      return {
        current: analog.response,
        options: entries<ResponseKind>(responseWords).map(([value, label]) => ({
          value,
          label,
          apply: (old) => withResponse(old, value),
        })),
      }
    case 'analog.family':
      return {
        current: analog.family,
        options: [
          ...entries<Family>(familyWords).map(([value, label]) => ({
            value,
            label,
            apply: (old: DesignSpec) => withFamily(old, value),
          })),
          {
            value: 'first-order',
            label: 'first-order section',
            apply: (old: DesignSpec) => {
              const section = withFamily(old, 'butterworth')
              return withAnalog(section, { ...section.analog, order: 1 })
            },
          },
        ],
      }
    case 'analog.normalization':
      return {
        current: analog.normalization ?? 'magnitude',
        options: entries<keyof typeof besselWords>(besselWords).map(([value, label]) => ({
          value,
          label,
          apply: (old) => withAnalog(old, { ...old.analog, normalization: value }),
        })),
      }
    case 'how.method':
      return {
        current: how.method,
        options: entries<MethodName>(methodWords).map(([value, label]) => ({
          value,
          label,
          apply: (old) => withMethod(old, value),
        })),
      }
    case 'how.hold': {
      const hold = how.method === 'bilinear' ? how.hold : 'none'
      const several = analog.edgesHz.length > 1
      return {
        current: typeof hold === 'number' ? 'at' : hold,
        options: [
          {
            value: 'edges',
            label: several ? 'held at both edges' : 'held at its edge',
            apply: (old) => withHold(old, 'edges'),
          },
          { value: 'at', label: 'held at a frequency', apply: (old) => withHold(old, usualHoldHz(old)) },
          { value: 'none', label: 'not held', apply: (old) => withHold(old, 'none') },
        ],
      }
    }
    case 'how.options': {
      const variants = [
        {},
        { restoreGain: true },
        { halfFirstSample: true },
        { halfFirstSample: true, restoreGain: true },
      ] as const
      return {
        current: how.method === 'impulse-invariant' ? impulseWords(how) : '',
        options: variants.map((options) => ({
          value: impulseWords(options),
          label: impulseWords(options),
          apply: (old) => ({ ...old, how: { method: 'impulse-invariant', ...options } }),
        })),
      }
    }
    default:
      return { current: '', options: [] }
  }
}

/** The spec with one quantity word set to a number. */
export function withQuantity(spec: DesignSpec, key: WordKey, value: number): DesignSpec {
  switch (key) {
    case 'analog.order':
      return withAnalog(spec, { ...spec.analog, order: value })
    case 'analog.rippleDb':
      return withAnalog(spec, { ...spec.analog, rippleDb: value })
    case 'analog.attenuationDb':
      return withAnalog(spec, { ...spec.analog, attenuationDb: value })
    case 'analog.edgesHz.0':
      return withEdge(spec, 0, value)
    case 'analog.edgesHz.1':
      return withEdge(spec, 1, value)
    case 'sampleRateHz':
      return { ...spec, sampleRateHz: value }
    case 'how.holdHz':
      return withHold(spec, value)
    default:
      return spec
  }
}

export function parseQuantity(unit: 'Hz' | 'dB' | 'order', text: string, nyquistHz: number | null): Promise<Parsed> {
  if (unit === 'order') return Promise.resolve(parseOrder(text))
  if (unit === 'dB') return Promise.resolve(parseDecibels(text))
  return parseFrequency(text, { nyquistHz })
}

/** One press of an arrow key: 1 for an order, otherwise one unit of the third significant digit; `coarse` ten of them. */
export function stepped(
  unit: 'Hz' | 'dB' | 'order',
  value: number,
  direction: 1 | -1,
  size: 'fine' | 'usual' | 'coarse',
): number {
  if (unit === 'order') return value + direction
  const digit = 10 ** (Math.floor(Math.log10(Math.abs(value) || 1) + 1e-9) - 2)
  const step = digit * { fine: 0.1, usual: 1, coarse: 10 }[size]
  // Landing on whole steps keeps 0.1 + 0.2 from showing as 0.30000000000000004.
  return Number(((Math.round(value / step) + direction) * step).toPrecision(12))
}

/** DesignError names `how.hold` for a held frequency too; the word that carries the number is `how.holdHz`. */
export function wordOfField(field: string, spec: DesignSpec): string {
  if (field === 'how.hold' && spec.how.method === 'bilinear' && typeof spec.how.hold === 'number') return 'how.holdHz'
  if (field === 'analog.edgesHz') return 'analog.edgesHz.0'
  return field
}
