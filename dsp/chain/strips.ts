import type { Filter } from '../forms/filter'
import type { ChainPart, ComputedChain } from './chain'
import { addMagnitudeDb } from './part-response'

/*
 * The arithmetic of folding. Strip n reaches from n to n + 1 times half the output rate; an even one comes down as it is, an odd one mirrored.
 * All rates of a chain are whole multiples of its output rate, so that folding at a rate with P strips below its half maps strips onto strips:
 * a digital part is needed on P strips alone, and every other is one of those again.
 */

/** Input frequency of an output frequency in a strip. */
export const inputOf = (strip: number, outputHz: number, outputRateHz: number): number =>
  strip % 2 === 0 ? (strip / 2) * outputRateHz + outputHz : ((strip + 1) / 2) * outputRateHz - outputHz

/** The strip of an input frequency, and where it lands. */
export function outputOf(inputHz: number, outputRateHz: number): { readonly strip: number; readonly landsHz: number } {
  const half = outputRateHz / 2
  const strip = Math.floor(inputHz / half)
  const landsHz = strip % 2 === 0 ? inputHz - (strip / 2) * outputRateHz : ((strip + 1) / 2) * outputRateHz - inputHz
  return { strip, landsHz: Math.min(Math.max(landsHz, 0), half) }
}

/** Where a strip comes to lie when folded at a rate that has `strips` strips below its half. */
function foldedStrip(strip: number, strips: number): number {
  const within = strip % (2 * strips)
  return within < strips ? within : 2 * strips - 1 - within
}

/** Strips below half of a rate. */
const stripsBelow = (rateHz: number, chain: ComputedChain): number => Math.round(rateHz / chain.outputRateHz)

/** Strips below half the converter's rate: the factor of the whole chain. */
export const converterStrips = (chain: ComputedChain): number => stripsBelow(chain.converterRateHz, chain)

/** The stage at whose output a strip first folds; null for the base band. */
export function foldsAt(chain: ComputedChain, strip: number): string | null {
  if (strip === 0) return null
  const stage = chain.stages
    .slice(chain.converterIndex)
    .find(({ outRateHz }) => outRateHz !== null && strip >= stripsBelow(outRateHz, chain))
  return stage?.stage.id ?? null
}

/** Gains whose product could leave a double's range are kept apart. */
const SAFE_GAIN = 1e280

/** Analog filters one after the other as one, which takes one evaluation and one logarithm. */
function together(filters: readonly Filter<'s'>[]): readonly Filter<'s'>[] {
  const gain = filters.reduce((product, filter) => product * filter.gain, 1)
  if (filters.length < 2 || !(Math.abs(gain) < SAFE_GAIN && Math.abs(gain) > 1 / SAFE_GAIN)) return filters
  const zeros = filters.flatMap((filter) => filter.zeros)
  return [{ domain: 's', zeros, poles: filters.flatMap((filter) => filter.poles), gain }]
}

const ahead = new WeakMap<ComputedChain, readonly ChainPart[]>()

/** Parts ahead of the quantiser, which see the input frequency itself; the analog ones are taken together. */
export function partsAhead(chain: ComputedChain): readonly ChainPart[] {
  const known = ahead.get(chain)
  if (known !== undefined) return known
  const parts = chain.stages.slice(0, chain.converterIndex + 1).flatMap((stage) => stage.parts)
  const analog = together(parts.flatMap((part) => (part.kind === 'analog' ? [part.filter] : [])))
  const fresh = [
    ...analog.map((filter): ChainPart => ({ kind: 'analog', filter })),
    ...parts.filter((part) => part.kind !== 'analog'),
  ]
  ahead.set(chain, fresh)
  return fresh
}

interface RateGroup {
  readonly strips: number
  readonly parts: readonly ChainPart[]
  readonly levels: Map<number, Float64Array>
}

function rateOf(part: ChainPart, inRateHz: number): number {
  if (part.kind === 'digital') return part.filter.sampleRateHz
  return part.kind === 'analog' ? inRateHz : part.sampleRateHz
}

/** Digital parts by the rate they run at. */
function groupsOf(chain: ComputedChain): RateGroup[] {
  const byStrips = new Map<number, ChainPart[]>()
  for (const { parts, inRateHz } of chain.stages.slice(chain.converterIndex + 1)) {
    for (const part of parts) {
      const strips = stripsBelow(rateOf(part, inRateHz ?? 0), chain)
      const known = byStrips.get(strips)
      if (known === undefined) byStrips.set(strips, [part])
      else known.push(part)
    }
  }
  return [...byStrips].map(([strips, parts]) => ({ strips, parts, levels: new Map<number, Float64Array>() }))
}

export interface Strips {
  /** What reaches each output frequency from a strip, in dB through the whole chain. */
  readonly levelDb: (strip: number) => Float64Array
  /** The same through the digital parts alone, as noise of the converter goes. */
  readonly digitalDb: (strip: number) => Float64Array
}

/**
 * Levels of strips over given output frequencies. Each part is evaluated once for each strip below half of its rate, when first asked for.
 *
 * An integrating stage counts against the ideal integral at the output frequency: 0 dB is what reads there like an input of level 1 there, so
 * that an image comes to (output frequency / frequency at the integrator)^n times what the integrator has against the ideal one at its own.
 *
 * @param outputHz frequencies from 0 up to half the output rate
 */
export function stripsOver(chain: ComputedChain, outputHz: Float64Array): Strips {
  const count = outputHz.length
  const groups = groupsOf(chain)
  const inFront = partsAhead(chain)
  const scratch = new Float64Array(count)
  const inputs = new Float64Array(count)
  const takeInputs = (strip: number): void => {
    for (let n = 0; n < count; n++) inputs[n] = inputOf(strip, outputHz[n]!, chain.outputRateHz)
  }

  const groupLevel = (group: RateGroup, strip: number): Float64Array => {
    const known = group.levels.get(strip)
    if (known !== undefined) return known
    const levels = new Float64Array(count)
    takeInputs(strip)
    for (const part of group.parts) {
      addMagnitudeDb(part, inputs, levels, scratch)
      if (part.kind !== 'integration' || strip === 0) continue
      for (let n = 0; n < count; n++) {
        levels[n] = levels[n]! + 20 * part.times * Math.log10(outputHz[n]! / inputs[n]!)
      }
    }
    group.levels.set(strip, levels)
    return levels
  }

  const digitalDb = (strip: number): Float64Array => {
    const total = new Float64Array(count)
    for (const group of groups) {
      const levels = groupLevel(group, foldedStrip(strip, group.strips))
      for (let n = 0; n < count; n++) total[n] = total[n]! + levels[n]!
    }
    return total
  }

  const levelDb = (strip: number): Float64Array => {
    const total = digitalDb(strip)
    takeInputs(strip)
    for (const part of inFront) addMagnitudeDb(part, inputs, total, scratch)
    return total
  }
  return { levelDb, digitalDb }
}
