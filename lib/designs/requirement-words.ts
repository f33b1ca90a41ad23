import type { Requirement, RequirementKind, RequirementResult } from '@/dsp'
import { formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'

/* The lines of a requirement sheet in words, in the manner of the statement; one place, so that the sheet and files say the same. */

/** Every number that a line can have. */
export type LineField =
  | 'fromHz'
  | 'toHz'
  | 'hz'
  | 'upToHz'
  | 'withinDb'
  | 'attenuationDb'
  | 'withinDegrees'
  | 'atMostSeconds'
  | 'atMostPercent'
  | 'withinPercent'
  | 'atMostMultiplies'
  | 'bits'

export type LineUnit = 'Hz' | 'dB' | '°' | 's' | '%' | 'multiplies' | 'bits'

/** Words of a line that are picked, not typed. */
export type LineChoice = 'reach' | 'span' | 'removeDelay'

export type LinePart =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'choice'; readonly key: LineChoice; readonly text: string }
  | {
      readonly kind: 'quantity'
      readonly field: LineField
      readonly value: number
      readonly unit: LineUnit
      readonly text: string
    }

/** What a kind of line is called where one is picked. */
export const requirementKindWords: Readonly<Record<RequirementKind, string>> = {
  pass: 'Band to keep',
  stop: 'Band to lose',
  'keep-tone': 'Tone to keep',
  'lose-tone': 'Tone to lose',
  'magnitude-departure': 'Magnitude departure',
  'phase-departure': 'Phase departure',
  'delay-spread': 'Delay spread',
  delay: 'Delay',
  overshoot: 'Step overshoot',
  settling: 'Step settling',
  cost: 'Cost per sample',
  'word-length': 'Word length',
}

const choiceWords = {
  reach: { above: 'and above', to: 'to' },
  span: { at: 'at', band: 'from' },
  removeDelay: { yes: 'best delay removed', no: 'delay kept in' },
} as const

/** A number of a line with its unit. */
export function lineQuantity(value: number, unit: LineUnit): string {
  switch (unit) {
    case 'Hz':
      return formatHz(value, 6)
    case 'dB':
      return `${formatNumber(value, 5)}\u2009dB`
    case '°':
      return `${formatNumber(value, 5)}°`
    case 's':
      return formatSeconds(value, 5)
    case '%':
      return `${formatNumber(value, 5)}\u2009%`
    case 'bits':
      return `${value} bits`
    case 'multiplies':
      return `${formatNumber(value, 7)} ${value === 1 ? 'multiply' : 'multiplies'}`
  }
}

const text = (words: string): LinePart => ({ kind: 'text', text: words })
const choice = (key: LineChoice, words: string): LinePart => ({ kind: 'choice', key, text: words })
const quantity =
  (unit: LineUnit) =>
  (field: LineField, value: number): LinePart => ({
    kind: 'quantity',
    field,
    value,
    unit,
    text: lineQuantity(value, unit),
  })

const hertz = quantity('Hz')
const decibels = quantity('dB')
const degrees = quantity('°')
const seconds = quantity('s')
const percent = quantity('%')

/** A line as a sentence, in parts: plain text, numbers that can be typed, words that can be picked. */
export function requirementParts(line: Requirement): readonly LinePart[] {
  switch (line.kind) {
    case 'pass':
      return [text('Keep '), ...band(line.fromHz, line.toHz), text(' within '), decibels('withinDb', line.withinDb)]
    case 'stop':
      return [
        text('Lose '),
        hertz('fromHz', line.fromHz),
        text(' '),
        ...(line.toHz === undefined
          ? [choice('reach', choiceWords.reach.above)]
          : [choice('reach', choiceWords.reach.to), text(' '), hertz('toHz', line.toHz)]),
        text(' by '),
        decibels('attenuationDb', line.attenuationDb),
      ]
    case 'keep-tone':
      return [text('Keep the tone at '), hertz('hz', line.hz), text(' within '), decibels('withinDb', line.withinDb)]
    case 'lose-tone':
      return [
        text('Lose the tone at '),
        hertz('hz', line.hz),
        text(' by '),
        decibels('attenuationDb', line.attenuationDb),
      ]
    case 'magnitude-departure':
      return [
        text('Magnitude departs by no more than '),
        decibels('withinDb', line.withinDb),
        text(' up to '),
        hertz('upToHz', line.upToHz),
      ]
    case 'phase-departure':
      return [
        text('Phase departs by no more than '),
        degrees('withinDegrees', line.withinDegrees),
        text(' up to '),
        hertz('upToHz', line.upToHz),
        text(', '),
        choice('removeDelay', choiceWords.removeDelay[line.removeDelay ? 'yes' : 'no']),
      ]
    case 'delay-spread':
      return [
        text('Delay spreads by no more than '),
        seconds('atMostSeconds', line.atMostSeconds),
        text(' from '),
        ...band(line.fromHz, line.toHz),
      ]
    case 'delay':
      return [
        text('Delay at most '),
        seconds('atMostSeconds', line.atMostSeconds),
        text(' '),
        ...(line.fromHz === line.toHz
          ? [choice('span', choiceWords.span.at), text(' '), hertz('fromHz', line.fromHz)]
          : [choice('span', choiceWords.span.band), text(' '), ...band(line.fromHz, line.toHz)]),
      ]
    case 'overshoot':
      return [text('Step overshoots by no more than '), percent('atMostPercent', line.atMostPercent)]
    case 'settling':
      return [
        text('Settled within '),
        percent('withinPercent', line.withinPercent),
        text(' after '),
        seconds('atMostSeconds', line.atMostSeconds),
        text(' at most'),
      ]
    case 'cost':
      return [text('At most '), quantity('multiplies')('atMostMultiplies', line.atMostMultiplies), text(' a sample')]
    case 'word-length':
      return [
        text('In '),
        quantity('bits')('bits', line.bits),
        text(' moves by no more than '),
        decibels('withinDb', line.withinDb),
      ]
  }
}

