import {
  isFamilyDesign,
  isFirDesign,
  isOwnDesign,
  type DesignSpec,
  type Family,
  type FirResponse,
  type MethodName,
  type ResponseKind,
} from '@/dsp'
import {
  usualHoldHz,
  withAnalog,
  withEdge,
  withFamily,
  withHold,
  withMethod,
  withRate,
  withResponse,
} from '@/lib/designs/edits'
import { firChoices, withBand, withFir, withFirResponse } from '@/lib/designs/fir-edits'
import { firName } from '@/lib/designs/fir-statement'
import { besselWords, fittedWords, impulseWords, type QuantityUnit, type WordKey } from '@/lib/designs/statement'
import { familyWords, firResponseWords, methodWords, responseWords } from '@/lib/designs/words'
import { formatHz, formatNumber } from '@/lib/format/quantity'
import { type Parsed, parseCount, parseDecibels, parseFrequency, parseOrder, parsePlainNumber } from '@/lib/units/parse'

export interface WordOption {
  readonly value: string
  readonly label: string
  readonly apply: (spec: DesignSpec) => DesignSpec
}

interface Options {
  readonly current: string
  readonly options: readonly WordOption[]
}

const entries = <Key extends string>(words: Record<Key, string>) => Object.entries(words) as [Key, string][]
const nothing: Options = { current: '', options: [] }

/** What a choice word can be changed to, and what each choice makes of the spec. */
export function optionsFor(key: WordKey, spec: DesignSpec): Options {
  switch (key) {
    case 'analog.family':
    case 'fir.kind':
    case 'own.given':
      return { current: currentKind(spec), options: kindOptions }
    case 'fir.response':
      return firResponseOptions(spec)
  }
  if (isFamilyDesign(spec) && (key === 'analog.response' || key === 'analog.normalization')) {
    return key === 'analog.response'
      ? {
          current: spec.analog.response,
          options: entries<ResponseKind>(responseWords).map(([value, label]) => ({
            value,
            label,
            apply: (old) => (isFamilyDesign(old) ? withResponse(old, value) : old),
          })),
        }
      : {
          current: spec.analog.normalization ?? 'magnitude',
          options: entries<keyof typeof besselWords>(besselWords).map(([value, label]) => ({
            value,
            label,
            apply: (old) => (isFamilyDesign(old) ? withAnalog(old, { normalization: value }) : old),
          })),
        }
  }
  return isFirDesign(spec) ? nothing : methodOptions(key, spec)
}

/** What the design is at heart: one of the families, an FIR filter, or whatever the user has given. */
const kindOptions: readonly WordOption[] = [
  ...entries<Family>(familyWords).map(([value, label]) => ({
    value,
    label,
    apply: (old: DesignSpec) => withFamily(old, value),
  })),
  {
    value: 'first-order',
    label: 'first-order section',
    apply: (old: DesignSpec) => withAnalog(withFamily(old, 'butterworth'), { order: 1 }),
  },
  ...firChoices.map((choice) => ({
    value: firName(choice),
    label: firName(choice),
    apply: (old: DesignSpec) => withFir(old, choice),
  })),
]

function currentKind(spec: DesignSpec): string {
  if (isFamilyDesign(spec)) return spec.analog.family
  return isFirDesign(spec) ? firName(spec.fir) : ''
}

const firResponseOptions = (spec: DesignSpec): Options =>
  isFirDesign(spec)
    ? {
        current: spec.fir.response,
        options: entries<FirResponse>(firResponseWords).map(([value, label]) => ({
          value,
          label,
          apply: (old) => (isFirDesign(old) ? withFirResponse(old, value) : old),
        })),
      }
    : nothing

function methodOptions(key: WordKey, spec: Exclude<DesignSpec, { fir: unknown }>): Options {
  const { how } = spec
  type Analog = typeof spec
  const analogOnly = (apply: (old: Analog) => DesignSpec) => (old: DesignSpec) => (isFirDesign(old) ? old : apply(old))
  switch (key) {
    case 'how.method':
      return {
        current: how.method,
        options: entries<MethodName>(methodWords).map(([value, label]) => ({
          value,
          label,
          apply: analogOnly((old) => withMethod(old, value)),
        })),
      }
    case 'how.hold': {
      const hold = how.method === 'bilinear' ? how.hold : 'none'
      const edges = isFamilyDesign(spec) ? spec.analog.edgesHz.length : 0
      const atEdges: WordOption = {
        value: 'edges',
        label: edges > 1 ? 'held at both edges' : 'held at its edge',
        apply: analogOnly((old) => withHold(old, 'edges')),
      }
      return {
        current: typeof hold === 'number' ? 'at' : hold,
        options: [
          ...(edges > 0 ? [atEdges] : []),
          { value: 'at', label: 'held at a frequency', apply: analogOnly((old) => withHold(old, usualHoldHz(old))) },
          { value: 'none', label: 'not held', apply: analogOnly((old) => withHold(old, 'none')) },
        ],
      }
    }
    case 'how.options':
      return how.method === 'fitted' ? fittedOptions(how) : impulseOptions(spec)
    default:
      return nothing
  }

  function fittedOptions(fitted: Extract<Analog['how'], { method: 'fitted' }>): Options {
    const { method, upToHz, order } = fitted
    const plain = { method, upToHz, ...(order === undefined ? {} : { order }) }
    const variants: readonly (typeof fitted)[] = [plain, { ...plain, freeDelay: true }]
    return {
      current: fittedWords(fitted),
      options: variants.map((next) => ({
        value: fittedWords(next),
        label: fittedWords(next),
        apply: analogOnly((old) => ({ ...old, how: next })),
      })),
    }
  }

  function impulseOptions({ how: now }: Analog): Options {
    const variants = [
      {},
      { restoreGain: true },
      { halfFirstSample: true },
      { halfFirstSample: true, restoreGain: true },
    ] as const
    return {
      current: now.method === 'impulse-invariant' ? impulseWords(now) : '',
      options: variants.map((options) => ({
        value: impulseWords(options),
        label: impulseWords(options),
        apply: analogOnly((old) => ({ ...old, how: { method: 'impulse-invariant', ...options } })),
      })),
    }
  }
}

