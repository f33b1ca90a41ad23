import { show } from '../check'
import { hertz, highestHz, lineName } from './line-words'
import type { Requirement, RequirementSheet } from './requirement'

/*
 * Lines of a sheet that no filter can meet together, for reasons that can be proved: the magnitude of a filter is one number at each
 * frequency, it changes without jumps, and it is known up to half the rate only. That a sheet is free of contradictions doesn't mean that
 * a filter of bearable order meets it.
 */

export interface Contradiction {
  /** Index of a line of the sheet, from 0. */
  readonly first: number
  /** Index of the other line; null when the first contradicts the sampling rate, or itself. */
  readonly second: number | null
  readonly reason: string
}

/** What a line says of the magnitude in dB over a closed range of frequencies. */
interface Claim {
  readonly index: number
  readonly fromHz: number
  readonly toHz: number
  /** −withinDb where something is kept; the magnitude is not below it. */
  readonly floorDb?: number
  /** −attenuationDb where something is lost; the magnitude is not above it. */
  readonly ceilingDb?: number
}

function claimOf(line: Requirement, index: number, foldHz: number): Claim | null {
  switch (line.kind) {
    case 'pass':
      return { index, fromHz: line.fromHz, toHz: line.toHz, floorDb: -line.withinDb }
    case 'stop':
      return { index, fromHz: line.fromHz, toHz: line.toHz ?? foldHz, ceilingDb: -line.attenuationDb }
    case 'keep-tone':
      return { index, fromHz: line.hz, toHz: line.hz, floorDb: -line.withinDb }
    case 'lose-tone':
      return { index, fromHz: line.hz, toHz: line.hz, ceilingDb: -line.attenuationDb }
    default:
      return null
  }
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1)

function againstRate(line: Requirement, index: number, foldHz: number): Contradiction | null {
  const name = capital(lineName(index, line))
  if ('fromHz' in line && line.toHz !== undefined) {
    const isPoint = line.kind === 'delay' && line.fromHz === line.toHz
    if (line.fromHz >= line.toHz && !isPoint) {
      return { first: index, second: null, reason: `${name} has no band between its two ends.` }
    }
  }
  const top = highestHz(line)
  if (top === null) return null
  const isOpen = line.kind === 'stop' && line.toHz === undefined
  if (isOpen ? top < foldHz : top <= foldHz) return null
  return {
    first: index,
    second: null,
    reason: `${name} speaks of ${hertz(top)}, and at this rate there is nothing above ${hertz(foldHz)}, half of it.`,
  }
}

function sharedWords(kept: Claim, lost: Claim): string | null {
  const fromHz = Math.max(kept.fromHz, lost.fromHz)
  const toHz = Math.min(kept.toHz, lost.toHz)
  if (fromHz > toHz) return null
  if (fromHz < toHz) return `both speak of ${show(fromHz)} … ${hertz(toHz)}`
  const isEdge = kept.fromHz < kept.toHz && lost.fromHz < lost.toHz
  return isEdge ? `meet at ${hertz(fromHz)} with no room to fall in between` : `both speak of ${hertz(fromHz)}`
}

function clash(sheet: RequirementSheet, kept: Claim, lost: Claim): Contradiction | null {
  const { floorDb = -Infinity } = kept
  const { ceilingDb = Infinity } = lost
  if (floorDb <= ceilingDb) return null
  const shared = sharedWords(kept, lost)
  if (shared === null) return null
  const [first, second] = [kept.index, lost.index].sort((left, right) => left - right) as [number, number]
  const [one, other] = [sheet[first], sheet[second]]
  if (one === undefined || other === undefined) return null
  const names = `${capital(lineName(first, one))} and ${lineName(second, other)}`
  return {
    first,
    second,
    reason: `${names} ${shared}: no filter is within ${show(-floorDb)} dB of 0 dB and ${show(-ceilingDb)} dB down there.`,
  }
}

/**
 * The lines of a sheet that no filter can meet, by pairs: something kept and lost at the same frequency (overlapping or touching bands,
 * tones in bands, tones on tones), and lines that the sampling rate rules out, alone.
 *
 * A band kept within ±6 dB and lost by 3 dB is no contradiction: −3 … −6 dB meets both.
 *
 * @param sampleRateHz in Hz
 * @returns in the sheet's order; empty when nothing can be proved against it
 */
export function contradictions(sheet: RequirementSheet, sampleRateHz: number): readonly Contradiction[] {
  const foldHz = sampleRateHz / 2
  const alone = sheet.flatMap((line, index) => againstRate(line, index, foldHz) ?? [])
  const ruledOut = new Set(alone.map(({ first }) => first))
  const claims = sheet.flatMap((line, index) => (ruledOut.has(index) ? [] : (claimOf(line, index, foldHz) ?? [])))
  const lost = claims.filter(({ ceilingDb }) => ceilingDb !== undefined)
  const pairs = claims
    .filter(({ floorDb }) => floorDb !== undefined)
    .flatMap((kept) => lost.flatMap((other) => clash(sheet, kept, other) ?? []))
  return [...alone, ...pairs].sort(
    (left, right) => left.first - right.first || (left.second ?? -1) - (right.second ?? -1),
  )
}
