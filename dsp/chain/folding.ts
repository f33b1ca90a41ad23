import { show } from '../check'
import { DesignError } from '../errors'
import { partMostAboveDb } from './analog-bound'
import type { ComputedChain, FoldChart, FoldPath, FoldStrip, WorstAlias } from './chain'
import { lookedUpTo, stripsUpTo } from './reach'
import { keptForPath } from './same-path'
import { foldsAt, inputOf, partsAhead, stripsOver } from './strips'
import { weakestStrips, type StripWorst } from './weakest'

/** A chart keeps every strip as long as there are no more than this. */
const MOST_FULL_STRIPS = 96
const KEPT_LOWEST = 16
const KEPT_WORST = 16

function checkOutput(chain: ComputedChain, outputHz: number, field: string): void {
  const half = chain.outputRateHz / 2
  if (outputHz >= 0 && outputHz <= half) return
  const message = `0 Hz ≤ output frequency ≤ ${show(half)} Hz (half the output rate); ${show(outputHz)} Hz was given.`
  throw new DesignError('output-out-of-range', field, message, outputHz > half ? half : 0)
}

/**
 * Every input frequency that lands on an output frequency, k·rate ± f, and what reaches it through all stages. At 0 Hz and at half the
 * output rate two neighbouring strips meet in one input frequency, which is given once, with the lower strip.
 *
 * Each part is evaluated at the input frequency that stands before it; a digital one repeats itself, so that what has folded ahead of it makes
 * no difference. Behind an integrating stage the level counts against the ideal integral at the output frequency.
 *
 * @param outputHz from 0 up to half the output rate
 * @param upToHz images up to here; without it four converter rates, or further while an analog resonance lies above
 * @throws DesignError `output-out-of-range` with field `outputHz`
 * Source: Oppenheim & Schafer, Discrete-Time Signal Processing, 3rd ed., eq. (4.20) and (4.77) (sampling and decimation; numbering from memory).
 */
export function foldPaths(chain: ComputedChain, outputHz: number, upToHz?: number): readonly FoldPath[] {
  checkOutput(chain, outputHz, 'outputHz')
  const most = upToHz ?? lookedUpTo(chain)
  const at = Float64Array.of(outputHz)
  const { levelDb } = stripsOver(chain, at)
  const paths: FoldPath[] = []
  for (let strip = 0; ; strip++) {
    const inputHz = inputOf(strip, outputHz, chain.outputRateHz)
    if (inputHz > most && strip > 0) break
    if (paths.at(-1)?.inputHz === inputHz) continue
    const mirrored = strip % 2 === 1
    const foldsAtStageId = foldsAt(chain, strip)
    paths.push({ inputHz, outputHz, strip, foldsAtStageId, mirrored, levelDb: levelDb(strip)[0]! })
  }
  return paths
}

/** Levels that nobody tells apart: the lowest of such strips is the one to name. */
const EQUAL_DB = 0.05

/** The weakest strip; where several come through alike, the lowest of them. */
const lowestOfEquals = (strips: readonly StripWorst[]): StripWorst | undefined =>
  strips
    .filter(({ levelDb }) => levelDb >= (strips[0]?.levelDb ?? 0) - EQUAL_DB)
    .reduce<StripWorst | undefined>((low, one) => (low === undefined || one.strip < low.strip ? one : low), undefined)

/** Strips that a chart keeps of more than it can show: the lowest, the worst, and those beside the first two multiples of every rate. */
function chosen(chain: ComputedChain, count: number, worst: readonly StripWorst[]): number[] {
  const kept = new Set<number>()
  for (let strip = 0; strip < KEPT_LOWEST; strip++) kept.add(strip)
  for (const { strip } of worst.slice(0, KEPT_WORST)) kept.add(strip)
  for (const { outRateHz } of chain.stages) {
    if (outRateHz === null) continue
    const whole = 2 * Math.round(outRateHz / chain.outputRateHz)
    for (const strip of [whole - 1, whole, 2 * whole - 1, 2 * whole]) if (strip < count) kept.add(strip)
  }
  return [...kept].sort((a, b) => a - b)
}

