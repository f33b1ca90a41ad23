import type {
  ChainRequirement,
  ChainRequirementKind,
  ChainRequirementResult,
  ChainSpec,
  ChainStage,
  ChainStageKind,
} from '@/dsp'
import { familyWords, responseWords } from '@/lib/designs/words'
import { formatNumber, formatSeconds } from '@/lib/format/quantity'
import { chainFieldText, hertzText } from './fields'
import type { DecimateFilterType } from './stage-starts'

/* The product's words for the parts of a chain; one place, so that the sentence, the strip, the sheet and files say the same. */

export const stageKindWords: Readonly<Record<ChainStageKind, string>> = {
  sensor: 'Sensor',
  analog: 'Analog filter',
  converter: 'Converter',
  decimate: 'Decimation',
  shape: 'Digital shaping',
}

const added: Readonly<Record<ChainStageKind, string>> = {
  sensor: 'A sensor',
  analog: 'An analog filter',
  converter: 'A converter',
  decimate: 'A decimation',
  shape: 'A digital shaping',
}

/** What was refused, and why: "A decimation wasn’t added: the band ends at …". */
export const wasnt = (what: string, reason: string): string =>
  `${what}: ${reason.replace(/^(?:The|A|An|There|At|Only|Integrating|Integrated)\b/, (word) => word.toLowerCase())}`

export const notAdded = (kind: ChainStageKind, reason: string): string => wasnt(`${added[kind]} wasn’t added`, reason)

export const decimateWords: Readonly<Record<DecimateFilterType, string>> = {
  'half-band': 'Half-band',
  kaiser: 'Kaiser window',
  equiripple: 'Equiripple',
  cic: 'Integrator–comb (CIC)',
  design: 'A design of the project',
}

/** What a stage is called on the strip: short, without its figures. */
export function stageName(stage: ChainStage): string {
  switch (stage.kind) {
    case 'sensor':
      return stage.name
    case 'analog': {
      if (stage.source.from === 'design') return `${stage.source.link.drawing} v${stage.source.link.version}`
      const { family, response, order } = stage.source.analog
      return `${capital(familyWords[family])} ${order}${response === 'lowpass' ? '' : ` ${responseWords[response]}`}`
    }
    case 'converter': {
      const { resolution } = stage
      return resolution.by === 'bits' ? `${resolution.bits} ${resolution.bits === 1 ? 'bit' : 'bits'}` : 'by its noise'
    }
    case 'decimate':
      return decimateName(stage.filter)
    case 'shape':
      return stage.filter.type === 'design'
        ? `${stage.filter.link.drawing} v${stage.filter.link.version}`
        : `integrated ${stage.filter.times === 1 ? 'once' : 'twice'}`
  }
}

function decimateName(filter: Extract<ChainStage, { kind: 'decimate' }>['filter']): string {
  switch (filter.type) {
    case 'half-band':
      return `Half-band ${filter.taps} taps`
    case 'kaiser':
      return `Kaiser ${filter.taps} taps`
    case 'equiripple':
      return `Equiripple ${filter.taps} taps`
    case 'cic':
      return `CIC order ${filter.order}${filter.compensation ? ', compensated' : ''}`
    case 'design':
      return `${filter.link.drawing} v${filter.link.version}`
  }
}

/** The small label over a stage: its kind, and what it does to the rate. */
export const stageLabel = (stage: ChainStage): string => {
  switch (stage.kind) {
    case 'decimate':
      return `Down by ${stage.factor}`
    case 'analog':
      return 'Analog'
    case 'shape':
      return 'Shaping'
    default:
      return stageKindWords[stage.kind]
  }
}

const capital = (words: string): string => words.charAt(0).toUpperCase() + words.slice(1)

/* Requirement lines */

export const chainRequirementKindWords: Readonly<Record<ChainRequirementKind, string>> = {
  'usable-band': 'Usable band',
  flatness: 'Flatness',
  'alias-floor': 'Alias floor',
  phase: 'Phase linearity',
  delay: 'Delay',
  'channel-match': 'Channel match',
  'effective-bits': 'Effective bits',
}

export type ChainLinePart =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'quantity'; readonly path: string; readonly value: number; readonly text: string }

