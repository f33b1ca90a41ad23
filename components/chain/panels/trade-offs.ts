import type { ChainRequirementKind, ChainRequirementResult, ChainSpec, PlanOption, RateOption } from '@/dsp'
import type { DecimateFilterType } from '@/lib/chains/stage-starts'
import { chainQuantity, chainRequirementKindWords, decimateWords } from '@/lib/chains/words'
import { sameValue } from '@/lib/designs/same-value'
import { formatDb, formatFixed, formatHz, formatNumber, formatSeconds } from '@/lib/format/quantity'
import { listed } from '@/components/studio/compare/sides'
import { downWords } from '../fold-chart/words'
import type { LinesPlan } from './chart/lines-picture'

/* What the advisor's tables and picture say. */

export const rateColumns = [
  'order',
  'converter rate',
  'down by',
  'corner',
  'images',
  'ripple',
  'delay',
  'multiplies',
] as const

export const rateCells = (option: RateOption): readonly string[] => [
  `${option.order}${option.isBest ? ', best' : ''}`,
  formatHz(option.converterRateHz),
  String(option.factor),
  formatHz(option.cornerHz),
  downWords(-option.aliasDb),
  `±${formatDb(option.rippleDb, 3)}`,
  formatSeconds(option.delaySeconds),
  `${formatNumber(option.multipliesPerSecond, 3)}/s`,
]

export const planColumns = ['down by', 'filters', 'multiplies', 'words', 'images', 'ripple', 'delay'] as const

/** Kinds of filter in signal order. */
export const filterWords = ({ filters }: PlanOption): string =>
  filters.map((type) => (type in decimateWords ? decimateWords[type as DecimateFilterType] : type)).join(', ')

export const planName = ({ factors }: PlanOption): string => (factors.length === 0 ? '1' : factors.join(' × '))

export const planCells = (option: PlanOption): readonly string[] => [
  planName(option),
  filterWords(option),
  formatFixed(option.multipliesPerStoredSample, 1),
  String(option.words),
  downWords(-option.aliasDb),
  `±${formatDb(option.rippleDb, 3)}`,
  formatSeconds(option.delaySeconds),
]

export const rateName = (option: RateOption): string => `order ${option.order} at ${formatHz(option.converterRateHz)}`

/** What both searches work to; the other lines are judged afterwards. */
const searchedKinds: readonly ChainRequirementKind[] = ['usable-band', 'flatness', 'alias-floor']

const kindWords = (kind: ChainRequirementKind): string => chainRequirementKindWords[kind].toLowerCase()

/** An option as far as it stands to the sheet; `meets` where a search lists one that it didn't find itself. */
export type Standing = Pick<RateOption, 'missed' | 'assumed' | 'spec'> & { readonly meets?: boolean }

const meetsAll = ({ missed, meets = true }: Standing): boolean => meets && missed.length === 0

/** How many options meet the whole sheet, what all of them keep, and what was assumed where the sheet says nothing. */
export function standingWords(options: readonly Standing[], one: string): string {
  const [first] = options
  const count = options.length
  if (first === undefined) return `no ${one} was found`
  const many = `${count} ${one}${count === 1 ? '' : 's'}`
  const met = options.filter(meetsAll).length
  const { sheet } = first.spec
  const over = `${listed(first.assumed)} over the kept band`
  if (sheet.length === 0) {
    const keep = `${met === count ? many : `${met} of ${many}`} ${met === 1 ? 'keeps' : 'keep'}`
    return `the sheet asks for nothing; ${keep} what was assumed: ${over}`
  }
  const isOpen = sheet.some(({ kind }) => kind === 'channel-match')
  const whole = isOpen ? 'the sheet as far as it can be judged' : 'the sheet'
  const assumed = first.assumed.length > 0 ? `; assumed beside it: ${over}` : ''
  if (met === count) return `${count === 1 ? `1 ${one} meets` : `all ${many} meet`} ${whole}${assumed}`
  const head =
    met === 0 ? `none of ${many} meets the whole sheet` : `${met} of ${many} ${met === 1 ? 'meets' : 'meet'} ${whole}`
  const kept = searchedKinds.filter((kind) => sheet.some((line) => line.kind === kind))
  const keeping = options.filter(
    ({ missed, meets = true }) => meets && missed.every(({ requirement }) => !searchedKinds.includes(requirement.kind)),
  ).length
  if (kept.length === 0 || keeping === met) return `${head}${assumed}`
  const who = keeping === count ? 'all keep' : `${keeping} ${keeping === 1 ? 'keeps' : 'keep'}`
  return `${head}; ${who} ${listed(kept.map(kindWords))}${assumed}`
}

