import { isOwnDesign, type DesignSpec } from '@/dsp'
import { sameValue } from './same-value'
import { statementParts, type StatementPart, type WordKey } from './statement'

/** What the alignment needs to know of a part of any statement: its words, and the place in the spec that they stand for. */
interface AnyPart {
  readonly kind: string
  readonly text: string
  readonly key?: string
}

/** A piece of two statements laid over each other: what both say, what only the earlier one said, what only the later one says. */
export interface MarkedPart<Part extends AnyPart = StatementPart> {
  readonly mark: 'same' | 'gone' | 'new'
  readonly part: Part
}

const keyOf = (part: AnyPart) => (part.kind === 'text' ? '' : (part.key ?? ''))
const isSame = (one: AnyPart, other: AnyPart) => one.text === other.text && keyOf(one) === keyOf(other)

/** How much it is worth to lay one part over the other: words of one place in the spec belong together even when they differ. */
function worth(one: AnyPart, other: AnyPart): number {
  if (one.kind === 'text' || other.kind === 'text') return isSame(one, other) ? 1 : 0
  if (keyOf(one) !== keyOf(other)) return 0
  return isSame(one, other) ? 4 : 3
}

/** The later statement of a design with the changed words marked, each old word before the one that replaced it. */
export const markedStatement = (before: DesignSpec, after: DesignSpec): readonly MarkedPart[] =>
  markedParts(statementParts(before), statementParts(after))

/**
 * Two statements in one, the changed words marked, each old word before the one that replaced it. Words count whole and belong to their
 * place in the spec: a rate of 120 Hz is not an edge of 120 Hz. (Alignment of greatest worth; Needleman & Wunsch 1970.)
 */
export function markedParts<Part extends AnyPart>(
  older: readonly Part[],
  newer: readonly Part[],
): readonly MarkedPart<Part>[] {
  const worths = alignmentWorths(older, newer)
  const rest = (i: number, j: number) => worths[i]?.[j] ?? 0
  const marked: MarkedPart<Part>[] = []
  let i = 0
  let j = 0
  while (i < older.length || j < newer.length) {
    const gone = older[i]
    const fresh = newer[j]
    const pair = gone && fresh ? worth(gone, fresh) : 0
    if (gone && fresh && pair > 0 && rest(i, j) === pair + rest(i + 1, j + 1)) {
      if (isSame(gone, fresh)) marked.push({ mark: 'same', part: fresh })
      else marked.push({ mark: 'gone', part: gone }, { mark: 'new', part: fresh })
      i++
      j++
    } else if (gone && (!fresh || rest(i, j) === rest(i + 1, j))) {
      marked.push({ mark: 'gone', part: gone })
      i++
    } else if (fresh) {
      marked.push({ mark: 'new', part: fresh })
      j++
    }
  }
  return marked
}

/** worths[i][j]: the greatest worth of laying older[i…] over newer[j…], in order. */
function alignmentWorths(older: readonly AnyPart[], newer: readonly AnyPart[]): number[][] {
  const worths = Array.from({ length: older.length + 1 }, () => new Array<number>(newer.length + 1).fill(0))
  for (let i = older.length - 1; i >= 0; i--) {
    for (let j = newer.length - 1; j >= 0; j--) {
      const [one, other, row] = [older[i], newer[j], worths[i]]
      if (!one || !other || !row) continue
      const pair = worth(one, other)
      const together = pair > 0 ? pair + (worths[i + 1]?.[j + 1] ?? 0) : 0
      row[j] = Math.max(together, worths[i + 1]?.[j] ?? 0, row[j + 1] ?? 0)
    }
  }
  return worths
}

const partNames: Readonly<Record<string, string>> = {
  'analog.response': 'response',
  'analog.family': 'family',
  'analog.order': 'order',
  'analog.normalization': 'normalisation',
  'analog.rippleDb': 'ripple',
  'analog.attenuationDb': 'attenuation',
  'analog.edgesHz.0': 'edge',
  'analog.edgesHz.1': 'upper edge',
  sampleRateHz: 'sampling rate',
  'how.method': 'method',
  'how.hold': 'held frequency',
  'how.holdHz': 'held frequency',
  'how.options': 'options of the method',
  'how.upToHz': 'fitted band',
  'how.order': 'poles of the fit',
  'fir.response': 'response',
  'fir.kind': 'kind of filter',
  'fir.taps': 'number of taps',
  'fir.attenuationDb': 'side lobes',
  'own.given': 'how the response is given',
}

const nameOf = (key: WordKey): string => partNames[key] ?? (key.startsWith('fir.bands.') ? 'bands' : key)

/** What differs between two specs, by name: "sampling rate", "held frequency", "departure budget". Empty when nothing does. */
export function changedParts(before: DesignSpec, after: DesignSpec): readonly string[] {
  const textsOf = (spec: DesignSpec) =>
    new Map(statementParts(spec).flatMap((part) => (part.kind === 'text' ? [] : [[part.key, part] as const])))
  const older = textsOf(before)
  const newer = textsOf(after)
  const names = new Set<string>()
  for (const key of [...older.keys(), ...newer.keys()]) {
    const [one, other] = [older.get(key), newer.get(key)]
    if (!one || !other || !isSame(one, other) || exactly(one) !== exactly(other)) names.add(nameOf(key))
  }
  if (!sameValue(before.budget, after.budget)) names.add('departure budget')
  if (!sameValue(before.sheet ?? [], after.sheet ?? [])) names.add('requirement sheet')
  if (!sameValue(ownOf(before), ownOf(after))) names.add('response of its own')
  return [...names]
}

/** Two values that are written alike may still differ further down. */
const exactly = (part: StatementPart) => (part.kind === 'quantity' ? part.value : part.text)
const ownOf = (spec: DesignSpec) => (isOwnDesign(spec) ? spec.own : null)
