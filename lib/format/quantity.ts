/*
 * Numbers as the product writes them: − for minus, thin spaces for thousands and before units, engineering prefixes.
 * Screens show these; files carry plain numbers instead.
 */

const THIN = '\u2009'
const MINUS = '−'

const PREFIXES = [
  { factor: 1e9, symbol: 'G' },
  { factor: 1e6, symbol: 'M' },
  { factor: 1e3, symbol: 'k' },
  { factor: 1, symbol: '' },
  { factor: 1e-3, symbol: 'm' },
  { factor: 1e-6, symbol: 'µ' },
  { factor: 1e-9, symbol: 'n' },
  { factor: 1e-12, symbol: 'p' },
] as const

/** From here on even the largest prefix leaves too many digits. */
const MOST_PREFIXED = 1e16

/** Groups the integer digits by threes with a thin space, from five digits on. */
function grouped(digits: string): string {
  const [whole = '', fraction] = digits.split('.')
  const spaced = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+(?!\d))/g, THIN) : whole
  return fraction === undefined ? spaced : `${spaced}.${fraction}`
}

function signed(value: number, digits: string): string {
  const isZero = !/[1-9]/.test(digits)
  return value < 0 && !isZero ? `${MINUS}${digits}` : digits
}

/** `significant` digits without trailing zeros: 1.2, 86.4, −0.003; very large and small values as 1.2×10⁻⁷. */
export function formatNumber(value: number, significant = 4): string {
  if (Number.isNaN(value)) return '—'
  if (!Number.isFinite(value)) return value > 0 ? '∞' : `${MINUS}∞`
  if (value === 0) return '0'
  const magnitude = Math.abs(value)
  if (magnitude >= 1e7 || magnitude < 1e-4) {
    const [mantissa = '0', exponent = '0'] = magnitude.toExponential(significant - 1).split('e')
    return signed(value, `${Number(mantissa)}×10${superscript(Number(exponent))}`)
  }
  return signed(value, grouped(plain(magnitude, significant)))
}

/** A fixed number of decimals, for columns whose points must line up. */
export function formatFixed(value: number, decimals: number): string {
  if (Number.isNaN(value)) return '—'
  if (!Number.isFinite(value)) return value > 0 ? '∞' : `${MINUS}∞`
  return signed(value, grouped(Math.abs(value).toFixed(decimals)))
}

/** With an engineering prefix: (1200, 'Hz') → 1.2 kHz; (0.00085, 's') → 850 µs. */
export function formatQuantity(value: number, unit: string, significant = 4): string {
  if (!Number.isFinite(value)) return `${formatNumber(value)}${THIN}${unit}`
  if (value === 0) return `0${THIN}${unit}`
  const magnitude = Math.abs(value)
  // Rounding first, so that 999.96 becomes 1 kHz and not 1000 Hz.
  const rounded = Number(magnitude.toPrecision(significant))
  const prefix = PREFIXES.find((candidate) => rounded >= candidate.factor)
  // Outside the prefixes powers of ten say it: a prefix would need zeros that nobody counts.
  if (prefix === undefined || rounded >= MOST_PREFIXED) return `${formatNumber(value, significant)}${THIN}${unit}`
  const { factor, symbol } = prefix
  return `${signed(value, plain(rounded / factor, significant))}${THIN}${symbol}${unit}`
}

export const formatHz = (hertz: number, significant = 4): string => formatQuantity(hertz, 'Hz', significant)
export const formatSeconds = (seconds: number, significant = 3): string => formatQuantity(seconds, 's', significant)
export const formatDb = (decibels: number, decimals = 2): string => `${formatFixed(decibels, decimals)}${THIN}dB`
export const formatDegrees = (degrees: number, decimals = 1): string => `${formatFixed(degrees, decimals)}°`

/** An instant as document control writes it: 01 Dec 2026 09:42 UTC. Fixed zone, so that server and browser agree. */
export function formatInstant(iso: string): string {
  const at = new Date(iso)
  const two = (n: number) => String(n).padStart(2, '0')
  const month = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'][at.getUTCMonth()]
  return `${two(at.getUTCDate())} ${month} ${at.getUTCFullYear()} ${two(at.getUTCHours())}:${two(at.getUTCMinutes())} UTC`
}

function plain(magnitude: number, significant: number): string {
  const text = Number(magnitude.toPrecision(significant)).toString()
  // toString turns to exponents below 1e-6; write those out.
  return text.includes('e') ? magnitude.toFixed(12).replace(/0+$/, '') : text
}

function superscript(exponent: number): string {
  const digits = '⁰¹²³⁴⁵⁶⁷⁸⁹'
  const text = String(Math.abs(exponent))
    .split('')
    .map((digit) => digits[Number(digit)])
    .join('')
  return exponent < 0 ? `⁻${text}` : text
}
