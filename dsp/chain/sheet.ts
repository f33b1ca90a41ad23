import { show } from '../check'
import { largest } from '../requirements/extremes'
import { bestDelay } from '../response/departure-curve'
import { chainGrid } from './band-grid'
import type { ChainRequirementResult, ChainRequirementUnit, ComputedChain } from './chain'
import { worstAlias } from './folding'
import { noiseBudget } from './noise'
import type { ChainRequirement } from './requirement'
import { chainResponse } from './response'
import { keptForPath } from './same-path'
import type { ToleranceResult } from './tolerance'
import { departureOf, usableBand } from './usable-band'

/** A line met exactly by design is off by rounding alone: this part of its limit is forgiven, and shown as no room. */
const ROUNDING = 1e-9
const DEGREES = 180 / Math.PI

interface Frame {
  readonly limit: number
  readonly unit: ChainRequirementUnit
  readonly asksForMore: boolean
}

function frameOf(line: ChainRequirement): Frame {
  switch (line.kind) {
    case 'usable-band':
      return { limit: line.toHz, unit: 'Hz', asksForMore: true }
    case 'flatness':
      return { limit: line.withinDb, unit: 'dB', asksForMore: false }
    case 'alias-floor':
      return { limit: line.atLeastDb, unit: 'dB', asksForMore: true }
    case 'phase':
    case 'channel-match':
      return { limit: line.withinDegrees, unit: '°', asksForMore: false }
    case 'delay':
      return { limit: line.atMostSeconds, unit: 's', asksForMore: false }
    case 'effective-bits':
      return { limit: line.atLeast, unit: 'bits', asksForMore: true }
  }
}

function judged(
  requirement: ChainRequirement,
  value: number,
  worstHz: number | null,
  reason?: string,
  frame: Frame = frameOf(requirement),
): ChainRequirementResult {
  const { limit, unit, asksForMore } = frame
  const room = asksForMore ? value - limit : limit - value
  const met = room >= -ROUNDING * limit
  const margin = met ? Math.max(room, 0) : room
  return { requirement, value, limit, unit, margin, met, worstHz, ...(reason === undefined ? {} : { reason }) }
}

function judgeUsableBand(
  chain: ComputedChain,
  line: Extract<ChainRequirement, { kind: 'usable-band' }>,
): ChainRequirementResult {
  const { fromHz } = chain.spec.kept
  const band = usableBand(chain, line)
  if (band === null) return judged(line, fromHz, fromHz, 'Nothing is usable from the lower edge of the kept band on.')
  if (band.fromHz > fromHz) {
    const reason = `At the lower edge of the kept band the response is not within ± ${show(line.rippleDb)} dB; from ${show(band.fromHz)} Hz on it is.`
    return judged(line, fromHz, fromHz, reason)
  }
  const reason =
    band.toHz >= line.toHz ? undefined : `The band ends by its ${band.endedBy === 'alias' ? 'images' : band.endedBy}.`
  return judged(line, band.toHz, band.toHz, reason)
}

/** An image is counted against the same level at the sensor, which says little where the wanted signal is held back as well. */
const LOW_WANTED_DB = 3

function wantedTooLow(chain: ComputedChain, outputHz: number): string | undefined {
  const { fromHz, toHz } = chain.spec.kept
  if (outputHz < fromHz || outputHz > toHz) return undefined
  const downDb = -chainResponse(chain, Float64Array.of(outputHz)).magnitudeDb[0]!
  if (!(downDb > LOW_WANTED_DB)) return undefined
  const down = Number.isFinite(downDb) ? `${show(Number(downDb.toFixed(1)))} dB down` : 'gone'
  return `The wanted signal itself is ${down} at ${show(Number(outputHz.toPrecision(4)))} Hz: the floor says little.`
}

/** The largest departure of the phase from the straight line through 0 that is the best constant delay: an inverted polarity is 180° off. */
function judgePhase(chain: ComputedChain, line: Extract<ChainRequirement, { kind: 'phase' }>): ChainRequirementResult {
  const grid = chainGrid(chain, line.fromHz, line.toHz)
  const { phaseRadians } = chainResponse(chain, grid)
  const delay = bestDelay(grid, phaseRadians, new Uint8Array(grid.length).fill(1))
  const { value, hz } = largest((at) => {
    const phases = chainResponse(chain, at).phaseRadians
    return phases.map((phase, n) => DEGREES * Math.abs(phase + 2 * Math.PI * at[n]! * delay))
  }, grid)
  return judged(line, value, hz)
}

interface Most {
  readonly value: number
  readonly hz: number
}