/**
 * The frequency axis folded onto the base band: what reaches each output frequency from each strip. Where there are more than 96 strips the
 * chart holds the lowest 16, the worst 16 and those beside the first two multiples of every rate in the chain; none above those looked at
 * can be weaker, the weakest is always among them, and its `worst` is refined between the chart's frequencies.
 *
 * `beyondAtMostDb` bounds whatever lies above `lookedUpToHz` and lands in the kept band: by the roots of the analog parts the most that they
 * have anywhere above it, with the envelope of an averaging converter, times the most that the digital parts let through to the kept band at
 * the frequencies looked at. Without an anti-alias filter that is near 0 dB, and says so.
 *
 * @param outputHz N rising frequencies from 0 up to half the output rate
 * @returns strips with N levels in dB each
 * @throws DesignError `output-out-of-range` with field `outputHz.<index>`
 */
export function foldChart(chain: ComputedChain, outputHz: Float64Array): FoldChart {
  outputHz.forEach((hertz, index) => checkOutput(chain, hertz, `outputHz.${index}`))
  const { fromHz, toHz } = chain.spec.kept
  const { strips, ...rest } = keptForPath(chain, ['chart', fromHz, toHz, [...outputHz]], () => chartOf(chain, outputHz))
  return { ...rest, outputHz, strips }
}

function chartOf(chain: ComputedChain, outputHz: Float64Array): FoldChart {
  const lookedUpToHz = lookedUpTo(chain)
  const count = stripsUpTo(chain, lookedUpToHz)
  const { fromHz, toHz } = chain.spec.kept
  const worst = weakestStrips(chain, fromHz, toHz, count)
  const all = Array.from({ length: count }, (_, strip) => strip)
  const strips = count <= MOST_FULL_STRIPS ? all : chosen(chain, count, worst.strips)
  const byStrip = new Map(worst.strips.map((one) => [one.strip, one]))
  const weakStrip = lowestOfEquals(worst.strips)?.strip ?? 1
  const { levelDb } = stripsOver(chain, outputHz)
  const half = chain.outputRateHz / 2
  return {
    outputHz,
    strips: strips.map((strip): FoldStrip => {
      const found = strip === 0 ? undefined : (byStrip.get(strip) ?? worst.worstIn(strip))
      return {
        strip,
        fromHz: strip * half,
        toHz: (strip + 1) * half,
        mirrored: strip % 2 === 1,
        foldsAtStageId: foldsAt(chain, strip),
        levelDb: levelDb(strip),
        worst:
          found === undefined
            ? null
            : {
                levelDb: found.levelDb,
                outputHz: found.outputHz,
                inputHz: inputOf(strip, found.outputHz, chain.outputRateHz),
              },
      }
    }),
    weakStrip,
    lookedUpToHz,
    beyondAtMostDb: partsAhead(chain).reduce(
      (sum, part) => sum + partMostAboveDb(part, lookedUpToHz),
      worst.mostDigitalDb,
    ),
  }
}

/**
 * The image that comes through strongest anywhere from the lower edge of the kept band up to a frequency; found on a grid, then refined between
 * its points in the strips that are nearest to it.
 *
 * @param toHz up to half the output rate; without it the upper edge of the kept band
 * @throws DesignError `output-out-of-range` with field `toHz`
 */
export function worstAlias(chain: ComputedChain, toHz: number = chain.spec.kept.toHz): WorstAlias {
  checkOutput(chain, toHz, 'toHz')
  const fromHz = Math.min(chain.spec.kept.fromHz, toHz)
  const count = stripsUpTo(chain, lookedUpTo(chain))
  const { strips } = weakestStrips(chain, fromHz, toHz, count)
  const first = lowestOfEquals(strips)
  if (first === undefined) throw new DesignError('output-out-of-range', 'toHz', 'No image was looked at.')
  const { outputHz, strip } = first
  // Of equals the lowest is named, but the level is that of none less.
  const levelDb = strips[0]?.levelDb ?? first.levelDb
  const inputHz = inputOf(strip, outputHz, chain.outputRateHz)
  return { levelDb, outputHz, inputHz, strip, foldsAtStageId: foldsAt(chain, strip) }
}
