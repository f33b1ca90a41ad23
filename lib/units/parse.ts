/*
 * Quantities as people type them. Plain forms ("2.5k", "2.5 kHz", "0.8 Nyquist") are read here at once; anything else is left to the
 * unit part of mathjs, which is heavy and therefore loaded only when such a text turns up.
 */

export type Parsed = { readonly ok: true; readonly value: number } | { readonly ok: false; readonly message: string }

export interface FrequencyContext {
  /** Half the sampling rate, for "0.8 Nyquist"; null where that would be circular (the sampling rate itself). */
  readonly nyquistHz: number | null
}

const PREFIX: Readonly<Record<string, number>> = { '': 1, m: 1e-3, k: 1e3, K: 1e3, M: 1e6, G: 1e9 }
const NUMBER = String.raw`[+-]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?`
// Case matters (m is milli, M is mega), and a bare "m" could mean metres or a million: it is left to the sentence of refusal.
const PLAIN = new RegExp(String.raw`^(${NUMBER})\s*(?:([kKMG]?)|([mkKMG]?)[hH][zZ])$`)
const NYQUIST = new RegExp(String.raw`^(${NUMBER})\s*(?:×|x|\*)?\s*(nyquist|fs/2|fs)$`, 'i')
const PER_MINUTE = new RegExp(String.raw`^(${NUMBER})\s*(?:rpm|r/min|/min)$`, 'i')

/** Spaces of every kind out of numbers, the typographic minus to a hyphen. A decimal comma is a point; grouping commas aren't read. */
function tidy(text: string): string {
  return text
    .trim()
    .replace(/−/g, '-')
    .replace(/(\d)[\s\u2009\u202f\u00a0](?=\d{3}(?!\d))/g, '$1')
    .replace(/[\u2009\u202f\u00a0]/g, ' ')
}

const toNumber = (digits: string): number => Number(digits.replace(',', '.'))

/** Hz from "120", "2.5k", "2,5 kHz", "157 rad/s", "0.8 Nyquist", "0.25 fs", "1480 rpm". */
export async function parseFrequency(input: string, context: FrequencyContext): Promise<Parsed> {
  const text = tidy(input)
  if (text === '') return refused('Type a frequency, such as 120 Hz or 2.5k.')

  const plain = PLAIN.exec(text)
  if (plain) return found(toNumber(plain[1] ?? '') * (PREFIX[plain[2] ?? plain[3] ?? ''] ?? 1))

  const perMinute = PER_MINUTE.exec(text)
  if (perMinute) return found(toNumber(perMinute[1] ?? '') / 60)

  const relative = NYQUIST.exec(text)
  if (relative) {
    if (context.nyquistHz === null)
      return refused('The sampling rate can’t be given as a part of itself; type it in Hz.')
    const ofRate = (relative[2] ?? '').toLowerCase() === 'fs' ? 2 : 1
    return found(toNumber(relative[1] ?? '') * context.nyquistHz * ofRate)
  }

  const { unitToHertz } = await import('./mathjs-units')
  const hertz = unitToHertz(text.replace(/(\d),(\d)/g, '$1.$2'))
  return hertz === null
    ? refused(`“${input.trim()}” isn’t a frequency; try 2.5 kHz, 157 rad/s or 0.8 Nyquist.`)
    : found(hertz)
}

/** dB from "0.5", "0.5 dB", "0,5dB". */
export function parseDecibels(input: string): Parsed {
  const match = new RegExp(String.raw`^(${NUMBER})\s*(?:db)?$`, 'i').exec(tidy(input))
  return match
    ? found(toNumber(match[1] ?? ''))
    : refused(`“${input.trim()}” isn’t a level; type decibels, such as 0.5.`)
}

/** Degrees from "1", "1°", "1 deg". */
export function parseDegrees(input: string): Parsed {
  const match = new RegExp(String.raw`^(${NUMBER})\s*(?:°|deg|degrees?)?$`, 'i').exec(tidy(input))
  return match ? found(toNumber(match[1] ?? '')) : refused(`“${input.trim()}” isn’t an angle; type degrees, such as 1.`)
}

/** A whole number from "4" or "order 4". */
export function parseOrder(input: string): Parsed {
  const match = /^(?:order\s*)?([+-]?\d+)$/i.exec(tidy(input))
  return match
    ? found(Number(match[1]))
    : refused(`“${input.trim()}” isn’t an order; type a whole number from 1 to 24.`)
}

const SECONDS: Readonly<Record<string, number>> = { '': 1, m: 1e-3, u: 1e-6, µ: 1e-6, n: 1e-9 }
const TIME = new RegExp(String.raw`^(${NUMBER})\s*(?:([munµ]?)s|(min))$`)

