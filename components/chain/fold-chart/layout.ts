import { linearScale, type Scale } from '@/components/plot/scale'
import type { ChainSpec, FoldChart, FoldStrip } from '@/dsp'
import { weakOf } from './words'

/*
 * How the folded axis lies on the page: strips of half the output rate under each other, joined left and right in turn. A mirrored strip
 * runs backwards, so that one x is one output frequency in all of them.
 */

/** Strips drawn before the rest is opened, the base band being one, and by how many an opening adds. */
export const FIRST_STRIPS = 8
export const MORE_STRIPS = 16

/** The first strips and, wherever it lies, the weak one. */
export function drawnStrips(chart: FoldChart, most: number): readonly FoldStrip[] {
  const first = chart.strips.slice(0, most)
  const weak = weakOf(chart)
  return weak && !first.includes(weak) ? [...first, weak] : first
}

export interface GatheredStrips {
  readonly count: number
  readonly fromHz: number
  readonly toHz: number
  /** The least far down of them in the kept band. */
  readonly worst: FoldStrip | null
}

/** Those that are not drawn, as one. */
export function gatheredStrips(chart: FoldChart, drawn: readonly FoldStrip[]): GatheredStrips | null {
  const rest = chart.strips.filter((strip) => !drawn.includes(strip))
  const [first] = rest
  if (!first) return null
  const level = (strip: FoldStrip) => strip.worst?.levelDb ?? Number.NEGATIVE_INFINITY
  return {
    count: rest.length,
    fromHz: Math.min(...rest.map(({ fromHz }) => fromHz)),
    toHz: Math.max(...rest.map(({ toHz }) => toHz)),
    worst: rest.reduce((worst, strip) => (level(strip) > level(worst) ? strip : worst), first),
  }
}

export interface AliasFloor {
  readonly toHz: number
  readonly atLeastDb: number
}

/** What the sheet asks of images: its alias floors, and those that come with a usable band. */
export const aliasFloors = ({ sheet }: ChainSpec): readonly AliasFloor[] =>
  sheet.flatMap((line): AliasFloor[] => {
    if (line.kind === 'alias-floor') return [{ toHz: line.toHz, atLeastDb: line.atLeastDb }]
    return line.kind === 'usable-band' ? [{ toHz: line.toHz, atLeastDb: line.aliasDb }] : []
  })

const upToTwenty = (decibels: number): number => Math.ceil(decibels / 20 - 1e-9) * 20

/** Least level shown: 30 dB under what is asked and under the weak fold, between −60 and −200 dB. */
export function floorDbOf(chart: FoldChart, floors: readonly AliasFloor[]): number {
  const asked = Math.max(60, ...floors.map(({ atLeastDb }) => atLeastDb))
  const weak = weakOf(chart)?.worst?.levelDb ?? Number.NEGATIVE_INFINITY
  const down = Number.isFinite(weak) ? Math.max(asked, -weak) : asked
  return -Math.min(200, upToTwenty(down + 30))
}

/** Highest level shown: unity, or what rises above it. */
export function topDbOf(strips: readonly FoldStrip[]): number {
  let most = 0
  for (const { levelDb } of strips) for (const level of levelDb) if (level > most && level < 400) most = level
  // A ripple of a tenth of a decibel needs no other scale.
  return most < 0.5 ? 0 : Math.ceil(most / 10) * 10
}

export interface FoldRow {
  readonly strip: FoldStrip
  readonly top: number
  readonly bottom: number
  /** Decibels to pixels. */
  readonly y: Scale
  /** The strip before it on the axis is drawn right above it. */
  readonly isJoined: boolean
}

export interface FoldFrame {
  readonly width: number
  readonly height: number
  readonly isNarrow: boolean
  readonly left: number
  readonly right: number
  /** Output frequency to pixels, the same in every strip. */
  readonly x: Scale
  readonly rows: readonly FoldRow[]
  readonly topDb: number
  readonly floorDb: number
}

const STRIP_PIXELS = 46
const BETWEEN_PIXELS = 7
/** Where strips are left out. */
const TORN_PIXELS = 26

/** Beside the strips: the fold's half-circle and the stage that makes it. */
const sidePixels = (isNarrow: boolean): number => (isNarrow ? 20 : 106)

export function foldFrame(
  width: number,
  outputRateHz: number,
  strips: readonly FoldStrip[],
  levels: { readonly topDb: number; readonly floorDb: number },
): FoldFrame {
  const isNarrow = width < 600
  const left = sidePixels(isNarrow)
  const right = width - sidePixels(isNarrow)
  let top = 2
  const rows = strips.map((strip, index): FoldRow => {
    const before = strips[index - 1]
    const isJoined = before !== undefined && before.strip + 1 === strip.strip
    if (before !== undefined) top += isJoined ? BETWEEN_PIXELS : TORN_PIXELS
    const bottom = top + STRIP_PIXELS
    const row = { strip, top, bottom, isJoined, y: linearScale([levels.floorDb, levels.topDb], [bottom, top]) }
    top = bottom
    return row
  })
  return {
    width,
    height: top + 3,
    isNarrow,
    left,
    right,
    x: linearScale([0, outputRateHz / 2], [left, right]),
    rows,
    ...levels,
  }
}

/** The frequencies at a strip's left and right end. */
export const endsHz = ({ fromHz, toHz, mirrored }: FoldStrip): { readonly leftHz: number; readonly rightHz: number } =>
  mirrored ? { leftHz: toHz, rightHz: fromHz } : { leftHz: fromHz, rightHz: toHz }

/** The input frequency of a strip that lands on an output frequency. */
export const inputOf = ({ fromHz, toHz, mirrored }: FoldStrip, outputHz: number): number =>
  mirrored ? toHz - outputHz : fromHz + outputHz
