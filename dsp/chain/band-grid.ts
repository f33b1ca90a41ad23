import { isFir, type Filter } from '../forms/filter'
import { departureGrid } from '../response/departure-grid'
import type { ComputedChain } from './chain'

const NO_ROOTS: Filter<'s'> = { domain: 's', zeros: [], poles: [], gain: 1 }
const EVEN = 96
const POINTS_A_RIPPLE = 8
const MOST_EVEN = 1024

/** Ripples that the longest FIR filter of a chain may have over a band: half as many as taps from 0 Hz to half its rate. */
export function ripplesOver(chain: ComputedChain, fromHz: number, toHz: number): number {
  const parts = chain.stages.flatMap((stage) => stage.parts)
  return parts.reduce((most, part) => {
    if (part.kind !== 'digital' || !isFir(part.filter)) return most
    const share = (toHz - fromHz) / (part.filter.sampleRateHz / 2)
    return Math.max(most, (part.filter.taps.length / 2) * share)
  }, 0)
}

/**
 * Frequencies at which a chain is looked at over a band, both ends included: crowded at every root of its analog and recursive digital parts as
 * closely as the root is sharp, and evenly as closely as the ripples of its longest FIR filter ask for.
 */
export function chainGrid(chain: ComputedChain, fromHz: number, toHz: number): Float64Array {
  if (fromHz === toHz) return Float64Array.of(fromHz)
  const parts = chain.stages.flatMap((stage) => stage.parts)
  const analog = parts.flatMap((part) => (part.kind === 'analog' ? [part.filter] : []))
  const together: Filter<'s'> = {
    ...NO_ROOTS,
    zeros: analog.flatMap(({ zeros }) => zeros),
    poles: analog.flatMap(({ poles }) => poles),
  }
  const even = Math.max(EVEN, Math.min(MOST_EVEN, Math.ceil(POINTS_A_RIPPLE * ripplesOver(chain, fromHz, toHz))))
  const points = new Set<number>()
  for (const part of parts) {
    if (part.kind !== 'digital' || isFir(part.filter)) continue
    for (const hertz of departureGrid(fromHz, toHz, NO_ROOTS, part.filter, 2)) points.add(hertz)
  }
  for (const hertz of departureGrid(fromHz, toHz, together, null, even)) points.add(hertz)
  return Float64Array.from(points).sort()
}