/** A line of the sheet as a sentence, in parts: plain text, and numbers by their path. */
export function chainLineParts(spec: ChainSpec, index: number): readonly ChainLinePart[] {
  const line = spec.sheet[index]
  if (!line) return []
  const words = (text: string): ChainLinePart => ({ kind: 'text', text })
  const number = (field: string, value: number): ChainLinePart => {
    const path = `sheet.${index}.${field}`
    return { kind: 'quantity', path, value, text: chainFieldText(spec, path, value) }
  }
  const band = (fromHz: number, toHz: number) => [number('fromHz', fromHz), words(' to '), number('toHz', toHz)]
  switch (line.kind) {
    case 'usable-band':
      return [
        words('Usable to '),
        number('toHz', line.toHz),
        words(', within '),
        number('rippleDb', line.rippleDb),
        words(' and images '),
        number('aliasDb', line.aliasDb),
        words(' down'),
      ]
    case 'flatness':
      return [words('Keeps '), ...band(line.fromHz, line.toHz), words(' within '), number('withinDb', line.withinDb)]
    case 'alias-floor':
      return [
        words('Alias floor below '),
        number('toHz', line.toHz),
        words(', '),
        number('atLeastDb', line.atLeastDb),
        words(' down'),
      ]
    case 'phase':
      return [
        words('Phase straight from '),
        ...band(line.fromHz, line.toHz),
        words(' within '),
        number('withinDegrees', line.withinDegrees),
      ]
    case 'delay':
      return [
        words('Delay at '),
        number('atHz', line.atHz),
        words(', '),
        number('atMostSeconds', line.atMostSeconds),
        words(' at most'),
      ]
    case 'channel-match':
      return [
        words('Channel match to '),
        number('toHz', line.toHz),
        words(', '),
        number('withinDegrees', line.withinDegrees),
        words(' and '),
        number('withinDb', line.withinDb),
      ]
    case 'effective-bits':
      return [words('Effective bits, '), number('atLeast', line.atLeast), words(' at least')]
  }
}

/** The same sentence as one string. */
export const chainLineText = (spec: ChainSpec, index: number): string =>
  chainLineParts(spec, index)
    .map((part) => part.text)
    .join('')

type Judged = Pick<ChainRequirementResult, 'value' | 'margin' | 'met' | 'unit'>

/** What a chain comes to, in the line's unit and with three digits; a dash while it can't be judged. */
export function chainQuantity(value: number | null, unit: ChainRequirementResult['unit']): string {
  if (value === null) return '—'
  switch (unit) {
    case 'Hz':
      return hertzText(value, 3)
    case 's':
      return formatSeconds(value, 3)
    case '°':
      return `${formatNumber(value, 3)}°`
    case 'bits':
      return formatNumber(value, 3)
    case 'dB':
      return `${formatNumber(value, 3)}\u2009dB`
  }
}

/** "met by 0.19 dB", "missed by 18.6 dB", or why it isn't known. */
export function chainMarginWords({ margin, met, unit }: Judged): string {
  if (met === null || margin === null) return 'not judged'
  if (met && margin === 0) return 'just met'
  const word = met ? 'met' : 'missed'
  return Number.isFinite(margin) ? `${word} by ${chainQuantity(Math.abs(margin), unit)}` : word
}

/** A new line of a kind, with values that suit the chain; every band lies below half its output rate. */
export function usualLine(kind: ChainRequirementKind, { kept, sheet }: ChainSpec): ChainRequirement {
  const { fromHz, toHz } = kept
  const middleHz = Number((fromHz > 0 ? Math.sqrt(fromHz * toHz) : toHz / 10).toPrecision(2))
  const floor = sheet.find((line) => line.kind === 'alias-floor')?.atLeastDb ?? 80
  switch (kind) {
    case 'usable-band':
      return { kind, toHz, rippleDb: 0.5, aliasDb: floor }
    case 'flatness':
      return { kind, fromHz, toHz, withinDb: 0.5 }
    case 'alias-floor':
      return { kind, toHz, atLeastDb: floor }
    case 'phase':
      return { kind, fromHz, toHz, withinDegrees: 5 }
    case 'delay':
      return { kind, atHz: middleHz, atMostSeconds: Number((10 / toHz).toPrecision(2)) }
    case 'channel-match':
      return { kind, toHz, withinDegrees: 1, withinDb: 0.1 }
    case 'effective-bits':
      return { kind, atLeast: 12 }
  }
}