/** The largest of values at rising frequencies up to a frequency, which is taken between its neighbours. */
function mostUpTo(frequenciesHz: Float64Array, values: Float64Array, toHz: number): Most {
  let most: Most = { value: values[0]!, hz: frequenciesHz[0]! }
  for (let n = 0; n < values.length; n++) {
    const hz = frequenciesHz[n]!
    if (hz <= toHz) {
      if (values[n]! > most.value) most = { value: values[n]!, hz }
      continue
    }
    const before = frequenciesHz[n - 1] ?? hz
    const part = hz > before ? (toHz - before) / (hz - before) : 0
    const value = (1 - part) * (values[n - 1] ?? values[n]!) + part * values[n]!
    if (value > most.value) most = { value, hz: toHz }
    break
  }
  return most
}

function judgeMatch(
  chain: ComputedChain,
  line: Extract<ChainRequirement, { kind: 'channel-match' }>,
  match: ToleranceResult | null,
): ChainRequirementResult {
  const { limit, unit } = frameOf(line)
  const open = { requirement: line, value: null, limit, unit, margin: null, met: null, worstHz: null }
  if (match === null) return { ...open, reason: 'No tolerance run has been made of this chain yet.' }
  if (JSON.stringify(match.settings) !== JSON.stringify(chain.spec.tolerance)) {
    return { ...open, reason: 'The tolerance run was made with other settings than the chain states.' }
  }
  const last = match.frequenciesHz.at(-1) ?? 0
  if (last < line.toHz * (1 - ROUNDING)) {
    return { ...open, reason: `The tolerance run reaches up to ${show(last)} Hz only.` }
  }
  const phase = mostUpTo(match.frequenciesHz, match.phaseMatchDegrees.p95, line.toHz)
  const gain = mostUpTo(match.frequenciesHz, match.gainMatchDb.p95, line.toHz)
  // The one of the two that is nearer to its limit speaks for the line.
  if (phase.value / line.withinDegrees >= gain.value / line.withinDb) return judged(line, phase.value, phase.hz)
  const inDecibels: Frame = { limit: line.withinDb, unit: 'dB', asksForMore: false }
  return judged(line, gain.value, gain.hz, undefined, inDecibels)
}

function judgeAfresh(
  chain: ComputedChain,
  line: ChainRequirement,
  match: ToleranceResult | null,
): ChainRequirementResult {
  switch (line.kind) {
    case 'usable-band':
      return judgeUsableBand(chain, line)
    case 'flatness': {
      const { value, hz } = largest(departureOf(chain), chainGrid(chain, line.fromHz, line.toHz))
      return judged(line, value, hz)
    }
    case 'alias-floor': {
      const { levelDb, outputHz } = worstAlias(chain, line.toHz)
      return judged(line, 0 - levelDb, outputHz, wantedTooLow(chain, outputHz))
    }
    case 'phase':
      return judgePhase(chain, line)
    case 'delay': {
      const { groupDelaySeconds } = chainResponse(chain, Float64Array.of(line.atHz))
      return judged(line, groupDelaySeconds[0]!, line.atHz)
    }
    case 'channel-match':
      return judgeMatch(chain, line, match)
    case 'effective-bits':
      return judged(line, noiseBudget(chain).effectiveBits, null)
  }
}

function judge(chain: ComputedChain, line: ChainRequirement, match: ToleranceResult | null): ChainRequirementResult {
  // The tolerance run and the converter's noise are no matter of the filters alone.
  if (line.kind === 'channel-match' || line.kind === 'effective-bits') return judgeAfresh(chain, line, match)
  const { fromHz, toHz } = chain.spec.kept
  const result = keptForPath(chain, ['line', fromHz, toHz, line], () => judgeAfresh(chain, line, match))
  return { ...result, requirement: line }
}

/** As checkChainSheet, line by line: each is judged when it is asked for, so that others may have a turn between them. */
export function* chainSheetLines(
  chain: ComputedChain,
  match: ToleranceResult | null,
): Generator<ChainRequirementResult> {
  for (const line of chain.spec.sheet) yield judge(chain, line, match)
}

/**
 * The lines of a chain's sheet, each judged by its worst point, which is refined between the points looked at.
 *
 * @param match the tolerance run, which a channel-match line is judged by; without one, or with one of other settings, that line stays open
 * @returns one result for each line, in order
 */
export const checkChainSheet = (
  chain: ComputedChain,
  match: ToleranceResult | null,
): readonly ChainRequirementResult[] => [...chainSheetLines(chain, match)]
