import { MOST_DECIMATION, MOST_STAGE_TAPS, type ChainSpec, type ChainStage } from '@/dsp'
import { formatHz, formatNumber, formatQuantity, formatSeconds } from '@/lib/format/quantity'
import {
  parseCount,
  parseDecibels,
  parseDegrees,
  parseFrequency,
  parseInUnit,
  parseOrder,
  parsePart,
  parsePlainNumber,
  parseSeconds,
  type Parsed,
} from '@/lib/units/parse'
import { unitAfter } from './outline'

/*
 * Every number of a chain that can be typed, by its path: `stages.3.filter.taps`, `kept.toHz`, `sheet.0.atLeastDb`, `interferers.2.hz`.
 * These are the paths that a DesignError names. The sentence, the desk and the sheet all edit through this table.
 */

export type ChainFieldUnit =
  'Hz' | 'dB' | '°' | 's' | 'bits' | 'order' | 'count' | 'taps' | 'number' | 'V' | 'V/√Hz' | 'level'

export interface ChainField {
  /** What the number is called where it stands alone. */
  readonly label: string
  readonly unit: ChainFieldUnit
  readonly least: number
  readonly most: number
  /** The least itself is too little. */
  readonly isOpen?: boolean
}

const open = { least: 0, isOpen: true } as const
const hertz = (label: string): ChainField => ({ label, unit: 'Hz', ...open, most: 1e9 })
const fromZero = (label: string): ChainField => ({ label, unit: 'Hz', least: 0, most: 1e9 })
const decibels = (label: string): ChainField => ({ label, unit: 'dB', ...open, most: 300 })
const order = (label: string, most: number): ChainField => ({ label, unit: 'order', least: 1, most })
const taps: ChainField = { label: 'Taps', unit: 'taps', least: 3, most: MOST_STAGE_TAPS }

const fields: Readonly<Record<string, ChainField>> = {
  'stages.*.sensitivity': { label: 'Sensitivity', unit: 'V', ...open, most: 1e9 },
  'stages.*.resonance.f0Hz': hertz('Resonance'),
  'stages.*.resonance.q': { label: 'Q of the resonance', unit: 'number', ...open, most: 1e4 },
  'stages.*.highPass.cornerHz': hertz('High-pass corner'),
  'stages.*.highPass.order': order('Order of the high-pass', 4),
  'stages.*.source.analog.order': order('Order', 24),
  'stages.*.source.analog.edgesHz.0': hertz('Edge'),
  'stages.*.source.analog.edgesHz.1': hertz('Upper edge'),
  'stages.*.source.analog.rippleDb': decibels('Ripple'),
  'stages.*.source.analog.attenuationDb': decibels('Attenuation'),
  'stages.*.sampleRateHz': hertz('Converter rate'),
  'stages.*.resolution.bits': { label: 'Bits', unit: 'bits', least: 1, most: 32 },
  'stages.*.resolution.voltsPerRootHz': { label: 'Noise density', unit: 'V/√Hz', ...open, most: 1 },
  'stages.*.fullScaleVolts': { label: 'Full scale', unit: 'V', ...open, most: 1e6 },
  'stages.*.averaging.order': order('Order of the averaging', 5),
  'stages.*.factor': { label: 'Factor', unit: 'count', least: 2, most: MOST_DECIMATION },
  'stages.*.filter.taps': taps,
  'stages.*.filter.passHz': hertz('Pass band to'),
  'stages.*.filter.stopHz': hertz('Stop band from'),
  'stages.*.filter.attenuationDb': decibels('Stop band down'),
  'stages.*.filter.stopWeight': { label: 'Weight of the stop band', unit: 'number', ...open, most: 1e6 },
  'stages.*.filter.order': order('Integrators and combs', 8),
  'stages.*.filter.combDelay': { label: 'Comb delay', unit: 'count', least: 1, most: 2 },
  'stages.*.filter.compensation.taps': { ...taps, label: 'Taps of the compensation' },
  'stages.*.filter.compensation.passHz': hertz('Compensated to'),
  'stages.*.filter.highPass.cornerHz': hertz('High-pass corner'),
  'stages.*.filter.highPass.order': order('Order of the high-pass', 4),
  'kept.fromHz': fromZero('Kept from'),
  'kept.toHz': hertz('Kept to'),
  'sheet.*.fromHz': fromZero('from'),
  'sheet.*.toHz': hertz('to'),
  'sheet.*.atHz': hertz('at'),
  'sheet.*.rippleDb': decibels('ripple'),
  'sheet.*.aliasDb': decibels('images down'),
  'sheet.*.withinDb': decibels('within'),
  'sheet.*.atLeastDb': decibels('at least'),
  'sheet.*.withinDegrees': { label: 'within', unit: '°', ...open, most: 36_000 },
  'sheet.*.atMostSeconds': { label: 'at most', unit: 's', ...open, most: 1e6 },
  'sheet.*.atLeast': { label: 'at least', unit: 'number', ...open, most: 40 },
  'interferers.*.hz': hertz('frequency'),
  'interferers.*.fromHz': hertz('from'),
  'interferers.*.toHz': hertz('to'),
  'interferers.*.level': { label: 'level', unit: 'level', ...open, most: 1e9 },
}

/** What is known of the number at a path; null where there is none that can be typed. */
export const chainFieldOf = (path: string): ChainField | null => fields[path.replace(/(^\w+)\.\d+/, '$1.*')] ?? null

/** The part of the chain at a path; undefined where there is none. */
export function partAt(spec: ChainSpec, path: string): unknown {
  return path
    .split('.')
    .reduce<unknown>(
      (part, key) => (typeof part === 'object' && part !== null ? (part as Record<string, unknown>)[key] : undefined),
      spec,
    )
}

