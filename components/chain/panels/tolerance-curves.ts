import { csvText } from '@/lib/exports/escape'
import { decimalText } from '@/lib/exports/numbers'
import type { ChainSpec, MatchPercentiles, Percentiles, ToleranceResult, ToleranceSettings } from '@/dsp'
import { formatFixed, formatHz, formatNumber } from '@/lib/format/quantity'
import { curveAt, spanOf, type LinesPlan } from './chart/lines-picture'

/* What a tolerance run looks like, in words and as a file. */

export const toleranceViews = [
  { value: 'phase-match', label: 'phase between channels' },
  { value: 'gain-match', label: 'gain between channels' },
  { value: 'phase', label: 'phase' },
  { value: 'magnitude', label: 'magnitude' },
] as const
export type ToleranceView = (typeof toleranceViews)[number]['value']

const spreadWords = ({ spread }: ToleranceSettings): string =>
  spread.of === 'parts'
    ? `${formatNumber(spread.percent)}\u2009% parts`
    : `f0 within ${formatNumber(spread.f0Percent)}\u2009%, Q within ${formatNumber(spread.qPercent)}\u2009%`

/** 2,000 channels at 1 % parts, seed 7 */
export const settingsWords = (settings: ToleranceSettings): string =>
  `${formatNumber(settings.channels, 6)} channels at ${spreadWords(settings)}, seed ${settings.seed}`

export const unitOf = (view: ToleranceView): string => (view.startsWith('phase') ? '°' : '\u2009dB')

export function tolerancePlan(
  view: ToleranceView,
  result: ToleranceResult,
  spec: ChainSpec,
  faded: boolean,
): LinesPlan {
  const { frequenciesHz: x } = result
  const [first = 1, last = 2] = [x[0], x[x.length - 1]]
  const isPhase = view.startsWith('phase')
  const axis = { quantity: isPhase ? 'degrees' : 'decibels', sign: unitOf(view) } as const
  const shared = {
    x: { kind: first > 0 ? 'log' : 'linear', span: [first, last], are: 'hertz' } as const,
    faded,
  }
  const settings = settingsWords(result.settings)
  if (view === 'phase' || view === 'magnitude') {
    const { p5, p50, p95 } = isPhase ? result.phaseDegrees : result.magnitudeDb
    return {
      ...shared,
      title: `${isPhase ? 'Phase' : 'Magnitude'} off nominal, ${settings}: median, 5\u2009% and 95\u2009%`,
      y: { span: spanOf([p5, p95], isPhase ? 0.2 : 0.02), ...axis },
      bands: [{ x, low: p5, high: p95, ink: 'slate', opacity: 0.25 }],
      curves: percentileCurves(x, { p5, p50, p95 }),
    }
  }
  const { p50, p95, most } = isPhase ? result.phaseMatchDegrees : result.gainMatchDb
  const limits = spec.sheet.flatMap((line) =>
    line.kind === 'channel-match'
      ? [{ from: first, to: line.toHz, at: isPhase ? line.withinDegrees : line.withinDb }]
      : [],
  )
  const highest = Math.max(...limits.map(({ at }) => at * 1.4), spanOf([p95], 1e-6)[1])
  const none = new Float64Array(x.length)
  return {
    ...shared,
    title: `${isPhase ? 'Phase' : 'Gain'} between channels, ${settings}: median, 95\u2009% and most`,
    y: { span: [0, highest], ...axis },
    bands: [
      { x, low: none, high: p95, ink: 'slate', opacity: 0.16 },
      { x, low: none, high: p50, ink: 'slate', opacity: 0.25 },
    ],
    curves: [
      { name: 'median', x, y: p50, ink: 'slate' },
      { name: '95\u2009%', x, y: p95, ink: 'slate', dash: [7, 3], widthPixels: 2 },
      { name: 'most', x, y: most, ink: 'pencil', dash: [2, 3] },
    ],
    limits,
  }
}

const percentileCurves = (x: Float64Array, { p5, p50, p95 }: Percentiles): LinesPlan['curves'] => [
  { name: 'median', x, y: p50, ink: 'slate' },
  { name: '95\u2009%', x, y: p95, ink: 'slate', dash: [7, 3] },
  { name: '5\u2009%', x, y: p5, ink: 'slate', dash: [2, 3] },
]