const missOf = ({ requirement, margin, unit }: ChainRequirementResult): string =>
  margin === null || !Number.isFinite(margin)
    ? kindWords(requirement.kind)
    : `${kindWords(requirement.kind)} by ${chainQuantity(-margin, unit)}`

/** Which lines an option misses, and by how much; null where it meets all that can be judged. */
export function missWords(option: Standing): string | null {
  const { missed, assumed } = option
  if (missed.length > 0) return `misses ${listed(missed.map(missOf))}`
  return option.meets === false ? `misses what was assumed: ${listed(assumed)}` : null
}

/** What the mark says, and among which. */
export const bestWords = (options: readonly RateOption[]): string => {
  const among = options.some(meetsAll) ? 'that meets the sheet' : 'here'
  return `Marked as best: nothing else ${among} has as low an order at a lower rate, or as low a rate with a lower order.`
}

/** What was taken or left out, said once for all options. */
export const notesOf = (options: readonly { readonly notes: readonly string[] }[]): readonly string[] => [
  ...new Set(options.flatMap(({ notes }) => notes)),
]

/** Whether the chain stands as an option would have it. */
export const standsAs = (option: { readonly spec: ChainSpec }, spec: ChainSpec): boolean =>
  sameValue(option.spec.stages, spec.stages)

/**
 * Whether options still answer for a chain: kept band and sheet are those that were asked about, and the stages are those or an option's
 * own. Interferers and tolerances don't enter.
 */
export const answersFor = (
  question: ChainSpec,
  options: readonly { readonly spec: ChainSpec }[],
  spec: ChainSpec,
): boolean =>
  sameValue([question.kept, question.sheet], [spec.kept, spec.sheet]) &&
  [{ spec: question }, ...options].some((option) => standsAs(option, spec))

/** The lowest converter rate for each order of the anti-alias filter; null with too few points to draw. */
export function ratesPlan(options: readonly RateOption[], faded: boolean): LinesPlan | null {
  const byOrder = [...options].sort((one, other) => one.order - other.order)
  const [first] = byOrder
  const last = byOrder.at(-1)
  if (!first || !last || first.order === last.order) return null
  const rates = byOrder.map(({ converterRateHz }) => converterRateHz)
  const best = byOrder.filter(({ isBest }) => isBest)
  const [least, most] = [Math.min(...rates), Math.max(...rates)]
  const perUnit = most >= 2000 ? 1000 : 1
  const curve = (name: string, from: readonly RateOption[]) => ({
    name,
    x: Float64Array.from(from, ({ order }) => order),
    y: Float64Array.from(from, ({ converterRateHz }) => converterRateHz),
  })
  return {
    title: 'Lowest converter rate for each order of the anti-alias filter',
    x: { kind: 'linear', span: [first.order - 0.5, last.order + 0.5], are: 'plain' },
    y: {
      kind: 'log',
      span: [least / 1.4, most * 1.4],
      quantity: 'plain',
      sign: perUnit === 1000 ? '\u2009kHz' : '\u2009Hz',
      perUnit,
    },
    curves: [
      { ...curve('every order', byOrder), ink: 'pencil', dash: [4, 3], marker: 'circle' },
      ...(best.length > 0 ? [{ ...curve('best', best), ink: 'spruce' as const, marker: 'diamond' as const }] : []),
    ],
    faded,
  }
}