export function numberAt(spec: ChainSpec, path: string): number | null {
  const value = partAt(spec, path)
  return typeof value === 'number' ? value : null
}

/** The chain with another part at a path, everything else the same objects as before. */
export function withPartAt(spec: ChainSpec, path: string, value: unknown): ChainSpec {
  const put = (part: unknown, [key, ...rest]: readonly string[]): unknown => {
    if (key === undefined) return value
    if (Array.isArray(part)) return part.map((item: unknown, index) => (String(index) === key ? put(item, rest) : item))
    const record = part as Readonly<Record<string, unknown>>
    return { ...record, [key]: put(record[key], rest) }
  }
  return put(spec, path.split('.')) as ChainSpec
}

export const withStage = (spec: ChainSpec, index: number, stage: ChainStage): ChainSpec =>
  withPartAt(spec, `stages.${index}`, stage)

export const isWholeNumber = (unit: ChainFieldUnit): boolean =>
  unit === 'bits' || unit === 'order' || unit === 'count' || unit === 'taps'

/** Units that carry a prefix of their own, or none: a second one before them would mislead. */
const unprefixed: readonly string[] = ['mm/s', 'mm', 'µm', 'µm/m']

/** A level in the unit of a sensor or of the samples: 0.05 g → 50 mg. */
export const levelText = (value: number, unit: string, significant = 3): string =>
  unprefixed.includes(unit)
    ? `${formatNumber(value, significant)}\u2009${unit}`
    : formatQuantity(value, unit, significant)

/** The unit that a prefixed one is a part of, so that what is far smaller can be said with another prefix. */
const whole: Readonly<Record<string, readonly [unit: string, factor: number]>> = {
  'mm/s': ['m/s', 1e-3],
  mm: ['m', 1e-3],
  µm: ['m', 1e-6],
}

/** A level that is read, not typed: 3.6e-6 mm/s → 3.6 nm/s. */
export function shownLevel(value: number, unit: string): string {
  const [base, factor] = whole[unit] ?? [unit, 1]
  return levelText(value * factor, base)
}

/** A frequency; below 1 Hz, where corners of sensors lie, nobody says millihertz: 0.5 Hz. */
export const hertzText = (hertz: number, significant = 4): string =>
  hertz > 0 && hertz < 1 ? `${formatNumber(hertz, significant)}\u2009Hz` : formatHz(hertz, significant)

/** The number at a path as it stands alone, with its unit. */
export function chainFieldText(spec: ChainSpec, path: string, value: number): string {
  const unit = chainFieldOf(path)?.unit ?? 'number'
  switch (unit) {
    case 'Hz':
      return hertzText(value, 6)
    case 'dB':
      return `${formatNumber(value, 5)}\u2009dB`
    case '°':
      return `${formatNumber(value, 5)}°`
    case 's':
      return formatSeconds(value, 5)
    case 'V':
    case 'V/√Hz':
      return formatQuantity(value, unit, 5)
    case 'level':
      return levelText(value, sensorUnitOf(spec), 5)
    case 'bits':
      return `${value} ${value === 1 ? 'bit' : 'bits'}`
    case 'taps':
      return `${value} taps`
    default:
      return formatNumber(value, 6)
  }
}

/** Interferers are given at the sensor, in its unit. */
const sensorUnitOf = (spec: ChainSpec): string => unitAfter(spec, 0)

/** A typed text as the number at a path. */
export function parseChainField(
  spec: ChainSpec,
  path: string,
  text: string,
  nyquistHz: number | null,
): Parsed | Promise<Parsed> {
  const unit = chainFieldOf(path)?.unit ?? 'number'
  switch (unit) {
    case 'Hz':
      return parseFrequency(text, { nyquistHz })
    case 'dB':
      return parseDecibels(text)
    case '°':
      return parseDegrees(text)
    case 's':
      return parseSeconds(text)
    case 'V':
    case 'V/√Hz':
      return parseInUnit(text, unit)
    case 'level':
      return parseInUnit(text, sensorUnitOf(spec))
    case 'order':
      return counted(parseOrder(text), text)
    case 'number':
      return parsePlainNumber(text.replace(/\s*bits?$/i, ''))
    default:
      return counted(parseCount(text), text)
  }
}

/** A number between two counts is read, so that it is refused with the nearest one: see `boundRefusal`. */
function counted(parsed: Parsed, text: string): Parsed {
  const value = parsed.ok ? null : parsePart(text)
  return value === null ? parsed : { ok: true, value }
}

export interface FieldRefusal {
  readonly message: string
  readonly nearest?: number
}

/** Why a number is none for its place, whatever else the chain holds; null when it may be tried. */
export function boundRefusal(spec: ChainSpec, path: string, value: number): FieldRefusal | null {
  const field = chainFieldOf(path)
  if (!field) return null
  const { label, least, most, isOpen, unit } = field
  const named = label.charAt(0).toUpperCase() + label.slice(1)
  if (isWholeNumber(unit) && !Number.isInteger(value)) {
    return { message: `${named} is a whole number.`, nearest: Math.min(Math.max(Math.round(value), least), most) }
  }
  if ((isOpen ? value > least : value >= least) && value <= most) return null
  const written = (number: number) => chainFieldText(spec, path, number)
  return isOpen
    ? {
        message: `${named} lies above ${written(0)}, and is ${written(most)} at most.`,
        ...(value > most ? { nearest: most } : {}),
      }
    : { message: `${named} lies from ${written(least)} to ${written(most)}.`, nearest: value > most ? most : least }
}