/** Seconds from "5 ms", "200 µs", "200us", "0.5 s", "2 min". A bare number is not taken: nobody means 200 s beside 200 µs. */
export function parseSeconds(input: string): Parsed {
  const text = tidy(input)
    .replace(/\u03bc/g, 'µ')
    .replace(/sec(?:onds?)?$/i, 's')
  const match = TIME.exec(text)
  if (match) return found(toNumber(match[1] ?? '') * (match[3] ? 60 : (SECONDS[match[2] ?? ''] ?? 1)))
  return refused(
    new RegExp(`^${NUMBER}$`).test(text)
      ? `Say the unit too: ${text} s, ${text} ms or ${text} µs.`
      : `“${input.trim()}” isn’t a time; try 5 ms or 200 µs.`,
  )
}

const PREFIXES: Readonly<Record<string, number>> = {
  '': 1,
  k: 1e3,
  M: 1e6,
  m: 1e-3,
  u: 1e-6,
  µ: 1e-6,
  n: 1e-9,
  p: 1e-12,
}
const BARE = new RegExp(`^(${NUMBER})$`)
const WITH_UNIT = new RegExp(String.raw`^(${NUMBER})\s*(\S.*)$`)

/** √ as people write it where their keyboard has none, both micro signs, and spaces, which say nothing inside a unit. */
const tidyUnit = (unit: string): string =>
  unit
    .replace(/\u03bc/g, 'µ')
    .replace(/sqrt\(?hz\)?|rt\s?hz|√\s?hz/i, '√Hz')
    .replace(/\^?2$/, '²')
    .replace(/\s+/g, '')

/** A value that people would type, where half of one is far from any. */
const exampleOf = (unit: string): string => (unit === 'V/√Hz' ? '500\u2009nV/√Hz' : `0.5\u2009${unit}`)

/** Units that carry a prefix of their own: a bare one behind the number would stand before another. */
const PREFIXED = /^(?:mm|µm)/

/** What a unit, as it was written, is of the field's own; undefined where it is another. A prefix alone counts for the field's unit. */
function factorOf(given: string, unit: string): number | undefined {
  if (given === unit) return 1
  if (!PREFIXED.test(unit) && given in PREFIXES) return PREFIXES[given]
  // Beside a field of noise densities nobody says "per root hertz": 500 nV.
  const said = unit.endsWith('/√Hz') && !given.includes('/') ? `${given}/√Hz` : given
  return said.endsWith(unit) ? PREFIXES[said.slice(0, -unit.length)] : undefined
}

/**
 * A value in `unit` from "0.5", "0.5 g", "50 mg", "50m", "3 µV/√Hz": the bare number counts in the unit itself, a prefix may stand before it
 * or alone.
 */
export function parseInUnit(input: string, unit: string): Parsed {
  const text = tidy(input)
  const bare = BARE.exec(text)
  if (bare) return found(toNumber(bare[1] ?? ''))
  const [, digits = '', written = ''] = WITH_UNIT.exec(text) ?? []
  const factor = factorOf(tidyUnit(written), unit)
  return factor === undefined || digits === ''
    ? refused(`“${input.trim()}” isn’t a value in ${unit}; type one, such as ${exampleOf(unit)}.`)
    : // 200 nV is 2e-7 V, without the dust of the product.
      found(Number((toNumber(digits) * factor).toPrecision(15)))
}

/** Per cent from "5", "5 %", "0,5%". */
export function parsePercent(input: string): Parsed {
  const match = new RegExp(String.raw`^(${NUMBER})\s*(?:%|per ?cent)?$`, 'i').exec(tidy(input))
  return match ? found(toNumber(match[1] ?? '')) : refused(`“${input.trim()}” isn’t a part; type per cent, such as 5.`)
}

/** A whole number from "63", "63 taps", "5 poles", "16 bits" or "20 multiplies". */
export function parseCount(input: string): Parsed {
  const match = /^([+-]?\d+)\s*(?:taps?|poles?|bits?|multipl(?:y|ies))?$/i.exec(tidy(input))
  if (match) return found(Number(match[1]))
  const between = parsePart(input)
  return refused(
    `“${input.trim()}” isn’t a count; type a whole number${between === null ? '' : `, such as ${Math.round(between)}`}.`,
  )
}

/** The number of "7.5" or "7,5 taps", which is none that is counted; null for other texts. */
export function parsePart(input: string): number | null {
  const [, digits] = new RegExp(String.raw`^(${NUMBER})\s*(?:taps?|poles?|bits?)?$`, 'i').exec(tidy(input)) ?? []
  return digits !== undefined && Number.isFinite(toNumber(digits)) ? toNumber(digits) : null
}

/** A number without a unit, such as a gain or a weight. */
export function parsePlainNumber(input: string): Parsed {
  const match = new RegExp(`^(${NUMBER})$`).exec(tidy(input))
  return match ? found(toNumber(match[1] ?? '')) : refused(`“${input.trim()}” isn’t a number; type one, such as 0.5.`)
}

function found(value: number): Parsed {
  return Number.isFinite(value) ? { ok: true, value } : refused('That number is too large to work with.')
}

function refused(message: string): Parsed {
  return { ok: false, message }
}
