import type { ProofLine, ProofResult } from '@/dsp'
import { formatDb, formatFixed, formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { spanOf, type LinesPlan } from './chart/lines-picture'

/* What a run of the simulated chain showed, in words. */

export const proofColumns = ['what', 'input', 'lands on', 'computed', 'measured', 'apart', 'bound', 'verdict'] as const

/** Where levels end: nothing in doubles is told apart below. */
const LEAST_DB = -300

const levelWords = (decibels: number): string =>
  decibels > LEAST_DB ? formatDb(decibels, 3) : `below ${formatDb(LEAST_DB, 0)}`

/** Of a line that lies in the noise nothing was measured but that it isn't above it. */
export const isBelow = ({ agrees, comparison }: ProofLine): boolean => agrees && comparison === 'not above'

export const proofCells = (line: ProofLine): readonly string[] => {
  const isMeasured = line.comparison === 'within'
  return [
    line.what,
    formatHz(line.inputHz, 6),
    formatHz(line.landsHz, 6),
    levelWords(line.computedDb),
    levelWords(line.measuredDb),
    isMeasured ? formatDb(line.measuredDb - line.computedDb, 3) : '—',
    isMeasured ? `±${formatDb(line.boundDb, 3)}` : `up to ${levelWords(line.computedDb + line.boundDb)}`,
    !line.agrees ? 'does not agree' : isMeasured ? 'agrees' : 'below what can be measured',
  ]
}

const lineCount = (count: number, one: string, more: string): string =>
  count === 1 ? `1 line ${one}` : `${count} lines ${more}`

export function proofVerdict(result: ProofResult): string {
  const { lines } = result
  const apart = lines.filter(({ agrees }) => !agrees).length
  const what = `${formatNumber(result.samplesIn, 7)} samples at ${formatHz(result.inputRateHz)} were run through the chain and ${formatNumber(result.samplesStored, 7)} stored`
  const below = lines.filter(isBelow).length
  if (result.agrees) {
    const agree = lineCount(lines.length - below, 'agrees', 'agree')
    if (below === 0)
      return `${what}: ${agree} with what is computed, within ${lines.length === 1 ? 'its' : 'their'} bound.`
    const isImageSeen = lines.some(({ what: name, comparison }) => name.startsWith('image') && comparison === 'within')
    const hasImages = lines.some(({ what: name }) => name.startsWith('image'))
    const images = hasImages && !isImageSeen ? ' No image could be measured.' : ''
    const they = below === 1 ? 'proves nothing more than that it is' : 'prove nothing more than that they are'
    return `${what}: ${agree}; ${below} ${below === 1 ? 'lies' : 'lie'} below the noise of the converter and ${they} not above it.${images}`
  }
  const faults = [
    ...(apart > 0 ? [`${apart} of ${lines.length} lines ${apart === 1 ? 'lies' : 'lie'} outside the bound`] : []),
    ...(result.delay.agrees ? [] : ['the delay lies outside its bound']),
  ]
  const nothing = 'nothing stood out of the noise where it should have'
  return `${what}: ${faults.length > 0 ? faults.join(', and ') : nothing}. Don’t rely on the figures of this chain; tell the owner of the team.`
}

export const delayWords = ({ delay }: ProofResult): string =>
  `Delay: computed ${formatSeconds(delay.computedSeconds, 5)}, measured ${formatSeconds(delay.measuredSeconds, 5)}, bound ±${formatSeconds(delay.boundSeconds, 3)}: ${delay.agrees ? 'agrees' : 'does not agree'}.`

const STRETCHES = 256

/** The highest value in each of so many stretches of the axis: lines stay seen, and combs of them stay readable. */
export function highest(x: Float64Array, y: Float64Array): { readonly x: Float64Array; readonly y: Float64Array } {
  const size = Math.max(1, Math.ceil(x.length / STRETCHES))
  const count = Math.ceil(x.length / size)
  const places = new Float64Array(count)
  const values = new Float64Array(count).fill(Number.NEGATIVE_INFINITY)
  for (let n = 0; n < x.length; n++) {
    const k = Math.floor(n / size)
    if ((y[n] ?? Number.NEGATIVE_INFINITY) < (values[k] ?? 0) && n % size !== 0) continue
    places[k] = x[n] ?? 0
    values[k] = y[n] ?? Number.NEGATIVE_INFINITY
  }
  return { x: places, y: values }
}

/** Density of what was stored, as measured and as computed. */
export function spectrumPlan({ spectrum }: ProofResult, faded: boolean): LinesPlan {
  const { frequenciesHz: x } = spectrum
  const measured = highest(x, spectrum.measuredDensityDb)
  const computed = highest(x, spectrum.computedDensityDb)
  const [low, high] = spanOf([measured.y, computed.y], 20)
  return {
    title: 'Density of the stored samples, dB against one squared per hertz; the highest of each stretch',
    x: { kind: 'linear', span: [0, x[x.length - 1] ?? 1], are: 'hertz' },
    y: { span: [Math.max(low, high - 220), high], quantity: 'decibels', sign: '\u2009dB' },
    curves: [
      { name: 'measured', ...measured, ink: 'slate', widthPixels: 2.4 },
      { name: 'computed', ...computed, ink: 'ink', dash: [5, 3], widthPixels: 1.2 },
    ],
    faded,
  }
}

export const spectrumRows = ({ spectrum }: ProofResult): readonly (readonly string[])[] => {
  const every = Math.max(1, Math.floor(spectrum.frequenciesHz.length / 128))
  return [...spectrum.frequenciesHz].flatMap((hz, n) =>
    n % every === 0
      ? [
          [
            formatHz(hz, 5),
            formatFixed(spectrum.measuredDensityDb[n] ?? Number.NaN, 2),
            formatFixed(spectrum.computedDensityDb[n] ?? Number.NaN, 2),
          ],
        ]
      : [],
  )
}
