import type { ProofLine, ProofResult } from '@/dsp'
import { formatDb, formatFixed, formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { spanOf, type LinesPlan } from './chart/lines-picture'

/* What a run of the simulated chain showed, in words. */

export const proofColumns = ['what', 'input', 'lands on', 'computed', 'measured', 'apart', 'bound', 'verdict'] as const

export const proofCells = (line: ProofLine): readonly string[] => [
  line.what,
  formatHz(line.inputHz, 6),
  formatHz(line.landsHz, 6),
  formatDb(line.computedDb, 3),
  formatDb(line.measuredDb, 3),
  formatDb(line.measuredDb - line.computedDb, 3),
  line.comparison === 'within' ? `±${formatDb(line.boundDb, 3)}` : `${formatDb(line.boundDb, 3)} above`,
  line.agrees ? 'agrees' : 'does not agree',
]

export function proofVerdict(result: ProofResult): string {
  const apart = result.lines.filter(({ agrees }) => !agrees).length
  const what = `${formatNumber(result.samplesIn, 7)} samples at ${formatHz(result.inputRateHz)} were run through the chain and ${formatNumber(result.samplesStored, 7)} stored`
  if (result.agrees) return `${what}: every line measured agrees with what is computed, within its bound.`
  const faults = [
    ...(apart > 0
      ? [`${apart} of ${result.lines.length} lines ${apart === 1 ? 'lies' : 'lie'} outside the bound`]
      : []),
    ...(result.delay.agrees ? [] : ['the delay lies outside its bound']),
  ]
  return `${what}: ${faults.length > 0 ? faults.join(', and ') : 'the spectrum does not agree'}. Don’t rely on the figures of this chain; tell the owner of the team.`
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