const band = (fromHz: number, toHz: number): LinePart[] => [hertz('fromHz', fromHz), text(' to '), hertz('toHz', toHz)]

/** The same sentence as one string. */
export const requirementText = (line: Requirement): string =>
  requirementParts(line)
    .map((part) => part.text)
    .join('')

/** What a number of a line is called where it stands alone. */
export const fieldWords: Readonly<Record<LineField, string>> = {
  fromHz: 'from',
  toHz: 'to',
  hz: 'tone',
  upToHz: 'up to',
  withinDb: 'within',
  attenuationDb: 'lost by',
  withinDegrees: 'within',
  atMostSeconds: 'at most',
  atMostPercent: 'at most',
  withinPercent: 'settled within',
  atMostMultiplies: 'at most',
  bits: 'word length',
}

type Figure = Pick<RequirementResult, 'unit'>

/** What a design comes to, in the line's unit and with three digits, which is what a reader compares. */
export function resultQuantity(value: number, { unit }: Figure): string {
  switch (unit) {
    case 's':
      return formatSeconds(value, 3)
    case '°':
      return `${formatNumber(value, 3)}°`
    case 'multiplies':
      return formatNumber(value, 7)
    default:
      return `${formatNumber(value, 3)}\u2009${unit}`
  }
}

/** More room than this many times the limit says nothing more. */
const PLENTY = 1000

type Judgement = Pick<RequirementResult, 'unit' | 'limit' | 'margin' | 'met'>

/** "met by 0.3 dB", "missed by 2.1°", or the bare word where the amount would say nothing. */
export function marginWords(result: Judgement): string {
  const { limit, margin, met } = result
  const says = Number.isFinite(margin) && Math.abs(margin) <= PLENTY * Math.max(limit, Number.MIN_VALUE)
  const word = met ? 'met' : 'missed'
  if (met && margin === 0) return 'just met'
  return says ? `${word} by ${resultQuantity(Math.abs(margin), result)}` : word
}

/** A frequency below this part of the rate is as good as 0 Hz: no axis shows it. */
const NEXT_TO_NOTHING = 1e-5
export const isNearDc = (hertz: number, sampleRateHz: number): boolean => hertz < sampleRateHz * NEXT_TO_NOTHING

/** "worst at 118 Hz"; null where no frequency is the worst one. */
export function worstWords(worstHz: number | null, sampleRateHz: number): string | null {
  if (worstHz === null) return null
  return isNearDc(worstHz, sampleRateHz) ? 'worst at DC' : `worst at ${formatHz(worstHz, 3)}`
}

/** Room as a part of the limit, by which lines of different units are ranked. */
const relativeMargin = ({ margin, limit }: Pick<RequirementResult, 'margin' | 'limit'>): number =>
  Number.isFinite(margin) ? margin / (limit === 0 ? 1 : limit) : margin

/** "5 of 6 met; worst: line 3, missed by 2.1°". */
export function sheetSummary(results: readonly Judgement[]): string {
  if (results.length === 0) return 'No lines yet.'
  const met = results.filter((result) => result.met).length
  const worst = results.reduce((least, result, index) => {
    const other = results[least]
    return other && relativeMargin(result) < relativeMargin(other) ? index : least
  }, 0)
  const named = results[worst]
  const words = named ? marginWords(named) : ''
  const count = met === results.length ? `All ${met} met` : `${met} of ${results.length} met`
  if (results.length === 1) return `${met} of 1 ${words}`
  return met === results.length
    ? `${count}; closest to its limit: line ${worst + 1}, ${words}`
    : `${count}; farthest past its limit: line ${worst + 1}, ${words}`
}