/** The highest value up to a frequency. */
function worstUpTo(x: Float64Array, y: Float64Array, toHz: number): number {
  let worst = curveAt({ x, y }, Math.min(toHz, x[x.length - 1] ?? toHz))
  for (let n = 0; n < x.length && (x[n] ?? 0) <= toHz; n++) worst = Math.max(worst, y[n] ?? Number.NaN)
  return worst
}

export interface MatchVerdict {
  readonly met: boolean
  readonly words: string
}

/** Each channel-match line of the sheet against the 95th percentile of the run. */
export const matchVerdicts = (result: ToleranceResult, { sheet }: ChainSpec): readonly MatchVerdict[] =>
  sheet.flatMap((line) => {
    if (line.kind !== 'channel-match') return []
    const degrees = worstUpTo(result.frequenciesHz, result.phaseMatchDegrees.p95, line.toHz)
    const decibels = worstUpTo(result.frequenciesHz, result.gainMatchDb.p95, line.toHz)
    const met = degrees <= line.withinDegrees && decibels <= line.withinDb
    return [
      {
        met,
        words: `To ${formatHz(line.toHz)}, 95\u2009% of pairs stay within ${formatFixed(degrees, 3)}° and ${formatFixed(decibels, 4)}\u2009dB; ${formatNumber(line.withinDegrees)}° and ${formatNumber(line.withinDb)}\u2009dB are asked: ${met ? 'met' : 'missed'}.`,
      },
    ]
  })

const tableFigures = (result: ToleranceResult) =>
  [
    ['gain between, median dB', result.gainMatchDb.p50],
    ['gain between, 95 % dB', result.gainMatchDb.p95],
    ['gain between, most dB', result.gainMatchDb.most],
    ['phase between, median °', result.phaseMatchDegrees.p50],
    ['phase between, 95 % °', result.phaseMatchDegrees.p95],
    ['phase between, most °', result.phaseMatchDegrees.most],
  ] as const

export const toleranceColumns = (result: ToleranceResult): readonly string[] => [
  'frequency',
  ...tableFigures(result).map(([name]) => name),
]

export const toleranceRows = (result: ToleranceResult): readonly (readonly string[])[] =>
  [...result.frequenciesHz].flatMap((hz, n) =>
    n % 8 === 0 || n === result.frequenciesHz.length - 1
      ? [[formatHz(hz, 4), ...tableFigures(result).map(([, values]) => formatFixed(values[n] ?? Number.NaN, 4))]]
      : [],
  )

/** All frequencies and percentiles (RFC 4180), after what the run was of. Names are guarded as in every file. */
export function toleranceCsv(result: ToleranceResult, spec: ChainSpec): string {
  const { settings } = result
  const sensor = spec.stages.find((stage) => stage.kind === 'sensor')
  const about: readonly (readonly [string, string])[] = [
    ['sensor', csvText(sensor?.name ?? '')],
    ['channels', String(settings.channels)],
    ['seed', String(settings.seed)],
    ['spread of', settings.spread.of],
    ...(settings.spread.of === 'parts'
      ? ([['percent', decimalText(settings.spread.percent, 'double')]] as const)
      : ([
          ['f0 percent', decimalText(settings.spread.f0Percent, 'double')],
          ['Q percent', decimalText(settings.spread.qPercent, 'double')],
        ] as const)),
  ]
  const percentiles = (unit: string, { p5, p50, p95 }: Percentiles) =>
    [
      [`${unit} off nominal p5`, p5],
      [`${unit} off nominal p50`, p50],
      [`${unit} off nominal p95`, p95],
    ] as const
  const match = (unit: string, { p50, p95, most }: MatchPercentiles) =>
    [
      [`${unit} between channels p50`, p50],
      [`${unit} between channels p95`, p95],
      [`${unit} between channels most`, most],
    ] as const
  const columns = [
    ...percentiles('dB', result.magnitudeDb),
    ...percentiles('deg', result.phaseDegrees),
    ...match('dB', result.gainMatchDb),
    ...match('deg', result.phaseMatchDegrees),
  ]
  const rows = [
    ...about.map((cells) => cells.join(',')),
    ['frequency in Hz', ...columns.map(([name]) => name)].join(','),
    ...Array.from(result.frequenciesHz, (hz, n) =>
      [hz, ...columns.map(([, values]) => values[n] ?? Number.NaN)]
        .map((value) => decimalText(value, 'double'))
        .join(','),
    ),
  ]
  return `${rows.join('\r\n')}\r\n`
}