const BAND_KEY = /^fir\.bands\.(\d+)\.(fromHz|toHz|gain|weight)$/

/** The spec with one quantity word set to a number. */
export function withQuantity(spec: DesignSpec, key: WordKey, value: number): DesignSpec {
  if (key === 'sampleRateHz') return withRate(spec, value)
  if (isFirDesign(spec)) {
    const [, index, part] = BAND_KEY.exec(key) ?? []
    if (index !== undefined) return withBand(spec, Number(index), part as 'fromHz' | 'toHz' | 'gain' | 'weight', value)
    if (key === 'fir.taps') return { ...spec, fir: { ...spec.fir, taps: value } }
    return key === 'fir.attenuationDb' ? { ...spec, fir: { ...spec.fir, attenuationDb: value } } : spec
  }
  if (key === 'how.holdHz') return withHold(spec, value)
  if (spec.how.method === 'fitted') {
    if (key === 'how.upToHz') return { ...spec, how: { ...spec.how, upToHz: value } }
    if (key === 'how.order') return { ...spec, how: { ...spec.how, order: value } }
  }
  if (isOwnDesign(spec)) return spec
  switch (key) {
    case 'analog.order':
      return withAnalog(spec, { order: value })
    case 'analog.rippleDb':
      return withAnalog(spec, { rippleDb: value })
    case 'analog.attenuationDb':
      return withAnalog(spec, { attenuationDb: value })
    case 'analog.edgesHz.0':
      return withEdge(spec, 0, value)
    case 'analog.edgesHz.1':
      return withEdge(spec, 1, value)
    default:
      return spec
  }
}

const isCount = (unit: QuantityUnit): boolean => unit === 'order' || unit === 'taps' || unit === 'poles'

export function parseQuantity(unit: QuantityUnit, text: string, nyquistHz: number | null): Promise<Parsed> {
  switch (unit) {
    case 'Hz':
      return parseFrequency(text, { nyquistHz })
    case 'dB':
      return Promise.resolve(parseDecibels(text))
    case 'factor':
      return Promise.resolve(parsePlainNumber(text))
    case 'order':
      return Promise.resolve(parseOrder(text))
    default:
      return Promise.resolve(parseCount(text))
  }
}

/** A number with its unit, where it stands alone. */
export function writtenIn(unit: QuantityUnit, value: number): string {
  if (unit === 'Hz') return formatHz(value, 6)
  if (unit === 'dB') return `${formatNumber(value, 5)}\u2009dB`
  return String(value)
}

/** One press of an arrow key: 1 for a count (2 for taps, which keeps them odd or even), else one unit of the third significant digit. */
export function stepped(
  unit: QuantityUnit,
  value: number,
  direction: 1 | -1,
  size: 'fine' | 'usual' | 'coarse',
): number {
  if (unit === 'taps') return value + direction * { fine: 1, usual: 2, coarse: 20 }[size]
  if (isCount(unit)) return value + direction
  const digit = 10 ** (Math.floor(Math.log10(Math.abs(value) || 1) + 1e-9) - 2)
  const step = digit * { fine: 0.1, usual: 1, coarse: 10 }[size]
  // Landing on whole steps keeps 0.1 + 0.2 from showing as 0.30000000000000004.
  return Number(((Math.round(value / step) + direction) * step).toPrecision(12))
}

/** DesignError names `how.hold` for a held frequency too; the word that carries the number is `how.holdHz`. */
export function wordOfField(field: string, spec: DesignSpec): string {
  if (field === 'how.hold' && !isFirDesign(spec) && spec.how.method === 'bilinear' && typeof spec.how.hold === 'number')
    return 'how.holdHz'
  if (field === 'analog.edgesHz') return 'analog.edgesHz.0'
  if (field === 'fir.window') return 'fir.kind'
  return field
}
